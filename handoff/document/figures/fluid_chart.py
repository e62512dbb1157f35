"""The fluid figure: due against given by the hour since the burn, and urine below on the same hours."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime
from functools import partial

from handoff.document.figures import fluid_hours
from handoff.document.figures.curves import Point
from handoff.document.figures.figure import Drawing, Figure
from handoff.document.figures.fluid_panels import (
    BAND,
    DUE,
    GIVEN,
    NOT_CONFIRMED,
    NOT_RECORDED_SIGN,
    OTHER_TIME,
    URINE,
    WORDS_WIDE,
    Target,
    fluid_panel,
    urine_panel,
)
from handoff.document.figures.fluid_sheet import TITLE_HIGH, WIDE, Sheet, cut_short, sheet_of, times
from handoff.document.figures.legend import Entry, legend
from handoff.document.figures.shapes import Look, Words, box, described, group, label, stroke
from handoff.document.sections import Mark
from handoff.plugin import Clock, number_text, plural

FLUID_HIGH, BETWEEN, URINE_HIGH, TIMES_HIGH = 106.0, 18.0, 74.0, 24.0


def fluid_chart(
    rows: Sequence[Sequence[object]], clock: Clock, now: datetime, target_ml_h: Target | None = None
) -> tuple[Figure, ...]:
    """Return the fluid figure; none where there are no hours.

    Args:
        rows: Hour, start, due, given, not confirmed and urine in mL, words for the urine.
        clock: The clock of the place.
        now: The moment of the document.
        target_ml_h: Lower and upper end of the urine target in mL/h, where there is one.
    """
    hours, left_out = fluid_hours.read(rows)
    if not hours:
        return ()
    sheet = sheet_of(hours, clock, now)
    urine_top = TITLE_HIGH + FLUID_HIGH + BETWEEN
    shapes = [
        *fluid_panel(sheet, TITLE_HIGH, TITLE_HIGH + FLUID_HIGH),
        *cut_short(sheet, TITLE_HIGH),
        *urine_panel(sheet, urine_top, urine_top + URINE_HIGH, target_ml_h),
        *times(sheet, urine_top + URINE_HIGH),
    ]
    top = urine_top + URINE_HIGH + TIMES_HIGH
    key, high = legend(_entries(sheet, target_ml_h), top, WIDE)
    xml = group("Fluid and urine by the hour", _described(sheet), WIDE, top + high, [*shapes, key])
    notes = (" ".join(_notes(sheet, left_out)),)
    return (Figure(Drawing("figure:fluid", xml), Mark("Fluid and urine by the hour"), notes),)


def _notes(sheet: Sheet, left_out: int) -> list[str]:
    notes = [
        "Each bar is one hour since the burn, between the clock times below it. Due is a formula estimate."
    ]
    if sheet.cut_short:
        notes.append(f"The last hour had run for {sheet.cut_short} when this was made.")
    if any(hour.due_ml is None for hour in sheet.hours):
        notes.append("Where no due line is drawn, no due volume was worked out for the hour.")
    if left_out:
        notes.append(f"The first {plural(left_out, 'hour')} are not drawn; the table has them.")
    return notes


def _entries(sheet: Sheet, target: Target | None) -> list[Entry]:
    hours = sheet.hours
    found = [Entry(partial(_symbol, GIVEN), "given, confirmed")]
    if any(hour.not_confirmed_ml for hour in hours):
        found.append(Entry(partial(_symbol, NOT_CONFIRMED), "not confirmed: not seen running"))
    if any(hour.due_ml is not None for hour in hours):
        found.append(Entry(_due_symbol, "due, formula estimate"))
    found.append(Entry(partial(_symbol, URINE), "urine"))
    if any(hour.urine_said for hour in hours):
        found.append(
            Entry(partial(_symbol, OTHER_TIME), "or *: urine over another time, or in words: see the table")
        )
    if target and any(end is not None for end in target):
        found.append(Entry(partial(_symbol, BAND), f"urine target: {_target_text(*target)}"))
    if sheet.slot < WORDS_WIDE and any(hour.urine_ml is None and not hour.urine_said for hour in hours):
        found.append(Entry(_sign, "not recorded"))
    return found


def _target_text(low: float | None, high: float | None) -> str:
    if low is None or high is None:
        end = low if high is None else high
        return f"{number_text(end or 0.0)} mL/h or {'more' if high is None else 'less'}"
    return f"{number_text(low)} to {number_text(high)} mL/h"


def _symbol(look: Look, name: str, left: float, top: float, wide: float, high: float) -> str:
    return box(name, left, top, wide, high, look)


def _sign(name: str, left: float, top: float, wide: float, high: float) -> str:
    words = [Words(NOT_RECORDED_SIGN)]
    return label(name, left, top, wide, high, words, align="right", anchor="ctr")


def _due_symbol(name: str, left: float, top: float, wide: float, high: float) -> str:
    middle = top + high / 2
    return stroke(name, (Point(left, middle), Point(left + wide, middle)), DUE)


def _described(sheet: Sheet) -> str:
    said = ["Fluid due, given and not confirmed, and urine, in each hour since the burn."]
    said += [hour.described(sheet.clock.time(hour.start, sheet.now)) for hour in sheet.hours]
    return described(said)
