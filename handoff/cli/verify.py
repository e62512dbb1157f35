"""``handoff verify``: whether a document still says what the file says, and what moved since."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    FileArgument,
    PolicyOption,
    leave,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from datetime import datetime

    from handoff.document.verify import Made
    from handoff.registry import Setup
    from handoff.state.load import Loaded

DocumentArgument = Annotated[
    Path, typer.Argument(metavar="DOCX", help="A document that was drafted from the file")
]


def verify(
    document: DocumentArgument,
    file: FileArgument,
    at: AtOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Say whether a document still matches the file it was made from, and what moved since.

    Example: handoff verify ferrandel-handover.docx ferrandel.yaml

    Exit codes: 0 it matches; 1 the file has faults; 2 it cannot be compared, or is of another patient;
    3 it no longer matches; 4 a policy or a plugin is at fault.
    """
    from handoff.document.verify import is_of, matches, moved, tasks_moved
    from handoff.work import assess_loaded

    made = _read(document)
    setup = setup_or_stop(policy, bundled_only)
    loaded = open_or_stop(file, setup, at)
    state = loaded.state
    if not is_of(made, state):
        stop(
            Exit.USAGE,
            f"{document} is not of the patient of {file}: no number of theirs, nor name with birth date, is in it",
            f"{file} is of {who(state)}; look at both before you use either",
        )
    say(who(state))
    if not made.as_drafted:
        say(
            f"{document.name} was changed since it was drafted (ticks and signatures count); read what was written in"
        )
    when = made.at or loaded.now
    said = f"made for {state.clock.day_and_time(when)} from version {made.digest[:12]}"
    if matches(made, state):
        say(f"{document.name} matches {file}: {said}; the clinical content has not moved")
        return
    say(f"{document.name} no longer matches {file}: {said}; the file is now version {state.digest[:12]}")
    assessment = assess_loaded(_as_of(file, setup, loaded, when), setup)
    lines = [one.said() for one in moved(made, assessment)]
    if document.stem.endswith("care-plan"):
        lines = list(tasks_moved(made, assessment))
    for line in lines:
        say(f"  {line}")
    if not lines:
        say("  no printed value moved: what changed stands in no line of this document")
    say("Draft it again before anyone acts on it.")
    leave(assessment)
    raise SystemExit(int(Exit.INCOMPLETE))


def _as_of(file: Path, setup: Setup, loaded: Loaded, when: datetime) -> Loaded:
    """Return the file for the moment of the document, or of its last row where entries came later.

    So the passing of time alone moves no figure.
    """
    from handoff.state.faults import StateFaults
    from handoff.work import open_file

    state = loaded.state
    later = [row.at for row in (*state.rows, *state.results, *state.dated(state.root.get("events")))]
    for moment in (when, max([when, *later])):
        try:
            return open_file(file, setup, state.clock.iso(moment).replace("T", " "))
        except StateFaults:
            continue  # an entry is later still
    return loaded


def _read(document: Path) -> Made:
    from handoff.document.verify import NotOurs, read_document

    try:
        return read_document(document.read_bytes())
    except OSError as error:
        stop(Exit.USAGE, f"{document} cannot be read ({error.strerror}); check the name")
    except NotOurs as error:
        stop(Exit.USAGE, f"{document}: {error}")
