"""Local times of one place, read strictly and kept as instants.

An instant is an aware ``datetime`` in UTC, so that elapsed time is right across a clock
change. A local time that the clocks skipped or showed twice is refused with both ways to
write it.
"""

from __future__ import annotations

import re
from calendar import monthrange
from datetime import UTC, date, datetime, timedelta
from functools import lru_cache
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

from msgspec import Struct

MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")
DAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")

_INSTANT = re.compile(
    r"([0-9]{4})-([0-9]{2})-([0-9]{2})[T ]([0-9]{2}):([0-9]{2})(?: ?(Z|[+-][0-9]{2}:[0-9]{2}))?"
)
_TIME = re.compile(r"([0-9]{2}):([0-9]{2})(?: ?(Z|[+-][0-9]{2}:[0-9]{2}))?")
_DATE = re.compile(r"([0-9]{4})-([0-9]{2})-([0-9]{2})")
_PART = re.compile(r"([0-9]{4})(?:-([0-9]{2}))?")


class ClockError(ValueError):
    """A text is not a time that existed once; says what is wrong and what to do."""

    def __init__(self, what: str, cure: str) -> None:
        super().__init__(what)
        self.what = what
        self.cure = cure


class PartialDate(Struct, frozen=True):
    """A date of which the day, or day and month, may be unknown."""

    year: int
    month: int | None
    day: int | None

    def earliest(self) -> date:
        """Return the first day that it can mean."""
        return date(self.year, self.month or 1, self.day or 1)

    def latest(self) -> date:
        """Return the last day that it can mean."""
        if self.day is not None:
            return date(self.year, self.month or 12, self.day)
        month = self.month or 12
        return date(self.year, month, monthrange(self.year, month)[1])

    def shown(self) -> str:
        """Return it with the month spelled: ``3 Jun 2012``, ``Jun 2012`` or ``2012``."""
        words = [str(self.day)] if self.day else []
        words += [MONTHS[self.month - 1]] if self.month else []
        return " ".join([*words, str(self.year)])


def read_date(text: str, partial: bool = False) -> PartialDate:
    """Return ``text`` (``2012-06-03``; ``2012-06`` or ``2012`` where ``partial``) as a date.

    Raises:
        ClockError: It is no such date.
    """
    whole = _DATE.fullmatch(text)
    part = None if whole else _PART.fullmatch(text)
    try:
        if whole:
            found = date(*(int(group) for group in whole.groups()))
            return PartialDate(found.year, found.month, found.day)
        if part and partial:
            found = date(int(part[1]), int(part[2] or 1), 1)
            return PartialDate(found.year, found.month if part[2] else None, None)
    except ValueError:
        raise ClockError(
            f"'{text}' is not a date of the calendar", "write year-month-day: 2026-03-14"
        ) from None
    cure = "write year-month-day: 2026-03-14"
    raise ClockError(f"'{text}' is not a date", cure + (", or 2026-03, or 2026" if partial else ""))


def _offset(written: str) -> timedelta:
    if written == "Z":
        return timedelta(0)
    sign = -1 if written[0] == "-" else 1
    return sign * timedelta(hours=int(written[1:3]), minutes=int(written[4:6]))


def _offset_text(delta: timedelta) -> str:
    minutes = round(delta.total_seconds() / 60)
    return f"{'-' if minutes < 0 else '+'}{abs(minutes) // 60:02d}:{abs(minutes) % 60:02d}"


def _written(local: datetime, between: str = " ") -> str:
    # strftime leaves the zeros of an early year out on some systems
    return local.replace(tzinfo=None).isoformat(between, "minutes")


