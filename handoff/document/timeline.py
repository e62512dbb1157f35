"""What the coming shift has to do, in the order of time, and what is awaited."""

from __future__ import annotations

import re
from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.brief import shortened
from handoff.document.references import references
from handoff.document.schedule import UNTIMED, Shift, due_times, is_overdue
from handoff.document.sections import NOT_RECORDED
from handoff.plugin import Action, Urgency, entries, hours_text, words

AFTERWARDS, LATER = ", after this shift", "later"

TASK_LETTERS = 38
"""How many letters a task may have in the shift in few words."""

NURSE_WRITTEN = "handover."
"""Actions with such keys repeat what the nurse wrote; here they are taken from the file itself."""


class Planned(Struct, frozen=True):
    """One task: its reference in the care plan (empty where it has none), what to do, and its rhythm.

    ``at`` is its own time where that is neither the time of its line nor that of the task before it.
    """

    ref: str
    text: str
    note: str = ""
    at: str = ""
    is_urgent: bool = False


class Moment(Struct, frozen=True):
    """What is due at one time."""

    when: str
    tasks: tuple[Planned, ...]


class Pending(Struct, frozen=True):
    """A result or decision that is awaited: what, by when, who telephones whom."""

    what: str
    due: str
    phone: str


def timeline(assessment: Assessment, shift: Shift) -> tuple[Moment, ...]:
    """Return the tasks of the shift by time: what is due now, then by the clock, then what has no time."""
    refs = references(assessment.actions)
    placed: dict[tuple[int, datetime, str], list[Planned]] = {}
    for action in assessment.actions:
        if not action.key.startswith(NURSE_WRITTEN):
            placed.setdefault(_place(action, shift), []).append(_task(action, shift, refs[action.key]))
    by_text = {action.text: refs[action.key] for action in assessment.actions}
    for entry in entries(assessment.state.handover.get("to_do")):
        due, text = assessment.state.when(entry.get("due")), words(entry.get("what"))
        place = (1, due, shift.time(due)) if due else (2, shift.end, UNTIMED[Urgency.SHIFT])
        placed.setdefault(place, []).append(Planned(by_text.get(text, ""), text))
    return tuple(Moment(place[2], tuple(placed[place])) for place in sorted(placed))


def in_brief(moments: Sequence[Moment]) -> tuple[Moment, ...]:
    """Return the same shift in fewer lines: one for each hour, each task in few words.

    Of an urgent task, whose text stands on page one, only the reference is left.
    """
    lines: dict[str, Moment] = {}
    for moment in moments:
        hour = _hour(moment, lines)
        own = "" if hour == moment.when else moment.when.removesuffix(AFTERWARDS)
        tasks = tuple(_in_few_words(task, "" if number else own) for number, task in enumerate(moment.tasks))
        before = lines[hour].tasks if hour in lines else ()
        lines[hour] = Moment(hour, before + tasks)
    return tuple(lines.values())


def _hour(moment: Moment, lines: dict[str, Moment]) -> str:
    """The line on which a moment stands: that of its hour, of what has no time, or of what comes after the shift."""
    if moment.when.endswith(AFTERWARDS):
        return LATER
    if moment.when == UNTIMED[Urgency.ONGOING]:
        return UNTIMED[Urgency.SHIFT]
    clock = re.fullmatch(r"(\d\d):\d\d(.*)", moment.when)
    same = (when for when in lines if clock and re.fullmatch(rf"{clock[1]}:\d\d{re.escape(clock[2])}", when))
    return next(same, moment.when)


def _in_few_words(task: Planned, at: str) -> Planned:
    if task.is_urgent:
        return replace(task, text="", note="")
    return replace(task, at=at, text=shortened(task.text, TASK_LETTERS))


def pending(assessment: Assessment) -> tuple[Pending, ...]:
    """Return what is awaited, as the nurse wrote it."""
    state = assessment.state
    found = []
    for entry in entries(state.handover.get("pending")):
        due = state.when(entry.get("due"))
        found.append(
            Pending(
                what=words(entry.get("what")),
                due=state.clock.time(due, assessment.now) if due else "time " + NOT_RECORDED,
                phone=words(entry.get("phone_to")) or NOT_RECORDED,
            )
        )
    return tuple(found)


def _place(action: Action, shift: Shift) -> tuple[int, datetime, str]:
    if action.urgency is Urgency.NOW or is_overdue(action, shift.start):
        return 0, shift.start, "now"
    times = due_times(action, shift)
    if times:
        return 1, times[0], shift.time(times[0])
    if action.first_due:
        return 3, action.first_due, f"{shift.time(action.first_due)}{AFTERWARDS}"
    return 2, shift.end, UNTIMED[Urgency.ONGOING if action.urgency is Urgency.ONGOING else Urgency.SHIFT]


def _task(action: Action, shift: Shift, ref: str) -> Planned:
    notes = []
    if is_overdue(action, shift.start) and action.first_due:
        notes.append(f"overdue since {shift.time(action.first_due)}")
    if action.every:
        notes.append(f"every {hours_text(action.every.total_seconds() / 3600)}")
    return Planned(ref, action.text, ", ".join(notes), is_urgent=action.urgency is Urgency.NOW)
