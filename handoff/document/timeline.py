"""What the coming shift has to do, in the order of time, and what is awaited."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime

from handoff.assess import Assessment
from handoff.document.references import references
from handoff.document.schedule import UNTIMED, Shift, due_times, is_overdue
from handoff.document.sections import NOT_RECORDED
from handoff.plugin import Action, Urgency, entries, hours_text, words

NURSE_WRITTEN = "handover."
"""Actions with such keys repeat what the nurse wrote; here they are taken from the file itself."""


@dataclass(frozen=True, slots=True)
class Planned:
    """One task: its reference in the care plan (empty where it has none) and what to do."""

    ref: str
    text: str


@dataclass(frozen=True, slots=True)
class Moment:
    """What is due at one time."""

    when: str
    tasks: tuple[Planned, ...]


@dataclass(frozen=True, slots=True)
class Pending:
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
        return 3, action.first_due, f"{shift.time(action.first_due)}, after this shift"
    return 2, shift.end, UNTIMED[Urgency.ONGOING if action.urgency is Urgency.ONGOING else Urgency.SHIFT]


def _task(action: Action, shift: Shift, ref: str) -> Planned:
    notes = []
    if is_overdue(action, shift.start) and action.first_due:
        notes.append(f"overdue since {shift.time(action.first_due)}")
    if action.every:
        notes.append(f"every {hours_text(action.every.total_seconds() / 3600)}")
    return Planned(ref, action.text + (f" ({', '.join(notes)})" if notes else ""))
