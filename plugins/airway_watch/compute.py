"""What the airway watch returns: why it runs, the signs, what is due, carbon monoxide, oxygenation, the tube."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import (
    carbon_monoxide,
    concern,
    cyanide,
    decay,
    gases,
    oxygen,
    schedule,
    signs,
    swelling,
    tube,
    ventilation,
)
from .exposure import exposure


def compute(case: Case) -> Findings:
    """Return the items and actions of airway and breathing."""
    seen = exposure(case)
    run = schedule.watch(case, seen)
    gas = decay.monoxide(case, seen)
    items = (
        *schedule.items(case, seen, run),
        *signs.items(case, seen, run),
        *concern.items(case, seen, run),
        *swelling.items(case, seen),
        *tube.items(case, seen, run),
        *carbon_monoxide.items(case, seen, gas),
        *cyanide.items(case, seen, run),
        *oxygen.items(case, seen.watched),
        *gases.items(case, seen, gas),
        *ventilation.items(case, run),
    )
    actions = (
        *schedule.actions(case, seen, run),
        *concern.actions(case, seen, run),
        *tube.actions(case, seen),
        *carbon_monoxide.actions(case, seen, gas),
        *cyanide.actions(case, seen, run),
    )
    values: dict[str, object] = {
        "spo2_doubt": gas.doubt,
        "spo2_doubts": gases.doubts(case, seen, gas),
        "tube_in_place": run.tube.in_place,
        "watched": seen.watched,
        "reasons": seen.reasons,
    }
    return Findings(items, actions, values)
