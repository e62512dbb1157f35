"""Drug infusions and patches, line by line: what ran, and until when it is confirmed."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.plugin import Case, Map, Node, amount, child, entries, unit_of, words

from . import formula
from .given import DAY
from .names import Drug, drug_of, route_of

SEEN, STOP, RATE = 0, 1, 2
"""Order of what happens in one minute: seen running, stopped, new rate."""

INHERITED = ("drug", "route", "concentration", "weight")
WEIGHTS = ("before burn", "today", "ideal")


class Run(Struct, frozen=True):
    """One rate of one infusion from ``start`` to ``end``, the last moment at which it is confirmed.

    ``open`` is True where nothing says that it stopped at ``end``. ``mg_h`` is None where the
    rate cannot be turned into mg/h; ``missing`` says why. ``kg`` is the
    weight of the patient, ``weight`` names it where the rate needed it; ``why`` is why it began or stopped.
    """

    line: str
    drug: Drug
    route: str
    start: datetime
    end: datetime
    open: bool
    mg_h: float | None
    written: str
    missing: str
    kg: float | None
    weight: str
    why: str
    node: Node

    def hours_in_day_to(self, now: datetime) -> float:
        """Return for how many of the 24 h that end at ``now`` it is confirmed to have run."""
        hour = DAY / formula.HOURS_A_DAY
        return formula.overlap_h((self.start - now) / hour, (self.end - now) / hour, -formula.HOURS_A_DAY, 0)

    def mg_in_day_to(self, now: datetime) -> float | None:
        """Return what it gave in the 24 h that end at ``now``, in mg, or None."""
        return None if self.mg_h is None else formula.delivered_mg(self.mg_h, self.hours_in_day_to(now))


def runs(case: Case) -> tuple[Run, ...]:
    """Return every run of every line, oldest first."""
    found = [run for line, written in _lines(case).items() for run in _runs_of(case, line, written)]
    return tuple(sorted(found, key=lambda run: (run.start, run.end, run.drug.name, run.line, run.written)))


def line_name(case: Case, entry: Map) -> str:
    """Return what tells one infusion from another: its line, else its drug and route."""
    drug = drug_of(case, entry.get("drug"))
    return (
        words(entry.get("line"))
        or f"{drug.name if drug else ''} {route_of(case, entry.get('route'))}".strip()
    )


def _lines(case: Case) -> dict[str, list[Map]]:
    lines: dict[str, list[Map]] = {}
    for entry in entries(child(case.block, "infusions")):
        lines.setdefault(line_name(case, entry), []).append(entry)
    return lines


def happenings(case: Case, written: list[Map]) -> list[tuple[datetime, int, Map]]:
    """Return what the entries of one line say happened, in time order, however they stand in the file."""
    found = [
        (moment, order, entry)
        for entry in written
        for name, order in (("running", SEEN), ("stopped", STOP), ("from", RATE))
        if (moment := case.when(entry.get(name))) is not None
    ]
    return sorted(found, key=lambda event: (event[0], event[1], words(event[2].get("rate"))))


def _runs_of(case: Case, line: str, written: list[Map]) -> Iterator[Run]:
    known: dict[str, Node] = {}
    current: Run | None = None
    for moment, order, entry in happenings(case, written):
        if order == SEEN:
            current = replace(current, end=moment) if current else None
            continue
        if current is not None:
            why = words(entry.get("why")) if order == STOP else current.why
            yield replace(current, end=moment, open=False, why=why)
            current = None
        if order == RATE:
            known |= {name: node for name in INHERITED if (node := entry.get(name)) is not None}
            current = _run(case, line, moment, entry, known)
    if current is not None:
        yield current


def _run(case: Case, line: str, moment: datetime, entry: Map, known: dict[str, Node]) -> Run | None:
    drug = drug_of(case, known.get("drug"))
    if drug is None:
        return None
    mg_h, missing, weight = _rate(case, entry.get("rate"), known)
    route = route_of(case, known.get("route")) or "IV"
    rate = words(entry.get("rate"))
    kg, _ = _weight(case, known.get("weight"))
    return Run(
        line,
        drug,
        route,
        moment,
        moment,
        True,
        mg_h,
        rate,
        missing,
        kg,
        weight,
        words(entry.get("why")),
        entry,
    )


def _rate(case: Case, rate: Node | None, known: dict[str, Node]) -> tuple[float | None, str, str]:
    unit = unit_of(rate)
    if unit in ("mg/h", "mcg/h", "mcg/min"):
        return amount(rate, "mg/h", "dose_rate"), "", ""
    if unit in ("mcg/kg/min", "mcg/kg/h", "mg/kg/h"):
        per_kg = amount(rate, "mg/kg/h", "dose_rate")
        kg, said = _weight(case, known.get("weight"))
        if kg is None or per_kg is None:
            return None, "rate by kg without a weight", ""
        return formula.rate_mg_h(per_kg, kg), "", said
    if unit == "mL/h":
        strength = amount(known.get("concentration"), "mg/mL", "drug_concentration")
        volume = amount(rate, "mL/h", "dose_rate")
        if strength is None or volume is None:
            return None, "rate in mL/h without a concentration in mg", ""
        return formula.mass_in_volume_mg(volume, strength), "", ""
    return None, f"rate in {unit}" if unit else "rate not recorded", ""


def _weight(case: Case, set_in_pump: Node | None) -> tuple[float | None, str]:
    kg = amount(set_in_pump, "kg", "mass")
    if kg is not None:
        return kg, f"{words(set_in_pump)} set in the pump"
    weight = case.state.weight(*WEIGHTS)
    if weight is None:
        return None, ""
    return weight.kg, f"{words(weight.node.get('value'))} {weight.kind}"
