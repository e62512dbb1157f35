"""Every formula of the plugin by one import: pure floats in, floats out.

Every clinical number comes in as an argument from ``parameters.yaml``. The figures are
starting estimates that are titrated at the bedside, never orders.
"""

from __future__ import annotations

from .formula_balance import (
    abdominal_perfusion_mmhg,
    balance_ml,
    evaporation_ml_h,
    grade_index,
    maintenance_24h_ml,
    maintenance_rate_ml_h,
    mean_pressure_mmhg,
    per_day_range,
    systolic_floor_mmhg,
)
from .formula_body import (
    at_z_score,
    body_mass_index,
    burned_surface_m2,
    mosteller_m2,
    power_surface_m2,
    z_score,
)
from .formula_course import (
    delivered_index,
    drops_rate_ml_h,
    hours_until_line,
    infusion_ml,
    per_kg_ml,
    projected_ml,
    titrated_rate_ml_h,
    urine_rate_ml_h,
    urine_rate_ml_kg_h,
)
from .formula_plan import (
    area_based_24h_ml,
    by_mass_24h_ml,
    catch_up_rate_ml_h,
    colloid_second_day_ml,
    crystalloid_24h_ml,
    due_ml,
    plan_rate_ml_h,
    rounded_up_ml_h,
    rule_of_ten_ml_h,
    surplus_ml,
)

__all__ = [
    "abdominal_perfusion_mmhg",
    "area_based_24h_ml",
    "at_z_score",
    "balance_ml",
    "body_mass_index",
    "burned_surface_m2",
    "by_mass_24h_ml",
    "catch_up_rate_ml_h",
    "colloid_second_day_ml",
    "crystalloid_24h_ml",
    "delivered_index",
    "drops_rate_ml_h",
    "due_ml",
    "evaporation_ml_h",
    "grade_index",
    "hours_until_line",
    "infusion_ml",
    "maintenance_24h_ml",
    "maintenance_rate_ml_h",
    "mean_pressure_mmhg",
    "mosteller_m2",
    "per_day_range",
    "per_kg_ml",
    "plan_rate_ml_h",
    "power_surface_m2",
    "projected_ml",
    "rounded_up_ml_h",
    "rule_of_ten_ml_h",
    "surplus_ml",
    "systolic_floor_mmhg",
    "titrated_rate_ml_h",
    "urine_rate_ml_h",
    "urine_rate_ml_kg_h",
    "z_score",
]
