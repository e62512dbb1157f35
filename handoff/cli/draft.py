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
    look_alikes,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    stop_for,
    who,
)
from handoff.cli.keeping import ReplaceOption, kept_or_stop
from handoff.cli.since import changes_or_stop

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.document.changes import Changes
    from handoff.registry import Setup
    from handoff.state.load import Loaded

STEM = "case"
"""What de-identified documents are called: the name of the file may be the patient's."""

OutOption = Annotated[
    Path | None,
    typer.Option("--out", metavar="DIR", help="Folder for the documents; beside the file if left out"),
]
EarlierOption = Annotated[
    Path | None,
    typer.Option("--since", metavar="OTHER", help="The items.json or the state file of the last handover"),
]


ConfidentialOption = Annotated[
    bool, typer.Option("--confidential", help="Write the confidential entries too, on a sheet of their own")
]
ProtectOption = Annotated[
    bool, typer.Option("--protect", help="Encrypt what is written; the password is asked for twice")
]
PdfOption = Annotated[
    bool, typer.Option("--pdf", help="Write each document as PDF too; needs LibreOffice on this machine")
]
DeidentifiedOption = Annotated[
    bool,
    typer.Option("--deidentified", help="For teaching: hours since the burn, no names, places or numbers"),
]


def draft(
    file: FileArgument,
    at: AtOption = "",
    out: OutOption = None,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
    since: EarlierOption = None,
    confidential: ConfidentialOption = False,
    protect: ProtectOption = False,
    deidentified: DeidentifiedOption = False,
    replace: ReplaceOption = False,
    pdf: PdfOption = False,
) -> None:
    """Draft the handover, the care plan and items.json; with --since what changed as well.

    Example: handoff draft ferrandel.yaml --at "2026-03-14 19:30" --out documents

    Example: handoff draft ferrandel.yaml --deidentified --out teaching
    """
    from handoff.files import CannotWrite, write_all

    if deidentified and (confidential or since):
        other = "--confidential" if confidential else "--since"
        stop(Exit.USAGE, f"--deidentified makes a case for teaching and goes without {other}; leave one out")
    setup = setup_or_stop(policy, bundled_only)
    loaded = open_or_stop(file, setup, at)
    assessment, report = _assessed(loaded, setup, deidentified)
    stem = STEM if deidentified else file.stem
    changes = changes_or_stop(assessment, setup, since) if since else None
    trouble: list[str] = []
    documents = _made(assessment, stem, changes, confidential, trouble)
    if pdf:
        documents |= _pdf(documents)
    if protect:
        documents = _protected(documents, stem)
    folder = out or file.parent
    documents |= kept_or_stop(folder, documents, replace)
    try:
        written = write_all(folder, documents)
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    say(who(loaded.state))
    look_alikes(file)
    for fault in assessment.warnings:
        complain(fault.said(assessment.state.file))
    for path in written:
        say(f"written: {path}")
    for line in report:
        say(line)
    if confidential and f"{stem}-confidential.docx" not in documents:
        say("no confidential sheet: the file holds no confidential entry")
    _say_wording(loaded, setup)
    say("Check them against the patient, the prescription and local policy before you sign.")
    stop_for(trouble)
    leave(assessment)


def _assessed(loaded: Loaded, setup: Setup, deidentified: bool) -> tuple[Assessment, list[str]]:
    """Return the assessment, and what is to be said of it where it was de-identified."""
    from handoff.work import assess_loaded

    if not deidentified:
        return assess_loaded(loaded, setup), []
    from handoff.privacy.deidentify import deidentified as without_identifiers

    assessment, report = without_identifiers(loaded, setup)
    return assessment, report.lines()


def _made(
    assessment: Assessment, stem: str, changes: Changes | None, confidential: bool, trouble: list[str]
) -> dict[str, bytes]:
    from handoff.document import DocumentError, confidential_document
    from handoff.document import draft as draft_documents
    from handoff.items_json import as_json

    try:
        documents = draft_documents(assessment, stem, changes, trouble)
        if confidential:
            documents |= confidential_document(assessment, stem, trouble)
    except DocumentError as error:
        stop(Exit.SETUP, f"the documents could not be made: {error}")
    return documents | {f"{stem}.items.json": as_json(assessment).encode()}


def _pdf(documents: dict[str, bytes]) -> dict[str, bytes]:
    from handoff.document.pdf import NoPdf, as_pdf

    try:
        return as_pdf(documents)
    except NoPdf as error:
        stop(Exit.USAGE, str(error), "nothing was written")


def _protected(documents: dict[str, bytes], stem: str) -> dict[str, bytes]:
    from handoff.privacy.protect import CannotProtect, ask_password, protected

    try:
        return protected(documents, stem, ask_password())
    except CannotProtect as error:
        stop(Exit.USAGE, str(error))


def _say_wording(loaded: Loaded, setup: Setup) -> None:
    from handoff.shift.wording import count_in_state, load_rules

    count = count_in_state(loaded.state.root, setup.schema, load_rules())
    if count:
        found = f"{count} finding{'' if count == 1 else 's'}"
        say(f"wording: {found} in the free text; handoff wording {loaded.state.file} shows them")
    else:
        say("wording: nothing is pointed out in the free text")
