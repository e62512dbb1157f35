"""Bowels: when they were last open, and the laxative that goes with an opioid."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    List,
    Map,
    System,
    Urgency,
    child,
    fact,
    gap,
    hours_text,
    words,
)

from . import formula

CHARTS = ("doses", "infusions", "patient_controlled")
LABEL = "Bowels"


def has_opioid(case: Case) -> bool:
    """Return whether an opioid is charted among the analgesics."""
    opioids = case.parameters["opioids"].value
    for name in CHARTS:
        node = case.state.at_path("pain", name)
        rows = node if isinstance(node, List) else ()
        if any(
            words(row.get("drug")) in opioids for row in rows if isinstance(row, Map) and "struck" not in row
        ):
            return True
    return False


def since_burn(case: Case) -> float | None:
    """Return the hours since the burn, or None."""
    burn = case.state.burn_time
    return None if burn is None else case.hours_between(burn.earliest, case.now)


def last_open(case: Case) -> tuple[datetime | None, Map | None]:
    """Return when the bowels were last open and the latest entry; None where nothing is charted."""
    rows = case.state.dated(child(case.block, "bowels"))
    opened = [row.at for row in rows if words(row.entry.get("opened")) == "yes"]
    return (opened[-1] if opened else None), (rows[-1].entry if rows else None)


def is_asked(case: Case) -> bool:
    """Return whether the bowels are asked about: from the second day on."""
    hours = since_burn(case)
    return hours is not None and formula.is_longer(hours, case.parameters.number("bowels.ask_after"))


def items(case: Case) -> tuple[Item, ...]:
    """Return when the bowels were last open; not recorded from the second day on."""
    opened, entry = last_open(case)
    if entry is None:
        if not is_asked(case):
            return ()
        return (gap("nutrition.bowels", LABEL, system=System.NUTRITION),)
    start = opened or (case.state.burn_time.earliest if case.state.burn_time else None)
    hours = case.hours_between(start, case.now) if start else None
    long = hours is not None and formula.is_longer(max(hours, 0.0), case.parameters.number("bowels.within"))
    kind, laxative = words(entry.get("kind")), words(child(case.block, "laxative"))
    parts = [f"last open {case.clock.day_and_time(opened)}" if opened else "not open as charted", kind]
    parts.append(f"laxative: {laxative or 'not recorded'}")
    parts += [f"none for {hours_text(hours)}"] if long and hours is not None else []
    return (
        fact(
            "nutrition.bowels",
            LABEL,
            "; ".join(part for part in parts if part),
            system=System.NUTRITION,
            value=opened,
            unit="time" if opened else "",
            as_of=case.when(entry.get("at")),
            flag=Flag.REVIEW if long and not case.comfort else Flag.NONE,
            sources=(case.parameters.source_of("bowels.within"),),
            line=entry.line,
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the daily question, and the laxative with an opioid where none is recorded."""
    made = []
    if is_asked(case):
        _, entry = last_open(case)
        at = case.when(entry.get("at")) if entry is not None else None
        every = timedelta(hours=case.parameters.number("bowels.every"))
        made.append(
            Action(
                key="nutrition.ask_bowels",
                area="Nutrition and bowels",
                text="Bowels: ask, look at the belly, chart",
                why="opioids, lying still and little food stop the bowel",
                system=System.NUTRITION,
                first_due=at + every if at else case.now,
                every=every,
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("bowels.every"),),
            )
        )
    if has_opioid(case) and not words(child(case.block, "laxative")) and is_asked(case):
        made.append(
            Action(
                key="nutrition.laxative",
                area="Nutrition and bowels",
                text="Ask the prescriber about a laxative",
                why="an opioid is charted and no laxative is",
                system=System.NUTRITION,
                sources=(case.parameters.source_of("opioids"),),
            )
        )
    return tuple(made)
