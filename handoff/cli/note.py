"""``handoff note``: the narrative nursing note of the shift."""

from __future__ import annotations

from datetime import datetime, timedelta
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    FileArgument,
    PolicyOption,
    assessed,
    leave,
    look_alikes,
    say,
    stop,
    stop_for,
    who,
)
from handoff.cli.keeping import ReplaceOption, kept_or_stop

if TYPE_CHECKING:
    from handoff.assess import Assessment

FromOption = Annotated[
    str,
    typer.Option(
        "--from", metavar="TIME", help="Where the note begins: '07:30'; one shift before --at if left out"
    ),
]
NoteOutOption = Annotated[
    Path | None, typer.Option("--out", metavar="DIR", help="Write a Word file into this folder instead")
]


def note(
    file: FileArgument,
    at: AtOption = "",
    start: FromOption = "",
    out: NoteOutOption = None,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
    replace: ReplaceOption = False,
) -> None:
    """Write the nursing note of the shift, by system, from what was charted in it.

    Example: handoff note ferrandel.yaml --from 07:30 --at "2026-03-14 19:30"
    """
    from handoff.shift.note import note_text, shift_note

    assessment = assessed(file, at, policy, bundled_only)
    made = shift_note(assessment, _start(assessment, start))
    if out is None:
        typer.echo(note_text(made, who(assessment.state)), nl=False)
        leave(assessment)
        return
    from handoff.document import DocumentError, note_document
    from handoff.files import CannotWrite, write_all

    trouble: list[str] = []
    try:
        documents = {f"{file.stem}-note.docx": note_document(made, assessment, trouble)}
    except DocumentError as error:
        stop(Exit.SETUP, f"the note could not be made: {error}")
    try:
        written = write_all(out, documents | kept_or_stop(out, documents, replace))
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    say(who(assessment.state))
    look_alikes(file)
    say(f"written: {written[0]}")
    say("Check it against the patient before you sign.")
    stop_for(trouble)
    leave(assessment)


def _start(assessment: Assessment, written: str) -> datetime:
    """Return the moment at which the note begins; a time alone is the last one before the note's end."""
    from handoff.state.clock import ClockError

    clock, now = assessment.state.clock, assessment.now
    if not written:
        return now - assessment.policy.shift_length
    try:
        if len(written) >= len("2026-03-14"):
            start = clock.read(written)
        else:
            start = clock.read_time(f"{clock.local(now):%Y-%m-%d}", written)
            if start > now:
                start = clock.read_time(f"{clock.local(now) - timedelta(days=1):%Y-%m-%d}", written)
    except ClockError as error:
        stop(Exit.USAGE, f"--from: {error.what}; {error.cure}")
    if start > now:
        stop(
            Exit.USAGE,
            f"--from: {clock.day_and_time(start)} is later than {clock.day_and_time(now)}; check --at",
        )
    return start
