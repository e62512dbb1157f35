"""Numbers and lists as they are printed: no trailing zero, a leading zero, units always."""

from __future__ import annotations

import math
from collections.abc import Sequence
from decimal import ROUND_HALF_UP, Context, Decimal

_ALL_PLACES = Context(prec=400, rounding=ROUND_HALF_UP)
"""Enough digits for every float, so that rounding itself never fails."""

HOURS_A_DAY = 24
DAYS_BEYOND_H = 3 * HOURS_A_DAY
"""Beyond so many hours nobody counts in hours."""


def number(value: float, places: int = 0) -> str:
    """Return ``value`` rounded half up to ``places``, without trailing zeros, commas from 1,000."""
    text = f"{_rounded(value, places):,f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text in ("-0", "") else text


def _rounded(value: float, places: int) -> Decimal:
    if not math.isfinite(value):
        raise ValueError("only a finite number can be printed")
    return Decimal(repr(float(value))).quantize(Decimal(1).scaleb(-places), context=_ALL_PLACES)


def with_unit(value: float, unit: str, places: int = 0) -> str:
    """Return ``number`` and unit: ``11,972 mL``; the unit may be empty."""
    return f"{number(value, places)} {unit}".strip()


def hours(value: float) -> str:
    """Return hours as hours and minutes: ``6 h 10 min``; beyond three days as days and whole hours.

    A negative value keeps its sign.
    """
    minutes = int(_rounded(abs(value) * 60, 0))
    whole, rest = divmod(minutes, 60)
    if minutes > DAYS_BEYOND_H * 60:
        days, left = divmod(whole, HOURS_A_DAY)
        return f"{'-' if value < 0 else ''}{days} days{f' {left} h' if left else ''}"
    said = f"{whole} h {rest} min" if rest and whole else f"{rest} min" if rest else f"{whole} h"
    return f"-{said}" if value < 0 and minutes else said


def joined(parts: Sequence[str], last: str = "and") -> str:
    """Return ``a, b and c``; an empty string for none."""
    if len(parts) < 2:
        return "".join(parts)
    return f"{', '.join(parts[:-1])} {last} {parts[-1]}"


def plural(count: int, singular: str, several: str = "") -> str:
    """Return ``1 dose`` or ``3 doses``."""
    return f"{count} {singular if count == 1 else several or singular + 's'}"
