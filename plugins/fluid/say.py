"""How items are made and figures printed, so that every module says the same thing the same way."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

from handoff.plugin import NOT_RECORDED, Flag, Input, Item, Source, System, fact, joined, number_text

RATE_PLACES = 0
SMALL_PLACES = 2
NOISE = 1e-9
"""Binary fractions: two sums that differ by less than the machine can tell differ by nothing."""
INDEX_PLACES = 2
PER_KG_PLACES = 2
UNITS = {  # of the figures that others look up by key; a figure that is not there keeps its unit
    "total_24h": "mL",
    "first_8h": "mL",
    "rate_now": "mL/h",
    "catch_up_rate": "mL/h",
    "due_by_now": "mL",
    "given": "mL",
    "not_confirmed": "mL",
    "given_index": "mL/kg/%",
    "projected_24h": "mL",
    "projected_per_kg": "mL/kg",
    "urine_rate": "mL/kg/h",
    "urine_last": "mL/h",
    "maintenance_rate": "mL/h",
    "balance": "mL",
}


def ml(value: float) -> str:
    """Return a volume as printed: ``10,988 mL``; what is above 0 is never printed as 0."""
    return f"{_amount(value)} mL"


def ml_h(value: float) -> str:
    """Return a rate as printed: ``687 mL/h``."""
    return f"{_amount(value)} mL/h"


def _amount(value: float) -> str:
    """Whole above 1; below it the places that keep it from being printed as nothing."""
    if NOISE < abs(value) < 1:
        if abs(value) * 100 < 1:
            return "under 0.01" if value > 0 else "above -0.01"
        return number_text(value, SMALL_PLACES)
    return number_text(value, RATE_PLACES)


def ml_kg_h(value: float) -> str:
    """Return urine by weight as printed: ``0.44 mL/kg/h``."""
    return f"{number_text(value, PER_KG_PLACES)} mL/kg/h"


def span(low: str, high: str) -> str:
    """Return ``low to high`` of two printed figures, once where they are the same, the unit only once."""
    if low == high:
        return low
    number, _, unit = low.partition(" ")
    return f"{number} to {high}" if unit and high.endswith(f" {unit}") else f"{low} to {high}"


def why_not(missing: Sequence[str]) -> str:
    """Return how a figure that cannot be worked out is printed, with what is missing."""
    names = list(dict.fromkeys(missing))
    return f"not computed: missing {joined(names)}" if names else NOT_RECORDED


def figure(key: str, label: str, **more: Any) -> Item:
    """Return an item of the assessment under fluid and urine, in the unit of its key."""
    more.setdefault("unit", UNITS.get(key, ""))
    more.setdefault("system", System.FLUID)
    return fact(f"fluid.{key}", label, **more)


def absent(key: str, label: str, shown: str = NOT_RECORDED, **more: Any) -> Item:
    """Return the item of a figure that is not there; it says so."""
    return figure(key, label, shown=shown, flag=Flag.NOT_RECORDED, **more)


def unflagged(key: str, label: str, shown: str, **more: Any) -> Item:
    """Return the item of a figure that does not apply: nothing is missing, and it says why."""
    return figure(key, label, shown=shown, **more)


def once(sources: Iterable[Source]) -> tuple[Source, ...]:
    """Return the sources, each once, in their order."""
    return tuple(dict.fromkeys(sources))


def inputs_of(*found: Input | None) -> tuple[Input, ...]:
    """Return the inputs that are there."""
    return tuple(one for one in found if one is not None)
