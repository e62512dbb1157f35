"""The narrative note of a shift: what was charted in it, by system, timed, and nothing else."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import datetime

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.identity import frame
from handoff.document.note import Note, NoteLine, NoteSystem
from handoff.document.printable import visible
from handoff.document.sections import sentence
from handoff.plugin import List, Map, PatientState
from handoff.shift.charted import ABOUT_THE_ENTRY, ROWS, Entry, entries_of
from handoff.shift.places import ASKED_FOR, ORDER, UNDATED, lead_of, system_of
from handoff.shift.say import Speaker

RULE = "Only what was charted in this time; what is not here was not charted."
SIGNATURE = "Name, role, signature, date and time:"

WITHOUT_TIME = ("fluid", "pain", "airway_watch", "wounds", "lines")
"""Blocks whose lists are dated; an entry without a time there may be of this shift."""


class _Found(Struct, frozen=True):
    system: str
    at: datetime
    line: int
    said: NoteLine


def shift_note(assessment: Assessment, start: datetime) -> Note:
    """Return the note from ``start`` to the moment of the assessment, both included.

    An entry stands there when it happened, was written, corrected or struck out in that time.
    """
    state, end = assessment.state, assessment.now
    speaker = Speaker(state.clock, end, assessment.policy.late_entry_after)
    titles = {plugin.name: plugin.title for plugin in assessment.plugins}
    found = [one for entry in entries_of(state) for one in _said(entry, start, end, speaker, titles)]
    found += list(_undated(state, end, speaker))
    said = {one.system for one in found}
    silent = [system.value for system in ASKED_FOR if system not in said]
    clock = state.clock
    return Note(
        frame=frame("Nursing note", assessment),
        window=f"From {clock.day_and_time(start)} to {clock.day_and_time(end)} ({clock.zone})",
        rule=RULE,
        systems=tuple(_systems(found)),
        silent="; ".join(silent),
    )


def note_text(note: Note, who: str) -> str:
    """Return the note as plain text, ready to be pasted; ``who`` is the line that names the patient."""
    lines = ["NURSING NOTE", who, note.window, note.rule]
    for system in note.systems:
        lines += ["", system.title.upper(), *(f"{line.time}  {line.text}".strip() for line in system.lines)]
    if not note.systems:
        lines += ["", "Nothing was charted in this time."]
    lines += ["", f"No entry in this time: {note.silent}."] if note.silent else []
    lines += ["", f"Made at {note.frame.made_at} from state file version {note.frame.version}.", SIGNATURE]
    return visible("\n".join(lines)) + "\n"


def _said(
    entry: Entry, start: datetime, end: datetime, speaker: Speaker, titles: Mapping[str, str]
) -> Iterator[_Found]:
    at = entry.first_within(start, end)
    if at is None and not entry.was_touched(start, end):
        return
    at = at or entry.at
    if entry.path[0] == ROWS:
        yield from _row(entry, at, speaker, titles)
        return
    path = ".".join(step for step in entry.path if isinstance(step, str))
    text = speaker.entry(entry.node, entry.node, at, lead_of(path))
    yield _found(system_of(path, titles), at, entry, text, speaker)


def _row(entry: Entry, at: datetime, speaker: Speaker, titles: Mapping[str, str]) -> Iterator[_Found]:
    """Yield one line for each system of an observation row; what is said about the row stands once."""
    keys: dict[str, list[str]] = {}
    for key in entry.node:
        if key not in ABOUT_THE_ENTRY:
            keys.setdefault(system_of(f"{ROWS}.{key}", titles), []).append(key)
    about = [name for name in ABOUT_THE_ENTRY if name in entry.node]
    if len(keys) != 1 and set(about) & {"note", "corrects", "confirmed"}:
        yield _found(system_of(ROWS, titles), at, entry, speaker.entry(entry.node, ()), speaker)
    for system, of_system in keys.items():
        only = entry.node if len(keys) == 1 else _without_remarks(entry.node)
        yield _found(system, at, entry, speaker.entry(only, of_system), speaker)


def _without_remarks(node: Map) -> Map:
    """Return a row without what concerns the whole of it, which is said in a line of its own."""
    kept = [(key, value) for key, value in node.items() if key not in ("note", "corrects", "confirmed")]
    return Map.at(kept, node.line, node.column)  # type: ignore[arg-type]  # the keys of a file are texts


def _found(system: str, at: datetime, entry: Entry, text: str, speaker: Speaker) -> _Found:
    happened = min(entry.happened, default=None)
    line = NoteLine(speaker.time(at), f"{speaker.marks(entry.node, happened)}{sentence(text)}")
    return _Found(system, at, entry.node.line, line)


def _undated(state: PatientState, end: datetime, speaker: Speaker) -> Iterator[_Found]:
    dated = {id(entry.node) for entry in entries_of(state)}
    for block in WITHOUT_TIME:
        node = state.written.get(block)
        lists = {block: node} if isinstance(node, List) else {}
        if isinstance(node, Map):
            lists |= {f"{block}.{key}": value for key, value in node.items() if isinstance(value, List)}
        for path, rows in lists.items():
            for row in rows:
                if isinstance(row, Map) and id(row) not in dated:
                    text = sentence(speaker.entry(row, row, lead=lead_of(path)))
                    yield _Found(UNDATED, end, row.line, NoteLine("", f"{speaker.marks(row, None)}{text}"))


def _systems(found: list[_Found]) -> Iterator[NoteSystem]:
    named = dict.fromkeys([*ORDER, *(one.system for one in found if one.system != UNDATED), UNDATED])
    for system in named:
        lines = sorted((one for one in found if one.system == system), key=lambda one: (one.at, one.line))
        if lines:
            yield NoteSystem(sentence(str(system)), tuple(one.said for one in lines))
