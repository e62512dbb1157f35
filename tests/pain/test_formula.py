"""The arithmetic at its edges: what it refuses, and where the numbers turn."""

from __future__ import annotations

import importlib
import math
from collections.abc import Callable
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from handoff.plugin import FormulaInputError

formula = importlib.import_module("handoff.bundled.pain.formula")
AMOUNTS = st.floats(min_value=0, max_value=1e6)

REFUSED: list[tuple[Callable[..., object], tuple[object, ...]]] = [
    (formula.scale_total, ([1, 1], 3, 0, 2)),
    (formula.scale_total, ([1, 1, 1, 1], 3, 0, 2)),
    (formula.scale_total, ([1, 3, 1], 3, 0, 2)),
    (formula.scale_total, ([1, 0, 1], 3, 1, 4)),
    (formula.scale_total, ([1, 0.5, 1], 3, 0, 2)),
    (formula.scale_total, ([1, math.nan, 1], 3, 0, 2)),
    (formula.score_class, (-1, [3, 10])),
    (formula.score_class, (11, [3, 10])),
    (formula.score_class, (math.nan, [3, 10])),
    (formula.overlap_h, (2, 1, 0, 5)),
    (formula.overlap_h, (1, 2, 5, 0)),
    (formula.overlap_h, (math.nan, 2, 0, 5)),
    (formula.overlap_h, (-math.inf, 2, 0, 5)),
    (formula.overlap_h, (1, math.inf, 0, 5)),
    (formula.overlap_h, (1, 2, 0, math.inf)),
    (formula.overlap_h, (1, 2, math.nan, 5)),
    (formula.overlap_h, (1, 2, -math.inf, 5)),
    (formula.delivered_mg, (-1, 1)),
    (formula.delivered_mg, (1, -1)),
    (formula.delivered_mg, (math.inf, 1)),
    (formula.rate_mg_h, (1, 0)),
    (formula.rate_mg_h, (-1, 80)),
    (formula.rate_mg_h, (1, -80)),
    (formula.rate_mcg_kg_min, (1, 0)),
    (formula.rate_mcg_kg_min, (-1, 80)),
    (formula.rate_mcg_kg_min, (1, -80)),
    (formula.mass_in_volume_mg, (-1, 1)),
    (formula.mass_in_volume_mg, (1, -1)),
    (formula.volume_ml, (1, 0)),
    (formula.volume_ml, (-1, 1)),
    (formula.volume_ml, (1, -1)),
    (formula.mean_rate_mcg_h, (-1,)),
    (formula.opioid_equivalent_mg, (-1, 1)),
    (formula.opioid_equivalent_mg, (1, -1)),
    (formula.opioid_equivalent_mg, (1, math.nan)),
    (formula.total_mg, ([1, -1],)),
    (formula.total_mg, ([1, math.inf],)),
    (formula.by_weight_mg, (0, 15)),
    (formula.by_weight_mg, (-1, 15)),
    (formula.by_weight_mg, (80, -15)),
    (formula.by_weight_mg, (80, 15, -1)),
    (formula.by_weight_mg, (80, 15, math.nan)),
    (formula.by_weight_mg, (math.nan, 15)),
    (formula.reduced, (-1, 25)),
    (formula.reduced, (1, -1)),
    (formula.reduced, (1, 101)),
    (formula.exceeds, (-1, 1)),
    (formula.exceeds, (1, -1)),
]


@pytest.mark.parametrize(("function", "arguments"), REFUSED)
def test_what_cannot_be_is_refused(function: Callable[..., object], arguments: tuple[object, ...]) -> None:
    with pytest.raises(FormulaInputError) as refused:
        function(*arguments)
    assert str(refused.value), "the refusal says why"


