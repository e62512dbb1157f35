"""The arithmetic of area at its edges; the figures are definitions or composed unless a source is named."""

from __future__ import annotations

import math

import pytest
from handoff.bundled.area import formula

from handoff.plugin import FormulaInputError

NOT_NUMBERS = (math.nan, math.inf, -math.inf, -0.001)


def test_a_share_of_a_region() -> None:
    assert formula.region_pct(18, 50) == 9
    assert formula.region_pct(18, 0) == 0
    assert formula.region_pct(0, 100) == 0
    assert formula.region_pct(101, 100) == 101


@pytest.mark.parametrize("share", [*NOT_NUMBERS, 100.001])
def test_a_share_outside_the_region_is_refused(share: float) -> None:
    with pytest.raises(FormulaInputError, match="of_region_pct"):
        formula.region_pct(18, share)


@pytest.mark.parametrize("size", NOT_NUMBERS)
def test_a_region_without_a_size_is_refused(size: float) -> None:
    with pytest.raises(FormulaInputError, match="region_size_pct"):
        formula.region_pct(size, 10)


def test_palms() -> None:
    assert formula.palms_pct(2.5, 0.8) == 2
    assert formula.palms_pct(0, 1) == 0


@pytest.mark.parametrize("bad", NOT_NUMBERS)
def test_palms_below_nothing_are_refused(bad: float) -> None:
    with pytest.raises(FormulaInputError, match="palms"):
        formula.palms_pct(bad, 1)
    with pytest.raises(FormulaInputError, match="palm_pct"):
        formula.palms_pct(1, bad)


def test_a_total_is_exact_where_plain_addition_is_not() -> None:
    assert formula.total_pct([0.1] * 10) == 1
    assert formula.total_pct([]) == 0


@pytest.mark.parametrize("bad", NOT_NUMBERS)
def test_a_part_that_is_no_area_is_refused(bad: float) -> None:
    with pytest.raises(FormulaInputError, match="a part"):
        formula.total_pct([1, bad])


def test_no_more_than_a_whole_body() -> None:
    assert formula.at_most_whole_body_pct(102) == 100
    assert formula.at_most_whole_body_pct(99.5) == 99.5
    assert formula.at_most_whole_body_pct(0) == 0
    with pytest.raises(FormulaInputError, match="total"):
        formula.at_most_whole_body_pct(-1)


def test_one_face_and_both_faces() -> None:
    assert formula.face_pct(9, 50) == 4.5
    assert formula.face_pct(9, 100) == 9
    assert formula.face_pct(9, 0) == 0
    assert formula.both_faces_pct(9.5) == 19
    with pytest.raises(FormulaInputError, match="face_share_pct"):
        formula.face_pct(9, 101)
    with pytest.raises(FormulaInputError, match="whole_pct"):
        formula.face_pct(-9, 50)
    with pytest.raises(FormulaInputError, match="face"):
        formula.both_faces_pct(-1)


@pytest.mark.parametrize(("age", "head", "leg"), [(0, 18, 14), (1, 18, 14), (2, 17, 14.5), (9, 10, 18)])
def test_steps_from_the_first_birthday(age: float, head: float, leg: float) -> None:
    assert formula.head_at_age_pct(18, age, 1, 1) == head
    assert formula.leg_at_age_pct(14, age, 1, 0.5) == leg


@pytest.mark.parametrize("bad", NOT_NUMBERS)
def test_steps_refuse_what_is_no_number(bad: float) -> None:
    for place in range(1, 4):
        arguments = [18.0, 5.0, 1.0, 1.0]
        arguments[place] = bad
        with pytest.raises(FormulaInputError):
            formula.head_at_age_pct(*arguments)
        with pytest.raises(FormulaInputError):
            formula.leg_at_age_pct(*arguments)
    with pytest.raises(FormulaInputError, match="head at this age"):
        formula.head_at_age_pct(bad, 0, 1, 1)
    with pytest.raises(FormulaInputError, match="each_leg_pct"):
        formula.leg_at_age_pct(bad, 0, 1, 1)


def test_a_step_may_be_more_than_one_point() -> None:
    assert formula.head_at_age_pct(18, 3, 1, 2) == 14


def test_a_head_may_step_down_to_nothing_and_no_further() -> None:
    assert formula.head_at_age_pct(3, 3, 0, 1) == 0
    with pytest.raises(FormulaInputError, match="head at this age"):
        formula.head_at_age_pct(3, 4, 0, 1)


BANDS = {"0": 0, "1": 1, "5": 5}


@pytest.mark.parametrize(
    ("age", "column"), [(0, "0"), (0.99, "0"), (1, "1"), (4, "1"), (5, "5"), (15, "5"), (16, "adult")]
)
def test_the_column_for_an_age(age: float, column: str) -> None:
    assert formula.column_for_age(age, BANDS, 16) == column


def test_an_age_before_every_column_is_refused() -> None:
    with pytest.raises(FormulaInputError, match="no column begins"):
        formula.column_for_age(0, {"1": 1}, 16)
    with pytest.raises(FormulaInputError, match="age_years"):
        formula.column_for_age(-1, BANDS, 16)


