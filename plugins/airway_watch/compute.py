"""What the airway watch returns: why it runs, the signs, what is due, carbon monoxide and oxygenation."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import carbon_monoxide, gases, oxygen, schedule, signs
from .exposure import exposure


def compute(case: Case) -> Findings:
    """Return the items and actions of airway and breathing."""
    seen = exposure(case)
    run = schedule.watch(case, seen)
    gas = carbon_monoxide.monoxide(case, seen)
    items = (
        *schedule.items(case, seen, run),
        *signs.items(case, seen, run),
        *carbon_monoxide.items(case, seen, gas),
        *oxygen.items(case, seen.watched),
        *gases.items(case, seen, gas),
    )
    actions = (
        *schedule.actions(case, seen, run),
        *carbon_monoxide.actions(case, seen, gas),
    )
    values: dict[str, object] = {
        "spo2_doubt": gas.doubt,
        "tube_in_place": run.tube.in_place,
        "watched": seen.watched,
        "reasons": seen.reasons,
    }
    return Findings(items, actions, values)