class Clock:
    """The clock of one time zone."""

    def __init__(self, zone: str) -> None:
        try:
            self._zone = ZoneInfo(zone)
        except (ZoneInfoNotFoundError, ValueError, OSError):
            raise ClockError(
                f"unknown time zone '{zone}'", "write a zone as Area/City: Europe/Dublin"
            ) from None
        self.zone = zone
        self._read = lru_cache(maxsize=4096)(self._read_local)

    def __reduce__(self) -> tuple[object, ...]:
        return type(self), (self.zone,)

    def read(self, text: str) -> datetime:
        """Return the instant of ``text``: ``2026-03-14 14:30``, with an offset if it must be told apart.

        Raises:
            ClockError: Not a time, or one that did not exist or happened twice.
        """
        match = _INSTANT.fullmatch(text)
        if match is None:
            raise ClockError(
                f"'{text}' is not a date and time", "write 2026-03-14 14:30, on the 24-hour clock"
            )
        year, month, day, hour, minute, offset = match.groups()
        try:
            local = datetime(int(year), int(month), int(day), int(hour), int(minute))
        except ValueError:
            raise ClockError(
                f"'{text}' is not a time of the calendar", "write 2026-03-14 14:30, on the 24-hour clock"
            ) from None
        return self._read(local, offset)

    def read_time(self, day: str, time: str) -> datetime:
        """Return the instant of a time key ``14:30`` under a date key ``2026-03-14``.

        Raises:
            ClockError: As :meth:`read`.
        """
        if _TIME.fullmatch(time) is None:
            raise ClockError(f"'{time}' is not a time", "write hours and minutes with two digits each: 14:30")
        return self.read(f"{day} {time}")

    def _read_local(self, local: datetime, offset: str | None) -> datetime:
        first = local.replace(tzinfo=self._zone, fold=0)
        second = local.replace(tzinfo=self._zone, fold=1)
        early, late = first.utcoffset() or timedelta(0), second.utcoffset() or timedelta(0)
        try:
            if offset is not None:
                return self._with_offset(local, offset, early, late)
            instant = first.astimezone(UTC)
        except OverflowError:
            raise ClockError(f"'{_written(local)}' is outside the calendar", "check the year") from None
        if early == late:
            return instant
        said = _written(local)
        if instant.astimezone(self._zone).replace(tzinfo=None, fold=0) != local:
            raise ClockError(
                f"{said} did not exist in {self.zone}: the clocks went forward over it",
                f"write {self._wall(second)} or {self._wall(first)}, whichever the clock showed",
            )
        raise ClockError(
            f"{said} happened twice in {self.zone}: the clocks went back",
            f"write {said}{_offset_text(early)} for the first or {said}{_offset_text(late)} for the second",
        )

    def _with_offset(self, local: datetime, offset: str, early: timedelta, late: timedelta) -> datetime:
        delta = _offset(offset)
        instant = (local - delta).replace(tzinfo=UTC)
        if instant.astimezone(self._zone).utcoffset() != delta:
            raise ClockError(
                f"offset {offset} is not that of {self.zone} at this time",
                f"leave it out, or write {_offset_text(early)}"
                + (f" or {_offset_text(late)}" if early != late else ""),
            )
        return instant

    def _wall(self, moment: datetime) -> str:
        return _written(moment.astimezone(UTC).astimezone(self._zone))

    def local(self, instant: datetime) -> datetime:
        """Return ``instant`` as local time of this zone."""
        return instant.astimezone(self._zone)

    def day_and_time(self, instant: datetime) -> str:
        """Return ``instant`` as ``Sat 14 Mar 2026 14:30``: day and month cannot be swapped."""
        local = self.local(instant)
        return f"{DAYS[local.weekday()]} {self.day(instant)} {local:%H:%M}"

    def day(self, instant: datetime) -> str:
        """Return the date of ``instant`` as ``14 Mar 2026``."""
        local = self.local(instant)
        return f"{local.day} {MONTHS[local.month - 1]} {local.year}"

    def time(self, instant: datetime, near: datetime | None = None) -> str:
        """Return ``14:30``; with ``near`` on another day ``14:30 on 13 Mar``, never a bare time."""
        local = self.local(instant)
        said = f"{local:%H:%M}"
        if near is not None and self.local(near).date() != local.date():
            said += f" on {local.day} {MONTHS[local.month - 1]}"
            if self.local(near).year != local.year:
                said += f" {local.year}"
        return said

    def iso(self, instant: datetime) -> str:
        """Return ISO 8601 with the offset: ``2026-03-14T14:30+00:00``."""
        local = self.local(instant)
        return f"{_written(local, 'T')}{_offset_text(local.utcoffset() or timedelta(0))}"
