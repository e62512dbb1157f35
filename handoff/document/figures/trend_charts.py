"""Trends as small charts side by side, all on one axis of time."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct

from handoff.document.figures.axes import Moments, Scale, around
from handoff.document.figures.curves import Point
from handoff.document.figures.figure import Drawing, Figure
from handoff.document.figures.shapes import (
    GREY,
    WHITE,
    Look,
    Words,
    box,
    described,
    dots,
    group,
    label,
    shorten,
    stroke,
)
from handoff.document.figures.trends import WINDOW, Trend, Value
from handoff.document.sections import Mark
from handoff.plugin import Clock, number_text, plural

WIDE, ACROSS, BETWEEN = 527.0, 4, 12.0
TITLE_HIGH, PLOT_HIGH, TIMES_HIGH, ROW_GAP = 12.0, 52.0, 11.0, 8.0
LEFT = 24.0
"""Room for the figures of an axis."""

LAST_WIDE = 36.0
MOST_PANELS = 12
MOST_DOTS = 60
"""Values closer than this are drawn as a line alone."""

LETTERS = 22
FRAME = Look(fill=WHITE, line=GREY, width_pt=0.5)
LINE, SECOND_LINE = Look(width_pt=1.1), Look(width_pt=1.1, dash="sysDash")
DOT, SECOND_DOT = Look(fill="000000", line=""), Look(fill=WHITE, width_pt=0.75)


class _Panel(Struct, frozen=True):
    """One small chart: its place on the sheet and its two scales."""

    trend: Trend
    left: float
    top: float
    wide: float
    values: Scale
    moments: Moments

    @property
    def bottom(self) -> float:
        return self.top + PLOT_HIGH

    def at(self, value: Value, index: int) -> Point:
        return Point(self.moments.at(value.at), self.values.at((value.numbers or ())[index]))


def trend_charts(found: Sequence[Trend], clock: Clock, now: datetime) -> tuple[Figure, ...]:
    """Return the small charts as one figure; none where there is nothing to draw.

    Args:
        found: The trends, each with at least two values.
        clock: The clock of the place.
        now: The moment of the document; the axis ends there.
    """
    drawn_ones = found[:MOST_PANELS]
    if not drawn_ones:
        return ()
    first = min(trend.known[0].at for trend in drawn_ones)
    wide = (WIDE - (ACROSS - 1) * BETWEEN) / ACROSS
    high = TITLE_HIGH + PLOT_HIGH + TIMES_HIGH
    shapes = []
    for index, trend in enumerate(drawn_ones):
        row, column = divmod(index, ACROSS)
        panel = _panel(
            trend, column * (wide + BETWEEN), row * (high + ROW_GAP) + TITLE_HIGH, wide, (first, now)
        )
        shapes += _drawn(panel, clock)
    rows = -(-len(drawn_ones) // ACROSS)
    said = [line(trend, clock, now) for trend in drawn_ones]
    xml = group(
        "Trends", described(["Trends of the charted values.", *said]), WIDE, rows * (high + ROW_GAP), shapes
    )
    return (Figure(Drawing("figure:trends", xml), Mark("Trends"), tuple(_notes(found, clock, now, first))),)


def _notes(found: Sequence[Trend], clock: Clock, now: datetime, first: datetime) -> list[str]:
    longest = number_text(WINDOW.total_seconds() / 3600)
    note = f"From {clock.time(first, now)} to {clock.time(now)}; at most the last {longest} h."
    note += " Where a value is missing or long awaited the line is broken. Most axes do not begin at zero."
    if any(trend.name.startswith("Urine") for trend in found):
        note += " Urine: each measure over its own time."
    if any(len(trend.last.numbers or ()) > 1 for trend in found):
        note += " Blood pressure: full line systolic, broken line diastolic."
    notes = [note]
    if len(found) > MOST_PANELS:
        names = "; ".join(trend.name for trend in found[MOST_PANELS:])
        notes.append(f"Not drawn for want of room: {names}.")
    return notes


def line(trend: Trend, clock: Clock, now: datetime) -> str:
    """Return a trend in one line of words: last value, how many, from when, lowest and highest."""
    known = trend.known
    unit = f" {trend.unit}" if trend.unit else ""
    ranges = []
    for each in zip(*(value.numbers or () for value in known), strict=True):
        low, high = (number_text(end, trend.places) for end in (min(each), max(each)))
        ranges.append(f"{low} to {high}")
    return (
        f"{trend.name}: last {trend.said(trend.last)}{unit} at {clock.time(trend.last.at, now)}; "
        f"{plural(len(known), 'value')} since {clock.time(known[0].at, now)}, {' over '.join(ranges)}{unit}."
    )


def _panel(trend: Trend, left: float, top: float, wide: float, span: tuple[datetime, datetime]) -> _Panel:
    numbers = [number for value in trend.known for number in value.numbers or ()]
    low, high = trend.ends or around(numbers, trend.least)
    if trend.unit == "%":
        high = min(high, 100.0)
    plot_left = left + LEFT
    values = Scale(low, high, top + PLOT_HIGH - 3, top + 3)
    return _Panel(trend, plot_left, top, wide - LEFT, values, Moments(*span, plot_left + 4, left + wide - 4))


def _drawn(panel: _Panel, clock: Clock) -> list[str]:
    trend = panel.trend
    name = trend.name
    unit = f", {trend.unit}" if trend.unit else ""
    heading = [Words(shorten(f"{name}{unit}", LETTERS), 7.5, bold=True)]
    last = [Words(trend.said(trend.last), 9, bold=True)]
    above, high = panel.top - TITLE_HIGH, TITLE_HIGH - 1
    right = panel.left + panel.wide - LAST_WIDE
    drawn = [
        label(f"title: {name}", panel.left - LEFT, above, right + 20 - panel.left, high, heading, anchor="b"),
        label(f"last value: {name}", right, above, LAST_WIDE, high, last, align="right", anchor="b"),
        box(f"frame: {name}", panel.left, panel.top, panel.wide, PLOT_HIGH, FRAME),
    ]
    for end in (panel.values.low, panel.values.high):
        place = (panel.left - LEFT, panel.values.at(end) - 4.5, LEFT - 3, 9)
        text = number_text(end, 1)
        drawn.append(label(f"axis of {name}: {text}", *place, [Words(text)], align="right"))
    for moment, edge, align in (
        (panel.moments.first, panel.left, "left"),
        (panel.moments.last, panel.left + panel.wide - 60, "right"),
    ):
        words = [Words(clock.time(moment, panel.moments.last))]
        drawn.append(label(f"{align} time of {name}", edge, panel.bottom + 1, 60, 9, words, align=align))
    for index in range(len(trend.last.numbers or ())):
        drawn += _curve(panel, index)
    return drawn


def _curve(panel: _Panel, index: int) -> list[str]:
    name = f"{panel.trend.name}, line {index + 1}"
    runs = [[panel.at(value, index) for value in run] for run in panel.trend.runs()]
    look, dot = ((LINE, DOT), (SECOND_LINE, SECOND_DOT))[index]
    drawn = [
        stroke(f"{name}, part {number}", run, look)
        for number, run in enumerate(runs, start=1)
        if len(run) > 1
    ]
    points = [point for run in runs for point in run]
    if len(points) > MOST_DOTS:
        points = [run[0] for run in runs if len(run) == 1] + [points[-1]]
    return [*drawn, dots(f"{name}, values", points, 1.7, dot)]
