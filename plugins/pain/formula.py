"""Arithmetic of analgesia: totals, limits and rates; floats in, floats out, nothing rounded."""

from __future__ import annotations

import math
from collections.abc import Sequence

from handoff.plugin import FormulaInputError

HOURS_A_DAY = 24
MINUTES_AN_HOUR = 60
MCG_IN_MG = 1000


def _checked(name: str, value: float, lowest: float = 0, highest: float = math.inf) -> float:
    if not math.isfinite(value) or not lowest <= value <= highest:
        raise FormulaInputError(f"{name} is {value}; it must be from {lowest} to {highest}")
    return value


def scale_total(parts: Sequence[float], count: float, lowest: float, highest: float) -> float:
    """Return the total of a scale from its item points.

    Args:
        parts: Points of each item.
        count: How many items the scale has.
        lowest: Least points of one item.
        highest: Most points of one item.

    Raises:
        FormulaInputError: An item is missing, or its points are not whole or outside its range.

    Source:
        ``scale.*`` in parameters.yaml.
    """
    if len(parts) != count:
        raise FormulaInputError(f"the scale has {count} items, {len(parts)} are given")
    for part in parts:
        if _checked("points of an item", part, lowest, highest) % 1:
            raise FormulaInputError(f"points of an item are whole, not {part}")
    return math.fsum(parts)


def score_class(score: float, upper_bounds: Sequence[float]) -> int:
    """Return which class ``score`` falls in, from 0: the first whose upper bound it does not exceed.

    Args:
        score: A score of the scale that the bounds belong to, in points.
        upper_bounds: Highest score of each class, rising, in points.

    Raises:
        FormulaInputError: The score is negative or above the last bound.

    Source:
        ``cut.*`` in parameters.yaml.
    """
    _checked("score", score, 0, upper_bounds[-1])
    return next(index for index, bound in enumerate(upper_bounds) if score <= bound)


def overlap_h(start_h: float, end_h: float, window_start_h: float, window_end_h: float) -> float:
    """Return for how many hours a run lies inside a window; all four times on one clock, in h.

    Raises:
        FormulaInputError: A time is not finite, or an end lies before its start.
    """
    _checked("end of the run", end_h, _checked("start of the run", start_h, -math.inf))
    _checked("end of the window", window_end_h, _checked("start of the window", window_start_h, -math.inf))
    return max(min(end_h, window_end_h) - max(start_h, window_start_h), 0)


def delivered_mg(rate_mg_h: float, hours: float) -> float:
    """Return what an infusion gave, in mg, from its rate in mg/h and the hours it ran.

    Raises:
        FormulaInputError: Negative or not finite.
    """
    return _checked("rate", rate_mg_h) * _checked("hours", hours)


def rate_mg_h(rate_mg_kg_h: float, mass_kg: float) -> float:
    """Return the rate of an infusion in mg/h, from mg/kg/h and the mass in kg.

    Raises:
        FormulaInputError: A negative rate, or no mass above 0.
    """
    if _checked("mass", mass_kg) == 0:
        raise FormulaInputError("the mass must be above 0 kg")
    return _checked("rate", rate_mg_kg_h) * mass_kg


def rate_mcg_kg_min(rate_mg_h: float, mass_kg: float) -> float:
    """Return the rate of an infusion in mcg/kg/min, from mg/h and the mass in kg.

    Raises:
        FormulaInputError: A negative rate, or no mass above 0.
    """
    if _checked("mass", mass_kg) == 0:
        raise FormulaInputError("the mass must be above 0 kg")
    return _checked("rate", rate_mg_h) * MCG_IN_MG / MINUTES_AN_HOUR / mass_kg


def mass_in_volume_mg(volume_ml: float, concentration_mg_ml: float) -> float:
    """Return how much drug a volume holds, in mg (for a rate in mL/h: mg/h).

    Args:
        volume_ml: Volume in mL, or rate in mL/h.
        concentration_mg_ml: Concentration in mg/mL.

    Raises:
        FormulaInputError: Negative or not finite.
    """
    return _checked("volume", volume_ml) * _checked("concentration", concentration_mg_ml)


def volume_ml(dose_mg: float, concentration_mg_ml: float) -> float:
    """Return the volume that holds a dose, in mL, from mg and mg/mL.

    Raises:
        FormulaInputError: Negative, not finite, or a concentration of 0.
    """
    if _checked("concentration", concentration_mg_ml) == 0:
        raise FormulaInputError("the concentration must be above 0 mg/mL")
    return _checked("dose", dose_mg) / concentration_mg_ml


def mean_rate_mcg_h(delivered_mcg: float) -> float:
    """Return the mean rate over a day in mcg/h of what was delivered in it, in mcg.

    A factor of a patch belongs to the rate of a whole day.

    Raises:
        FormulaInputError: Negative or not finite.
    """
    return _checked("delivered", delivered_mcg) / HOURS_A_DAY


def opioid_equivalent_mg(amount: float, factor: float) -> float:
    """Return oral morphine equivalent in mg, as exposure only, never as a dose to give.

    Args:
        amount: Amount of the drug in the unit of the factor (mg, mcg, or mcg/h of a patch).
        factor: mg of oral morphine for each unit of the drug.

    Raises:
        FormulaInputError: Negative or not finite.

    Source:
        ``factors.*`` in parameters.yaml.
    """
    return _checked("amount", amount) * _checked("factor", factor)


def total_mg(amounts_mg: Sequence[float]) -> float:
    """Return the sum of amounts in mg.

    Raises:
        FormulaInputError: One is negative or not finite.
    """
    return math.fsum(_checked("amount", amount) for amount in amounts_mg)


def by_weight_mg(mass_kg: float, mg_per_kg: float, cap_mg: float = math.inf) -> float:
    """Return a published limit or dose by weight in mg, not above its cap.

    Args:
        mass_kg: Body mass in kg, above 0.
        mg_per_kg: mg for each kg (for a daily limit: each day).
        cap_mg: What it never exceeds, in mg.

    Raises:
        FormulaInputError: No mass above 0, or a negative number.

    Source:
        ``paracetamol.*`` and ``ibuprofen.*`` in parameters.yaml.
    """
    if _checked("mass", mass_kg) == 0:
        raise FormulaInputError("the mass must be above 0 kg")
    if math.isnan(cap_mg) or cap_mg < 0:
        raise FormulaInputError(f"the cap is {cap_mg}; it must not be negative")
    return min(mass_kg * _checked("mg/kg", mg_per_kg), cap_mg)


def reduced(amount: float, reduction_pct: float) -> float:
    """Return ``amount`` less ``reduction_pct`` percent, in the unit of ``amount``.

    Raises:
        FormulaInputError: A negative amount, or a reduction outside 0 to 100 %.
    """
    return _checked("amount", amount) * (100 - _checked("reduction", reduction_pct, 0, 100)) / 100


def exceeds(total_mg: float, limit_mg: float) -> bool:
    """Return whether a total in mg is above a limit in mg; a difference of binary rounding is none.

    Raises:
        FormulaInputError: Negative or not finite.
    """
    above = _checked("total", total_mg) > _checked("limit", limit_mg)
    return above and not math.isclose(total_mg, limit_mg)
