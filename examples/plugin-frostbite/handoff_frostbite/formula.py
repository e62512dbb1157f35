"""Arithmetic of frostbite: floats in, floats out, nothing rounded."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def degrees_outside(water_c: float, lowest_c: float, highest_c: float) -> float:
    """Return how far the water lies outside the range, in C: above 0 too warm, below 0 too cold, 0 inside.

    Args:
        water_c: Water temperature in C.
        lowest_c: Lowest temperature of the range in C; it belongs to the range.
        highest_c: Highest temperature of the range in C; it belongs to the range.

    Raises:
        FormulaInputError: An argument is not finite, or the range is upside down.

    Source:
        ``bath_range.*`` in parameters.yaml.
    """
    if not all(math.isfinite(value) for value in (water_c, lowest_c, highest_c)) or lowest_c > highest_c:
        raise FormulaInputError(f"water {water_c} C against {lowest_c} to {highest_c} C cannot be judged")
    return max(water_c - highest_c, 0) + min(water_c - lowest_c, 0)


def hours_left(window_h: float, elapsed_h: float) -> float:
    """Return how much of a time window is left, in h, never below 0.

    Args:
        window_h: Length of the window in h.
        elapsed_h: Time since it opened in h.

    Raises:
        FormulaInputError: An argument is not finite or below 0.

    Source:
        ``thrombolysis_window`` in parameters.yaml.
    """
    if not all(math.isfinite(value) and value >= 0 for value in (window_h, elapsed_h)):
        raise FormulaInputError(f"{elapsed_h} h of a window of {window_h} h cannot be judged")
    return max(window_h - elapsed_h, 0)
