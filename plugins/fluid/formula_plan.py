"""Arithmetic of a plan: volumes, what is due by when, the rate of a period, catching up."""

from __future__ import annotations

import math
from collections.abc import Sequence

from handoff.plugin import FormulaInputError

from .formula_checks import need, need_positive


def crystalloid_24h_ml(mass_kg: float, burned_area_pct: float, coefficient: float) -> float:
    """Return the volume of a formula that goes by weight and burned area, in mL, not rounded.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        burned_area_pct: Counted burn in % of body surface (20 means 20 %), 0 to 100.
        coefficient: mL per kg per % for the period of the formula, 0 or more.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``starting_rate.*`` in parameters.yaml, each with its own publication.
    """
    need_positive("mass_kg", mass_kg)
    need("burned_area_pct", burned_area_pct, high=100)
    need("coefficient", coefficient)
    return coefficient * mass_kg * burned_area_pct


def area_based_24h_ml(
    burned_m2: float, body_m2: float, per_burned_m2_ml: float, per_body_m2_ml: float
) -> float:
    """Return the volume of a formula that goes by surface, in mL for its period.

    Args:
        burned_m2: Burned surface in m2.
        body_m2: Body surface in m2, greater than 0.
        per_burned_m2_ml: mL for each m2 burned.
        per_body_m2_ml: mL for each m2 of body surface (the maintenance part).

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``starting_rate.galveston``, ``starting_rate.cincinnati``.
    """
    need_positive("body_m2", body_m2)
    need("burned_m2", burned_m2, high=body_m2)
    need("per_burned_m2_ml", per_burned_m2_ml)
    need("per_body_m2_ml", per_body_m2_ml)
    return burned_m2 * per_burned_m2_ml + body_m2 * per_body_m2_ml


def by_mass_24h_ml(mass_kg: float, per_kg_ml: float) -> float:
    """Return a volume that goes by weight alone, in mL.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        per_kg_ml: mL for each kg.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``starting_rate.mass-casualty``.
    """
    need_positive("mass_kg", mass_kg)
    need("per_kg_ml", per_kg_ml)
    return mass_kg * per_kg_ml


def rule_of_ten_ml_h(
    mass_kg: float,
    burned_area_pct: float,
    per_pct: float,
    round_to_pct: float,
    from_kg: float,
    to_kg: float,
    step_kg: float,
    step_ml_h: float,
) -> float:
    """Return the starting rate of the Rule of Ten in mL/h; it is a rate and not a total.

    Args:
        mass_kg: Body mass in kg; the rule is not published below ``from_kg``.
        burned_area_pct: Counted burn in % of body surface.
        per_pct: mL/h for each %.
        round_to_pct: The burn is rounded to this step first, half up; 0 leaves it exact.
        from_kg: Lowest weight of the rule.
        to_kg: Weight above which a step is added.
        step_kg: Width of a step. Whole steps are counted; part steps are not defined by the source.
        step_ml_h: mL/h for each whole step above ``to_kg``.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``rule_of_ten`` in parameters.yaml (Chung 2010).
    """
    need("mass_kg", mass_kg, low=from_kg)
    need("burned_area_pct", burned_area_pct, high=100)
    need_positive("step_kg", step_kg)
    area = burned_area_pct if round_to_pct == 0 else _nearest(burned_area_pct, round_to_pct)
    steps = math.floor(max(0.0, mass_kg - to_kg) / step_kg)
    return area * per_pct + steps * step_ml_h


def _nearest(value: float, step: float) -> float:
    below = math.floor(value / step) * step
    return below + step if value - below >= below + step - value else below


def _need_schedule(ends_h: Sequence[float], shares: Sequence[float]) -> None:
    if not ends_h or len(ends_h) != len(shares):
        raise FormulaInputError("a schedule needs as many shares as periods")
    start = 0.0
    for end, share in zip(ends_h, shares, strict=True):
        need("share", share, high=1)
        if not end > start:
            raise FormulaInputError("the periods of a schedule must follow each other")
        start = end


def due_ml(volume_ml: float, ends_h: Sequence[float], shares: Sequence[float], hours: float) -> float:
    """Return what a plan has due by ``hours`` after the burn, in mL, counted from the burn.

    Args:
        volume_ml: Volume of the plan over all its periods, in mL.
        ends_h: End of each period in hours since the burn, rising.
        shares: Share of the volume in each period, 0 to 1.
        hours: Hours since the burn, 0 or more.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``schedule.*`` in parameters.yaml.
    """
    need("volume_ml", volume_ml)
    need("hours", hours)
    _need_schedule(ends_h, shares)
    due, start = [], 0.0
    for end, share in zip(ends_h, shares, strict=True):
        gone = min(max(hours - start, 0.0), end - start)
        due.append(volume_ml * share * (gone / (end - start)))
        start = end
    return math.fsum(due)


def plan_rate_ml_h(volume_ml: float, ends_h: Sequence[float], shares: Sequence[float], hours: float) -> float:
    """Return the rate of a plan at ``hours`` after the burn, in mL/h; 0 once the plan has ended.

    A period begins at its first moment: at 8 h the second rate holds.

    Args:
        volume_ml: Volume of the plan over all its periods, in mL.
        ends_h: End of each period in hours since the burn, rising.
        shares: Share of the volume in each period, 0 to 1.
        hours: Hours since the burn, 0 or more.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``schedule.*`` in parameters.yaml.
    """
    need("volume_ml", volume_ml)
    need("hours", hours)
    _need_schedule(ends_h, shares)
    start = 0.0
    for end, share in zip(ends_h, shares, strict=True):
        if hours < end:
            return volume_ml * share / (end - start)
        start = end
    return 0.0


def catch_up_rate_ml_h(due_at_end_ml: float, given_ml: float, hours_left: float) -> float:
    """Return the rate that would bring the first period in on time, in mL/h; never below 0.

    Args:
        due_at_end_ml: What is due by the end of the first period, in mL.
        given_ml: What was given since the burn, in mL.
        hours_left: Hours to the end of the first period, greater than 0: after it there is no
            published rule and no rate is invented.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``catch_up.into-first-period`` in parameters.yaml.
    """
    need("due_at_end_ml", due_at_end_ml)
    need("given_ml", given_ml)
    need_positive("hours_left", hours_left)
    return max(0.0, due_at_end_ml - given_ml) / hours_left


def surplus_ml(due: float, given: float) -> float:
    """Return how much more was given than was due, in mL; negative is a shortfall.

    Args:
        due: What was due, in mL.
        given: What was given, in mL.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: arithmetic.
    """
    need("due", due)
    need("given", given)
    return given - due


def rounded_up_ml_h(rate_ml_h: float, step_ml_h: float) -> float:
    """Return a rate rounded up to the next step, in mL/h.

    Args:
        rate_ml_h: Exact rate in mL/h.
        step_ml_h: Step in mL/h, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``rounding.uthealth-2021`` in parameters.yaml.
    """
    need("rate_ml_h", rate_ml_h)
    need_positive("step_ml_h", step_ml_h)
    return math.ceil(rate_ml_h / step_ml_h) * step_ml_h


def colloid_second_day_ml(mass_kg: float, burned_area_pct: float, coefficient: float) -> float:
    """Return the colloid of the second 24 h, in mL for the 24 h.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        burned_area_pct: Counted burn in % of body surface, 0 to 100.
        coefficient: mL per kg per % of the band of the burn.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``second_day.colloid`` in parameters.yaml (Emergency War Surgery, table 2).
    """
    return crystalloid_24h_ml(mass_kg, burned_area_pct, coefficient)
