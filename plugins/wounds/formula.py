"""Arithmetic of dates and intervals of wounds; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError

AT_LEAST, OVER = "at least", "over"
Day = tuple[int, int, int]
"""A calendar day as year, month and day."""


def years_reached(last: Day, judged: Day, years: int, how: str) -> bool:
    """Return whether at least (or over) so many calendar years lie between two days.

    Args:
        last: Day of the last dose, as (year, month, day).
        judged: Day that is judged.
        years: Years of the table.
        how: ``at least`` or ``over``, as the table prints it.

    Raises:
        FormulaInputError: ``judged`` lies before ``last``, the years are negative, or ``how`` is another word.

    Source:
        ``tetanus.*`` in parameters.yaml.
    """
    if tuple(judged) < tuple(last) or years < 0:
        raise FormulaInputError("the last dose lies after the day that is judged, or the years are negative")
    anniversary = (last[0] + years, last[1], last[2])
    if how == AT_LEAST:
        return anniversary <= tuple(judged)
    if how == OVER:
        return anniversary < tuple(judged)
    raise FormulaInputError(f"'{how}' is no way to compare")


def interval_hours(days: float) -> float:
    """Return an interval in h from days.

    Raises:
        FormulaInputError: Not above 0, or not finite.
    """
    if not math.isfinite(days) or days <= 0:
        raise FormulaInputError("an interval must be above 0 days")
    return days * 24