def test_nothing_is_a_number_that_can_be() -> None:
    assert formula.delivered_mg(0, 0) == 0
    assert formula.total_mg([]) == 0
    assert formula.by_weight_mg(80, 0) == 0
    assert formula.by_weight_mg(80, 15, 0) == 0
    assert formula.reduced(4, 0) == 4
    assert formula.reduced(4, 100) == 0
    assert formula.mean_rate_mcg_h(0) == 0
    assert formula.mass_in_volume_mg(0, 0) == 0
    assert formula.volume_ml(0, 1) == 0
    assert formula.rate_mg_h(0, 80) == 0
    assert formula.rate_mcg_kg_min(0, 80) == 0
    assert formula.opioid_equivalent_mg(0, 0) == 0
    assert formula.score_class(0, [0, 4]) == 0
    assert formula.overlap_h(1, 1, 0, 5) == 0


@pytest.mark.parametrize(
    ("run", "window", "hours"),
    [
        ((1, 3), (0, 5), 2),
        ((-4, 3), (0, 5), 3),
        ((3, 9), (0, 5), 2),
        ((-4, 9), (0, 5), 5),
        ((-4, 0), (0, 5), 0),
        ((-4, -1), (0, 5), 0),
        ((5, 9), (0, 5), 0),
        ((6, 9), (0, 5), 0),
        ((0, 5), (0, 5), 5),
        ((-0.5, 0.25), (0, 5), 0.25),
    ],
)
def test_a_run_counts_for_the_hours_inside_the_window(
    run: tuple[float, float], window: tuple[float, float], hours: float
) -> None:
    assert formula.overlap_h(*run, *window) == hours


@pytest.mark.parametrize(
    ("score", "index"), [(0, 0), (0.5, 1), (1, 1), (4, 1), (4.5, 2), (6, 2), (7, 3), (10, 3)]
)
def test_a_score_falls_in_the_first_class_that_holds_it(score: float, index: int) -> None:
    assert formula.score_class(score, [0, 4, 6, 10]) == index


@pytest.mark.parametrize(
    ("total", "limit", "above"),
    [
        (4000, 4000, False),
        (4001, 4000, True),
        (3999, 4000, False),
        (0.1 * 3, 0.3, False),
        (4000 * (1 + 1e-12), 4000, False),
        (4000.01, 4000, True),
        (0, 0, False),
        (1, 0, True),
    ],
)
def test_only_a_real_difference_is_over_a_limit(total: float, limit: float, above: bool) -> None:
    assert formula.exceeds(total, limit) is above


def test_rates_turn_into_each_other() -> None:
    assert formula.rate_mg_h(0.006, 82) == pytest.approx(0.492)
    assert formula.rate_mcg_kg_min(0.492, 82) == pytest.approx(0.1)
    assert formula.mean_rate_mcg_h(600) == 25
    assert formula.volume_ml(675, 10) == 67.5
    assert formula.delivered_mg(3, 4) == 12
    assert formula.opioid_equivalent_mg(40, 1.5) == 60
    assert formula.mass_in_volume_mg(67.5, 10) == 675


@given(AMOUNTS, st.floats(min_value=0.1, max_value=300))
def test_a_rate_by_weight_comes_back(rate: float, kg: float) -> None:
    there = formula.rate_mg_h(rate * 0.06, kg)
    assert formula.rate_mcg_kg_min(there, kg) == pytest.approx(rate, rel=1e-9, abs=1e-9)


@given(st.floats(min_value=0.1, max_value=300), st.floats(min_value=0, max_value=100), AMOUNTS)
def test_a_limit_by_weight_never_passes_its_cap_and_never_falls_with_weight(
    kg: float, per_kg: float, cap: float
) -> None:
    found = formula.by_weight_mg(kg, per_kg, cap)
    assert found <= cap
    assert found <= formula.by_weight_mg(kg + 1, per_kg, cap)
    assert found == pytest.approx(min(float(Fraction(kg) * Fraction(per_kg)), cap))


@given(st.lists(AMOUNTS, max_size=12), st.randoms())
def test_a_total_does_not_depend_on_the_order(amounts: list[float], random: object) -> None:
    mixed = list(amounts)
    getattr(random, "shuffle")(mixed)  # noqa: B009
    assert formula.total_mg(mixed) == formula.total_mg(amounts)
