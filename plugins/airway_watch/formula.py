"""Arithmetic of the airway watch: plain numbers in, plain numbers out; every clinical figure is an argument."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TypeAlias

from handoff.plugin import FormulaInputError

from . import formula_tube

MMHG_PER_KPA = 7.50062
HALF = 1 / 2
tube_depth_cm = formula_tube.tube_depth_cm

FlowRow: TypeAlias = Sequence[float]
"""One row of an oxygen table: lowest and highest flow in L/min, lowest and highest oxygen in %."""


def _positive(value: float, name: str) -> float:
    if not math.isfinite(value) or value <= 0:
        raise FormulaInputError(f"{name} must be a finite number above 0")
    return value


def _within(value: float, name: str, low: float, high: float) -> float:
    if not math.isfinite(value) or not low <= value <= high:
        raise FormulaInputError(f"{name} must lie between {low:g} and {high:g}")
    return value


def _share_pct(value: float, name: str) -> float:
    if _positive(value, name) > 100:
        raise FormulaInputError(f"{name} must not be above 100 %")
    return value


def _halvings(minutes: Sequence[float], half_lives_min: Sequence[float]) -> float:
    if len(minutes) != len(half_lives_min):
        raise FormulaInputError("each stretch of time needs one half-life")
    total = 0.0
    for length, half_life in zip(minutes, half_lives_min, strict=True):
        total += _within(length, "minutes", 0, math.inf) / _positive(half_life, "half-life")
    return total


def decayed_pct(start_pct: float, minutes: Sequence[float], half_lives_min: Sequence[float]) -> float:
    """Return carboxyhaemoglobin in % after stretches of time, each with its half-life.

    One exponential for each stretch: ``start x 0.5 ** (minutes / half-life)``.

    Args:
        start_pct: Measured carboxyhaemoglobin in %, 0 to 100.
        minutes: Length of each stretch in min, 0 or more.
        half_lives_min: Half-life in each stretch in min, above 0.

    Raises:
        FormulaInputError: A value is not finite or outside its range, or the lists differ in length.
    """
    _within(start_pct, "carboxyhaemoglobin", 0, 100)
    return float(start_pct * HALF ** _halvings(minutes, half_lives_min))


def backdated_pct(
    measured_pct: float, minutes: Sequence[float], half_lives_min: Sequence[float]
) -> tuple[float, bool]:
    """Return carboxyhaemoglobin in % before stretches of time, and whether it had to be capped at 100.

    Args:
        measured_pct: Measured carboxyhaemoglobin in %, 0 to 100.
        minutes: Length of each stretch before the measurement in min.
        half_lives_min: Half-life in each stretch in min, above 0.

    Raises:
        FormulaInputError: As :func:`decayed_pct`.
    """
    _within(measured_pct, "carboxyhaemoglobin", 0, 100)
    try:
        before = measured_pct * 2 ** _halvings(minutes, half_lives_min)
    except OverflowError:
        before = math.inf if measured_pct else 0.0
    return min(before, 100.0), before > 100


def oxyhaemoglobin_pct(spo2_pct: float, carboxyhaemoglobin_pct: float) -> float:
    """Return the upper estimate of oxygenated haemoglobin in % behind a displayed saturation.

    Args:
        spo2_pct: Displayed saturation in %, 0 to 100.
        carboxyhaemoglobin_pct: Carboxyhaemoglobin in %, 0 to 100.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    _within(spo2_pct, "saturation", 0, 100)
    _within(carboxyhaemoglobin_pct, "carboxyhaemoglobin", 0, 100)
    return max(spo2_pct - carboxyhaemoglobin_pct, 0.0)


def pf_ratio_mmhg(pao2_mmhg: float, fio2_pct: float) -> float:
    """Return arterial oxygen pressure over inspired oxygen fraction, in mmHg.

    Args:
        pao2_mmhg: Arterial oxygen pressure in mmHg, above 0.
        fio2_pct: Inspired oxygen in %, above 0 to 100.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    return _positive(pao2_mmhg, "oxygen pressure") * 100 / _share_pct(fio2_pct, "oxygen")


def room_air_equivalent_mmhg(pf_mmhg: float, room_air_pct: float) -> float:
    """Return the arterial oxygen pressure in mmHg that the same ratio would give on room air.

    Args:
        pf_mmhg: P/F in mmHg, above 0.
        room_air_pct: Oxygen of room air in % as the source counts it.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    return _positive(pf_mmhg, "P/F") * _share_pct(room_air_pct, "oxygen") / 100


def kilopascals(mmhg: float) -> float:
    """Return a pressure of ``mmhg`` in kPa.

    Raises:
        FormulaInputError: Not finite.
    """
    return _within(mmhg, "pressure", 0, math.inf) / MMHG_PER_KPA


def at_or_below(value: float, limits: Sequence[float]) -> float | None:
    """Return the lowest of ``limits`` that ``value`` does not exceed, or None when it exceeds them all.

    Args:
        value: A ratio, in the unit of the limits.
        limits: Upper limits of the ranges; a limit belongs to its range.

    Raises:
        FormulaInputError: The value is not finite.
    """
    _within(value, "ratio", 0, math.inf)
    return min((limit for limit in limits if value <= limit), default=None)


