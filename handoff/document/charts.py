"""The burn table and the fluid table by the hour, from the rows that their plugins pass on."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.sections import NOT_RECORDED, sentence
from handoff.plugin import number_text, plural

AREA_PLACES = 2
BURNS, HOURS = ("area", "burns"), ("fluid", "hours")
"""The plugin that passes the rows of a table on, and under which name."""

COLUMNS = {BURNS: 7, HOURS: 7}


_COUNTED = {True: "counted", False: "NOT counted", None: "not assessed"}


class Burn(Struct, frozen=True):
    """One burned region: where, how deep, how much of the body, and whether it counts."""

    region: str
    depth: str
    share: str
    counted: str
    around: str
    line: str


class Hour(Struct, frozen=True):
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
            counted=_COUNTED[counted if isinstance(counted, bool) else None],
            around=_yes_no(around),
            line=str(line or ""),
        )
        for region, face, depth, share, counted, around, line in rows(assessment, BURNS)[0]
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
        for hour, start, due, given, unsure, urine, urine_text in rows(assessment, HOURS)[0]
    )


def lost_tables(assessment: Assessment) -> tuple[str, ...]:
    """Return one line for each table whose rows were passed on in a form that cannot be printed."""
    found = []
    for table in COLUMNS:
        count = rows(assessment, table)[1]
        if count:
            found.append(
                f"table '{table[1]}' of the plugin '{table[0]}': {plural(count, 'row')} cannot be printed"
            )
    return tuple(found)


def rows(assessment: Assessment, table: tuple[str, str]) -> tuple[list[Sequence[object]], int]:
    """Return the rows of a table that can be printed, and how many cannot."""
    plugin, key = table
    found = assessment.findings.get(plugin)
    passed = found.values.get(key, ()) if found else ()
    if not isinstance(passed, (tuple, list)):
        return [], 1
    kept: list[Sequence[object]] = [
        row for row in passed if isinstance(row, (tuple, list)) and len(row) == COLUMNS[table]
    ]
    return kept, len(passed) - len(kept)


def _amount(value: object, places: int = 0) -> str:
    return number_text(value, places) if isinstance(value, (int, float)) else NOT_RECORDED


def _yes_no(value: object) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return str(value or NOT_RECORDED)
