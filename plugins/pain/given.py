"""Every charted dose as one record: single doses, blocks and readings of a patient-controlled pump."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import UTC, datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, List, Map, Node, amount, child, entries, unit_of, words

from . import formula
from .names import Drug, drug_of, route_of

DAY = timedelta(hours=formula.HOURS_A_DAY)
HOME = "home"
DOSE, BLOCK, PUMP = "dose", "block", "patient-controlled"
OLDEST = datetime.min.replace(tzinfo=UTC)


class Given(Struct, frozen=True):
    """One amount of one drug that was given.

    ``mg`` is None where the amount is not known or is not a mass; ``missing`` says why.
    ``earliest`` and ``latest`` differ where the time is uncertain.
    """

    drug: Drug
    route: str
    earliest: datetime
    latest: datetime
    mg: float | None
    written: str
    missing: str
    place: str
    release: str
    purpose: str
    product: str
    how: str
    node: Node

    def in_day_to(self, now: datetime) -> bool:
        """Whether it may fall in the 24 h that end at ``now``; what was given exactly 24 h ago does not."""
        return now - DAY < self.latest <= now


def given(case: Case) -> tuple[Given, ...]:
    """Return every charted amount, oldest first."""
    found = [*_doses(case), *_blocks(case), *_pumps(case)]
    return tuple(
        sorted(found, key=lambda one: (one.latest, one.earliest, one.drug.name, one.route, one.written))
    )


def moment_of(case: Case, node: Node | None) -> tuple[datetime, datetime] | None:
    """Return the earliest and the latest instant that ``node`` can mean, or None."""
    first, last = (child(node, "earliest"), child(node, "latest")) if isinstance(node, Map) else (node, node)
    earliest, latest = case.when(first), case.when(last)
    return (earliest, latest) if earliest is not None and latest is not None else None


def mass_mg(dose: Node | None, concentration: Node | None = None) -> tuple[float | None, str]:
    """Return an amount in mg, or None and the reason why it is not one."""
    unit = unit_of(dose)
    if not unit:
        return None, "amount not known"
    if unit in ("mg", "mcg", "g"):
        return amount(dose, "mg", "dose"), ""
    if unit == "mL":
        strength = amount(concentration, "mg/mL", "drug_concentration")
        volume = amount(dose, "mL", "dose")
        if strength is not None and volume is not None:
            return formula.mass_in_volume_mg(volume, strength), ""
        return None, "volume without a concentration in mg"
    return None, f"amount in {unit}"


def _doses(case: Case) -> Iterator[Given]:
    for entry in entries(child(case.block, "doses")):
        moment = moment_of(case, entry.get("at"))
        if moment is None:
            continue
        for part in _contents(entry) or (entry,):
            drug = drug_of(case, part.get("drug"))
            if drug is not None:
                mg, missing = mass_mg(part.get("dose"), entry.get("concentration"))
                yield Given(
                    drug=drug,
                    route=route_of(case, entry.get("route")),
                    earliest=moment[0],
                    latest=moment[1],
                    mg=mg,
                    written=words(part.get("dose")),
                    missing=missing,
                    place=words(entry.get("place")) or "ward",
                    release=words(entry.get("release")),
                    purpose=words(entry.get("for")),
                    product=words(entry.get("product")),
                    how=DOSE,
                    node=part,
                )


def _contents(entry: Map) -> tuple[Map, ...]:
    contains = entry.get("contains")
    return tuple(part for part in contains if isinstance(part, Map)) if isinstance(contains, List) else ()


def _blocks(case: Case) -> Iterator[Given]:
    for entry in entries(child(case.block, "blocks")):
        at, drug = case.when(entry.get("at")), drug_of(case, entry.get("drug"))
        if at is None or drug is None:
            continue
        mg, missing = mass_mg(entry.get("dose"), entry.get("concentration"))
        route = route_of(case, entry.get("route")) or "perineural"
        dose = words(entry.get("dose"))
        yield Given(drug, route, at, at, mg, dose, missing, "ward", "", "", "", BLOCK, entry)


def _pumps(case: Case) -> Iterator[Given]:
    for entry in entries(child(case.block, "patient_controlled")):
        drug = drug_of(case, entry.get("drug"))
        readings = entry.get("delivered")
        if drug is None or not isinstance(readings, List):
            continue
        route = route_of(case, entry.get("route")) or "IV"
        for reading in entries(readings):
            start, end = case.when(reading.get("from")), case.when(reading.get("to"))
            if start is not None and end is not None:
                mg, missing = mass_mg(reading.get("total"), entry.get("concentration"))
                total = words(reading.get("total"))
                yield Given(drug, route, start, end, mg, total, missing, "ward", "", "", "", PUMP, reading)
