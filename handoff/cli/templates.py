"""``handoff templates``: the unit's own look, as Word files that a ward clerk can change."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import Exit, complain, say, stop

if TYPE_CHECKING:
    from handoff.registry import Setup

templates = typer.Typer(
    name="templates", help="Write out the Word templates, and check edited ones.", no_args_is_help=True
)

FolderArgument = Annotated[
    Path, typer.Argument(metavar="DIR", help="Folder for the templates; made if it is not there")
]
FilesArgument = Annotated[
    list[Path], typer.Argument(metavar="FILE...", help="Edited templates, or a folder of them")
]

EXAMPLE = "house-fire.yaml"
MOMENT = "2026-03-14 19:30"


@templates.command()
def write(folder: FolderArgument) -> None:
    """Write the built-in templates into a folder, to be changed in Word; none that is there is written over.

    Example: handoff templates write look
    """
    from handoff.document.render import template_bytes
    from handoff.document.template_check import KINDS
    from handoff.files import CannotWrite, write_all

    there = [name for name in KINDS if (folder / name).exists()]
    if there:
        stop(Exit.USAGE, f"{folder / there[0]} is there already; nothing was written; name another folder")
    try:
        written = write_all(folder, {name: template_bytes(name) for name in KINDS})
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    for path in written:
        say(f"written: {path}")
    say(f"Change them in Word, then: handoff templates check {folder}")
    say(f"To use them write into the policy file: templates: {folder.name}")


@templates.command()
def check(files: FilesArgument) -> None:
    """Check edited templates: every misspelt field with its place and the nearest known name.

    Each is then filled with an invented patient, and the page is read back.

    Example: handoff templates check look/handover.docx

    Exit codes: 0 all can be used; 2 a file is no template; 4 a template is at fault.
    """
    from handoff.document.template_check import KINDS

    found = [path for given in files for path in (_in(given, KINDS) if given.is_dir() else [given])]
    at_fault = False
    for path in found:
        if path.name not in KINDS:
            stop(Exit.USAGE, f"{path}: a template is called {', '.join(KINDS)}; give it the name it had")
        faults = _faults(path)
        for fault in faults:
            complain(f"{path}: {fault}")
        at_fault = at_fault or bool(faults)
        if not faults:
            say(f"{path}: every field is known, and an invented patient is printed whole")
    if not found:
        stop(
            Exit.USAGE, f"{files[0]} holds no template; write them first: handoff templates write {files[0]}"
        )
    if at_fault:
        raise SystemExit(int(Exit.SETUP))


def _in(folder: Path, names: object) -> list[Path]:
    return [folder / name for name in names if (folder / name).is_file()]  # type: ignore[attr-defined]


def _faults(path: Path) -> list[str]:
    from handoff.document.errors import DocumentError
    from handoff.document.outside import refuse_what_reaches_out
    from handoff.document.template_check import template_faults

    try:
        content = path.read_bytes()
    except OSError as error:
        stop(Exit.USAGE, f"{path} cannot be read ({error.strerror}); check the name")
    try:
        refuse_what_reaches_out(content, path.name)
    except DocumentError as error:
        return [str(error)]
    try:
        faults = template_faults(content, path.name)
    except Exception as error:  # a foreign file may be broken in any way
        return [f"it cannot be read as a template ({type(error).__name__}); save it in Word as .docx"]
    return faults or _trial(path)


def _trial(path: Path) -> list[str]:
    """Fill the template with an invented patient; return what is wrong with it."""
    from msgspec.structs import replace

    from handoff.document import draft, note_document, ward_document
    from handoff.policy import Policy
    from handoff.shift.note import shift_note
    from handoff.shift.ward import standing, ward_page
    from handoff.state.schema import schema_folder
    from handoff.work import assess_loaded, make_setup, open_file

    setup: Setup = make_setup(None, bundled_only=True)
    loaded = open_file(schema_folder().parent / "examples" / EXAMPLE, setup, MOMENT)
    policy = Policy(templates=str(path.parent))
    assessment = replace(assess_loaded(loaded, setup), policy=policy)
    trouble: list[str] = []
    if path.name == "note.docx":
        note_document(shift_note(assessment, assessment.now - policy.shift_length), assessment, trouble)
    elif path.name == "ward.docx":
        page = ward_page([standing(assessment, "an invented patient")], "", (), (), ())
        ward_document(page, assessment.now, assessment.state.digest, policy, trouble)
    else:
        draft(assessment, "trial", None, trouble)
    return [one for one in trouble if path.name in one or "field" in one]
