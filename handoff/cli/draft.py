"""``handoff draft``: the handover, the care plan and items.json of one patient."""

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
    complain,
    leave,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    who,
)
from handoff.cli.since import changes_or_stop

if TYPE_CHECKING:
    from handoff.registry import Setup
    from handoff.state.load import Loaded

OutOption = Annotated[
    Path | None,
    typer.Option("--out", metavar="DIR", help="Folder for the documents; beside the file if left out"),
]
EarlierOption = Annotated[
    Path | None,
    typer.Option("--since", metavar="OTHER", help="The items.json or the state file of the last handover"),
]


def draft(
    file: FileArgument,
    at: AtOption = "",
    out: OutOption = None,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
    since: EarlierOption = None,
) -> None:
    """Draft the handover, the care plan and items.json; with --since what changed as well.

    Example: handoff draft ferrandel.yaml --at "2026-03-14 19:30" --out documents
    """
    from handoff.document import DocumentError
    from handoff.document import draft as draft_documents
    from handoff.files import CannotWrite, write_all
    from handoff.items_json import as_json
    from handoff.work import assess_loaded

    setup = setup_or_stop(policy, bundled_only)
    loaded = open_or_stop(file, setup, at)
    assessment = assess_loaded(loaded, setup)
    changes = changes_or_stop(assessment, setup, since) if since else None
    try:
        documents = draft_documents(assessment, file.stem, changes)
    except DocumentError as error:
        stop(Exit.SETUP, f"the documents could not be made: {error}")
    documents[f"{file.stem}.items.json"] = as_json(assessment).encode()
    folder = out or file.parent
    try:
        written = write_all(folder, documents)
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    say(who(assessment.state))
    for fault in assessment.warnings:
        complain(fault.said(assessment.state.file))
    for path in written:
        say(f"written: {path}")
    _say_wording(loaded, setup)
    say("Check them against the patient, the prescription and local policy before you sign.")
    leave(assessment)


def _say_wording(loaded: Loaded, setup: Setup) -> None:
    from handoff.shift.wording import count_in_state, load_rules

    count = count_in_state(loaded.state.root, setup.schema, load_rules())
    if count:
        found = f"{count} finding{'' if count == 1 else 's'}"
        say(f"wording: {found} in the free text; handoff wording {loaded.state.file} shows them")
    else:
        say("wording: nothing is pointed out in the free text")
