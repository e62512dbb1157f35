"""Pumps as they leave, each with how long it runs on what is left."""

from __future__ import annotations

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Map,
    System,
    amount,
    child,
    entries,
    fact,
    hours_text,
    line_of,
    with_unit,
    words,
)

from . import formula
from .journey import lasts_min

PLACES = 2


def items(case: Case) -> tuple[Item, ...]:
    """Return one item for each pump; none where none is charted."""
    pumps = entries(child(case.block, "pumps"))
    return tuple(_pump(case, entry, number) for number, entry in enumerate(pumps, start=1))


def _pump(case: Case, entry: Map, number: int) -> Item:
    rate, left = amount(entry.get("rate"), "mL/h", "flow"), amount(entry.get("left"), "mL", "volume")
    minutes = formula.pump_min(left, rate) if rate and left is not None else None
    battery = amount(entry.get("battery"), "min", "duration")
    journey = lasts_min(case)
    short = [
        what
        for what, lasts in (("runs empty", minutes), ("battery ends", battery))
        if journey is not None and lasts is not None and lasts < journey
    ]
    parts = [words(entry.get("concentration")) or "concentration not recorded"]
    parts.append(with_unit(rate, "mL/h", PLACES) if rate is not None else "rate not recorded")
    parts.append(f"{with_unit(left, 'mL', PLACES)} left" if left is not None else "volume left not recorded")
    if minutes is not None:
        parts.append(f"lasts {hours_text(minutes / formula.MINUTES_AN_HOUR)}")
    if battery is not None:
        parts.append(f"battery {words(entry.get('battery'))}")
    parts += [f"{what} on the way" for what in short]
    return fact(
        f"transfer.pump.{number}",
        f"Pump: {words(entry.get('drug'))}",
        ", ".join(parts),
        system=System.LINES,
        flag=Flag.ACTION if short else Flag.NONE,
        line=line_of(entry),
    )
