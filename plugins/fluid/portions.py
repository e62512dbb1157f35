"""What went in, as portions of time: infusions by line, single volumes, and what nobody confirmed."""

from __future__ import annotations

import math
from collections.abc import Collection, Iterable, Mapping
from datetime import datetime, timedelta

from msgspec import Struct
from msgspec.structs import replace

from handoff.plugin import Case, Map, amount, child, entries, words

from . import formula

HOUR = timedelta(hours=1)
RESUSCITATION = "resuscitation"
COLLOID = "colloid"


class Portion(Struct, frozen=True):
    """A volume that went in evenly from ``start`` to ``end``, or at once where the two are equal."""

    start: datetime
    end: datetime
    ml: float
    purpose: str
    fluid: str
    confirmed: bool
    line: int
    name: str = ""
    is_bolus: bool = False
    before_arrival: bool = False

    def between_ml(self, start: datetime, end: datetime, first: bool = False) -> float:
        """Return what of it went in after ``start`` up to ``end``, in mL; ``first`` takes in the start itself."""
        if self.end <= self.start:
            inside = start < self.start <= end or (first and self.start == start)
            return self.ml if inside else 0.0
        overlap = (min(self.end, end) - max(self.start, start)) / (self.end - self.start)
        return self.ml * max(0.0, overlap)


class Running(Struct, frozen=True):
    """A line that has not been stopped: its rate, since when, and when it was last seen running."""

    name: str
    purpose: str
    fluid: str
    ml_h: float
    since: datetime
    seen: datetime
    line: int


class Given(Struct, frozen=True):
    """Everything that went in, the lines that run now, and whether anything was charted: blank is not zero."""

    portions: tuple[Portion, ...]
    running: tuple[Running, ...]
    charted: bool

    def total_ml(self, purposes: Collection[str] | None = None, confirmed: bool = True) -> float:
        """Return the volume of the purposes (all for None), in mL: what is confirmed, or what is not."""
        return math.fsum(p.ml for p in self._of(purposes, confirmed))

    def between_ml(
        self,
        start: datetime,
        end: datetime,
        purposes: Collection[str] | None = None,
        confirmed: bool = True,
        first: bool = False,
    ) -> float:
        """Return what went in after ``start`` up to ``end``, in mL."""
        return math.fsum(p.between_ml(start, end, first) for p in self._of(purposes, confirmed))

    def _of(self, purposes: Collection[str] | None, confirmed: bool) -> Iterable[Portion]:
        return (
            p
            for p in self.portions
            if p.confirmed is confirmed and (purposes is None or p.purpose in purposes)
        )

    def first(self, purposes: Collection[str]) -> datetime | None:
        """Return when the first volume of the purposes began, or None."""
        starts = [p.start for p in self.portions if p.purpose in purposes]
        return min(starts) if starts else None

    def rate_ml_h(self, purposes: Collection[str]) -> float:
        """Return the rate of the lines of the purposes that run now, in mL/h."""
        return math.fsum(line.ml_h for line in self.running if line.purpose in purposes)

    def seen(self, purposes: Collection[str]) -> datetime | None:
        """Return the latest moment to which what was given is confirmed, or None."""
        ends = [p.end for p in self.portions if p.confirmed and p.purpose in purposes]
        return max(ends) if ends else None


def read_given(case: Case) -> Given:
    """Return everything that went in by ``now``."""
    rows = entries(child(case.block, "given"))
    portions = [portion for row in rows for portion in _single(case, row)]
    running = []
    for name, on_line in _lines(rows).items():
        made, still = _line(case, name, on_line)
        portions += made
        running += still
    portions.sort(key=lambda p: (p.start, p.end, p.purpose, p.fluid, p.name, p.ml, p.confirmed))
    running.sort(key=lambda r: (r.since, r.name, r.ml_h))
    return Given(tuple(portions), tuple(running), bool(rows))


def _arrival(case: Case) -> datetime | None:
    admissions = case.state.events("admission")
    return admissions[0].at if admissions else None


def _single(case: Case, row: Map) -> list[Portion]:
    """The single volumes of an entry: a bolus, a drink, ice, a volume between two times, before arrival."""
    made = []
    purpose, fluid = words(row.get("purpose")), words(row.get("fluid"))
    at, start, end = (case.when(row.get(key)) for key in ("at", "from", "to"))
    whole = Portion(case.now, case.now, 0.0, purpose, fluid, True, row.line, words(row.get("line")))
    volume = amount(row.get("volume"), "mL")
    if volume is not None and start is not None and end is not None:
        made.append(replace(whole, start=start, end=end, ml=volume))
    elif volume is not None and at is not None:
        bolus = words(row.get("bolus")) == "yes"
        made.append(replace(whole, start=at, end=at, ml=volume, is_bolus=bolus))
    ice = amount(row.get("ice"), "mL")
    if ice is not None and at is not None:
        made.append(replace(whole, start=at, end=at, ml=ice * case.parameters.number("balance.ice_share")))
    before = amount(row.get("before_arrival"), "mL")
    if before is not None:
        burn = case.state.burn_time
        moment = at or _arrival(case) or (burn.latest if burn else case.now)
        began, through = (start, end) if start and end else (moment, moment)
        made.append(replace(whole, start=began, end=through, ml=before, before_arrival=True))
    return made


