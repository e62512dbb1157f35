"""The keywords of times, dates and the rows that are charted by them."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import datetime
from typing import Any, TypeAlias

from jsonschema import ValidationError

from handoff.state.clock import Clock, ClockError, read_date
from handoff.state.findings import Finding, closed, is_blank, kind_of
from handoff.state.moments import Moments
from handoff.state.nodes import List, Map, Text

Schema: TypeAlias = Mapping[str, Any]
Found: TypeAlias = Iterator[ValidationError]

OLDEST_YEARS = 125


class TimeKeywords:
    """The time keywords of one file, whose times are limited by its ``moments``."""

    def __init__(self, moments: Moments) -> None:
        self._moments = moments

    def by_name(self) -> dict[str, Any]:
        """Return the functions that check, by their keywords."""
        return {
            "x-instant": self._instant,
            "x-date": self._date,
            "x-zone": self._zone,
            "x-rows": self._rows,
            "x-order": self._order,
        }

    def _instant(self, _validator: Any, rule: Schema, instance: Any, _schema: Schema) -> Found:
        clock = self._moments.clock
        if clock is None or not isinstance(instance, Text):
            return
        try:
            refused = self._refuse(clock, clock.read(instance), rule)
        except ClockError as error:
            refused = closed(instance, error.what, error.cure)
        if refused is not None:
            yield refused

    def _date(self, _validator: Any, rule: Schema, instance: Any, _schema: Schema) -> Found:
        if not isinstance(instance, Text):
            return
        try:
            first = read_date(instance, partial=rule.get("partial", False)).earliest()
        except ClockError as error:
            yield closed(instance, error.what, error.cure)
            return
        now, clock = self._moments.now, self._moments.clock
        today = (clock.local(now) if clock else now).date()
        if first > today and not rule.get("future", False):
            yield Finding(f"{instance} is later than today", "check the year")
        elif today.year - first.year > OLDEST_YEARS:
            yield Finding(f"{instance} is more than {OLDEST_YEARS} years ago", "check the year")

    def _order(self, _validator: Any, pairs: list[list[str]], instance: Any, _schema: Schema) -> Found:
        """Times of one entry that can only follow each other; an entry that was struck out may be wrong."""
        clock = self._moments.clock
        if clock is None or not isinstance(instance, Map) or "struck" in instance:
            return
        for first, later in pairs:
            before, after = (_moment(clock, instance.get(name)) for name in (first, later))
            if before is not None and after is not None and after < before:
                said = f"{later} {clock.day_and_time(after)} is before {first} {clock.day_and_time(before)}"
                found = Finding(said, "check both times")
                found.relative_path.appendleft(later)
                yield found

    def _zone(self, _validator: Any, _rule: bool, instance: Any, _schema: Schema) -> Found:
        if not isinstance(instance, Text):
            return
        try:
            Clock(instance)
        except ClockError as error:
            yield closed(instance, error.what, error.cure)

    def _rows(self, validator: Any, _rule: bool, instance: Any, schema: Schema) -> Found:
        if not isinstance(instance, Map):
            yield Finding(
                f"{kind_of(instance)} stands where dates are due", "write a date, and times below it"
            )
            return
        for day, times in instance.items():
            key = instance.key(day)
            try:
                read_date(day)
            except ClockError as error:
                yield closed(day, error.what, error.cure, key)
                continue
            if isinstance(times, Map):
                for found in self._times(validator, day, times, schema["x-row"]):
                    found.relative_path.appendleft(str(day))
                    yield found
            elif not is_blank(times):
                what = f"{kind_of(times)} stands where times are due"
                yield Finding(what, "write 14:30: {...} below the date", key=key)

    def _times(self, validator: Any, day: str, times: Map, row: Schema) -> Found:
        for time, entry in times.items():
            refused = self._time(day, time)
            if refused is not None:
                refused.key = times.key(time)
                yield refused
            if is_blank(entry):
                continue
            due = {"type": "array", "items": row} if isinstance(entry, List) else row
            yield from validator.descend(entry, due, path=str(time))

    def _time(self, day: str, time: str) -> Finding | None:
        clock = self._moments.clock
        if clock is None:
            return None
        try:
            return self._refuse(clock, clock.read_time(day, time), {})
        except ClockError as error:
            return closed(time, error.what, error.cure)

    def _refuse(self, clock: Clock, moment: datetime, rule: Schema) -> Finding | None:
        if self._moments.now.year - moment.year > OLDEST_YEARS:
            return Finding(f"{clock.day(moment)} is more than {OLDEST_YEARS} years ago", "check the year")
        return self._moments.refuse(moment, rule)


def _moment(clock: Clock, node: Any) -> datetime | None:
    """The moment written at ``node``; None where that is a fault of its own."""
    try:
        return clock.read(node) if isinstance(node, Text) and not is_blank(node) else None
    except ClockError:
        return None
