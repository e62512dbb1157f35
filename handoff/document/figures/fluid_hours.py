"""The hours of the fluid figure, read from the rows of the fluid table."""

from __future__ import annotations

import math
from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct

from handoff.plugin import number_text

MOST_HOURS = 48
"""More hours than this are not drawn; the last ones are kept."""


class FluidHour(Struct, frozen=True):
    """One hour since the burn; None where there is no plan, or no measure of urine."""

    number: str
    start: datetime
    due_ml: float | None
    given_ml: float | None
    not_confirmed_ml: float | None
    urine_ml: float | None
    urine_said: str

    @property
    def infused_ml(self) -> float:
        """What was given and what was not confirmed, together."""
        return (self.given_ml or 0.0) + (self.not_confirmed_ml or 0.0)

    def described(self, time: str) -> str:
        """Return the hour in words; ``time`` is when it began."""
        parts = (("due", self.due_ml), ("given", self.given_ml), ("not confirmed", self.not_confirmed_ml))
        said = [f"{name} {ml_text(value)}" for name, value in parts]
        urine = self.urine_said or ml_text(self.urine_ml)
        return f"Hour {self.number} from {time}: {', '.join(said)}, urine {urine}."


def ml_text(value: float | None) -> str:
    """Return a volume as printed: ``748 mL``."""
    return "not recorded" if value is None else f"{number_text(value)} mL"


def read(rows: Sequence[Sequence[object]]) -> tuple[tuple[FluidHour, ...], int]:
    """Return the hours that are drawn, and how many earlier ones are left out.

    Args:
        rows: Hour, start, due, given, not confirmed and urine in mL, words for the urine.
    """
    found = [
        FluidHour(str(hour), start, _ml(due), _ml(given), _ml(unsure), _ml(urine), str(said or ""))
        for hour, start, due, given, unsure, urine, said in rows
        if isinstance(start, datetime)
    ]
    return tuple(found[-MOST_HOURS:]), max(len(found) - MOST_HOURS, 0)


def _ml(value: object) -> float | None:
    known = isinstance(value, (int, float)) and not isinstance(value, bool) and math.isfinite(value)
    return max(float(value), 0.0) if known else None  # type: ignore[arg-type]
