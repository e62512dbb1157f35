"""How much is too much: delivered index, projection at the present rate, and when each line is crossed."""

from __future__ import annotations

import math
from datetime import datetime, timedelta

from handoff.plugin import Flag, Item, Working, number_text

from . import formula
from .course import COMFORT, Course
from .say import INDEX_PLACES, absent, figure, ml, ml_h, unflagged, why_not

HOUR = timedelta(hours=1)
INDEX = ("given_index", "Delivered in the first 24 h")
PROJECTED = ("projected_24h", "Projected for the first 24 h at the present rate")
PER_KG = ("projected_per_kg", "Projected for the first 24 h by weight")
RANK_TOO_MUCH = 46


def items(course: Course) -> tuple[Item, ...]:
    """Return the items that warn of too much fluid."""
    return (_index(course), _projected(course), _per_kg(course))


def _end(course: Course) -> datetime | None:
    return course.burn.earliest + timedelta(hours=course.period_h) if course.burn else None


def _day_one_ml(course: Course, confirmed: bool) -> float:
    end = _end(course)
    if course.burn is None or end is None:
        return course.given.total_ml(course.counted, confirmed)
    return course.given.between_ml(
        course.burn.earliest, min(end, course.now), course.counted, confirmed, first=True
    )


def _nothing(course: Course, key: str, label: str, missing: tuple[str, ...]) -> Item | None:
    if course.comfort:
        return unflagged(key, label, COMFORT, detail=True)
    if not course.given.charted:
        return absent(key, label)
    return absent(key, label, why_not(missing)) if missing else None


def _index(course: Course) -> Item:
    key, label = INDEX
    weight, pct = course.person.weight, course.person.pct
    lacking = course.missing()
    nothing = _nothing(course, key, label, lacking)
    if nothing is not None:
        return nothing
    if weight is None or pct is None or pct <= 0:
        return unflagged(key, label, "not computed: no burn that counts")
    total = _day_one_ml(course, confirmed=True)
    value = formula.delivered_index(total, weight.kg, pct)
    per_kg = formula.per_kg_ml(total, weight.kg)
    line = course.number("line.index")
    over = value >= line or per_kg >= course.number("line.per_kg")
    return figure(
        key,
        label,
        value=value,
        unit="mL/kg/%",
        shown=f"{number_text(value, INDEX_PLACES)} mL/kg/% and {number_text(per_kg)} mL/kg, confirmed",
        as_of=course.now,
        flag=Flag.ACTION if over else Flag.NONE,
        rank=RANK_TOO_MUCH if over else None,
        working=Working(
            formula="resuscitation fluid confirmed in the first 24 h / weight / burned area",
            sum=f"{ml(total)} / {weight.name} / {number_text(pct, 2)} % = {number_text(value, INDEX_PLACES)} mL/kg/%",
            inputs=(weight.input,),
            rule=", ".join(sorted(course.counted)),
        ),
        sources=(course.source("line.index"), course.source("line.per_kg")),
        cautions=(
            f"Lines: {number_text(line)} mL/kg/% and {number_text(course.number('line.per_kg'))} mL/kg in 24 h "
            "ask for steps against too much fluid.",
        ),
    )


def _projection(course: Course) -> tuple[float, float, float] | None:
    """Projected volume, the rate used and what has gone in with the unconfirmed, in mL and mL/h."""
    end = _end(course)
    if end is None:
        return None
    gone = _day_one_ml(course, confirmed=True)
    if course.now >= end:
        return gone, 0.0, gone
    gone += _day_one_ml(course, confirmed=False)
    rate = course.given.rate_ml_h(course.counted)
    return formula.projected_ml(gone, rate, (end - course.now) / HOUR), rate, gone


def over_line(course: Course) -> bool:
    """Return whether a warning line is reached, or would be within the first 24 h at the present rate."""
    found, end = _projection(course), _end(course)
    if found is None or end is None or course.person.weight is None:
        return False
    value, _, _ = found
    return any(value >= line_ml for _, line_ml in _lines(course))