def test_between_two_columns() -> None:
    assert formula.between_columns_pct(1, 1, 8.5, 5, 6.5) == 8.5
    assert formula.between_columns_pct(2, 1, 8.5, 5, 6.5) == 8
    assert formula.between_columns_pct(5, 1, 8.5, 5, 6.5) == 6.5
    assert formula.between_columns_pct(2, 1, 3, 5, 4) == 3.25
    assert formula.between_columns_pct(0.5, 0, 0, 1, 2) == 1


@pytest.mark.parametrize("age", [0.99, 5.01, math.nan])
def test_an_age_outside_its_two_columns_is_refused(age: float) -> None:
    with pytest.raises(FormulaInputError, match="age_years"):
        formula.between_columns_pct(age, 1, 8.5, 5, 6.5)


@pytest.mark.parametrize(("younger", "older"), [(5, 5), (5, 1)])
def test_two_columns_in_the_wrong_order_are_refused(younger: float, older: float) -> None:
    with pytest.raises(FormulaInputError, match="must lie above"):
        formula.between_columns_pct(5, younger, 8.5, older, 6.5)


@pytest.mark.parametrize("bad", NOT_NUMBERS)
def test_between_refuses_what_is_no_number(bad: float) -> None:
    for place, name in ((1, "younger_years"), (2, "younger_pct"), (3, "older_years"), (4, "older_pct")):
        arguments = [3.0, 1.0, 8.5, 5.0, 6.5]
        arguments[place] = bad
        with pytest.raises(FormulaInputError, match=name):
            formula.between_columns_pct(*arguments)


def test_a_difference_may_be_below_nothing() -> None:
    assert formula.difference_points(36, 22) == -14
    assert formula.difference_points(22, 36) == 14
    with pytest.raises(FormulaInputError, match="second_pct"):
        formula.difference_points(1, -1)
    with pytest.raises(FormulaInputError, match="first_pct"):
        formula.difference_points(-1, 1)


def test_an_area_by_another_table() -> None:
    assert formula.by_other_table_pct(2.5, 9.5, 9) == pytest.approx(2.5 * 9 / 9.5)
    assert formula.by_other_table_pct(0, 9.5, 9) == 0
    assert formula.by_other_table_pct(1, 2, 0) == 0
    with pytest.raises(FormulaInputError, match="no size"):
        formula.by_other_table_pct(1, 0, 9)
    for arguments, name in (
        ((-1, 1, 1), "area_pct"),
        ((1, -1, 1), "own_region_pct"),
        ((1, 1, -1), "other_region"),
    ):
        with pytest.raises(FormulaInputError, match=name):
            formula.by_other_table_pct(*arguments)


def test_revised_baux_is_a_sum() -> None:
    """Osler, Glance, Hosmer, J Trauma 2010;68:690: age + area + 17; the patients are composed."""
    assert formula.revised_baux_points(60, 50, 17) == 127
    assert formula.revised_baux_points(60, 50, 0) == 110
    assert formula.revised_baux_points(25, 30, 0) == 55
    assert formula.revised_baux_points(25, 0.5, 0) == 25.5
    assert formula.revised_baux_points(0, 100, 0) == 100
    for arguments, name in (
        ((-1, 1, 1), "age_years"),
        ((1, -1, 1), "burned_area_pct"),
        ((1, 100.1, 1), "burned_area_pct"),
        ((1, 1, -1), "inhalation_points"),
    ):
        with pytest.raises(FormulaInputError, match=name):
            formula.revised_baux_points(*arguments)


@pytest.mark.parametrize(
    ("value", "points"), [(0, 0), (0.1, 1), (10, 1), (10.1, 2), (20, 2), (91, 10), (100, 10), (200, 10)]
)
def test_points_by_begun_band(value: float, points: float) -> None:
    assert formula.band_points(value, 10, 10) == points


@pytest.mark.parametrize(
    ("age", "points"),
    [(20, 1), (21, 2), (40, 2), (41, 3), (60, 3), (61, 4), (80, 4), (81, 5), (100, 5), (101, 5)],
)
def test_points_by_begun_score_of_years(age: float, points: float) -> None:
    assert formula.band_points(age, 20, 5) == points


def test_bands_refuse_what_is_no_band() -> None:
    with pytest.raises(FormulaInputError, match="no width"):
        formula.band_points(1, 0, 10)
    for arguments, name in (((-1, 1, 1), "value"), ((1, -1, 1), "width"), ((1, 1, -1), "at_most")):
        with pytest.raises(FormulaInputError, match=name):
            formula.band_points(*arguments)


def test_severity_index_is_the_sum_of_five_parts() -> None:
    """After Tobiasen, Hiebert, Edlich, Ann Emerg Med 1982;11:260, from memory; the patients are composed."""
    assert formula.absi_points(3, 4, 1, 0, 1) == 9
    assert formula.absi_points(1, 1, 0, 0, 0) == 2
    assert formula.absi_points(5, 10, 1, 1, 1) == 18
    for place in range(5):
        parts = [1.0] * 5
        parts[place] = -1
        with pytest.raises(FormulaInputError, match="a part"):
            formula.absi_points(*parts)
