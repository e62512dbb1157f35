"""Arithmetic of temperature, triggers and days in place; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError

ABOVE, AT_LEAST, BELOW, AT_MOST = "above", "at least", "below", "at most"


def _finite(name: str, value: float) -> float:
    if not math.isfinite(value):
        raise FormulaInputError(f"the {name} is not a finite number")
    return value


def is_beyond(value: float, how: str, line: float) -> bool:
    """Return whether ``value`` is beyond ``line``; a difference of binary rounding is none.

    Args:
        value: The sign or result, in the unit of the line.
        how: ``above``, ``at least``, ``below`` or ``at most``, as the list prints it.
        line: The printed line.

    Raises:
        FormulaInputError: A number is not finite, or ``how`` is another word.

    Source:
        ``sepsis.*`` and ``hypothermia.*`` in parameters.yaml.
    """
    same = math.isclose(_finite("value", value), _finite("line", line), rel_tol=0.0, abs_tol=1e-9)
    apart = 0 if same else value - line
    if how == ABOVE:
        return apart > 0
    if how == BELOW:
        return apart < 0
    if how == AT_LEAST:
        return apart >= 0
    if how == AT_MOST:
        return apart <= 0
    raise FormulaInputError(f"'{how}' is no way to compare")


def rise_pct(now: float, before: float) -> float:
    """Return by how many percent ``now`` is above ``before``; negative for a fall.

    Raises:
        FormulaInputError: A number is negative or not finite, or ``before`` is 0.
    """
    if _finite("value now", now) < 0 or _finite("value before", before) <= 0:
        raise FormulaInputError("a rise needs a value above 0 to start from, and none below 0")
    return (now - before) / before * 100


def day_of_line(placed_ordinal: int, today_ordinal: int) -> int:
    """Return which day of a line it is; the day on which it was placed is day 1.

    Args:
        placed_ordinal: Day of placing, as a running number of days.
        today_ordinal: Today, as a running number of days.

    Raises:
        FormulaInputError: Placed after today.
    """
    if placed_ordinal > today_ordinal:
        raise FormulaInputError("the line was placed after today")
    return today_ordinal - placed_ordinal + 1


def reaches(met: int, needed: int) -> bool:
    """Return whether as many rows of a list are met as it asks for.

    Raises:
        FormulaInputError: A negative count, or a list that asks for none.
    """
    if met < 0 or needed < 1:
        raise FormulaInputError("a list needs at least one row, and counts none below 0")
    return met >= needed
