"""The two panels of the fluid figure: what was due, given and not confirmed, and the urine."""

from __future__ import annotations

from typing import TypeAlias

from handoff.document.figures.axes import Scale
from handoff.document.figures.curves import Point
from handoff.document.figures.fluid_hours import FluidHour
from handoff.document.figures.fluid_sheet import LEFT, TEXT_HIGH, VALUE_WIDE, Sheet, axis
from handoff.document.figures.shapes import GREY, WHITE, Look, Words, box, label, shorten, stroke
from handoff.plugin import number_text

WORDS_WIDE = 44.0
"""An hour as wide as this has room for words; a narrower one has a short sign that the legend explains."""

DIGIT_WIDE = 4.2
"""Room for one letter of a figure printed at a bar."""

NOT_RECORDED_SIGN = "nr"
GIVEN = Look(fill="A6A6A6", width_pt=0.5)
NOT_CONFIRMED = Look(WHITE, "wdUpDiag", width_pt=0.5)
DUE = Look(width_pt=2.0)
URINE = Look(fill="595959", width_pt=0.5)
OTHER_TIME = Look(fill=WHITE, dash="sysDash", width_pt=1.0)
BAND = Look(fill="E7E7E7", line=GREY, width_pt=0.5, dash="dash")

Target: TypeAlias = "tuple[float | None, float | None]"
"""Lower and upper end of the urine target in mL/h."""


def fluid_panel(sheet: Sheet, top: float, bottom: float) -> list[str]:
    """Return the bars of what was given and not confirmed, and the steps of what was due."""
    most = max(max(hour.infused_ml, hour.due_ml or 0.0) for hour in sheet.hours)
    scale, drawn = axis(sheet, "Resuscitation fluid, mL in each hour", most, top, bottom)
    for index, hour in enumerate(sheet.hours):
        left, wide = sheet.bar(index)
        sure, both = scale.at(hour.given_ml or 0.0), scale.at(hour.infused_ml)
        if hour.given_ml:
            drawn.append(box(f"given, hour {hour.number}", left, sure, wide, bottom - sure, GIVEN))
        if hour.not_confirmed_ml:
            drawn.append(
                box(f"not confirmed, hour {hour.number}", left, both, wide, sure - both, NOT_CONFIRMED)
            )
        if hour.given_ml or not hour.not_confirmed_ml:
            # nothing given is said too, so that it does not look like an hour left out
            drawn += _value(
                sheet, index, f"given, hour {hour.number}", hour.given_ml or 0.0, bottom, bottom - sure
            )
        if hour.not_confirmed_ml:
            name = f"not confirmed, hour {hour.number}"
            drawn += _value(sheet, index, name, hour.not_confirmed_ml, sure, sure - both)
    return drawn + [_due_line(sheet, scale, run) for run in _runs(sheet)]


def _value(sheet: Sheet, index: int, name: str, value: float, bottom: float, high: float) -> list[str]:
    """The figure of a bar on white at its foot; left out where it would not fit, except for nothing given."""
    if sheet.slot < VALUE_WIDE or (value and high < TEXT_HIGH + 2):
        return []
    text = number_text(value)
    wide = DIGIT_WIDE * len(text) + 2
    left = sheet.left_of(index) + (sheet.slot - wide) / 2
    place = (left, bottom - TEXT_HIGH - 1, wide, TEXT_HIGH)
    return [label(f"figure of {name}", *place, [Words(text)], align="center", fill=WHITE if value else "")]


def _runs(sheet: Sheet) -> list[list[int]]:
    """The hours with a due volume, in unbroken runs; an hour that is not over has less due and stands apart."""
    runs: list[list[int]] = []
    for index, hour in enumerate(sheet.hours):
        if hour.due_ml is None:
            continue
        apart = bool(sheet.cut_short) and index == len(sheet.hours) - 1
        if runs and runs[-1][-1] == index - 1 and not apart:
            runs[-1].append(index)
        else:
            runs.append([index])
    return runs


