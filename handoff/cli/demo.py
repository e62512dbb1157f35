"""``handoff demo``: the example case, written into a folder and drafted."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from handoff.cli.edge import Exit, say, stop

FolderArgument = Annotated[
    Path,
    typer.Argument(metavar="DIR", help="Folder for the example and its documents; made if it is not there"),
]

EXAMPLE = "house-fire.yaml"
MOMENT = "2026-03-14 19:30"


def demo(folder: FolderArgument = Path("handoff-demo")) -> None:
    """Write the invented example case into a folder and draft its documents.

    Example: handoff demo
    """
    from handoff.cli.draft import draft
    from handoff.files import CannotWrite, write_all
    from handoff.state.schema import schema_folder

    source = schema_folder().parent / "examples" / EXAMPLE
    target = folder / EXAMPLE
    if target.exists() and target.read_bytes() != source.read_bytes():
        stop(Exit.USAGE, f"{target} was changed since it was written; name another folder: handoff demo NAME")
    try:
        write_all(folder, {EXAMPLE: source.read_bytes()})
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))
    say(f"written: {target} (an invented patient)")
    draft(target, at=MOMENT, out=folder)
