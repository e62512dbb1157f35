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
    from handoff.document.edited import is_as_drafted

    kept: dict[str, bytes] = {}
    for name, new in documents.items():
        path = folder / name
        if path.suffix != ".docx" or not path.is_file():
            continue
        try:
            old = path.read_bytes()
        except OSError as error:
            stop(Exit.USAGE, f"{path} cannot be read ({error.strerror}); nothing was written")
        if old != new and not is_as_drafted(old):
            kept[_free_name(folder, path)] = old
            if not replace:
                stop(
                    Exit.USAGE,
                    f"{path} was changed since it was drafted, or is protected; nothing was written",
                    "to write over it add --replace (a copy is kept), or name another folder with --out",
                )
    return kept


def _free_name(folder: Path, path: Path) -> str:
    number = 1
    while (folder / f"{path.stem}-kept-{number}{path.suffix}").exists():
        number += 1
    return f"{path.stem}-kept-{number}{path.suffix}"
