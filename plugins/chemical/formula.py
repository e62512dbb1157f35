"""Arithmetic of rinsing; every number is passed in."""

from __future__ import annotations

import math
from collections.abc import Sequence

from handoff.plugin import FormulaInputError


def minutes_covered(spans: Sequence[Sequence[float]]) -> float:
    """Return the minutes that the spans cover together, what overlaps counted once.

    Args:
        spans: Each as (start, end) in min from any one moment.

    Raises:
        FormulaInputError: A span that is not finite or ends before it starts.
    """
    covered, reached = 0.0, -math.inf
    for start, end in sorted((span[0], span[1]) for span in spans):
        if not (math.isfinite(start) and math.isfinite(end)) or end < start:
            raise FormulaInputError("a span must be finite and must not end before it starts")
        covered += max(0.0, end - max(start, reached))
        reached = max(reached, end)
    return covered


def minutes_left(covered_min: float, wanted_min: float) -> float:
    """Return how many minutes of rinsing are missing, 0 where there are enough.

    Raises:
        FormulaInputError: A number is negative or not finite.

    Source:
        ``rinse.*`` in parameters.yaml.
    """
    if not (math.isfinite(covered_min) and math.isfinite(wanted_min)) or min(covered_min, wanted_min) < 0:
        raise FormulaInputError("minutes must be finite and not negative")
    return max(0.0, wanted_min - covered_min)
