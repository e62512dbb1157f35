"""Arithmetic of the course: what ran in, urine, what was delivered, projections, titration steps."""

from __future__ import annotations

import math

from .formula_checks import need, need_positive

MINUTES_AN_HOUR = 60


def infusion_ml(rate_ml_h: float, hours: float) -> float:
    """Return what ran in at a rate, in mL.

    Args:
        rate_ml_h: Rate in mL/h.
        hours: Hours that it ran.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: arithmetic.
    """
    need("rate_ml_h", rate_ml_h)
    need("hours", hours)
    return rate_ml_h * hours


def drops_rate_ml_h(drops_per_min: float, drops_per_ml: float) -> float:
    """Return a drop rate in mL/h.

    Args:
        drops_per_min: Drops counted a minute.
        drops_per_ml: Drop factor of the giving set, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: arithmetic.
    """
    need("drops_per_min", drops_per_min)
    need_positive("drops_per_ml", drops_per_ml)
    return drops_per_min * MINUTES_AN_HOUR / drops_per_ml


def urine_rate_ml_h(volume_ml: float, hours: float) -> float:
    """Return urine over its true collection interval, in mL/h.

    Args:
        volume_ml: Urine collected, in mL.
        hours: Hours over which it was collected, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: arithmetic.
    """
    need("volume_ml", volume_ml)
    need_positive("hours", hours)
    return volume_ml / hours


def urine_rate_ml_kg_h(volume_ml: float, mass_kg: float, hours: float) -> float:
    """Return urine over its true collection interval, in mL/kg/h.

    Args:
        volume_ml: Urine collected, in mL.
        mass_kg: The weight that the target goes by, in kg, greater than 0.
        hours: Hours over which it was collected, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: arithmetic.
    """
    need_positive("mass_kg", mass_kg)
    return urine_rate_ml_h(volume_ml, hours) / mass_kg


def per_kg_ml(volume_ml: float, mass_kg: float) -> float:
    """Return a volume in mL/kg.

    Args:
        volume_ml: Volume in mL.
        mass_kg: Body mass in kg, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: arithmetic.
    """
    need("volume_ml", volume_ml)
    need_positive("mass_kg", mass_kg)
    return volume_ml / mass_kg


def delivered_index(volume_ml: float, mass_kg: float, burned_area_pct: float) -> float:
    """Return what was delivered in mL/kg/% of burn.

    Args:
        volume_ml: Volume given in the first 24 h, in mL.
        mass_kg: Body mass in kg, greater than 0.
        burned_area_pct: Counted burn in % of body surface, greater than 0, to 100.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: arithmetic; compared with ``line.index`` (Saffle 2016).
    """
    need_positive("burned_area_pct", burned_area_pct)
    need("burned_area_pct", burned_area_pct, high=100)
    return per_kg_ml(volume_ml, mass_kg) / burned_area_pct


def projected_ml(given_ml: float, rate_ml_h: float, hours_left: float) -> float:
    """Return the volume at the end of the period if the present rate runs on, in mL.

    Args:
        given_ml: What has gone in, in mL.
        rate_ml_h: The present rate in mL/h.
        hours_left: Hours to the end of the period, 0 or more.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: arithmetic.
    """
    need("given_ml", given_ml)
    return given_ml + infusion_ml(rate_ml_h, hours_left)


def hours_until_line(given_ml: float, rate_ml_h: float, line_ml: float) -> float:
    """Return the hours until a warning line is crossed at the present rate; 0 where it is crossed already.

    Infinite where nothing runs.

    Args:
        given_ml: What has gone in, in mL.
        rate_ml_h: The present rate in mL/h.
        line_ml: The line in mL.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: arithmetic; the lines are ``line.per_kg`` and ``line.index`` (Saffle 2016).
    """
    need("given_ml", given_ml)
    need("rate_ml_h", rate_ml_h)
    need("line_ml", line_ml)
    if given_ml >= line_ml:
        return 0.0
    return (line_ml - given_ml) / rate_ml_h if rate_ml_h > 0 else math.inf


def titrated_rate_ml_h(
    running_ml_h: float, base_ml_h: float, step_pct: float, step_ml_h: float, floor_ml_h: float
) -> float:
    """Return the rate that a titration table arrives at, in mL/h; never below its floor, nor below 0.

    Args:
        running_ml_h: The rate that runs now, in mL/h.
        base_ml_h: The rate that the percentage is taken of (the running or the calculated one), in mL/h.
        step_pct: Signed step in % of the base; 0 for none.
        step_ml_h: Signed step in mL/h; 0 for none.
        floor_ml_h: Rate below which the table does not go, in mL/h; 0 for none.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``titration.*`` in parameters.yaml.
    """
    need("running_ml_h", running_ml_h)
    need("base_ml_h", base_ml_h)
    need("floor_ml_h", floor_ml_h)
    need("step_pct", step_pct, low=-100, high=100)
    changed = running_ml_h + base_ml_h * step_pct / 100 + step_ml_h
    return max(changed, floor_ml_h, 0.0)
