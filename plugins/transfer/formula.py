"""Arithmetic of oxygen and pumps for a journey; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError

MINUTES_AN_HOUR = 60


def content_l(holds_l: float, gauge_kpa: float, full_kpa: float) -> float:
    """Return the gas left in a cylinder, in L.

    Args:
        holds_l: What the full cylinder holds, in L.
        gauge_kpa: Pressure on the gauge now, in kPa.
        full_kpa: Pressure of the full cylinder, in kPa, greater than 0.

    Raises:
        FormulaInputError: Not finite, negative, or a gauge above the full pressure.

    Source:
        ``cylinder.content`` in parameters.yaml: content goes with the pressure.
    """
    _finite(holds_l, gauge_kpa, full_kpa)
    if full_kpa <= 0 or gauge_kpa > full_kpa:
        raise FormulaInputError("the gauge cannot show more than the full pressure")
    return holds_l * gauge_kpa / full_kpa


def demand_l_min(minute_volume_l: float, oxygen_fraction: float, driving_l_min: float) -> float:
    """Return the oxygen that a ventilator takes from the cylinder, in L/min.

    Args:
        minute_volume_l: Minute volume set, in L/min.
        oxygen_fraction: Inspired oxygen as a fraction, 0 to 1.
        driving_l_min: Gas that drives the ventilator, in L/min.

    Raises:
        FormulaInputError: Not finite, negative, or a fraction above 1.

    Source:
        ``ventilator.demand`` in parameters.yaml.
    """
    _finite(minute_volume_l, oxygen_fraction, driving_l_min)
    if oxygen_fraction > 1:
        raise FormulaInputError("a fraction is at most 1")
    return minute_volume_l * oxygen_fraction + driving_l_min


def lasts_min(oxygen_l: float, flow_l_min: float) -> float:
    """Return how long oxygen lasts at a constant flow, in min.

    Args:
        oxygen_l: Oxygen carried, in L.
        flow_l_min: Flow drawn from the cylinders, in L/min, greater than 0.

    Raises:
        FormulaInputError: Not finite, negative, or no flow.

    Source:
        ``reserve`` in parameters.yaml.
    """
    _finite(oxygen_l, flow_l_min)
    if flow_l_min <= 0:
        raise FormulaInputError("the flow must be greater than 0")
    return oxygen_l / flow_l_min


def needed_l(flow_l_min: float, journey_min: float, reserve: float) -> float:
    """Return the oxygen to carry, in L.

    Args:
        flow_l_min: Flow drawn from the cylinders, in L/min.
        journey_min: Time from bed to bed, in min.
        reserve: How many times the journey is carried for.

    Raises:
        FormulaInputError: Not finite or negative.

    Source:
        ``reserve`` in parameters.yaml.
    """
    _finite(flow_l_min, journey_min, reserve)
    return flow_l_min * journey_min * reserve


def pump_min(left_ml: float, rate_ml_h: float) -> float:
    """Return how long a pump runs on what is left, in min.

    Args:
        left_ml: Volume left, in mL.
        rate_ml_h: Rate, in mL/h, greater than 0.

    Raises:
        FormulaInputError: Not finite, negative, or no rate.

    Source:
        Definition: volume over rate.
    """
    _finite(left_ml, rate_ml_h)
    if rate_ml_h <= 0:
        raise FormulaInputError("the rate must be greater than 0")
    return left_ml / rate_ml_h * MINUTES_AN_HOUR


def _finite(*values: float) -> None:
    if not all(math.isfinite(value) and value >= 0 for value in values):
        raise FormulaInputError("values must be finite and not negative")
