"""The sheet of the fluid figure: where each hour lies, the axes, and the times below."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.document.figures.axes import Scale, ticks
from handoff.document.figures.curves import Point
from handoff.document.figures.fluid_hours import FluidHour
from handoff.document.figures.shapes import Look, Words, label, stroke
from handoff.plugin import Clock, hours_text, number_text

WIDE, LEFT, RIGHT = 527.0, 34.0, 14.0
TITLE_WIDE, TITLE_HIGH = 170.0, 14.0
SLOT_MOST, BAR = 58.0, 0.62
"""Widest room of one hour in points, and the part of it that a bar takes."""

TEXT_HIGH, VALUE_WIDE = 9.0, 22.0
"""Height of a figure printed at a bar, and the width that the longest one takes."""

TIME_WIDE = 28.0
LEAST_ML = 10.0
"""No axis ends lower."""

GRID = Look(line="BFBFBF", width_pt=0.4)
AXIS = Look(width_pt=0.75)
HOUR = timedelta(hours=1)


class Sheet(Struct, frozen=True):
    """The hours on the sheet, side by side, each as wide as ``slot``."""

    hours: tuple[FluidHour, ...]
    slot: float
    clock: Clock
    now: datetime

    @property
    def right(self) -> float:
        """Where the last hour ends."""
        return LEFT + self.slot * len(self.hours)

    @property
    def end(self) -> datetime:
        """The end of the last hour, or the moment of the document where that hour is not over."""
        last = self.hours[-1].start
        return self.now if last < self.now < last + HOUR else last + HOUR

    @property
    def cut_short(self) -> str:
        """How long the last hour had run where it is not over; otherwise an empty string."""
        run = self.end - self.hours[-1].start
        return hours_text(run / HOUR) if run < HOUR else ""

    def left_of(self, index: int) -> float:
        """Return where an hour begins."""
        return LEFT + self.slot * index

    def bar(self, index: int) -> tuple[float, float]:
        """Return left edge and width of the bar of an hour."""
        return self.left_of(index) + self.slot * (1 - BAR) / 2, self.slot * BAR


def sheet_of(hours: tuple[FluidHour, ...], clock: Clock, now: datetime) -> Sheet:
    """Return the sheet for the hours, filled where there are many."""
    return Sheet(hours, min((WIDE - LEFT - RIGHT) / len(hours), SLOT_MOST), clock, now)


def axis(sheet: Sheet, title: str, most: float, top: float, bottom: float) -> tuple[Scale, list[str]]:
    """Return the scale of a panel from 0 to ``most`` or above, and its title, lines and figures."""
    values = ticks(max(most, LEAST_ML), 4)
    scale = Scale(0.0, values[-1], bottom, top)
    heading = [Words(title, 7.5, bold=True)]
    drawn = [label(f"title: {title}", 0, top - TITLE_HIGH, TITLE_WIDE, TITLE_HIGH - 4, heading)]
    for value in values:
        y, text = scale.at(value), number_text(value, 1)
        ends = (Point(LEFT, y), Point(sheet.right, y))
        drawn.append(stroke(f"{title}: line at {text}", ends, GRID if value else AXIS))
        drawn.append(label(f"{title}: {text}", 0, y - 4.5, LEFT - 4, 9, [Words(text)], align="right"))
    drawn.append(stroke(f"{title}: axis", (Point(LEFT, top), Point(LEFT, bottom)), AXIS))
    return scale, drawn


def times(sheet: Sheet, top: float) -> list[str]:
    """Return clock times at the beginning of the hours and at the end, with the date where it changes."""
    every = next(n for n in (1, 2, 3, 4, 6, 12, 24) if n * sheet.slot >= VALUE_WIDE or n == 24)
    drawn, day, free = [], "", 0.0
    moments = [(index, hour.start) for index, hour in enumerate(sheet.hours)]
    for index, moment in [*moments, (len(moments), sheet.end)]:
        x = sheet.left_of(index)
        drawn.append(stroke(f"tick {index + 1}", (Point(x, top), Point(x, top + 3)), AXIS))
        ends = index == len(moments)
        if (index % every and not ends) or (ends and x < free):
            continue
        date = sheet.clock.day(moment).rpartition(" ")[0]
        lines = [Words(sheet.clock.time(moment)), *([Words(date)] if date != day else [])]
        day, free = date, x + VALUE_WIDE
        place = (x - TIME_WIDE / 2, top + 3, TIME_WIDE, 2 * TEXT_HIGH)
        drawn.append(label(f"time {index + 1}", *place, lines, align="center"))
    return drawn


def cut_short(sheet: Sheet, top: float) -> list[str]:
    """Return how long the last hour had run, above it, where it is not over."""
    if not sheet.cut_short:
        return []
    wide = max(sheet.slot, 2 * TIME_WIDE)
    left = min(sheet.right - sheet.slot / 2 - wide / 2, WIDE - wide)
    words = [Words(f"{sheet.cut_short} so far")]
    place = (max(left, TITLE_WIDE), top - TEXT_HIGH - 1, wide, TEXT_HIGH)
    return [label("last hour: how long it had run", *place, words, align="center")]
