"""The arithmetic of every formula, its edges, and what it refuses.

Figures: University of Texas Health Science Center 2021 (70 kg, 25 %), pararescue handbook pp 33
and 54 and Journal of Special Operations Medicine 2025 p 68 (Rule of Ten), Holliday and Segar
1957 (maintenance), Mosteller 1987, DuBois 1916, WSACS 2013 (grades); the rest is arithmetic.
"""

from __future__ import annotations

import importlib
import math
from typing import Any

import pytest

from handoff.plugin import FormulaInputError

formula = importlib.import_module("handoff.bundled.fluid.formula")

HALVES = {"ends_h": [8, 24], "shares": [0.5, 0.5]}
TEN: dict[str, float] = {
    "per_pct": 10,
    "round_to_pct": 10,
    "from_kg": 40,
    "to_kg": 80,
    "step_kg": 10,
    "step_ml_h": 100,
}
BANDS = {"widths_kg": [10, 10], "per_kg_ml_h": [4, 2, 1], "most_ml_h": 100}
DAILY = {"widths_kg": [10, 10], "per_kg_ml": [100, 50, 20], "most_ml": 2400}
GRADES = {"from_values": [12, 16, 21], "to_values": [15, 20, 25]}


def titrated(running: float, base: float, pct: float, step: float, floor: float) -> dict[str, float]:
    names = ("running_ml_h", "base_ml_h", "step_pct", "step_ml_h", "floor_ml_h")
    return dict(zip(names, (running, base, pct, step, floor), strict=True))


