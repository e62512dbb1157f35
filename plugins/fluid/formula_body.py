"""Arithmetic of the body: surface, mass index, and where a weight lies in a growth table."""

from __future__ import annotations

import math

from .formula_checks import need, need_positive

CM_A_METRE = 100


def mosteller_m2(height_cm: float, mass_kg: float, divisor: float) -> float:
    """Return body surface by Mosteller in m2.

    Args:
        height_cm: Height in cm, greater than 0.
        mass_kg: Body mass in kg, greater than 0.
        divisor: The constant of the formula.

    Raises:
        FormulaInputError: An argument is not finite or not above 0.

    Source: ``surface.mosteller`` (Mosteller 1987).
    """
    need_positive("height_cm", height_cm)
    need_positive("mass_kg", mass_kg)
    need_positive("divisor", divisor)
    return math.sqrt(height_cm * mass_kg / divisor)


def power_surface_m2(
    height_cm: float, mass_kg: float, factor: float, height_power: float, mass_power: float
) -> float:
    """Return body surface by a formula of powers in m2 (DuBois, Haycock, Gehan and George).

    Args:
        height_cm: Height in cm, greater than 0.
        mass_kg: Body mass in kg, greater than 0.
        factor: Factor of the formula.
        height_power: Power of the height.
        mass_power: Power of the mass.

    Raises:
        FormulaInputError: An argument is not finite or not above 0.

    Source: ``surface.*`` in parameters.yaml.
    """
    need_positive("height_cm", height_cm)
    need_positive("mass_kg", mass_kg)
    need_positive("factor", factor)
    need_positive("height_power", height_power)
    need_positive("mass_power", mass_power)
    found: float = factor * height_cm**height_power * mass_kg**mass_power
    return found


def burned_surface_m2(body_m2: float, burned_area_pct: float) -> float:
    """Return the burned surface in m2.

    Args:
        body_m2: Body surface in m2, greater than 0.
        burned_area_pct: Burned area in % of body surface, 0 to 100.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: definition.
    """
    need_positive("body_m2", body_m2)
    need("burned_area_pct", burned_area_pct, high=100)
    return body_m2 * burned_area_pct / 100


def body_mass_index(mass_kg: float, height_cm: float) -> float:
    """Return the body mass index in kg/m2.

    Args:
        mass_kg: Body mass in kg, greater than 0.
        height_cm: Height in cm, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or not above 0.

    Source: definition.
    """
    need_positive("mass_kg", mass_kg)
    need_positive("height_cm", height_cm)
    height_m = height_cm / CM_A_METRE
    return mass_kg / (height_m * height_m)


def z_score(value: float, power: float, median: float, spread: float) -> float:
    """Return how many standard deviations a measure lies from the median of a growth table.

    Args:
        value: The measure, greater than 0.
        power: L of the table; 0 stands for the logarithm.
        median: M of the table, greater than 0.
        spread: S of the table, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or not above 0.

    Source: the LMS method (Cole 1990); the tables are ``growth.*`` in parameters.yaml.
    """
    need_positive("value", value)
    need_positive("median", median)
    need_positive("spread", spread)
    if power == 0:
        return math.log(value / median) / spread
    raised: float = (value / median) ** power
    return (raised - 1) / (power * spread)


def at_z_score(z: float, power: float, median: float, spread: float) -> float:
    """Return the measure that lies ``z`` standard deviations from the median of a growth table.

    Args:
        z: Standard deviations, below 0 for less than the median.
        power: L of the table; 0 stands for the logarithm.
        median: M of the table, greater than 0.
        spread: S of the table, greater than 0.

    Raises:
        FormulaInputError: An argument is not finite or not above 0, or the table has no such measure.

    Source: the LMS method (Cole 1990); the tables are ``growth.*`` in parameters.yaml.
    """
    need("z", z, low=-math.inf)
    need_positive("median", median)
    need_positive("spread", spread)
    if power == 0:
        return median * math.exp(spread * z)
    inner = 1 + power * spread * z
    need_positive("1 + L S z", inner)
    raised: float = inner ** (1 / power)
    return median * raised
