"""Arithmetic of the early warning score, the coma scale and children's ranges; every number is passed in."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from decimal import ROUND_HALF_UP, Decimal

from handoff.plugin import FormulaInputError

BELOW, WITHIN, ABOVE = "below", "within", "above"


def _finite(name: str, value: float) -> float:
    if not math.isfinite(value):
        raise FormulaInputError(f"the {name} is not a finite number")
    return value


def rounded(value: float, places: int) -> float:
    """Return ``value`` rounded half up to ``places`` decimals, in its own unit, as a chart is read.

    Raises:
        FormulaInputError: The value is not finite.
    """
    exact = Decimal(repr(float(_finite("value", value))))
    return float(exact.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP))


def band_points(value: float, bands: Sequence[Mapping[str, float]]) -> int:
    """Return the points of the band that holds ``value``.

    Args:
        value: The sign, rounded as the bands are printed and in their unit.
        bands: Each with ``points`` and its printed ends ``from`` and ``to``, both inside; an
            end that is not printed is open.

    Raises:
        FormulaInputError: The value is not finite, or no band holds it.

    Source:
        ``news2.*`` in parameters.yaml.
    """
    _finite("value", value)
    for band in bands:
        if band.get("from", -math.inf) <= value <= band.get("to", math.inf):
            return int(band["points"])
    raise FormulaInputError(f"no band holds {value}")


def total_points(points: Sequence[int]) -> int:
    """Return the sum of the points of all parts of a score.

    Raises:
        FormulaInputError: No part, or a part below 0.
    """
    if not points or min(points) < 0:
        raise FormulaInputError("a total needs the points of every part, none below 0")
    return sum(points)


def step_of(total: int, highest_part: int, steps: Sequence[Mapping[str, float]]) -> int:
    """Return the index of the first of ``steps`` that is reached.

    Args:
        total: Sum of the points.
        highest_part: The highest points of a single part.
        steps: In the order in which they are tried; each with ``total_from``, or ``part_from``
            for a step that one part reaches alone.

    Raises:
        FormulaInputError: None is reached.

    Source:
        ``news2.response`` in parameters.yaml.
    """
    for index, step in enumerate(steps):
        if total >= step.get("total_from", math.inf) or highest_part >= step.get("part_from", math.inf):
            return index
    raise FormulaInputError(f"a total of {total} reaches no step")


def coma_total(eye: int, verbal: int, motor: int) -> int:
    """Return the total of the three parts of the coma scale, in points.

    Raises:
        FormulaInputError: A part below 1.

    Source:
        ``coma.parts`` in parameters.yaml.
    """
    if min(eye, verbal, motor) < 1:
        raise FormulaInputError("no part of the coma scale is below 1")
    return eye + verbal + motor


def coma_pupils(total: int, unreactive: int) -> int:
    """Return the coma scale total less the number of pupils that do not react to light, in points.

    Raises:
        FormulaInputError: A negative number of pupils.

    Source:
        ``coma.pupils`` in parameters.yaml.
    """
    if unreactive < 0:
        raise FormulaInputError("the number of pupils is negative")
    return total - unreactive


def hypotension_line_mmhg(age_years: int, base_mmhg: float, each_year_mmhg: float) -> float:
    """Return the systolic pressure in mmHg under which a child is hypotensive.

    Args:
        age_years: Completed years.
        base_mmhg: Pressure at birth in mmHg.
        each_year_mmhg: What each completed year adds, in mmHg.

    Raises:
        FormulaInputError: A negative age.

    Source:
        ``hypotension.*`` in parameters.yaml.
    """
    if age_years < 0:
        raise FormulaInputError("the age is negative")
    return base_mmhg + each_year_mmhg * age_years


def against_range(value: float, low: float, high: float, ends_inside: bool) -> str:
    """Return whether ``value`` lies ``below``, ``within`` or ``above`` a range.

    Args:
        value: The sign, in the unit of the range.
        low: Lower end.
        high: Upper end.
        ends_inside: Whether the printed ends belong to the range.

    Raises:
        FormulaInputError: The value is not finite.

    Source:
        ``child_ranges.*`` in parameters.yaml.
    """
    _finite("value", value)
    if value < low or (value == low and not ends_inside):
        return BELOW
    if value > high or (value == high and not ends_inside):
        return ABOVE
    return WITHIN