def _lines(rows: Iterable[Map]) -> dict[str, list[Map]]:
    """The entries of each line; an infusion without a line is a line of its own."""
    found: dict[str, list[Map]] = {}
    for index, row in enumerate(rows):
        if not any(key in row for key in ("rate", "drops", "running", "stopped")):
            continue
        name = words(row.get("line"))
        found.setdefault(name or f"\0{index}", []).append(row)
    return found


class _Rate(Struct, frozen=True):
    start: datetime
    ml_h: float
    purpose: str
    fluid: str
    line: int


class Stop(Struct, frozen=True):
    """A stop of a line; ``apart`` where it stands in an entry of its own, not in that of the rate it ends."""

    at: datetime
    apart: bool

    def ends_all(self, start: datetime, rates: Mapping[datetime, float], stops: Iterable[Stop]) -> bool:
        """Return whether it also ends the rate that began in its minute: where the line was running before."""
        earlier = max((moment for moment in rates if moment < start), default=None)
        if not self.apart or self.at != start or earlier is None or rates[earlier] <= 0:
            return False
        return not any(earlier < stop.at < start for stop in stops)


def rate_of(row: Map) -> float | None:
    """Return the rate written in an entry, in mL/h: as such, or as drops with the drop factor; None for none."""
    rate = amount(row.get("rate"), "mL/h")
    if rate is not None:
        return rate
    drops, factor = amount(row.get("drops"), "drops/min"), amount(row.get("drop_factor"), "drops/mL")
    return formula.drops_rate_ml_h(drops, factor) if drops is not None and factor else None


def _line(case: Case, name: str, rows: list[Map]) -> tuple[list[Portion], list[Running]]:
    rates = _rates(case, rows)
    seen = sorted(at for row in rows if (at := case.when(row.get("running"))) is not None)
    stops = stops_of(case, rows)
    starts = {rate.start: rate.ml_h for rate in rates}
    portions: list[Portion] = []
    running: list[Running] = []
    for index, rate in enumerate(rates):
        following = [rates[index + 1].start] if index + 1 < len(rates) else []
        stopped = [
            stop.at for stop in stops if stop.at > rate.start or stop.ends_all(rate.start, starts, stops)
        ]
        ends = [*following, *stopped[:1]]
        if ends:
            portions.append(_portion(name, rate, rate.start, min(ends), confirmed=True))
            continue
        last = max([rate.start, *(at for at in seen if at >= rate.start)])
        portions.append(_portion(name, rate, rate.start, last, confirmed=True))
        portions.append(_portion(name, rate, last, case.now, confirmed=False))
        if rate.ml_h > 0:
            running.append(
                Running(_said(name), rate.purpose, rate.fluid, rate.ml_h, rate.start, last, rate.line)
            )
    return [p for p in portions if p.end > p.start], running


def stops_of(case: Case, rows: Iterable[Map]) -> list[Stop]:
    """Return the stops of a line in time order."""
    found = [
        Stop(at, rate_of(row) is None) for row in rows if (at := case.when(row.get("stopped"))) is not None
    ]
    return sorted(found, key=lambda stop: (stop.at, stop.apart))


def _said(name: str) -> str:
    return "" if name.startswith("\0") else name


def _portion(name: str, rate: _Rate, start: datetime, end: datetime, confirmed: bool) -> Portion:
    volume = formula.infusion_ml(rate.ml_h, max(0.0, (end - start) / HOUR))
    return Portion(start, end, volume, rate.purpose, rate.fluid, confirmed, rate.line, _said(name))


def _rates(case: Case, rows: list[Map]) -> list[_Rate]:
    """The rates of a line in time order; what a later entry leaves out, it takes from the one before."""
    dated = sorted(
        ((at, row) for row in rows if rate_of(row) is not None and (at := case.when(row.get("from")))),
        key=lambda pair: pair[0],
    )
    rates: list[_Rate] = []
    purpose = fluid = ""
    for at, row in dated:
        purpose = words(row.get("purpose")) or purpose
        fluid = words(row.get("fluid")) or fluid
        rates.append(_Rate(at, rate_of(row) or 0.0, purpose, fluid, row.line))
    return rates
