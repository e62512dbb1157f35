"""Arithmetic of the depth of a tube: published straight lines, kept to be compared with the confirmed mark."""

from __future__ import annotations

import math

from handoff.plugin import FormulaInputError


def tube_depth_cm(measure: float, base_cm: float, slope: float) -> float:
    """Return the depth in cm that a straight line gives: ``base + slope x measure``.

    Args:
        measure: Height in cm, or the size of the tube in mm, above 0.
        base_cm: Depth in cm at a measure of 0; below 0 in print.
        slope: cm of depth for each unit of the measure, above 0.

    Raises:
        FormulaInputError: A value is outside its range, or the depth is not above 0.

    Source:
        ``tube.depth`` in parameters.yaml.
    """
    if not all(math.isfinite(value) for value in (measure, base_cm, slope)) or measure <= 0 or slope <= 0:
        raise FormulaInputError("measure and slope must be finite numbers above 0")
    depth = base_cm + slope * measure
    if depth <= 0:
        raise FormulaInputError("the line gives no depth for this measure")
    return depth
