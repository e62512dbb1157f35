"""Arithmetic of fasting; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def hours_short(fasted_hours: float, wanted_hours: float) -> float:
    """Return how many hours of fasting will be missing at the start, 0 where there are enough.

    Args:
        fasted_hours: From the last intake to the planned start, in h.
        wanted_hours: Shortest fast of the table, in h.

    Raises:
        FormulaInputError: Negative or not finite.

    Source:
        ``fasting.*`` in parameters.yaml.
    """
    if (
        not (math.isfinite(fasted_hours) and math.isfinite(wanted_hours))
        or min(fasted_hours, wanted_hours) < 0
    ):
        raise FormulaInputError("times must be finite and not negative")
    return max(0.0, wanted_hours - fasted_hours)