def _lines(course: Course) -> list[tuple[str, float]]:
    """The warning lines by name, in mL for this patient."""
    weight, pct = course.person.weight, course.person.pct
    if weight is None:
        return []
    per_kg, index = course.number("line.per_kg"), course.number("line.index")
    lines = [(f"{number_text(per_kg)} mL/kg", per_kg * weight.kg)]
    return [*lines, (f"{number_text(index)} mL/kg/%", index * weight.kg * pct)] if pct else lines


def _projected(course: Course) -> Item:
    key, label = PROJECTED
    missing = () if course.burn else ("time of the burn",)
    nothing = _nothing(course, key, label, missing)
    found = _projection(course)
    end = _end(course)
    if nothing is not None or found is None or end is None:
        return nothing or absent(key, label)
    value, rate, gone = found
    over = course.now >= end
    shown = f"{ml(value)}; the first 24 h have passed" if over else _if_it_runs(value, rate)
    crossings = [] if over else _crossings(course, gone, rate, end)
    flag = Flag.REVIEW if any(crossed for _, crossed in crossings) else Flag.NONE
    said = "; ".join(text for text, _ in crossings)
    left = 0.0 if over else (end - course.now) / HOUR
    return figure(
        key,
        label,
        value=value,
        unit="mL",
        shown=f"{shown}; {said}" if said else shown,
        as_of=course.now,
        flag=flag,
        working=Working(
            formula="given and not confirmed + present rate x hours left of the first 24 h",
            sum=f"{ml(gone)} + {ml_h(rate)} x {number_text(left, 2)} h = {ml(value)}",
            rule=", ".join(sorted(course.counted)),
        ),
        sources=(course.source("line.per_kg"), course.source("line.index")),
        cautions=(
            "A projection, not a plan: the rate will be changed by urine and perfusion.",
            *(("The time of the burn is uncertain: the earliest is used.",) if not _certain(course) else ()),
        ),
    )


def _if_it_runs(value: float, rate: float) -> str:
    return f"{ml(value)} if {ml_h(rate)} runs on" if rate else f"{ml(value)}: no resuscitation line runs now"


def _certain(course: Course) -> bool:
    return course.burn is not None and course.burn.certain


def _crossings(course: Course, gone: float, rate: float, end: datetime) -> list[tuple[str, bool]]:
    """When each warning line is crossed at the present rate, and whether that is within the first 24 h."""
    found = []
    for name, line_ml in _lines(course):
        hours = formula.hours_until_line(gone, rate, line_ml)
        if hours == 0:
            found.append((f"{name} ({ml(line_ml)}) is reached", True))
        elif math.isfinite(hours) and course.now + timedelta(hours=hours) <= end:
            moment = course.time(course.now + timedelta(hours=hours))
            found.append((f"{name} ({ml(line_ml)}) would be crossed at {moment}", True))
        else:
            found.append((f"{name} ({ml(line_ml)}) not crossed in the first 24 h", False))
    return found


def _per_kg(course: Course) -> Item:
    key, label = PER_KG
    weight = course.person.weight
    missing = (() if course.burn else ("time of the burn",)) + (() if weight else ("weight",))
    nothing = _nothing(course, key, label, missing)
    found = _projection(course)
    if nothing is not None or found is None or weight is None:
        return nothing or absent(key, label)
    value = formula.per_kg_ml(found[0], weight.kg)
    line = course.number("line.per_kg")
    return figure(
        key,
        label,
        value=value,
        unit="mL/kg",
        shown=f"{number_text(value)} mL/kg; line {number_text(line)} mL/kg",
        as_of=course.now,
        flag=Flag.REVIEW if value >= line else Flag.NONE,
        working=Working(
            formula="projected volume / weight",
            sum=f"{ml(found[0])} / {weight.name} = {number_text(value)} mL/kg",
            inputs=(weight.input,),
        ),
        sources=(course.source("line.per_kg"),),
        detail=value < line,
    )
