"""What is due: overdue, now, within the hour, in this shift, for any number of patients."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime
from enum import IntEnum

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.printable import visible
from handoff.document.references import references
from handoff.document.schedule import HOUR, UNTIMED, Shift, due_times, is_overdue
from handoff.plugin import Action, PatientState, Urgency, hours_text
from handoff.ticks import ticks


class Group(IntEnum):
    """How soon something is due; printed in this order."""

    OVERDUE = 0
    NOW = 1
    HOUR = 2
    SHIFT = 3

    @property
    def title(self) -> str:
        """The heading of the group."""
        return ("overdue", "now", "due within the hour", "due this shift")[self]


class Due(Struct, frozen=True):
    """One line: when, who, its reference in the care plan, and what to do."""

    group: Group
    at: datetime
    time: str
    patient: str
    ref: str
    text: str

    def said(self) -> str:
        """Return the line as it is printed."""
        return visible(f"{self.time}  {self.patient}  {self.ref}  {self.text}")


class DueList(Struct, frozen=True):
    """What is due for one patient; ``ongoing`` and ``later`` count what has no line here."""

    moment: str
    lines: tuple[Due, ...]
    ongoing: int
    later: int


def due_list(assessment: Assessment) -> DueList:
    """Return what is due for one patient from its moment to the end of the shift."""
    state = assessment.state
    shift = Shift(assessment.now, assessment.now + assessment.policy.shift_length, state.clock)
    refs, known = references(assessment.actions), ticks(state, assessment.now)
    lines, ongoing, later = [], 0, 0
    for action in assessment.actions:
        placed = _placed(action, shift)
        if placed:
            group, at, time = placed
            tick = f"; {known[action.key].said(state, assessment.now)}" if action.key in known else ""
            text = action.text + _rhythm(action) + tick
            lines.append(Due(group, at, time, short_name(state), refs[action.key], text))
        elif action.first_due is not None:
            later += 1
        else:
            ongoing += 1
    moment = f"{state.clock.day_and_time(shift.start)} ({state.clock.zone})"
    return DueList(moment, in_order(lines), ongoing, later)


def in_order(lines: Iterable[Due]) -> tuple[Due, ...]:
    """Return lines of any number of patients by group, then time, then patient and reference."""
    return tuple(sorted(lines, key=lambda line: (line.group, line.at, line.patient, line.ref)))


def overdue_count(assessment: Assessment) -> int:
    """Return how many actions of the care plan are overdue."""
    return sum(is_overdue(action, assessment.now) for action in assessment.actions)


def short_name(state: PatientState) -> str:
    """Return name and first identifier, short enough for a line among others."""
    number = next((f"{kind.replace('_', ' ')} {number}" for kind, number in state.identifiers), "")
    return f"{state.name or 'name not recorded'}, {number or 'no identifier recorded'}"


def _placed(action: Action, shift: Shift) -> tuple[Group, datetime, str] | None:
    if action.first_due is not None and is_overdue(action, shift.start):
        return Group.OVERDUE, action.first_due, f"since {shift.time(action.first_due)}"
    if action.urgency is Urgency.NOW:
        return Group.NOW, shift.start, "now"
    times = due_times(action, shift)
    if times:
        group = Group.HOUR if times[0] <= shift.start + HOUR else Group.SHIFT
        return group, times[0], shift.time(times[0])
    if action.first_due is None and action.urgency is not Urgency.ONGOING:
        return Group.SHIFT, shift.end, UNTIMED[action.urgency]
    return None


def _rhythm(action: Action) -> str:
    return f" (every {hours_text(action.every / HOUR)})" if action.every else ""
