"""Times of a care plan: its boxes say only the hour, and so do those who write beside them."""

from __future__ import annotations

import re
from datetime import datetime, timedelta

from handoff.state.clock import MONTHS, Clock, ClockError

_MADE_AT = re.compile(r"[Mm]ade at [A-Z][a-z]{2} (\d{1,2}) ([A-Z][a-z]{2}) (\d{4}) (\d{2}:\d{2})")
_BESIDE = re.compile(
    r"(\d{1,2})[:.](\d{2})(?:\s*h)?(?:[\s,;/]+(.*))?|(\d{2})(\d{2})(?:\s*h)?(?:[\s,;/]+(.*))?"
)
_NUMBER = re.compile(r"\d")


def printed_moment(text: str, clock: Clock) -> datetime | None:
    """Return the moment that a care plan prints of its making, or None."""
    match = _MADE_AT.search(text)
    if match is None or match[2] not in MONTHS:
        return None
    try:
        return clock.read(f"{match[3]}-{MONTHS.index(match[2]) + 1:02}-{int(match[1]):02} {match[4]}")
    except ClockError:
        return None


def due_of(stamp: str, made_at: datetime, clock: Clock) -> datetime | None:
    """Return when a box was due (``2000`` or ``1815-overdue``); None where its hour names no one moment."""
    hour, _, kind = stamp.partition("-")
    if kind not in ("", "overdue") or len(hour) != len("2000") or not hour.isdigit():
        return None
    moments = _on_days(f"{hour[:2]}:{hour[2:]}", made_at, clock)
    if kind:
        return next((moment for moment in reversed(moments) if moment < made_at), None)
    return next((moment for moment in moments if moment >= made_at), None)


def time_and_initials(beside: str) -> tuple[str, str, bool]:
    """Return time (``20:05``) and initials of what is written beside a box, and whether it was clear."""
    text = " ".join(beside.split())
    match = _BESIDE.fullmatch(text)
    if match:
        hour, minute, initials = match[1] or match[4], match[2] or match[5], match[3] or match[6] or ""
        is_time = int(hour) < 24 and int(minute) < 60
        return f"{int(hour):02}:{minute}" if is_time else "", initials.strip(" ,;/"), is_time
    if _NUMBER.search(text):
        swapped = re.fullmatch(r"([^\d]+?)[\s,;/]+(\d{1,2}[:.]?\d{2})", text)
        return time_and_initials(f"{swapped[2]} {swapped[1]}") if swapped else ("", text, False)
    return "", text, True


def done_of(
    time: str, due: datetime | None, made_at: datetime, now: datetime, clock: Clock
) -> datetime | None:
    """Return when something was done by its hour alone; None where no one moment can be meant.

    With a time due it is the nearest moment to it that has come; without one, the first since the plan.
    """
    moments = [moment for moment in _on_days(time, due or made_at, clock) if moment <= now]
    if due is not None:
        near = [moment for moment in moments if abs(moment - due) < timedelta(hours=12)]
        return min(near, key=lambda moment: abs(moment - due)) if near else None
    since = [moment for moment in moments if moment >= made_at]
    return since[0] if since else None


def _on_days(time: str, near: datetime, clock: Clock) -> list[datetime]:
    """The moments at which the clock showed ``time`` from the day before ``near`` to the day after."""
    found = []
    for days in (-1, 0, 1):
        day = clock.local(near).date() + timedelta(days=days)
        try:
            found.append(clock.read_time(f"{day:%Y-%m-%d}", time))
        except ClockError:
            continue  # a time that did not exist that day, or came twice, names no one moment
    return found