def sf_ratio(spo2_pct: float, fio2_pct: float, highest_spo2_pct: float) -> float | None:
    """Return saturation over inspired oxygen fraction, or None above the highest usable saturation.

    Args:
        spo2_pct: Saturation in %, above 0 to 100.
        fio2_pct: Inspired oxygen in %, above 0 to 100.
        highest_spo2_pct: Highest saturation in % for which the ratio was published.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    _share_pct(spo2_pct, "saturation")
    _share_pct(fio2_pct, "oxygen")
    return None if spo2_pct > highest_spo2_pct else spo2_pct * 100 / fio2_pct


def sf_from_pf(pf_mmhg: float, intercept: float, slope: float) -> float:
    """Return the S/F that a regression line gives for a P/F in mmHg.

    Args:
        pf_mmhg: P/F in mmHg, above 0.
        intercept: S/F at a P/F of zero.
        slope: S/F per mmHg.

    Raises:
        FormulaInputError: P/F is outside its range.
    """
    return intercept + slope * _positive(pf_mmhg, "P/F")


def pf_limit_for(sf: float, cut_offs: Sequence[Sequence[float]]) -> float | None:
    """Return the P/F limit in mmHg that the published cut-offs put in place of an S/F; None above them all.

    Args:
        sf: S/F, 0 or more.
        cut_offs: pairs of a P/F limit in mmHg and the S/F at or below which it counts as reached.

    Raises:
        FormulaInputError: S/F is outside its range.
    """
    _within(sf, "S/F", 0, math.inf)
    return min((pf for pf, limit in cut_offs if sf <= limit), default=None)


def rox_index(spo2_pct: float, fio2_pct: float, breaths_per_min: float) -> float:
    """Return saturation over inspired oxygen fraction over breaths a minute.

    Args:
        spo2_pct: Saturation in %, above 0 to 100.
        fio2_pct: Inspired oxygen in %, above 0 to 100.
        breaths_per_min: Breaths a minute, above 0.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    _share_pct(spo2_pct, "saturation")
    _share_pct(fio2_pct, "oxygen")
    return spo2_pct * 100 / fio2_pct / _positive(breaths_per_min, "breaths")


def predicted_body_weight_kg(height: float, base_kg: float, kg_per_unit: float, base_height: float) -> float:
    """Return the predicted body weight of an adult in kg, by height and sex.

    Args:
        height: Height in cm or in, the unit of ``base_height``, above 0.
        base_kg: Weight in kg at ``base_height``, by sex.
        kg_per_unit: kg for each cm or in above it.
        base_height: Height of the line's anchor.

    Raises:
        FormulaInputError: A height is outside its range, or the line gives no weight above 0.
    """
    weight = base_kg + kg_per_unit * (_positive(height, "height") - _positive(base_height, "height"))
    return _positive(weight, "predicted body weight")


def per_kg(amount: float, mass_kg: float) -> float:
    """Return ``amount`` (mL, say) for each kg of ``mass_kg``.

    Raises:
        FormulaInputError: A value is outside its range.
    """
    return _within(amount, "amount", 0, math.inf) / _positive(mass_kg, "mass")


def fio2_range_pct(flow_l_min: float, rows: Sequence[FlowRow]) -> tuple[float, float] | None:
    """Return the lowest and highest oxygen in % that a table prints for a flow; None when it prints none.

    Args:
        flow_l_min: Oxygen flow in L/min, 0 or more.
        rows: Rows of the table; where rows overlap, both count.

    Raises:
        FormulaInputError: The flow is outside its range.
    """
    _within(flow_l_min, "flow", 0, math.inf)
    fitting = [row for row in rows if row[0] <= flow_l_min <= row[1]]
    if not fitting:
        return None
    return min(row[2] for row in fitting), max(row[3] for row in fitting)


def score_points(met: Sequence[bool | None]) -> tuple[int, int]:
    """Return the points of a one-point-each score and how many of its entries are not known."""
    return sum(entry is True for entry in met), sum(entry is None for entry in met)


def exceeds(points: int, limit: float) -> bool:
    """Return whether ``points`` is above ``limit``; the limit itself does not count."""
    return points > limit


def drift_cm(depth_cm: float, earlier_cm: float) -> float:
    """Return how far a tube moved, in cm: deeper is positive.

    Raises:
        FormulaInputError: A depth is outside its range.
    """
    return _positive(depth_cm, "depth") - _positive(earlier_cm, "depth")


def is_outside(value: float, low: float, high: float) -> bool:
    """Return whether ``value`` lies below ``low`` or above ``high``; the limits are inside.

    Raises:
        FormulaInputError: Not finite.
    """
    if not math.isfinite(value):
        raise FormulaInputError("a finite number is needed")
    return value < low or value > high


def swelling_phase(hours: float, peak_from: float, peak_to: float, rising_until: float) -> str:
    """Return the phase of swelling: ``building``, ``peak``, ``may rise`` or ``later``.

    Args:
        hours: Hours since the burn, 0 or more.
        peak_from: Hour at which the usual peak begins; it belongs to the peak.
        peak_to: Hour at which it ends; it belongs to the peak.
        rising_until: Last hour in which swelling is said to rise.

    Raises:
        FormulaInputError: The hours are outside their range.
    """
    _within(hours, "hours", 0, math.inf)
    if hours < peak_from:
        return "building"
    if hours <= peak_to:
        return "peak"
    return "may rise" if hours <= rising_until else "later"