FIGURES: list[tuple[str, dict[str, Any], float]] = [
    ("crystalloid_24h_ml", {"mass_kg": 70, "burned_area_pct": 25, "coefficient": 2}, 3500),
    ("crystalloid_24h_ml", {"mass_kg": 70, "burned_area_pct": 0, "coefficient": 2}, 0),
    ("crystalloid_24h_ml", {"mass_kg": 70, "burned_area_pct": 100, "coefficient": 0}, 0),
    ("area_based_24h_ml", {"burned_m2": 0.2, "body_m2": 0.5, "per_burned_m2_ml": 5000, "per_body_m2_ml": 2000}, 2000),
    ("area_based_24h_ml", {"burned_m2": 0.5, "body_m2": 0.5, "per_burned_m2_ml": 0, "per_body_m2_ml": 1500}, 750),
    ("area_based_24h_ml", {"burned_m2": 0, "body_m2": 0.5, "per_burned_m2_ml": 5000, "per_body_m2_ml": 0}, 0),
    ("by_mass_24h_ml", {"mass_kg": 70, "per_kg_ml": 100}, 7000),
    ("by_mass_24h_ml", {"mass_kg": 70, "per_kg_ml": 0}, 0),
    ("rule_of_ten_ml_h", {"mass_kg": 70, "burned_area_pct": 30, **TEN}, 300),
    ("rule_of_ten_ml_h", {"mass_kg": 90, "burned_area_pct": 50, **TEN}, 600),
    ("rule_of_ten_ml_h", {"mass_kg": 90, "burned_area_pct": 32, **TEN, "round_to_pct": 0}, 420),
    ("rule_of_ten_ml_h", {"mass_kg": 80, "burned_area_pct": 24.9, **TEN}, 200),
    ("rule_of_ten_ml_h", {"mass_kg": 80, "burned_area_pct": 25, **TEN}, 300),
    ("rule_of_ten_ml_h", {"mass_kg": 40, "burned_area_pct": 100, **TEN}, 1000),
    ("rule_of_ten_ml_h", {"mass_kg": 89.9, "burned_area_pct": 0, **TEN}, 0),
    ("rule_of_ten_ml_h", {"mass_kg": 115, "burned_area_pct": 40, **TEN}, 700),
    ("due_ml", {"volume_ml": 3500, **HALVES, "hours": 0}, 0),
    ("due_ml", {"volume_ml": 3500, **HALVES, "hours": 4}, 875),
    ("due_ml", {"volume_ml": 3500, **HALVES, "hours": 8}, 1750),
    ("due_ml", {"volume_ml": 3500, **HALVES, "hours": 16}, 2625),
    ("due_ml", {"volume_ml": 3500, **HALVES, "hours": 30}, 3500),
    ("due_ml", {"volume_ml": 0, **HALVES, "hours": 30}, 0),
    ("due_ml", {"volume_ml": 100, "ends_h": [0.5], "shares": [1], "hours": 0.25}, 50),
    ("due_ml", {"volume_ml": 100, "ends_h": [10], "shares": [1], "hours": 5}, 50),
    ("due_ml", {"volume_ml": 100, "ends_h": [5, 10], "shares": [0, 1], "hours": 6}, 20),
    ("plan_rate_ml_h", {"volume_ml": 3500, **HALVES, "hours": 0}, 218.75),
    ("plan_rate_ml_h", {"volume_ml": 3500, **HALVES, "hours": 8}, 109.375),
    ("plan_rate_ml_h", {"volume_ml": 3500, **HALVES, "hours": 24}, 0),
    ("plan_rate_ml_h", {"volume_ml": 0, **HALVES, "hours": 1}, 0),
    ("catch_up_rate_ml_h", {"due_at_end_ml": 4200, "given_ml": 1000, "hours_left": 7}, 3200 / 7),
    ("catch_up_rate_ml_h", {"due_at_end_ml": 3200, "given_ml": 3500, "hours_left": 5}, 0),
    ("catch_up_rate_ml_h", {"due_at_end_ml": 0, "given_ml": 0, "hours_left": 0.5}, 0),
    ("surplus_ml", {"due": 1200, "given": 700}, -500),
    ("surplus_ml", {"due": 0, "given": 0}, 0),
    ("rounded_up_ml_h", {"rate_ml_h": 218.75, "step_ml_h": 10}, 220),
    ("rounded_up_ml_h", {"rate_ml_h": 220, "step_ml_h": 10}, 220),
    ("rounded_up_ml_h", {"rate_ml_h": 0, "step_ml_h": 10}, 0),
    ("colloid_second_day_ml", {"mass_kg": 70, "burned_area_pct": 60, "coefficient": 0.4}, 1680),
    ("infusion_ml", {"rate_ml_h": 450, "hours": 1.5}, 675),
    ("infusion_ml", {"rate_ml_h": 0, "hours": 0}, 0),
    ("drops_rate_ml_h", {"drops_per_min": 40, "drops_per_ml": 20}, 120),
    ("drops_rate_ml_h", {"drops_per_min": 0, "drops_per_ml": 20}, 0),
    ("urine_rate_ml_h", {"volume_ml": 60, "hours": 1.5}, 40),
    ("urine_rate_ml_h", {"volume_ml": 0, "hours": 1.5}, 0),
    ("urine_rate_ml_kg_h", {"volume_ml": 60, "mass_kg": 80, "hours": 1.5}, 0.5),
    ("per_kg_ml", {"volume_ml": 12600, "mass_kg": 70}, 180),
    ("per_kg_ml", {"volume_ml": 0, "mass_kg": 70}, 0),
    ("delivered_index", {"volume_ml": 12600, "mass_kg": 70, "burned_area_pct": 40}, 4.5),
    ("delivered_index", {"volume_ml": 7000, "mass_kg": 70, "burned_area_pct": 100}, 1),
    ("projected_ml", {"given_ml": 8000, "rate_ml_h": 700, "hours_left": 14}, 17800),
    ("projected_ml", {"given_ml": 0, "rate_ml_h": 0, "hours_left": 0}, 0),
    ("hours_until_line", {"given_ml": 8000, "rate_ml_h": 500, "line_ml": 17500}, 19),
    ("hours_until_line", {"given_ml": 17500, "rate_ml_h": 0, "line_ml": 17500}, 0),
    ("hours_until_line", {"given_ml": 17499, "rate_ml_h": 0.5, "line_ml": 17500}, 2),
    ("hours_until_line", {"given_ml": 0, "rate_ml_h": 0, "line_ml": 0}, 0),
    ("titrated_rate_ml_h", titrated(500, 500, 20, 0, 0), 600),
    ("titrated_rate_ml_h", titrated(500, 250, -33, 0, 0), 417.5),
    ("titrated_rate_ml_h", titrated(500, 0, 0, -50, 0), 450),
    ("titrated_rate_ml_h", titrated(200, 250, -33, 0, 175), 175),
    ("titrated_rate_ml_h", titrated(20, 0, -100, -100, 0), 0),
    ("titrated_rate_ml_h", titrated(0, 10, 100, 0, 0), 10),
    ("maintenance_24h_ml", {"mass_kg": 24, **DAILY}, 1580),
    ("maintenance_24h_ml", {"mass_kg": 10, **DAILY}, 1000),
    ("maintenance_24h_ml", {"mass_kg": 5, **DAILY}, 500),
    ("maintenance_24h_ml", {"mass_kg": 70, **DAILY}, 2400),
    ("maintenance_24h_ml", {"mass_kg": 5, "widths_kg": [], "per_kg_ml": [80], "most_ml": 2400}, 400),
    ("maintenance_rate_ml_h", {"mass_kg": 24, **BANDS}, 64),
    ("maintenance_rate_ml_h", {"mass_kg": 70, **BANDS}, 100),
    ("maintenance_rate_ml_h", {"mass_kg": 70, **BANDS, "per_kg_ml_h": [0, 0, 0]}, 0),
    ("balance_ml", {"intake_ml": 2160, "output_ml": 1230}, 930),
    ("balance_ml", {"intake_ml": 0, "output_ml": 0}, 0),
    ("evaporation_ml_h", {"constant": 25, "burned_area_pct": 20, "body_m2": 1.14}, 51.3),
    ("evaporation_ml_h", {"constant": 0, "burned_area_pct": 100, "body_m2": 2}, 200),
    ("evaporation_ml_h", {"constant": 25, "burned_area_pct": 0, "body_m2": 2}, 50),
    ("mean_pressure_mmhg", {"systolic": 104, "diastolic": 62, "diastolic_weight": 2}, 76),
    ("mean_pressure_mmhg", {"systolic": 60, "diastolic": 0, "diastolic_weight": 2}, 20),
    ("mean_pressure_mmhg", {"systolic": 60, "diastolic": 60, "diastolic_weight": 0.5}, 60),
    ("systolic_floor_mmhg", {"age_years": 1, "base": 70, "per_year": 2, "to_years": 10}, 72),
    ("systolic_floor_mmhg", {"age_years": 14, "base": 70, "per_year": 2, "to_years": 10}, 90),
    ("systolic_floor_mmhg", {"age_years": 3, "base": 0, "per_year": 0, "to_years": 10}, 0),
    ("abdominal_perfusion_mmhg", {"mean_pressure": 75, "abdominal_pressure": 18}, 57),
    ("abdominal_perfusion_mmhg", {"mean_pressure": 0, "abdominal_pressure": 18}, -18),
    ("abdominal_perfusion_mmhg", {"mean_pressure": 10, "abdominal_pressure": 0}, 10),
    ("grade_index", {"value": 11.9, **GRADES}, 0),
    ("grade_index", {"value": 12, **GRADES}, 1),
    ("grade_index", {"value": 15, **GRADES}, 1),
    ("grade_index", {"value": 15.5, **GRADES}, 0),
    ("grade_index", {"value": 16, **GRADES}, 2),
    ("grade_index", {"value": 25, **GRADES}, 3),
    ("grade_index", {"value": 25.1, **GRADES}, 0),
    ("grade_index", {"value": 0, **GRADES}, 0),
    ("mosteller_m2", {"height_cm": 180, "mass_kg": 80, "divisor": 3600}, 2),
    ("mosteller_m2", {"height_cm": 0.5, "mass_kg": 0.5, "divisor": 0.25}, 1),
    ("power_surface_m2", {"height_cm": 16, "mass_kg": 9, "factor": 0.5, "height_power": 0.5, "mass_power": 0.5}, 6),
    ("burned_surface_m2", {"body_m2": 1.5, "burned_area_pct": 40}, 0.6),
    ("burned_surface_m2", {"body_m2": 0.5, "burned_area_pct": 100}, 0.5),
    ("burned_surface_m2", {"body_m2": 0.5, "burned_area_pct": 0}, 0),
    ("body_mass_index", {"mass_kg": 80, "height_cm": 200}, 20),
    ("body_mass_index", {"mass_kg": 0.5, "height_cm": 50}, 2),
    ("z_score", {"value": 12, "power": 1, "median": 10, "spread": 0.1}, 2),
    ("z_score", {"value": 5, "power": -1, "median": 10, "spread": 0.5}, -2),
    ("z_score", {"value": 10 * math.e, "power": 0, "median": 10, "spread": 0.5}, 2),
    ("z_score", {"value": 0.5, "power": 2, "median": 0.5, "spread": 0.1}, 0),
    ("at_z_score", {"z": 2, "power": 1, "median": 10, "spread": 0.1}, 12),
    ("at_z_score", {"z": -2, "power": -1, "median": 10, "spread": 0.5}, 5),
    ("at_z_score", {"z": 2, "power": 0, "median": 10, "spread": 0.5}, 10 * math.e),
    ("at_z_score", {"z": -3, "power": 0.5, "median": 0.5, "spread": 0.1}, 0.5 * 0.85**2),
]  # fmt: skip


