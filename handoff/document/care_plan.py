"""The care plan as finished strings: problem areas, tasks with their reasons, boxes of the shift."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.appendix import Citations, Cited
from handoff.document.identity import Frame, Identity, frame, identity
from handoff.document.references import BY_HAND, by_area, references
from handoff.document.schedule import Shift, overdue_slot, slots, when
from handoff.document.sections import Band, Mark, bands, sentence
from handoff.plugin import Action, Urgency

BLANK_ROWS, BLANK_BOXES = 5, 6
"""Rows for tasks that are added by hand, and boxes of each."""


class Box(Struct, frozen=True):
    """One box to tick with room for time and initials, and the tags that find both again."""

    label: str
    tag: Mark
    title: Mark
    by_tag: Mark
    by_title: Mark


class Task(Struct, frozen=True):
    """One row of the plan; ``tag`` marks its printed reference."""

    ref: str
    tag: Mark
    urgent: str
    text: str
    why: str
    when: str
    note: str
    late: tuple[Box, ...]
    boxes: tuple[Box, ...]


class Area(Struct, frozen=True):
    """One problem area."""

    title: str
    tasks: tuple[Task, ...]


class BlankBox(Struct, frozen=True):
    """One box of a row that is added by hand: room for the time due beside it."""

    due_tag: Mark
    due_title: Mark
    tag: Mark
    title: Mark
    by_tag: Mark
    by_title: Mark


class BlankRow(Struct, frozen=True):
    """One row for a task that is added by hand."""

    ref: str
    tag: Mark
    text_tag: Mark
    text_title: Mark
    boxes: tuple[BlankBox, ...]


class CarePlan(Struct, frozen=True):
    """Everything that the care plan prints."""

    frame: Frame
    bands: tuple[Band, ...]
    identity: Identity
    start: str
    end: str
    now: str
    areas: tuple[Area, ...]
    by_hand: tuple[BlankRow, ...]
    sources: tuple[Cited, ...]


def care_plan(assessment: Assessment) -> CarePlan:
    """Return the care plan of the coming shift as finished strings."""
    clock = assessment.state.clock
    shift = Shift(assessment.now, assessment.now + assessment.policy.shift_length, clock)
    refs = references(assessment.actions)
    citations = Citations()
    areas = tuple(
        Area(sentence(area), tuple(_task(action, refs[action.key], shift, citations) for action in group))
        for area, group in by_area(assessment.actions)
    )
    urgent = [task for area in areas for task in area.tasks if task.urgent]
    return CarePlan(
        frame=frame("Burn care plan", assessment),
        bands=bands(assessment),
        identity=identity(assessment),
        start=clock.day_and_time(shift.start),
        end=clock.day_and_time(shift.end),
        now=", ".join(task.ref for task in urgent),
        areas=areas,
        by_hand=tuple(_blank_row(f"{BY_HAND}{number}") for number in range(1, BLANK_ROWS + 1)),
        sources=citations.cited(),
    )


def _task(action: Action, ref: str, shift: Shift, citations: Citations) -> Task:
    marks = citations.cite(action.sources)
    return Task(
        ref=ref,
        tag=Mark(f"row:{ref}"),
        urgent="NOW" if action.urgency is Urgency.NOW else "",
        text=action.text,
        why=f"{action.why} {marks}".strip(),
        when=when(action, shift),
        note=" ".join(action.cautions),
        late=tuple(_box(ref, slot.label, slot.stamp) for slot in overdue_slot(action, shift)),
        boxes=tuple(_box(ref, slot.label, slot.stamp) for slot in slots(action, shift)),
    )


def _box(ref: str, label: str, stamp: str) -> Box:
    return Box(
        label=label,
        tag=Mark(f"row:{ref}:{stamp}"),
        title=Mark(f"{ref} {label} done"),
        by_tag=Mark(f"by:{ref}:{stamp}"),
        by_title=Mark(f"{ref} {label} time and initials"),
    )


def _blank_row(ref: str) -> BlankRow:
    return BlankRow(
        ref=ref,
        tag=Mark(f"row:{ref}"),
        text_tag=Mark(f"text:{ref}"),
        text_title=Mark(f"{ref} what to do, and why"),
        boxes=tuple(_blank_box(ref, number) for number in range(1, BLANK_BOXES + 1)),
    )


def _blank_box(ref: str, number: int) -> BlankBox:
    name = f"{ref} box {number}"
    return BlankBox(
        due_tag=Mark(f"due:{ref}:{number}"),
        due_title=Mark(f"{name} when due"),
        tag=Mark(f"row:{ref}:{number}"),
        title=Mark(f"{name} done"),
        by_tag=Mark(f"by:{ref}:{number}"),
        by_title=Mark(f"{name} time and initials"),
    )
