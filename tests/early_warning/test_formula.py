"""What the arithmetic of the scores refuses, and the kind of number that it returns."""

from __future__ import annotations

import math

import pytest
from handoff.bundled.early_warning import formula

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize("parts", [(0, 5, 6), (4, 0, 6), (4, 5, 0)])
def test_no_part_of_the_coma_scale_is_below_one(parts: tuple[int, int, int]) -> None:
    with pytest.raises(FormulaInputError):
        formula.coma_total(*parts)


def test_a_sign_that_is_no_number_lies_in_no_range() -> None:
    with pytest.raises(FormulaInputError):
        formula.against_range(math.nan, 10, 20, ends_inside=True)


def test_points_are_whole_numbers_however_the_table_writes_them() -> None:
    points = formula.band_points(22, [{"points": 2.0, "from": 21, "to": 24}])
    assert isinstance(points, int)
    assert points == 2