@pytest.mark.parametrize(("name", "given", "due"), FIGURES)
def test_a_figure(name: str, given: dict[str, Any], due: float) -> None:
    assert getattr(formula, name)(**given) == pytest.approx(due, rel=1e-12, abs=1e-12)


def test_nothing_running_never_reaches_a_line() -> None:
    assert formula.hours_until_line(0, 0, 1) == math.inf


def test_a_range_by_weight_has_both_ends() -> None:
    assert formula.per_day_range(80, 1.5, 2) == (120, 160)
    assert formula.per_day_range(0.5, 0, 0) == (0, 0)


POSITIVE = {
    "mass_kg", "body_m2", "height_cm", "divisor", "factor", "height_power", "mass_power", "hours_left_catch",
    "drops_per_ml", "median", "spread", "step_kg", "systolic", "diastolic_weight", "most_ml", "most_ml_h",
}  # fmt: skip
FREE = {
    "power",
    "z",
    "to_kg",
    "step_ml_h",
    "per_pct",
    "round_to_pct",
    "to_years",
    "from_kg",
    "hours",
    "value",
}


def bad_arguments() -> list[tuple[str, dict[str, Any]]]:
    """Each number of each example put out of its range, one at a time."""
    made = []
    for name, given, _ in FIGURES:
        for key, number in given.items():
            if isinstance(number, list) or key in FREE:
                continue
            wrong = [math.nan, math.inf, -1.0] if key != "step_pct" else [math.nan, 101.0, -101.0]
            if key in POSITIVE:
                wrong.append(0.0)
            if key == "burned_area_pct":
                wrong.append(100.1)
            made += [(name, {**given, key: value}) for value in wrong]
    return made


