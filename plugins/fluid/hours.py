"""The course by the hour since the burn: due, given, not confirmed, urine."""

from __future__ import annotations

import math
from datetime import datetime, timedelta
from typing import NamedTuple

from .course import Course
from .urine import Urine

HOUR = timedelta(hours=1)


class HourRow(NamedTuple):
    """One hour since the burn; ``due_ml`` None without a plan, ``urine_ml`` None where none was measured."""

    hour: int
    start: datetime
    due_ml: float | None
    given_ml: float
    not_confirmed_ml: float
    urine_ml: float | None
    urine_text: str


def hour_rows(course: Course) -> tuple[HourRow, ...]:
    """Return a row for each hour since the (earliest) burn up to now, no further than the table goes."""
    if course.burn is None or course.hours is None:
        return ()
    start = course.burn.earliest
    count = min(math.ceil(course.hours), int(course.number("hours.table")))
    return tuple(_row(course, start, index) for index in range(count))


def _row(course: Course, burn: datetime, index: int) -> HourRow:
    start, end = burn + index * HOUR, min(burn + (index + 1) * HOUR, course.now)
    in_hour = [
        one for one in course.urine.readings if start < one.at <= end or (index == 0 and one.at == burn)
    ]
    volumes = [one.ml for one in in_hour if one.ml is not None]
    return HourRow(
        hour=index + 1,
        start=start,
        due_ml=_due(course, burn, start, end),
        given_ml=course.given.between_ml(start, end, course.counted, True, first=index == 0),
        not_confirmed_ml=course.given.between_ml(start, end, course.counted, False, first=index == 0),
        urine_ml=math.fsum(volumes) if volumes else None,
        urine_text=_urine_text(in_hour),
    )


def _due(course: Course, burn: datetime, start: datetime, end: datetime) -> float | None:
    plan = course.plan
    if plan is None or course.comfort:
        return None
    before, after = plan.due_ml(burn, start), plan.due_ml(burn, end)
    return None if before is None or after is None else after - before


def _urine_text(in_hour: list[Urine]) -> str:
    """Words where a bare figure would mislead: not measured, or collected over more than this hour."""
    if not in_hour:
        return ""
    long = [one for one in in_hour if one.hours is not None and one.hours > 1]
    if long or any(one.ml is None or one.hours is None for one in in_hour):
        return "; ".join(one.shown() for one in in_hour)
    return ""
