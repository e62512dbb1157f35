"""When an action is due in the shift, and the boxes to tick for it."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Action, Clock, Urgency, hours_text, plural

MOST_BOXES = 48
"""A shift of twelve hours by the quarter of an hour. What is due more often is ticked by the hour."""

HOUR = timedelta(hours=1)

UNTIMED = {
    Urgency.NOW: "now",
    Urgency.TIMED: "no time set",
    Urgency.SHIFT: "this shift",
    Urgency.ONGOING: "through the shift",
}


class Shift(Struct, frozen=True):
    """The window of a document: from its moment to the end of the coming shift."""

    start: datetime
    end: datetime
    clock: Clock

    def time(self, moment: datetime) -> str:
        """Return a time of the shift, with its date where it is not of the first day."""
        return self.clock.time(moment, self.start)


class Slot(Struct, frozen=True):
    """One box: how it is labelled, and its part of the tag (``1930``)."""

    label: str
    stamp: str


def is_overdue(action: Action, now: datetime) -> bool:
    """Return whether the action was due before ``now``."""
    return action.first_due is not None and action.first_due < now


def due_times(action: Action, shift: Shift) -> list[datetime]:
    """Return the moments at which the action is due in the shift, an overdue one not among them."""
    first = action.first_due or (shift.start if action.every else None)
    if first is None:
        return []
    if action.every is None:
        return [first] if shift.start <= first < shift.end else []
    moment = first
    if first < shift.start:
        moment = first + ((shift.start - first) // action.every + 1) * action.every
    times = []
    while moment < shift.end:
        times.append(moment)
        moment += action.every
    return times


def overdue_slot(action: Action, shift: Shift) -> tuple[Slot, ...]:
    """Return the box of an action that should have been done before the shift; none for the others."""
    if action.first_due is None or not is_overdue(action, shift.start):
        return ()
    return (Slot(f"{shift.time(action.first_due)} overdue", f"{_stamp(action.first_due, shift)}-overdue"),)


def slots(action: Action, shift: Shift) -> tuple[Slot, ...]:
    """Return the boxes of the action in the shift; none when it is due before or after it."""
    times = due_times(action, shift)
    made: list[Slot] = []
    if not times and not action.first_due:
        return (Slot(UNTIMED[action.urgency], "once"),)
    grouped = _blocks(times, shift) if len(times) > MOST_BOXES else [(at, "") for at in times]
    for at, note in grouped:
        label = shift.clock.time(at)
        made.append(Slot(f"{label} {note}".strip(), _stamp(at, shift)))
    return _told_apart(made)


def when(action: Action, shift: Shift) -> str:
    """Return the rhythm of the action in words (``every 1 h, next 20:00``); empty where its box says it all."""
    if not action.every and (action.first_due is None or action.first_due < shift.end):
        return ""
    said = []
    if action.every:
        said.append(f"every {hours_text(action.every / HOUR)}")
    if is_overdue(action, shift.start) and action.first_due:
        said.append(f"overdue since {shift.time(action.first_due)}")
    elif action.first_due and action.first_due >= shift.end:
        said.append(f"due {shift.time(action.first_due)}, after this shift")
    elif times := due_times(action, shift):
        said.append(f"{'next' if action.every else 'due'} {shift.time(times[0])}")
    return ", ".join(said)


def _stamp(moment: datetime, shift: Shift) -> str:
    return f"{shift.clock.local(moment):%H%M}"


def _blocks(times: list[datetime], shift: Shift) -> list[tuple[datetime, str]]:
    for hours in range(1, max(2, len(times) + 1)):
        blocks: dict[datetime, int] = {}
        for moment in times:
            start = _hour(times[0], shift)
            start += (_hour(moment, shift) - start) // (hours * HOUR) * hours * HOUR
            blocks[start] = blocks.get(start, 0) + 1
        if len(blocks) <= MOST_BOXES:
            break
    made = []
    for start, count in blocks.items():
        until = f"to {shift.clock.time(start + hours * HOUR)} " if hours > 1 else ""
        made.append((start, f"{until}({plural(count, 'check')})"))
    return made


def _hour(moment: datetime, shift: Shift) -> datetime:
    local = shift.clock.local(moment)
    return moment - timedelta(minutes=local.minute, seconds=local.second, microseconds=local.microsecond)


def _told_apart(made: list[Slot]) -> tuple[Slot, ...]:
    seen: dict[str, int] = {}
    apart = []
    for slot in made:
        count = seen[slot.stamp] = seen.get(slot.stamp, 0) + 1
        apart.append(slot if count == 1 else Slot(f"{slot.label} (time {count})", f"{slot.stamp}-{count}"))
    return tuple(apart)
