"""Arithmetic of electrical injury; every number is passed in."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError

HIGH, LOW, AT_THE_LINE = "high", "low", "at the line"


def voltage_class(volts: float, line_volts: float) -> str:
    """Return whether a voltage is ``high`` or ``low``; ``at the line`` where prints differ.

    Args:
        volts: Voltage in V, above 0.
        line_volts: The line in V. Some prints say at least, others over.

    Raises:
        FormulaInputError: Not above 0, or not finite.

    Source:
        ``voltage_line`` in parameters.yaml.
    """
    if not math.isfinite(volts) or volts <= 0:
        raise FormulaInputError("a voltage must be above 0 V")
    if volts > line_volts:
        return HIGH
    return AT_THE_LINE if volts == line_volts else LOW