def _due_line(sheet: Sheet, scale: Scale, run: list[int]) -> str:
    points = []
    for index in run:
        y = scale.at(sheet.hours[index].due_ml or 0.0)
        points += [Point(sheet.left_of(index), y), Point(sheet.left_of(index + 1), y)]
    first, last = sheet.hours[run[0]].number, sheet.hours[run[-1]].number
    name = f"due, hours {first} to {last}"
    halo = stroke(f"halo of {name}", points, Look(line=WHITE, width_pt=4))
    return halo + stroke(name, points, DUE) + "".join(_due_figures(sheet, scale, run))


def _due_figures(sheet: Sheet, scale: Scale, run: list[int]) -> list[str]:
    """The due volume in figures, where it changes."""
    drawn, before = [], ""
    for index in run if sheet.slot >= VALUE_WIDE else ():
        hour = sheet.hours[index]
        text = number_text(hour.due_ml or 0.0)
        if text == before:
            continue
        before, y = text, scale.at(hour.due_ml or 0.0)
        top = y - TEXT_HIGH - 2 if y - TEXT_HIGH - 2 > scale.end else y + 2
        place = (sheet.left_of(index) + 2, top, DIGIT_WIDE * len(text) + 2, TEXT_HIGH)
        drawn.append(
            label(f"figure of due, hour {hour.number}", *place, [Words(text, bold=True)], fill=WHITE)
        )
    return drawn


def urine_panel(sheet: Sheet, top: float, bottom: float, target: Target | None) -> list[str]:
    """Return the bars of urine upon the band of its target, where there is one."""
    ends = [end for end in target or () if end is not None]
    most = max([*(hour.urine_ml or 0.0 for hour in sheet.hours), *ends])
    scale, drawn = axis(sheet, "Urine, mL in each hour", most * 1.12, top, bottom)
    if target and ends:
        drawn.insert(0, _band(sheet, scale, target, top, bottom))
    for index, hour in enumerate(sheet.hours):
        left, wide = sheet.bar(index)
        name = f"urine, hour {hour.number}"
        if hour.urine_ml is None:
            drawn += _no_urine(sheet, index, hour, bottom)
            continue
        y = scale.at(hour.urine_ml)
        if hour.urine_ml:
            drawn.append(box(name, left, y, wide, bottom - y, OTHER_TIME if hour.urine_said else URINE))
        text = number_text(hour.urine_ml) + ("*" if hour.urine_said else "")
        if len(text) * DIGIT_WIDE <= sheet.slot:
            place = (sheet.left_of(index), max(y - TEXT_HIGH - 0.5, top), sheet.slot, TEXT_HIGH)
            drawn.append(label(f"figure of {name}", *place, [Words(text, bold=True)], align="center"))
    return drawn


def _no_urine(sheet: Sheet, index: int, hour: FluidHour, bottom: float) -> list[str]:
    said = hour.urine_said or "not recorded"
    texts = _two_lines(said) if sheet.slot >= WORDS_WIDE else ("*" if hour.urine_said else NOT_RECORDED_SIGN,)
    high = 9.0 * len(texts)
    place = (sheet.left_of(index), bottom - high - 1, sheet.slot, high)
    return [label(f"no urine, hour {hour.number}", *place, [Words(text) for text in texts], align="center")]


def _two_lines(text: str) -> tuple[str, ...]:
    """Words broken at a space near their middle, each line short enough for the room of an hour."""
    first, _, rest = text.partition(" ")
    return tuple(shorten(line, 12) for line in (first, rest) if line)


def _band(sheet: Sheet, scale: Scale, target: Target, top: float, bottom: float) -> str:
    low, high = target
    upper = top if high is None else scale.at(high)
    lower = bottom if low is None else scale.at(low)
    return box("target of urine", LEFT, upper, sheet.right - LEFT, max(lower - upper, 0.5), BAND)
