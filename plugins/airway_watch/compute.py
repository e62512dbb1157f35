"""What the airway watch returns: why it runs, the signs, what is due, carbon monoxide, oxygenation, the tube."""

from __future__ import annotations

from msgspec.structs import replace

from handoff.plugin import Case, Findings, Flag, Item, not_asked

from . import (
    antidote,
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
        *antidote.items(case),
        *oxygen.items(case, seen.watched),
        *gases.items(case, seen, gas),
        *ventilation.items(case, run),
    )
    actions = (
        *concern.actions(case, seen, run),  # where help is called for, the call comes before the look
        *schedule.actions(case, seen, run),
        *tube.actions(case, seen),
        *carbon_monoxide.actions(case, seen, gas),
        *cyanide.actions(case, seen, run),
    )
    if case.comfort:
        items = tuple(_silent(item) for item in items)
    values: dict[str, object] = {
        "spo2_doubt": gas.doubt,
        "spo2_doubts": gases.doubts(case, seen, gas),
        "tube_in_place": run.tube.in_place,
        "watched": seen.watched,
        "reasons": seen.reasons,
    }
    return Findings(items, actions, values)


def _silent(item: Item) -> Item:
    """Where the goal is comfort a finding is shown and asks for nothing; what is not recorded is no gap."""
    if item.flag is Flag.NOT_RECORDED:
        return not_asked(item)
    return replace(item, flag=Flag.NONE, rank=None)
