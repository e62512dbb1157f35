"""The arithmetic of a journey: what lasts how long, and what is no figure is refused."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from handoff.bundled.transfer.formula import content_l, demand_l_min, lasts_min, needed_l, pump_min

from handoff.plugin import FormulaInputError


@pytest.mark.parametrize("bad", [-1.0, math.nan, math.inf])
@pytest.mark.parametrize(
    ("formula", "count"),
    [(content_l, 3), (demand_l_min, 3), (lasts_min, 2), (needed_l, 3), (pump_min, 2)],
)
def test_what_is_no_figure_is_refused_wherever_it_stands(
    formula: Callable[..., float], count: int, bad: float
) -> None:
    for place in range(count):
        given = [0.5] * count
        given[place] = bad
        with pytest.raises(FormulaInputError):
            formula(*given)


def test_figures_between_0_and_1_are_figures() -> None:
    assert content_l(460, 0.25, 0.5) == 230
    assert lasts_min(100, 0.5) == 200
    assert pump_min(1, 0.5) == 120


@pytest.mark.parametrize("formula", [lasts_min, pump_min])
def test_nothing_lasts_for_ever(formula: Callable[..., float]) -> None:
    with pytest.raises(FormulaInputError, match="greater than 0"):
        formula(100, 0)
