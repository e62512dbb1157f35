"""Perfusion by pressure: mean arterial and systolic pressure against their named lines."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.plugin import Flag, Item, System, Working, amount, number_text, pressure_pair, words

from . import formula
from .course import Course
from .say import figure, once

RANK_LOW = 31
MEAN_PLACES = 0


class Mean(Struct, frozen=True):
    """A mean arterial pressure: mmHg, when, whether it was measured or worked out, and its sum."""

    mmhg: float
    at: datetime
    measured: bool
    sum: str
    line: int


def latest_mean(course: Course) -> Mean | None:
    """Return the latest mean arterial pressure: measured, or from the cuff where that is newer."""
    found = []
    for reading in course.case.state.series("map"):
        value = amount(reading.node, "mmHg")
        if value is not None:
            found.append(Mean(value, reading.at, True, "as measured", reading.row.line))
    for reading in course.case.state.series("bp"):
        pair = pressure_pair(reading.node)
        if pair is not None:
            weight = course.number("pressure.diastolic_weight")
            value = formula.mean_pressure_mmhg(*pair, weight)
            said = (
                f"({number_text(pair[0])} + {number_text(weight)} x {number_text(pair[1])}) / "
                f"{number_text(weight + 1)} = {number_text(value)} mmHg"
            )
            found.append(Mean(value, reading.at, False, said, reading.row.line))
    return max(found, key=lambda mean: (mean.at, mean.measured), default=None)


def items(course: Course) -> tuple[Item, ...]:
    """Return mean arterial pressure, and systolic pressure where it is below its line."""
    mean, systolic = _mean(course), _systolic(course)
    if mean and systolic and mean[0].rank is not None and mean[0].as_of == systolic[0].as_of:
        said = f"{systolic[0].shown}; mean {mean[0].shown}"  # one pressure takes one row of page one
        return (replace(mean[0], rank=None), replace(systolic[0], shown=said))
    return (*mean, *systolic)


def _mean(course: Course) -> tuple[Item, ...]:
    key, label = "mean_pressure", "Mean arterial pressure"
    mean = latest_mean(course)
    if mean is None:
        return ()
    name = course.case.chosen("pressure_line").name
    line = course.number(f"pressure_line.{name}")
    is_adult = course.person.is_child is False
    low = is_adult and mean.mmhg < line
    how = "measured" if mean.measured else "from the cuff"
    against = f"; line {number_text(line)} mmHg ({name})" if is_adult else "; no line for a child"
    return (
        figure(
            key,
            label,
            system=System.CIRCULATION,
            value=mean.mmhg,
            unit="mmHg",
            shown=f"{number_text(mean.mmhg, MEAN_PLACES)} mmHg, {how}{against if course.person.age else ''}",
            as_of=mean.at,
            flag=course.flagged(Flag.ACTION) if low else Flag.NONE,
            rank=RANK_LOW if low and not course.comfort else None,
            working=Working(
                formula="(systolic + 2 x diastolic) / 3, or as measured", sum=mean.sum, rule=name
            ),
            sources=once(
                (course.source(f"pressure_line.{name}"), course.source("pressure.diastolic_weight"))
            ),
            cautions=(
                "Never acted on alone: read it with urine, lactate and skin. A cuff over a burn reads low.",
            ),
            line=mean.line,
        ),
    )


def _systolic(course: Course) -> tuple[Item, ...]:
    readings = [r for r in course.case.state.series("bp") if pressure_pair(r.node) is not None]
    floor = _floor(course)
    if not readings or floor is None:
        return ()
    last = readings[-1]
    pair = pressure_pair(last.node)
    limit, source, said = floor
    if pair is None or pair[0] >= limit:
        return ()
    flag = course.flagged(Flag.ACTION)
    return (
        figure(
            "systolic_low",
            "Systolic pressure below its line",
            system=System.CIRCULATION,
            value=pair[0],
            unit="mmHg",
            shown=f"{words(last.node)}; line {number_text(limit)} mmHg ({said})",
            as_of=last.at,
            flag=flag,
            rank=RANK_LOW if flag is Flag.ACTION else None,
            sources=(course.source(source),),
            cautions=("Low pressure is late in burn shock; call for help by the unit's rule.",),
            line=last.row.line,
        ),
    )


def _floor(course: Course) -> tuple[float, str, str] | None:
    """The systolic line in mmHg, its parameter, and how it is said; None where no rule is published."""
    age, child = course.person.age, course.person.is_child
    if age is None or child is None:
        return None
    if not child:
        return course.number("pressure.adult_systolic"), "pressure.adult_systolic", "adult"
    if age.years < 1:
        return None
    table = course.case.parameters.table("pressure.child_systolic")
    floor = formula.systolic_floor_mmhg(
        age.years, float(table["base"]), float(table["per_year"]), float(table["to_years"])
    )
    return floor, "pressure.child_systolic", f"{age.years} years"
