"""A document that someone edited by hand is never written over without being asked, and then a copy is kept."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Annotated

import typer

from handoff.cli.edge import Exit, stop

ReplaceOption = Annotated[
    bool,
    typer.Option("--replace", help="Write over a document that was changed by hand; a copy of it is kept"),
]


def kept_or_stop(folder: Path, documents: Mapping[str, bytes], replace: bool) -> dict[str, bytes]:
    """Return copies of what is to be kept, by file name, to be written in the same step as ``documents``.

    Leaves with exit code 2 where a document in ``folder`` was changed by hand and ``replace`` is not asked for.
    """
    from handoff.document.kept import changed_by_hand

    try:
        changed = changed_by_hand(folder, documents)
    except OSError as error:
        stop(Exit.USAGE, f"{error.filename} cannot be read ({error.strerror}); nothing was written")
    if changed and not replace:
        stop(
            Exit.USAGE,
            f"{changed[0].path} was changed since it was drafted, or is protected; nothing was written",
            "to write over it add --replace (a copy is kept), or name another folder with --out",
        )
    return {one.copy_name: one.content for one in changed}
