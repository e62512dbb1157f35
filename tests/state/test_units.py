"""Every unit of the state file turns into every other as pint turns it, and nothing turns by guess."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import Any

import pint
import pytest
from hypothesis import given
from hypothesis import strategies as st

from handoff.state.access import amount, unit_of
from handoff.state.nodes import Text
from handoff.state.quantity import QuantityError, read_quantity
from handoff.state.units import ALIASES, DOSES, KINDS, UNSAFE, WHOLE
from handoff.words import number

registry: Any = pint.UnitRegistry(autoconvert_offset_to_baseunit=True)
for definition in (
    "unit_of_activity = [activity]",
    "drop = [drop]",
    "percent_burned = [percent_burned]",
    "billion = 1e9",
):
    registry.define(definition)

PARTS_IN_PINT = {
    "": "dimensionless",
    "C": "degree_Celsius",
    "F": "degree_Fahrenheit",
    "U": "unit_of_activity",
    "d": "day",
    "drops": "drop",
    "in": "inch",
    "lb": "pound",
    "units": "unit_of_activity",
    "weeks": "week",
    "x10^9": "billion",
}
"""Parts of a unit that pint calls otherwise."""

NOT_IN_PINT = {"mEq/L", "G", "Fr", "month", "months", "year", "years"}
"""A charge, two gauges without a scale, and months, which the calendar does not make equal."""


def in_pint(unit: str) -> str:
    """Return the name of ``unit`` in pint: the parts between the strokes, each by its own name."""
    if unit == "%":
        return "percent"
    parts = [PARTS_IN_PINT.get(part, part) for part in unit.replace("/%", "/percent_burned").split("/")]
    return "/".join([parts[0] if unit[:1] != "/" else "1", *parts[1:]])


MOLAR_MASS_G_PER_MOL = {
    # From the formula and the conventional atomic weights, so apart from the factors that are tested.
    "glucose": 6 * 12.011 + 12 * 1.008 + 6 * 15.999,
    "lactate": 3 * 12.011 + 6 * 1.008 + 3 * 15.999,
    "creatinine": 4 * 12.011 + 7 * 1.008 + 3 * 14.007 + 15.999,
    "cyanide": 12.011 + 14.007,
}
TOLERANCE = {**dict.fromkeys(MOLAR_MASS_G_PER_MOL, 1e-4)}

numbers = st.floats(-1000, 1000, allow_nan=False).map(lambda value: round(value, 3))


def pairs() -> Iterator[Any]:
    for kind, units in KINDS.items():
        if kind == "pressure_pair":
            continue
        for have in units:
            for want in units:
                if have not in NOT_IN_PINT and want not in NOT_IN_PINT:
                    yield pytest.param(kind, have, want, id=f"{kind}-{have or 'plain'}-{want or 'plain'}")


def by_pint(kind: str, value: float, have: str, want: str) -> float:
    quantity = registry.Quantity(value, in_pint(have))
    if kind in MOLAR_MASS_G_PER_MOL:
        molar = registry.Quantity(MOLAR_MASS_G_PER_MOL[kind], "gram/mole")
        if quantity.check("[substance]/[length]**3") and "mg" in want:
            quantity = quantity * molar
        elif quantity.check("[mass]/[length]**3") and "mol" in want:
            quantity = quantity / molar
    return float(quantity.to(in_pint(want)).magnitude)


def is_known(unit: str) -> bool:
    return unit in NOT_IN_PINT or all(part in registry or part == "1" for part in in_pint(unit).split("/"))


def test_every_unit_is_held_against_pint_or_named_as_one_it_does_not_know() -> None:
    assert [unit for units in KINDS.values() for unit in units if not is_known(unit)] == []


@pytest.mark.parametrize(("kind", "have", "want"), list(pairs()))
def test_a_conversion_agrees_with_pint(kind: str, have: str, want: str) -> None:
    units = KINDS[kind]
    if units[have].dimension != units[want].dimension:
        with pytest.raises(QuantityError, match="cannot be turned into"):
            read_quantity(kind, f"10 {have}".strip()).to(want)
        return
    for value in ("-40", "0", "0.5", "1", "37.5", "165", "12345.6"):
        got = read_quantity(kind, f"{value} {have}".strip()).to(want)
        due = by_pint(kind, float(value), have, want)
        assert math.isclose(got, due, rel_tol=TOLERANCE.get(kind, 1e-9), abs_tol=1e-9), (got, due)


@pytest.mark.parametrize("kind", [kind for kind in KINDS if kind != "pressure_pair"])
@given(data=st.data(), value=numbers)
def test_a_figure_turned_there_and_back_is_the_same(kind: str, data: st.DataObject, value: float) -> None:
    units = KINDS[kind]
    have = data.draw(st.sampled_from(sorted(units)))
    want = data.draw(
        st.sampled_from(sorted(unit for unit in units if units[unit].dimension == units[have].dimension))
    )
    there = read_quantity(kind, f"{value} {have}".strip()) if not read_twice(value, have) else None
    if there is None:
        return
    factor_there = there.to(want)
    back = (factor_there * units[want].factor + units[want].offset - units[have].offset) / units[have].factor
    assert math.isclose(back, value, rel_tol=1e-9, abs_tol=1e-9)


def read_twice(value: float, unit: str) -> bool:
    """Whether the figure is one that is refused because a point may part thousands."""
    text = str(value)
    return "e" in text or (len(text.partition(".")[2]) > 2 and unit in WHOLE | DOSES)


@pytest.mark.parametrize(
    ("kind", "text", "unit", "value"),
    [
        ("mass", "165 lb", "kg", 75),
        ("temperature", "98.6 F", "C", 37),
        ("temperature", "-40 F", "C", -40),
        ("pressure", "13.3 kPa", "mmHg", 100),
        ("glucose", "180 mg/dL", "mmol/L", 10),
        ("creatinine", "1 mg/dL", "umol/L", 88),
        ("length", "70 in", "cm", 178),
        ("duration", "2 weeks", "d", 14),
        ("duration", "2 years", "months", 24),
        ("dose_rate", "1 mcg/kg/min", "mcg/kg/h", 60),
    ],
)
def test_a_conversion_that_is_known_by_heart(kind: str, text: str, unit: str, value: float) -> None:
    assert number(read_quantity(kind, text).to(unit)) == number(value)


@pytest.mark.parametrize("kind", list(KINDS))
def test_what_plugins_read_is_what_the_check_read(kind: str) -> None:
    for have, unit in KINDS[kind].items():
        text = "104/62 mmHg" if kind == "pressure_pair" else f"12.5 {have}".strip()
        for want, other in KINDS[kind].items():
            if other.dimension == unit.dimension:
                got = amount(Text.at(text), want, kind)
                assert got is not None
                assert math.isclose(got, read_quantity(kind, text).to(want), rel_tol=1e-12)


def test_two_kinds_that_share_their_units_are_never_confused() -> None:
    with pytest.raises(QuantityError, match="cannot be read"):
        amount(Text.at("90 mg/dL"), "mmol/L")
    assert number(amount(Text.at("90 mg/dL"), "mmol/L", "glucose") or 0, 1) == "5"
    assert number(amount(Text.at("90 mg/dL"), "mmol/L", "lactate") or 0, 1) == "10"
    with pytest.raises(QuantityError, match="cannot be read"):
        amount(Text.at("10 units"), "mg")


@pytest.mark.parametrize(("written", "unit"), ALIASES.items())
def test_a_spelling_that_can_mean_one_thing_only_is_read_as_that(written: str, unit: str) -> None:
    for kind in [kind for kind, units in KINDS.items() if unit in units and kind != "pressure_pair"]:
        assert read_quantity(kind, f"12 {written}").unit == unit
        assert unit_of(Text.at(f"12 {written}")) == unit


@pytest.mark.parametrize(("written", "safe"), UNSAFE.items())
def test_an_unsafe_abbreviation_is_refused_with_the_safe_form(written: str, safe: str) -> None:
    for kind in [kind for kind, units in KINDS.items() if safe in units and written not in units]:
        with pytest.raises(QuantityError) as refused:
            read_quantity(kind, f"12 {written}")
        assert refused.value.cure == f"write {safe}"
