"""Arithmetic of feeding and bowels; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def of_target_pct(rate_ml_h: float, target_ml_h: float) -> float:
    """Return the rate of a feed in percent of its target.

    Args:
        rate_ml_h: Rate in mL/h.
        target_ml_h: Rate aimed at in mL/h, above 0.

    Raises:
        FormulaInputError: Not finite, a negative rate, or no target above 0.
    """
    if not (math.isfinite(rate_ml_h) and math.isfinite(target_ml_h)) or rate_ml_h < 0 or target_ml_h <= 0:
        raise FormulaInputError("a rate must not be negative and its target must be above 0 mL/h")
    return rate_ml_h / target_ml_h * 100


def is_longer(hours: float, limit_hours: float) -> bool:
    """Return whether a time in h is longer than its limit in h.

    Raises:
        FormulaInputError: Negative or not finite.
    """
    if not (math.isfinite(hours) and math.isfinite(limit_hours)) or min(hours, limit_hours) < 0:
        raise FormulaInputError("times must be finite and not negative")
    return hours > limit_hours
