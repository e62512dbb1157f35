"""What the nurse asks of the next shift: concerns, requests, what is pending, what is planned."""

from __future__ import annotations

from datetime import timedelta

from handoff.bundled.overview.charted import charted

from handoff.plugin import Action, Case, Item, Part, System, Urgency, entries, words


def handing_items(case: Case) -> tuple[Item, ...]:
    """Return the items of the recommendation, in the nurse's own words."""
    handover = case.state.handover
    at = case.when(handover.get("at"))
    texts = (
        ("handover.summary", "Course so far", words(handover.get("summary")), Part.SITUATION, "summary"),
        (
            "handover.concerns",
            "Concerns",
            "; ".join(case.state.texts(handover.get("concerns"))),
            Part.RECOMMENDATION,
            "concerns",
        ),
        (
            "handover.requests",
            "Requests",
            "; ".join(case.state.texts(handover.get("requests"))),
            Part.RECOMMENDATION,
            "requests",
        ),
        ("handover.if_then", "What to do if", _if_then(case), Part.RECOMMENDATION, "if_then"),
        ("handover.pending", "Pending", _pending(case), Part.RECOMMENDATION, "pending"),
        ("handover.to_do", "Planned", _to_do(case), Part.RECOMMENDATION, "to_do"),
        ("handover.from", "Handed over by", _person(case, "from"), Part.RECOMMENDATION, "from"),
        ("handover.to", "Handed over to", _person(case, "to"), Part.RECOMMENDATION, "to"),
    )
    return tuple(
        charted(key, label, shown, part, node=handover.get(name), as_of=at if shown else None)
        for key, label, shown, part, name in texts
    )


def _if_then(case: Case) -> str:
    return "; ".join(
        f"if {words(entry.get('if'))}: {words(entry.get('then'))}"
        for entry in entries(case.state.handover.get("if_then"))
    )


def _pending(case: Case) -> str:
    said = []
    for entry in entries(case.state.handover.get("pending")):
        due = case.when(entry.get("due"))
        parts = [words(entry.get("what"))]
        parts += [f"due {case.clock.time(due, case.now)}"] if due else ["no time given"]
        phone = words(entry.get("phone_to"))
        parts += [f"telephone result to {phone}"] if phone else ["who telephones: not recorded"]
        said.append(", ".join(parts))
    return "; ".join(said)


def _to_do(case: Case) -> str:
    said = []
    for entry in entries(case.state.handover.get("to_do")):
        due = case.when(entry.get("due"))
        said.append(words(entry.get("what")) + (f" at {case.clock.time(due, case.now)}" if due else ""))
    return "; ".join(said)


def _person(case: Case, name: str) -> str:
    node = case.state.handover.get(name)
    if not isinstance(node, dict):
        return ""
    return ", ".join(part for part in (words(node.get(key)) for key in ("name", "role", "phone")) if part)


def handing_actions(case: Case) -> tuple[Action, ...]:
    """Return what was asked, planned or is awaited, as lines of the care plan."""
    handover = case.state.handover
    actions = []
    for index, text in enumerate(case.state.texts(handover.get("requests"))):
        actions.append(
            _action(f"handover.request.{index + 1}", text, "asked for by the nurse handing over", Urgency.NOW)
        )
    for index, entry in enumerate(entries(handover.get("to_do"))):
        due = case.when(entry.get("due"))
        actions.append(
            Action(
                key=f"handover.to_do.{index + 1}",
                area="Planned and awaited",
                text=words(entry.get("what")),
                why="planned by the nurse handing over",
                system=System.GENERAL,
                first_due=due,
                urgency=Urgency.TIMED if due else Urgency.SHIFT,
            )
        )
    for index, entry in enumerate(entries(handover.get("pending"))):
        due = case.when(entry.get("due"))
        phone = words(entry.get("phone_to"))
        tell = f"; telephone it to {phone}" if phone else ""
        actions.append(
            Action(
                key=f"handover.pending.{index + 1}",
                area="Planned and awaited",
                text=f"Chase: {words(entry.get('what'))}{tell}",
                why="awaited when handed over",
                system=System.GENERAL,
                first_due=due,
                urgency=Urgency.TIMED if due else Urgency.SHIFT,
            )
        )
    actions += _line_checks(case)
    return tuple(actions)


def _action(key: str, text: str, why: str, urgency: Urgency) -> Action:
    return Action(
        key=key, area="Planned and awaited", text=text, why=why, system=System.GENERAL, urgency=urgency
    )


def _line_checks(case: Case) -> list[Action]:
    names = [
        words(entry.get("what")) for entry in entries(case.state.root.get("lines")) if "removed" not in entry
    ]
    if not names:
        return []
    interval = timedelta(hours=case.parameters.number("line.check_interval"))
    return [
        Action(
            key="line.check",
            area="Lines, tubes and drains",
            text=f"Look at site, fixing and day count: {', '.join(names)}",
            why="infection and loss of a line show at the site first",
            system=System.LINES,
            first_due=case.now,
            every=interval,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of("line.check_interval"),),
        )
    ]
