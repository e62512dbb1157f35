"""Arithmetic of the first hours: plain numbers in, plain numbers out."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def minutes_short(wanted_min: float, had_min: float) -> float:
    """Return the minutes that are missing of ``wanted_min``, 0 where there are enough.

    Args:
        wanted_min: Minutes wanted, 0 or more.
        had_min: Minutes had, 0 or more.

    Raises:
        FormulaInputError: An argument is negative or not finite.
    """
    for value, name in ((wanted_min, "minutes wanted"), (had_min, "minutes had")):
        if not math.isfinite(value) or value < 0:
            raise FormulaInputError(f"{name} must be 0 or more")
    return max(wanted_min - had_min, 0)
