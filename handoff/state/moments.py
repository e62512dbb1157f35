"""The moments that limit every time of a file: now, birth and burn."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from datetime import UTC, datetime, timedelta
from typing import Any

from handoff.state.clock import Clock, ClockError, read_date
from handoff.state.findings import Finding
from handoff.state.nodes import Map, Text


class Moments:
    """The moments that limit every time of the file: now, birth and burn."""

    def __init__(self, root: Map, now: datetime) -> None:
        self.now = now
        self.clock: Clock | None = None
        self.birth: datetime | None = None
        self.burn: datetime | None = None
        try:
            self.clock = Clock(str(root.get("clock", "")))
        except ClockError:
            return
        self.birth = self._limit(lambda: self._birth(root))
        self.burn = self._limit(lambda: self._burn(root))

    def _limit(self, read: Callable[[], datetime | None]) -> datetime | None:
        try:
            found = read()
        except (ClockError, ValueError, OverflowError):
            return None
        # One that lies ahead is a fault of its own, and would make one of every time in the file.
        return found if found is not None and found <= self.now else None

    def _birth(self, root: Map) -> datetime | None:
        patient = root.get("patient")
        born = patient.get("born") if isinstance(patient, Map) else None
        if not isinstance(born, Text):
            return None
        first = read_date(born).earliest()
        # A birth date has no time: half a day of grace keeps every zone of the clock right.
        return datetime(first.year, first.month, first.day, tzinfo=UTC) - timedelta(hours=14)

    def _burn(self, root: Map) -> datetime | None:
        injury = root.get("injury")
        at = injury.get("at") if isinstance(injury, Map) else None
        if isinstance(at, Map):
            at = at.get("earliest")
        return self.clock.read(at) if self.clock is not None and isinstance(at, Text) else None

    def refuse(self, moment: datetime, rule: Mapping[str, Any]) -> Finding | None:
        """Return what is wrong with ``moment`` under ``rule`` (``future``, ``not_before``), or None."""
        clock = self.clock
        if clock is None:
            return None
        said = clock.day_and_time(moment)
        if moment > self.now and not rule.get("future", False):
            now = clock.day_and_time(self.now)
            return Finding(
                f"{said} is later than {now}, the moment this is read for",
                "check the date and the time, or --at",
            )
        limit = rule.get("not_before", "burn")
        if limit != "none" and self.birth is not None and moment < self.birth:
            return Finding(f"{said} is before the birth date", "check the year, or the birth date")
        if limit == "burn" and self.burn is not None and moment < self.burn:
            burn = clock.day_and_time(self.burn)
            return Finding(f"{said} is before the burn ({burn})", "check the date and the time, or injury.at")
        return None
