"""What this plugin says in the same words everywhere; its items are of the airway unless they say otherwise."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime
from functools import partial

from handoff.plugin import NOT_RECORDED, Case, Item, System, joined, number_text
from handoff.plugin import fact as item_of
from handoff.plugin import gap as gap_of

__all__ = ["NOT_RECORDED", "PLACES", "ago", "and_list", "at", "fact", "gap", "not_asked", "pct", "person"]

PLACES = 1
fact = partial(item_of, system=System.AIRWAY)
gap = partial(gap_of, system=System.AIRWAY)


def not_asked(key: str, label: str, unit: str) -> Item:
    """Return an item of breathing that must be there, where nothing recorded asks for it: not a gap."""
    shown = "not worked out: nothing recorded asks for it"
    return fact(key, label, shown, unit=unit, system=System.BREATHING, detail=True)


def pct(value: float) -> str:
    """Return a percentage as printed: ``18 %``, ``0.9 %``."""
    return f"{number_text(value, PLACES)} %"


def at(case: Case, moment: datetime) -> str:
    """Return a moment near now: ``14:15``, or with its date on another day."""
    return case.clock.time(moment, case.now)


def person(by: str) -> str:
    """Return `` by EM`` where a name was written."""
    return f" by {by}" if by else ""


def ago(case: Case, earlier: datetime) -> float:
    """Return the hours from ``earlier`` to now."""
    return case.hours_between(earlier, case.now)


def and_list(parts: Iterable[str]) -> str:
    """Return ``a, b and c``."""
    return joined(tuple(parts))
