"""Numbers as they are printed: no trailing zero, a leading zero, commas, half up, and the value they say."""

from __future__ import annotations

import re
from decimal import ROUND_HALF_UP, Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from handoff.words import hours, joined, number, plural, with_unit

PRINTED = re.compile(r"-?(0|[1-9]\d{0,2}(,\d{3})*)(\.\d*[1-9])?")

clinical = st.floats(-1e9, 1e9, allow_nan=False, allow_infinity=False)
any_finite = st.floats(allow_nan=False, allow_infinity=False)
places = st.integers(0, 6)


@given(any_finite, places)
def test_a_number_has_no_trailing_zero_a_leading_zero_and_commas(value: float, digits: int) -> None:
    said = number(value, digits)
    assert PRINTED.fullmatch(said)
    assert said != "-0"
    assert len(said.partition(".")[2]) <= digits


@given(any_finite, places)
def test_a_number_reads_back_as_the_value_rounded_half_up(value: float, digits: int) -> None:
    exact = Decimal(repr(value))
    step = Decimal(1).scaleb(-digits)
    steps = (abs(exact) / step).to_integral_value(ROUND_HALF_UP) if abs(exact) < 10**20 else abs(exact) / step
    rounded = (steps * step).copy_sign(exact)
    assert Decimal(number(value, digits).replace(",", "")) == rounded


@given(clinical, places)
def test_printing_what_was_printed_changes_nothing(value: float, digits: int) -> None:
    said = number(value, digits)
    assert number(float(said.replace(",", "")), digits) == said


@given(st.integers(-(10**15), 10**15))
def test_a_whole_number_is_printed_exactly(value: int) -> None:
    assert number(value) == f"{value:,}"
    assert number(value, 3) == f"{value:,}"


@pytest.mark.parametrize(
    ("value", "digits", "said"),
    [
        (0.5, 0, "1"),
        (1.5, 0, "2"),
        (2.5, 0, "3"),
        (-2.5, 0, "-3"),
        (0.285, 2, "0.29"),
        (1.005, 2, "1.01"),
        (999.95, 1, "1,000"),
        (11972.0, 0, "11,972"),
        (0.1 + 0.2, 1, "0.3"),
        (5.0, 2, "5"),
        (0.05, 1, "0.1"),
        (0.04, 1, "0"),
        (-0.04, 1, "0"),
        (1e22, 0, "10,000,000,000,000,000,000,000"),
        (5e-324, 3, "0"),
    ],
)
def test_rounding_is_half_up_as_on_paper(value: float, digits: int, said: str) -> None:
    assert number(value, digits) == said


@pytest.mark.parametrize("value", [float("inf"), float("-inf"), float("nan")])
def test_what_is_no_number_is_never_printed(value: float) -> None:
    with pytest.raises(ValueError, match="finite"):
        number(value)
    with pytest.raises(ValueError, match="finite"):
        hours(value)


def test_a_unit_stands_after_one_space() -> None:
    assert with_unit(11972, "mL") == "11,972 mL"
    assert with_unit(0.45, "mL/kg/h", 1) == "0.5 mL/kg/h"
    assert with_unit(7.31, "", 2) == "7.31"


@given(st.integers(-72 * 60, 72 * 60))
def test_hours_and_minutes_read_back_as_the_same_minutes(minutes: int) -> None:
    said = hours(minutes / 60)
    match = re.fullmatch(r"(-?)(?:(\d+) h)?(?: ?(\d+) min)?", said)
    assert match
    total = int(match[2] or 0) * 60 + int(match[3] or 0)
    assert (-total if match[1] else total) == minutes
    assert int(match[3] or 0) < 60


@given(st.integers(72 * 60 + 1, 100_000))
def test_beyond_three_days_hours_are_said_as_days_and_whole_hours(minutes: int) -> None:
    match = re.fullmatch(r"(\d+) days(?: (\d+) h)?", hours(minutes / 60))
    assert match
    assert int(match[1]) * 24 + int(match[2] or 0) == minutes // 60
    assert hours(-minutes / 60) == f"-{hours(minutes / 60)}"


@pytest.mark.parametrize(
    ("value", "said"),
    [(6 + 10 / 60, "6 h 10 min"), (0.5, "30 min"), (8, "8 h"), (0, "0 h"), (-1.5, "-1 h 30 min"), (-0.001, "0 h"),
     (0.999, "1 h"), (23.9999, "24 h"), (2.5 / 60, "3 min"), (72, "72 h"),
     (72.25, "3 days"), (340.75, "14 days 4 h")],
)  # fmt: skip
def test_hours_are_said_as_at_the_bedside(value: float, said: str) -> None:
    assert hours(value) == said


def test_a_list_is_joined_as_it_is_spoken() -> None:
    assert joined([]) == ""
    assert joined(["a"]) == "a"
    assert joined(["a", "b"]) == "a and b"
    assert joined(["a", "b", "c"], "or") == "a, b or c"


def test_one_and_several() -> None:
    assert [plural(count, "dose") for count in (0, 1, 2)] == ["0 doses", "1 dose", "2 doses"]
    assert plural(2, "entry", "entries") == "2 entries"
