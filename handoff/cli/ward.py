"""``handoff ward``: one page for the charge nurse."""

from __future__ import annotations

from functools import partial
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.console import draw
from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    PolicyOption,
    say,
    setup_or_stop,
    stop,
    stop_for,
    who,
)
from handoff.cli.keeping import ReplaceOption, kept_or_stop
from handoff.cli.many import leave_many, lost_lines, mixed_up_lines, read_many, unread_lines

if TYPE_CHECKING:
    from collections.abc import Sequence

    from handoff.assess import Assessment
    from handoff.document.ward import Ward
    from handoff.policy import Policy
    from handoff.shift.many import Patient
    from handoff.shift.ward import Standing

WardArgument = Annotated[
    Path, typer.Argument(metavar="DIR", help="The folder that holds the patients' files, in it and below it")
]
WardOutOption = Annotated[
    Path | None, typer.Option("--out", metavar="DIR", help="Write ward.docx into this folder as well")
]
DocumentsOption = Annotated[
    Path | None,
    typer.Option(
        "--documents", metavar="DIR", help="Draft each patient's documents below this folder as well"
    ),
]
JobsOption = Annotated[
    int, typer.Option("--jobs", metavar="N", min=1, help="How many files are read side by side")
]


def ward(
    folder: WardArgument,
    at: AtOption = "",
    out: WardOutOption = None,
    jobs: JobsOption = 1,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
    replace: ReplaceOption = False,
    documents: DocumentsOption = None,
) -> None:
    """Show a whole ward on one page: who needs action first, what is overdue, what comes next.

    Example: handoff ward patients --at "2026-03-14 19:30" --jobs 4 --out documents

    Example: handoff ward patients --documents drafts --jobs 2
    """
    from handoff.shift.ward import ward_page
    from handoff.shift.ward_screen import print_ward

    setup = setup_or_stop(policy, bundled_only)
    if not folder.is_dir():
        stop(Exit.USAGE, f"{folder} is not a folder; name the one that holds the patients' files")
    make = partial(_made, root=folder, documents=documents, replace=replace)
    read, unread = read_many([folder], make, at, policy, bundled_only, jobs)
    patients = [one.made.made for one in read]
    page = ward_page(
        patients, setup.policy.unit_name, mixed_up_lines(read), unread_lines(unread), lost_lines(read)
    )
    draw(lambda console: print_ward(page, console))
    if out is not None:
        _write(page, patients, setup.policy, out, replace)
    if documents is not None:
        say(f"documents of each patient: below {documents}")
        say("Check them against the patient, the prescription and local policy before you sign.")
    leave_many(read, unread, said=True)


def _made(assessment: Assessment, root: Path, documents: Path | None, replace: bool) -> Patient[Standing]:
    from handoff.shift.drafting import draft_below
    from handoff.shift.many import Patient
    from handoff.shift.people import person_of
    from handoff.shift.ward import standing

    said = who(assessment.state)
    lost = tuple(f"{one.title}: {one.what}" for one in assessment.failures)
    if documents is not None:
        lost += draft_below(assessment, root, documents, replace)
    return Patient(said, person_of(assessment.state), lost, standing(assessment, said))


def _write(page: Ward, patients: Sequence[Standing], policy: Policy, out: Path, replace: bool) -> None:
    from handoff.document import DocumentError, ward_document
    from handoff.files import CannotWrite, write_all
    from handoff.shift.ward import digest_of

    if not patients:
        stop(Exit.FAULTS, "no patient could be read; ward.docx was not written")
    made_at = max(one.now for one in patients)
    trouble: list[str] = []
    try:
        documents = {"ward.docx": ward_document(page, made_at, digest_of(patients), policy, trouble)}
    except DocumentError as error:
        stop(Exit.SETUP, f"the page could not be made: {error}")
    try:
        written = write_all(out, documents | kept_or_stop(out, documents, replace))
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    say(f"written: {written[0]}")
    say("Check it at the bedside; it is of the moment that stands on it.")
    stop_for(trouble)
