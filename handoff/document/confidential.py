"""The confidential sheet as finished strings: what prints nowhere else, on a sheet of its own, only when asked."""

from __future__ import annotations

from handoff.assess import Assessment
from handoff.document.identity import frame
from handoff.document.note import Note, NoteLine, NoteSystem
from handoff.document.sections import sentence
from handoff.plugin import Map, entries, words

TITLE = "Confidential sheet"
RULE = "Confidential: for the people who must know, never with the handover. Nothing of it stands in another document."


def confidential_sheet(assessment: Assessment) -> Note | None:
    """Return the confidential entries of the file, oldest first; None where there is none."""
    state = assessment.state
    block = state.root.get("confidential")
    systems = []
    for kind, written in block.items() if isinstance(block, Map) else ():
        lines = tuple(_line(entry, assessment) for entry in entries(written))
        if lines:
            systems.append(NoteSystem(sentence(str(kind).replace("_", " ")), lines))
    if not systems:
        return None
    made_for = f"Entries up to {state.clock.day_and_time(assessment.now)}"
    return Note(frame(TITLE, assessment), made_for, RULE, tuple(systems), "")


def _line(entry: Map, assessment: Assessment) -> NoteLine:
    at = assessment.state.when(entry.get("at"))
    said = [words(entry.get("note")) or "nothing written"]
    said += [f"told: {words(entry.get('told')) or 'not recorded'}"]
    said += [f"written by {words(entry.get('by')) or 'not recorded'}"]
    time = assessment.state.clock.day_and_time(at) if at else "time not recorded"
    return NoteLine(time, "; ".join(said))
