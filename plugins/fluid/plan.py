"""The plan in force: the order that counts at this moment, its rates, and what is due by it."""

from __future__ import annotations

import math
from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Map, Row, amount, number_text, words

from . import formula
from .bands import Facts
from .orders import SETS_FLUID, ended_at, order_in_force, orders, sets
from .person import Person
from .rules import COEFFICIENT_PLACES, NoVolume, Volume, by_coefficient, by_rule
from .say import ml_h

HOUR = timedelta(hours=1)
LOCAL = "local"


class OrderedRate(Struct, frozen=True):
    """A rate that an order set, from its moment on, to where the order was ended."""

    at: datetime
    ml_h: float
    line: int
    until: datetime | None = None

    def end(self, moment: datetime) -> datetime:
        """When it no longer held, no later than ``moment``."""
        return moment if self.until is None else min(self.until, moment)


class Plan(Struct, frozen=True):
    """What is due: the volume of an order or a named formula from the burn, then any rates ordered since."""

    said: str
    by_order: bool
    at: datetime | None
    line: int
    volume: Volume | None
    rates: tuple[OrderedRate, ...] = ()
    problem: NoVolume | None = None
    volume_until: datetime | None = None

    def due_ml(self, burn: datetime, moment: datetime) -> float | None:
        """Return what is due from the burn to ``moment``, in mL; None where the plan is no volume over time."""
        if self.volume is None and not self.rates:
            return None
        if self.volume is not None and self.volume.total_ml is None:
            return None
        parts = []
        ends = [self.rates[0].at] if self.rates else []
        ends += [self.volume_until] if self.volume_until is not None else []
        until = min(moment, *ends) if ends else moment
        if self.volume is not None:
            parts.append(self.volume.due_ml(max(0.0, (until - burn) / HOUR)))
        for index, rate in enumerate(self.rates):
            following = self.rates[index + 1].at if index + 1 < len(self.rates) else moment
            end = rate.end(min(following, moment))
            parts.append(formula.infusion_ml(rate.ml_h, max(0.0, (end - rate.at) / HOUR)))
        return math.fsum(parts)

    @property
    def since(self) -> datetime | None:
        """From when it counts: None from the burn; the first ordered rate where no volume was ordered."""
        return self.rates[0].at if self.volume is None and self.rates else None

    def gaps(self, moment: datetime) -> tuple[tuple[datetime, datetime], ...]:
        """Return the times up to ``moment`` in which an order had ended and no other had come."""
        if not self.rates:
            return ()
        starts = [rate.at for rate in self.rates]
        nexts = [*starts[1:], moment]
        ends = [rate.end(following) for rate, following in zip(self.rates, nexts, strict=True)]
        if self.volume is None:
            starts = starts[1:]
        else:
            ends = [starts[0] if self.volume_until is None else min(self.volume_until, starts[0]), *ends]
        pairs = zip(ends, starts, strict=False)
        return tuple((end, start) for end, start in pairs if end < start <= moment)

    def rate_ml_h(self, burn: datetime, moment: datetime) -> float | None:
        """Return the rate of the plan at ``moment``, in mL/h; None when its schedule or its order has ended."""
        ordered = [rate for rate in self.rates if rate.at <= moment]
        if ordered:
            return ordered[-1].ml_h if ordered[-1].end(moment) == moment else None
        if self.volume is None or (self.volume_until is not None and moment >= self.volume_until):
            return None
        hours = (moment - burn) / HOUR
        ended = self.volume.rate_ml_h is None and hours >= self.volume.schedule.ends_h[-1]
        return None if ended else self.volume.rate_at(hours)


def ordered_plan(case: Case, person: Person, facts: Facts) -> Plan | None:
    """Return the plan of the order in force, with the rates ordered since; None without an order."""
    force = order_in_force(case)
    if force is None:
        return None
    setting = [row for row in orders(case) if sets(row.entry, SETS_FLUID)]
    bases = [row for row in setting if _sets_volume(row.entry)]
    base = bases[-1] if bases else None
    volume: Volume | NoVolume | None = None
    if base is not None:
        volume = _volume_of(case, person, base.entry, facts)
    rates = [
        OrderedRate(row.at, rate, row.line, ended_at(case, row))
        for row in setting
        if (base is None or row.at >= base.at) and (rate := amount(row.entry.get("rate"), "mL/h")) is not None
    ]
    if isinstance(volume, Volume) and volume.rate_ml_h is not None and base is not None:
        held = OrderedRate(base.at, volume.rate_ml_h, base.line, ended_at(case, base))
        rates = [held, *(r for r in rates if r.at > base.at)]
    return Plan(
        said=_said(case, force),
        by_order=True,
        at=force.at,
        line=force.line,
        volume=volume if isinstance(volume, Volume) else None,
        rates=tuple(rates),
        problem=volume if isinstance(volume, NoVolume) else None,
        volume_until=ended_at(case, base) if base is not None else None,
    )


def _sets_volume(entry: Map) -> bool:
    """A bare rate, of the unit's own formula too, follows on the volume before it and does not begin it anew."""
    return "coefficient" in entry or words(entry.get("formula")) not in ("", LOCAL)


def _volume_of(case: Case, person: Person, entry: Map, facts: Facts) -> Volume | NoVolume | None:
    written = words(entry.get("formula"))
    name = written.replace(" ", "-")
    coefficient = amount(entry.get("coefficient"), "mL/kg/%")
    if coefficient is not None:
        return by_coefficient(case, person, name or "coefficient as ordered", coefficient)
    return by_rule(case, person, name, facts)


def _said(case: Case, row: Row) -> str:
    """The order in words: ``order of 14:30: parkland, 4 mL/kg/%, by Dr A. Quill``."""
    entry = row.entry
    parts = [words(entry.get("formula"))]
    coefficient = amount(entry.get("coefficient"), "mL/kg/%")
    if coefficient is not None:
        parts.append(f"{number_text(coefficient, COEFFICIENT_PLACES)} mL/kg/%")
    rate = amount(entry.get("rate"), "mL/h")
    if rate is not None:
        parts.append(ml_h(rate))
    by = words(entry.get("by"))
    parts.append(f"by {by}" if by else "prescriber not recorded")
    return f"order of {case.clock.time(row.at, case.now)}: {', '.join(part for part in parts if part)}"


def policy_plan(case: Case, person: Person, facts: Facts) -> Plan | None:
    """Return the plan of the rule that the policy named, where nothing is ordered; None otherwise."""
    chosen = case.chosen("starting_rate")
    if not chosen.by_policy:
        return None
    made = by_rule(case, person, chosen.name, facts)
    return Plan(
        said=f"rule named by the policy: {made.said if isinstance(made, Volume) else chosen.name}",
        by_order=False,
        at=None,
        line=0,
        volume=made if isinstance(made, Volume) else None,
        problem=made if isinstance(made, NoVolume) else None,
    )
