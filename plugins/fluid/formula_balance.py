"""Arithmetic of balance, maintenance, evaporation and pressures."""

from __future__ import annotations

from collections.abc import Sequence

from handoff.plugin import FormulaInputError

from .formula_checks import need, need_positive


def _by_bands(mass_kg: float, widths_kg: Sequence[float], per_kg: Sequence[float]) -> float:
    need_positive("mass_kg", mass_kg)
    if len(per_kg) != len(widths_kg) + 1:
        raise FormulaInputError("the bands of weight need one more value than widths")
    total, left = 0.0, mass_kg
    for width, value in zip(widths_kg, per_kg, strict=False):
        need_positive("width", width)
        need("value", value)
        total += min(left, width) * value
        left = max(0.0, left - width)
    need("value", per_kg[-1])
    return total + left * per_kg[-1]


def maintenance_24h_ml(
    mass_kg: float, widths_kg: Sequence[float], per_kg_ml: Sequence[float], most_ml: float
) -> float:
    """Return the maintenance of a child by bands of weight, in mL for 24 h, up to its ceiling.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        widths_kg: Width of each band but the last, in kg.
        per_kg_ml: mL/kg for 24 h in each band.
        most_ml: Ceiling in mL for 24 h.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``maintenance.daily-100-50-20`` (Holliday and Segar 1957).
    """
    need_positive("most_ml", most_ml)
    return min(_by_bands(mass_kg, widths_kg, per_kg_ml), most_ml)


def maintenance_rate_ml_h(
    mass_kg: float, widths_kg: Sequence[float], per_kg_ml_h: Sequence[float], most_ml_h: float
) -> float:
    """Return the maintenance of a child by the hourly bands, in mL/h, up to its ceiling.

    It is not the daily volume divided by 24: at 10 kg it is lower by 4 %.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        widths_kg: Width of each band but the last, in kg.
        per_kg_ml_h: mL/kg/h in each band.
        most_ml_h: Ceiling in mL/h.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``maintenance.hourly-4-2-1`` (after Holliday and Segar 1957).
    """
    need_positive("most_ml_h", most_ml_h)
    return min(_by_bands(mass_kg, widths_kg, per_kg_ml_h), most_ml_h)


def balance_ml(intake_ml: float, output_ml: float) -> float:
    """Return intake less output in mL; above 0 is positive.

    Args:
        intake_ml: Everything that went in, in mL.
        output_ml: Everything measured that came out, in mL.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: definition.
    """
    need("intake_ml", intake_ml)
    need("output_ml", output_ml)
    return intake_ml - output_ml


def evaporation_ml_h(constant: float, burned_area_pct: float, body_m2: float) -> float:
    """Return the estimated evaporation in mL/h.

    Args:
        constant: The named constant; published texts print more than one.
        burned_area_pct: Burned area in % of body surface, 0 to 100.
        body_m2: Body surface in m2, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``evaporation.*`` in parameters.yaml.
    """
    need("constant", constant)
    need("burned_area_pct", burned_area_pct, high=100)
    need_positive("body_m2", body_m2)
    return (constant + burned_area_pct) * body_m2


def mean_pressure_mmhg(systolic: float, diastolic: float, diastolic_weight: float) -> float:
    """Return the mean arterial pressure from a cuff reading, in mmHg.

    Args:
        systolic: Systolic pressure in mmHg.
        diastolic: Diastolic pressure in mmHg, not above the systolic.
        diastolic_weight: How many times the diastolic counts against once the systolic.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``pressure.diastolic_weight`` in parameters.yaml.
    """
    need_positive("systolic", systolic)
    need("diastolic", diastolic, high=systolic)
    need_positive("diastolic_weight", diastolic_weight)
    return (systolic + diastolic_weight * diastolic) / (1 + diastolic_weight)


def systolic_floor_mmhg(age_years: float, base: float, per_year: float, to_years: float) -> float:
    """Return the systolic pressure below which a child is hypotensive by the rule, in mmHg.

    Args:
        age_years: Age in completed years, 1 or more: the rule is not published for infants.
        base: mmHg at age 0.
        per_year: mmHg for each year.
        to_years: Age from which the line no longer rises.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``pressure.child_systolic`` in parameters.yaml.
    """
    need("age_years", age_years, low=1)
    need("base", base)
    need("per_year", per_year)
    return base + per_year * min(age_years, to_years)


def abdominal_perfusion_mmhg(mean_pressure: float, abdominal_pressure: float) -> float:
    """Return abdominal perfusion pressure in mmHg: mean arterial less abdominal; it can be below 0.

    Args:
        mean_pressure: Mean arterial pressure in mmHg.
        abdominal_pressure: Bladder pressure in mmHg.

    Raises:
        FormulaInputError: An argument is not finite or negative.

    Source: ``abdomen.grades`` (World Society of the Abdominal Compartment Syndrome 2013).
    """
    need("mean_pressure", mean_pressure)
    need("abdominal_pressure", abdominal_pressure)
    return mean_pressure - abdominal_pressure


def grade_index(value: float, from_values: Sequence[float], to_values: Sequence[float]) -> int:
    """Return which band holds ``value``, counted from 1; 0 for none: below all, or between two of them.

    Args:
        value: The measured value.
        from_values: Lower edge of each band, itself within the band.
        to_values: Upper edge of each band, itself within the band.

    Raises:
        FormulaInputError: The value is not finite or negative, or the edges do not pair up.

    Source: the table that is passed in.
    """
    need("value", value)
    if len(from_values) != len(to_values):
        raise FormulaInputError("the bands need as many lower as upper edges")
    for index, (low, high) in enumerate(zip(from_values, to_values, strict=True)):
        if low <= value <= high:
            return index + 1
    return 0


def per_day_range(mass_kg: float, low_per_kg: float, high_per_kg: float) -> tuple[float, float]:
    """Return a daily need by weight as (lowest, highest), in the unit of the values.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        low_per_kg: Lowest need for each kg and day.
        high_per_kg: Highest need for each kg and day, not below the lowest.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``protein.*`` in parameters.yaml (ESPEN 2013).
    """
    need_positive("mass_kg", mass_kg)
    need("low_per_kg", low_per_kg)
    need("high_per_kg", high_per_kg, low=low_per_kg)
    return mass_kg * low_per_kg, mass_kg * high_per_kg
