"""Named rules as bands: which band of a table holds for this patient, and what is missing to tell."""

from __future__ import annotations

import operator
from collections.abc import Callable, Mapping, Sequence
from typing import Any, TypeAlias

from msgspec import Struct

Facts: TypeAlias = Mapping[str, float | bool | None]
Band: TypeAlias = Mapping[str, Any]

COMPARED: dict[str, Callable[[Any, Any], bool]] = {
    "from": operator.ge,
    "below": operator.lt,
    "above": operator.gt,
    "to": operator.le,
    "up_to": operator.le,
}
MEASURES = ("years", "months", "kg", "pct")
STATES = (
    "child",
    "high_voltage",
    "electrical",
    "inhalation",
    "overload_risk",
    "scald",
    "pigment_after_high_voltage",
)
MISSING = {
    "years": "age",
    "months": "age in months",
    "kg": "weight",
    "pct": "burned area",
    "child": "age",
    "high_voltage": "voltage",
    "inhalation": "whether there is inhalation injury",
    "overload_risk": "heart, kidney and frailty",
    "pigment_after_high_voltage": "colour of the urine or the voltage",
}


class Picked(Struct, frozen=True):
    """The band that holds, or why none does: what is not recorded, or that the patient falls between."""

    band: Band | None
    missing: tuple[str, ...] = ()

    @property
    def between(self) -> bool:
        """Whether every band was judged and none holds."""
        return self.band is None and not self.missing


def pick(bands: Sequence[Band], facts: Facts) -> Picked:
    """Return the first band whose conditions all hold; what is missing where that cannot be told."""
    lacking: list[str] = []
    for band in bands:
        unknown = _unknown(band, facts)
        if unknown is None:
            continue
        if not unknown:
            return Picked(band)
        lacking += unknown
    return Picked(None, tuple(dict.fromkeys(lacking)))


def _unknown(band: Band, facts: Facts) -> list[str] | None:
    """What is not known of a band that may hold; None where it does not hold."""
    unknown = []
    for key, limit in band.items():
        name, compare = _condition(key)
        if compare is None:
            continue
        value = facts.get(name)
        if value is None:
            unknown.append(MISSING.get(name, name))
        elif not compare(value, limit):
            return None
    return unknown


def _condition(key: str) -> tuple[str, Callable[[Any, Any], bool] | None]:
    if key in STATES:
        return key, operator.eq
    before, _, measure = key.rpartition("_")
    return (measure, COMPARED.get(before)) if measure in MEASURES else (key, None)
