"""What every formula refuses: an argument that is not finite or lies outside its range."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def need(name: str, value: float, low: float = 0, high: float = math.inf) -> None:
    """Refuse ``value`` unless it is finite and from ``low`` to ``high``.

    Raises:
        FormulaInputError: It is not.
    """
    if not math.isfinite(value) or value < low or value > high:
        raise FormulaInputError(f"{name} is {value}; it must be finite, from {low} to {high}")


def need_positive(name: str, value: float) -> None:
    """Refuse ``value`` unless it is finite and above 0.

    Raises:
        FormulaInputError: It is not.
    """
    if not math.isfinite(value) or value <= 0:
        raise FormulaInputError(f"{name} is {value}; it must be finite and above 0")
