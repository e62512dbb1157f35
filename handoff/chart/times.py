"""The moment that a nurse means by ``15:00`` or ``2026-03-14 15:00``, and how the file writes it."""

from __future__ import annotations

import re
from collections.abc import Container
from datetime import datetime, timedelta

from handoff.chart.asking import Ask, Question, Refused
from handoff.state.clock import Clock, ClockError

_CLOCK_TIME = re.compile(r"\d{1,2}:\d{2}(?: ?(?:Z|[+-]\d{2}:\d{2}))?")


def spelled(moment: datetime, clock: Clock) -> str:
    """Return ``2026-03-14 15:00``, with its offset only where the local time happened twice."""
    local = f"{clock.local(moment):%Y-%m-%d %H:%M}"
    try:
        clock.read(local)
    except ClockError:
        return f"{local}{clock.iso(moment)[-6:]}"
    return local


def meant(written: str, now: datetime, clock: Clock, yes: Container[str]) -> datetime:
    """Return the moment meant by ``written``; a time alone means today, and ``now`` stands for nothing.

    Args:
        written: ``15:00``, ``2026-03-14 15:00`` or nothing.
        now: The moment of charting.
        clock: The clock of the file.
        yes: The questions answered with yes.

    Raises:
        Ask: The time today has not come yet: is it yesterday's?
        Refused: It is not a time, or it lies ahead.
    """
    text = " ".join(written.split())
    if not text:
        return now
    try:
        if not _CLOCK_TIME.fullmatch(text):
            moment = clock.read(text)
        else:
            today = clock.local(now)
            moment = clock.read_time(f"{today:%Y-%m-%d}", text)
            if moment > now:
                return _yesterday(text, moment, now, clock, yes)
    except ClockError as error:
        raise Refused(f"{error.what}; {error.cure}") from None
    if moment > now:
        raise Refused(
            f"{clock.day_and_time(moment)} has not come yet (it is {clock.day_and_time(now)}); "
            "what lies ahead cannot be charted"
        )
    return moment


def _yesterday(text: str, ahead: datetime, now: datetime, clock: Clock, yes: Container[str]) -> datetime:
    day_before = clock.local(now).date() - timedelta(days=1)
    moment = clock.read_time(f"{day_before:%Y-%m-%d}", text)
    said = clock.day_and_time(moment)
    question = Question(
        f"yesterday {text}",
        f"{text} today has not come yet (it is {clock.day_and_time(now)}). Is it {said}, yesterday?",
        f"{text} today has not come yet (it is {clock.day_and_time(now)}); "
        f"write '{spelled(moment, clock)}' for yesterday; today's, '{spelled(ahead, clock)}', "
        "can be charted once it has come",
    )
    if question.key not in yes:
        raise Ask([question])
    return moment