@pytest.mark.parametrize(("name", "given"), bad_arguments())
def test_an_argument_outside_its_range_is_refused(name: str, given: dict[str, Any]) -> None:
    with pytest.raises(FormulaInputError, match="must be finite"):
        getattr(formula, name)(**given)


@pytest.mark.parametrize(
    ("name", "given"),
    [
        ("due_ml", {"volume_ml": 100, **HALVES, "hours": -0.1}),
        ("plan_rate_ml_h", {"volume_ml": 100, **HALVES, "hours": -0.1}),
        ("due_ml", {"volume_ml": 100, "ends_h": [], "shares": [], "hours": 1}),
        ("due_ml", {"volume_ml": 100, "ends_h": [8], "shares": [0.5, 0.5], "hours": 1}),
        ("due_ml", {"volume_ml": 100, "ends_h": [8, 8], "shares": [0.5, 0.5], "hours": 1}),
        ("due_ml", {"volume_ml": 100, "ends_h": [0, 8], "shares": [0.5, 0.5], "hours": 1}),
        ("due_ml", {"volume_ml": 100, "ends_h": [8, 24], "shares": [1.5, 0.5], "hours": 1}),
        ("plan_rate_ml_h", {"volume_ml": 100, "ends_h": [8, 24], "shares": [-0.5, 0.5], "hours": 1}),
        ("plan_rate_ml_h", {"volume_ml": 100, "ends_h": [8, 4], "shares": [0.5, 0.5], "hours": 1}),
        ("catch_up_rate_ml_h", {"due_at_end_ml": 1, "given_ml": 0, "hours_left": 0}),
        ("infusion_ml", {"rate_ml_h": 1, "hours": -1}),
        ("infusion_ml", {"rate_ml_h": 1, "hours": math.nan}),
        ("urine_rate_ml_h", {"volume_ml": 1, "hours": 0}),
        ("urine_rate_ml_kg_h", {"volume_ml": 1, "mass_kg": 1, "hours": 0}),
        ("delivered_index", {"volume_ml": 1, "mass_kg": 1, "burned_area_pct": 0}),
        ("rounded_up_ml_h", {"rate_ml_h": 1, "step_ml_h": 0}),
        ("rule_of_ten_ml_h", {"mass_kg": 39.9, "burned_area_pct": 30, **TEN}),
        ("maintenance_rate_ml_h", {"mass_kg": 10, **BANDS, "per_kg_ml_h": [4, 2]}),
        ("maintenance_rate_ml_h", {"mass_kg": 10, **BANDS, "per_kg_ml_h": [4, 2, 1, 1]}),
        ("maintenance_rate_ml_h", {"mass_kg": 10, **BANDS, "per_kg_ml_h": [-4, 2, 1]}),
        ("maintenance_rate_ml_h", {"mass_kg": 10, **BANDS, "per_kg_ml_h": [4, 2, -1]}),
        ("maintenance_rate_ml_h", {"mass_kg": 10, **BANDS, "widths_kg": [0, 10]}),
        ("area_based_24h_ml", {"burned_m2": 0.6, "body_m2": 0.5, "per_burned_m2_ml": 1, "per_body_m2_ml": 1}),
        ("mean_pressure_mmhg", {"systolic": 60, "diastolic": 61, "diastolic_weight": 2}),
        ("systolic_floor_mmhg", {"age_years": 0.9, "base": 70, "per_year": 2, "to_years": 10}),
        ("grade_index", {"value": -1, **GRADES}),
        ("grade_index", {"value": math.nan, **GRADES}),
        ("grade_index", {"value": 1, "from_values": [1], "to_values": [1, 2]}),
        ("z_score", {"value": 0, "power": 1, "median": 10, "spread": 0.1}),
        ("z_score", {"value": math.inf, "power": 1, "median": 10, "spread": 0.1}),
        ("at_z_score", {"z": math.nan, "power": 1, "median": 10, "spread": 0.1}),
        ("at_z_score", {"z": -20, "power": 1, "median": 10, "spread": 0.1}),
        ("per_day_range", {"mass_kg": 1, "low_per_kg": 2, "high_per_kg": 1.9}),
        ("per_day_range", {"mass_kg": 0, "low_per_kg": 1, "high_per_kg": 1}),
        ("per_day_range", {"mass_kg": 1, "low_per_kg": -1, "high_per_kg": 1}),
    ],
)  # fmt: skip
def test_what_does_not_fit_together_is_refused(name: str, given: dict[str, Any]) -> None:
    with pytest.raises(FormulaInputError):
        getattr(formula, name)(**given)


def test_a_refusal_names_the_argument_its_value_and_the_limits() -> None:
    with pytest.raises(
        FormulaInputError, match=r"^burned_area_pct is 101; it must be finite, from 0 to 100$"
    ):
        formula.crystalloid_24h_ml(70, 101, 2)
    with pytest.raises(FormulaInputError, match=r"^mass_kg is 0; it must be finite and above 0$"):
        formula.crystalloid_24h_ml(0, 10, 2)


def test_a_step_of_one_kilogram_begins_above_the_line_and_not_at_it() -> None:
    ten = {**TEN, "step_kg": 1}
    assert formula.rule_of_ten_ml_h(80, 40, **ten) == 400
    assert formula.rule_of_ten_ml_h(81, 40, **ten) == 500


def test_a_distance_from_the_middle_of_a_growth_table_must_be_a_number() -> None:
    with pytest.raises(FormulaInputError):
        formula.at_z_score(math.nan, power=0, median=10, spread=0.1)
