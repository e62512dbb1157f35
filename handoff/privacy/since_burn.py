"""A clock that tells hours since the burn in place of dates, and moves every moment so that none is left."""

from __future__ import annotations

from datetime import UTC, datetime, timedelta

from handoff.state.clock import Clock, PartialDate

ZERO = datetime(2001, 1, 1, tzinfo=UTC)
"""Where the burn is moved to: a day that says nothing about the patient."""


class SinceBurn(Clock):
    """Prints an instant as hours and minutes since the burn: ``+06:10``; before the burn ``-00:30``."""

    def __init__(self) -> None:
        super().__init__("UTC")
        self.zone = "hours since the burn"

    def __reduce__(self) -> tuple[object, ...]:
        return SinceBurn, ()

    def day_and_time(self, instant: datetime) -> str:
        """Return ``+06:10 h since burn``."""
        return f"{self.time(instant)} h since burn"

    def day(self, instant: datetime) -> str:
        """Return ``day 1 after the burn``: the first 24 hours are day 1."""
        days = (instant - ZERO) // timedelta(days=1)
        return f"day {days + 1} after the burn" if days >= 0 else f"day {-days} before the burn"

    def time(self, instant: datetime, near: datetime | None = None) -> str:  # noqa: ARG002 (of any clock)
        """Return ``+06:10``; another day needs no mark of its own."""
        minutes = round((instant - ZERO).total_seconds() / 60)
        hours, rest = divmod(abs(minutes), 60)
        return f"{'-' if minutes < 0 else '+'}{hours:02d}:{rest:02d}"

    def iso(self, instant: datetime) -> str:
        """Return the same as :meth:`time`: there is no calendar to write it in."""
        return self.time(instant)


class Mover:
    """Moves moments and dates by one and the same length of time, so that the burn falls on ``ZERO``."""

    def __init__(self, burn: datetime) -> None:
        self._by = ZERO - burn
        self.moved = 0

    def moment(self, instant: datetime) -> datetime:
        """Return ``instant`` on the clock of the burn."""
        self.moved += 1
        return instant + self._by

    def text(self, instant: datetime) -> str:
        """Return ``instant`` on the clock of the burn as a state file writes it."""
        return f"{self.moment(instant):%Y-%m-%d %H:%M}"

    def date(self, written: PartialDate) -> str:
        """Return a date on the calendar of the burn, whole, so that it can be told from other numbers."""
        day = written.earliest()
        moved = datetime(day.year, day.month, day.day, tzinfo=UTC) + self._by
        self.moved += 1
        return f"{moved:%Y-%m-%d}"
