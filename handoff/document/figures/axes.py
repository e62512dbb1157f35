"""Axes: round steps, and where a value or a moment lies on the sheet."""

from __future__ import annotations

import math
from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct

STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
"""Round steps of an axis, times a power of ten."""


class Scale(Struct, frozen=True):
    """A straight scale: ``low`` lies at ``start`` and ``high`` at ``end``."""

    low: float
    high: float
    start: float
    end: float

    def at(self, value: float) -> float:
        """Return the place of ``value``."""
        return self.start + (value - self.low) / (self.high - self.low) * (self.end - self.start)


class Moments(Struct, frozen=True):
    """A scale of time."""

    first: datetime
    last: datetime
    start: float
    end: float

    def at(self, moment: datetime) -> float:
        """Return the place of ``moment``."""
        span = (self.last - self.first).total_seconds()
        if not span:
            return self.end
        return self.start + (moment - self.first).total_seconds() / span * (self.end - self.start)


def step_for(span: float, parts: int) -> float:
    """Return a round step that divides ``span`` into about ``parts``; 1 for an empty span."""
    if span <= 0:
        return 1.0
    rough = span / parts
    power = 10.0 ** math.floor(math.log10(rough))
    return next(step * power for step in STEPS if step * power >= rough * (1 - 1e-9))


def ticks(high: float, parts: int) -> tuple[float, ...]:
    """Return round values from 0 to at least ``high``."""
    step = step_for(high, parts)
    count = max(math.ceil(high / step - 1e-9), 1)
    return tuple(index * step for index in range(count + 1))


def around(values: Sequence[float], least: float) -> tuple[float, float]:
    """Return round ends around ``values`` that lie at least ``least`` apart."""
    low, high = min(values), max(values)
    spare = max(least - (high - low), 0.0) / 2
    step = step_for(max(high - low, least), 4)
    return math.floor((low - spare) / step) * step, math.ceil((high + spare) / step) * step
