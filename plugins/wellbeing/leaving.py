"""Teaching that was shown back, and what is still needed before going home or on."""

from __future__ import annotations

from datetime import date

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    System,
    child,
    entries,
    fact,
    joined,
    line_of,
    read_date,
    words,
)


def planned(case: Case) -> date | None:
    """Return the planned day of going home, or None."""
    written = words(child(case.block, "discharge", "planned"))
    return read_date(written).earliest() if written else None


def _days_left(case: Case) -> int | None:
    day = planned(case)
    return None if day is None else (day - case.clock.local(case.now).date()).days


def is_near(case: Case) -> bool:
    """Return whether going home is planned within the days in which teaching has to be done."""
    left = _days_left(case)
    return left is not None and left <= case.parameters.number("teaching.before")


def not_shown_back(case: Case) -> list[str]:
    """Return the topics that were never shown or told back."""
    done = [
        words(entry.get("topic"))
        for entry in entries(child(case.block, "teaching"))
        if words(entry.get("shown_back")) == "yes"
    ]
    return [str(topic) for topic in case.parameters["teaching.needed"].value if topic not in done]


def items(case: Case) -> tuple[Item, ...]:
    """Return teaching and discharge as charted; nothing where nothing is."""
    return (*_teaching(case), *_discharge(case))


def _teaching(case: Case) -> tuple[Item, ...]:
    taught = entries(child(case.block, "teaching"))
    if not taught and not is_near(case):
        return ()
    said = [_said(case, entry) for entry in taught]
    missing = not_shown_back(case) if is_near(case) else []
    said += [f"not shown back: {joined(missing)}"] if missing else []
    return (
        fact(
            "wellbeing.teaching",
            "Teaching",
            "; ".join(said),
            system=System.PEOPLE,
            flag=Flag.REVIEW if missing and not case.comfort else Flag.NONE,
            sources=(case.parameters.source_of("teaching.needed"),),
            line=taught[-1].line if taught else 0,
        ),
    )


def _said(case: Case, entry: Map) -> str:
    at = case.when(entry.get("at"))
    parts = [f"to {words(entry.get('to'))}" if words(entry.get("to")) else ""]
    parts += [case.clock.day(at)] if at else []
    back = words(entry.get("shown_back"))
    parts.append(
        {"yes": "shown back", "no": "not shown back"}.get(back, "whether shown back is not recorded")
    )
    return f"{words(entry.get('topic'))} ({', '.join(part for part in parts if part)})"


def _discharge(case: Case) -> tuple[Item, ...]:
    node = child(case.block, "discharge")
    if not isinstance(node, Map) or "struck" in node:
        return ()
    left = _days_left(case)
    needs = case.state.texts(node.get("needs"))
    parts = [
        f"planned {read_date(words(node.get('planned'))).shown()}" if left is not None else "day not planned"
    ]
    parts += [f"to {words(node.get('to'))}"] if words(node.get("to")) else []
    parts += [f"still needed: {joined(needs)}"] if needs else []
    parts.append(f"follow-up: {words(node.get('follow_up')) or 'not recorded'}")
    return (
        fact(
            "wellbeing.discharge",
            "Going home or on",
            "; ".join(parts),
            system=System.PEOPLE,
            value=left,
            unit="days" if left is not None else "",
            flag=Flag.REVIEW if needs and is_near(case) and not case.comfort else Flag.NONE,
            sources=(case.parameters.source_of("teaching.before"),),
            line=line_of(node),
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the teaching and the needs that are left when going home is near."""
    if case.comfort or not is_near(case):
        return ()
    made = []
    missing = not_shown_back(case)
    if missing:
        made.append(
            Action(
                key="wellbeing.teach",
                area="Patient and family",
                text=f"Teach and have it shown back: {', '.join(missing)}",
                why="going home is near",
                system=System.PEOPLE,
                sources=(case.parameters.source_of("teaching.needed"),),
            )
        )
    for index, need in enumerate(case.state.texts(child(case.block, "discharge", "needs")), start=1):
        made.append(
            Action(
                key=f"wellbeing.need.{index}",
                area="Patient and family",
                text=need,
                why="still needed before going home",
                system=System.PEOPLE,
            )
        )
    return tuple(made)
