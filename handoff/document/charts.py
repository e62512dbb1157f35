"""The burn table and the fluid table by the hour, from the rows that their plugins pass on."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import datetime

from handoff.assess import Assessment
from handoff.document.sections import NOT_RECORDED, sentence
from handoff.plugin import number_text

AREA_PLACES = 2
BURN_COLUMNS = 7
HOUR_COLUMNS = 7


@dataclass(frozen=True, slots=True)
class Burn:
    """One burned region: where, how deep, how much of the body, and whether it counts."""

    region: str
    depth: str
    share: str
    counted: str
    around: str
    line: str


@dataclass(frozen=True, slots=True)
class Hour:
    """One hour since the burn: what was due, what went in, what came out."""

    hour: str
    start: str
    due: str
    given: str
    not_confirmed: str
    urine: str


def burns(assessment: Assessment) -> tuple[Burn, ...]:
    """Return the rows of the burn table; none when the area was not computed."""
    return tuple(
        Burn(
            region=sentence(", ".join(str(part) for part in (region, face) if part)),
            depth=str(depth or NOT_RECORDED),
            share=_amount(share, AREA_PLACES),
            counted="counted" if counted else "NOT counted",
            around=_yes_no(around),
            line=str(line or ""),
        )
        for region, face, depth, share, counted, around, line in _rows(
            assessment, "area", "burns", BURN_COLUMNS
        )
    )


def hours(assessment: Assessment) -> tuple[Hour, ...]:
    """Return the rows of the fluid table; none when fluid was not computed."""
    clock, now = assessment.state.clock, assessment.now
    return tuple(
        Hour(
            hour=str(hour),
            start=clock.time(start, now) if isinstance(start, datetime) else str(start),
            due=_amount(due),
            given=_amount(given),
            not_confirmed=_amount(unsure),
            urine=str(urine_text or _amount(urine)),
        )
        for hour, start, due, given, unsure, urine, urine_text in _rows(
            assessment, "fluid", "hours", HOUR_COLUMNS
        )
    )


def _rows(assessment: Assessment, plugin: str, key: str, columns: int) -> list[Sequence[object]]:
    found = assessment.findings.get(plugin)
    rows = found.values.get(key) if found else None
    if not isinstance(rows, (tuple, list)):
        return []
    return [row for row in rows if isinstance(row, (tuple, list)) and len(row) == columns]


def _amount(value: object, places: int = 0) -> str:
    return number_text(value, places) if isinstance(value, (int, float)) else NOT_RECORDED


def _yes_no(value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return str(value or NOT_RECORDED)
