"""Receiver, times and the airway plan, as they were charted."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Case,
    Item,
    Part,
    System,
    amount,
    child,
    entries,
    fact,
    gap,
    joined,
    line_of,
    words,
    yes,
)

RANK_AIRWAY = 12


def lasts_min(case: Case) -> float | None:
    """Return how long the journey is planned to last, in min; None where it is not recorded."""
    return amount(child(case.block, "journey", "lasts"), "min", "duration")


def items(case: Case) -> tuple[Item, ...]:
    """Return who takes the patient, when the journey begins and ends, and the airway plan."""
    return (_receiver(case), *_times(case), _airway(case), _can_intubate(case))


def _receiver(case: Case) -> Item:
    node = child(case.block, "receiver")
    centre = words(child(node, "centre"))
    if not centre:
        return gap("transfer.receiver", "Receiving centre", part=Part.RECOMMENDATION, system=System.PEOPLE)
    who, at = words(child(node, "accepted_by", "name")), case.when(child(node, "accepted"))
    when = f" at {case.clock.time(at, case.now)}" if at else ", time not recorded"
    accepted = f"accepted by {who}{when}" if who else "accepted by: not recorded"
    ward = words(child(node, "ward"))
    return fact(
        "transfer.receiver",
        "Receiving centre",
        "; ".join(part for part in (centre, ward, accepted) if part),
        value=centre,
        part=Part.RECOMMENDATION,
        system=System.PEOPLE,
        line=line_of(node),
    )


def _times(case: Case) -> tuple[Item, ...]:
    leaves, lasts = case.when(child(case.block, "journey", "leaves")), lasts_min(case)
    arrives = leaves + timedelta(minutes=lasts) if leaves and lasts is not None else None
    missing = [
        name
        for name, value in (("departure not recorded", leaves), ("length of the journey not recorded", lasts))
        if value is None
    ]
    return (
        _time(case, "transfer.leaves", "Departure planned", leaves, ""),
        _time(case, "transfer.arrives", "Arrival expected", arrives, joined(missing)),
    )


def _time(case: Case, key: str, label: str, at: datetime | None, missing: str) -> Item:
    if at is None:
        return gap(key, label, missing, part=Part.RECOMMENDATION, system=System.PEOPLE)
    shown = case.clock.time(at, case.now)
    return fact(key, label, shown, value=at, unit="time", part=Part.RECOMMENDATION, system=System.PEOPLE)


def _airway(case: Case) -> Item:
    node = child(case.block, "airway_plan")
    secured = words(child(node, "secured"))
    if not secured:
        return gap("transfer.airway", "Airway for the journey", system=System.AIRWAY, rank=RANK_AIRWAY)
    at, who = case.when(child(node, "at")), words(child(node, "decided_by"))
    how = words(child(node, "how"))
    parts = [
        f"airway {'secured' if secured == 'yes' else 'not secured'}{f': {how}' if how else ''}",
        words(child(node, "plan")) or "plan: not recorded",
        f"decided by {who or 'not recorded'}",
        f"difficulty: {words(child(node, 'difficulty')) or 'not recorded'}",
        f"fallback: {words(child(node, 'fallback')) or 'not recorded'}",
    ]
    return fact(
        "transfer.airway",
        "Airway for the journey",
        "; ".join(parts),
        value="secured" if secured == "yes" else "not secured",
        system=System.AIRWAY,
        as_of=at,
        line=line_of(node),
    )


def _can_intubate(case: Case) -> Item:
    crew = entries(child(case.block, "escort"))
    able = [
        ", ".join(part for part in (words(one.get("name")), words(one.get("role"))) if part)
        for one in crew
        if yes(one.get("can_intubate"))
    ]
    asked = [one for one in crew if words(one.get("can_intubate"))]
    label = "Who can intubate on board"
    if able:
        return fact("transfer.can_intubate", label, joined(able), value=joined(able), system=System.AIRWAY)
    if crew and len(asked) == len(crew):
        return fact("transfer.can_intubate", label, "nobody on board", value="nobody", system=System.AIRWAY)
    return gap("transfer.can_intubate", label, system=System.AIRWAY)
