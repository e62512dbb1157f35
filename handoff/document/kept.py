"""Find the documents that someone changed by hand, before new ones are written in their place."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

from msgspec import Struct

from handoff.document.edited import is_as_drafted


class Changed(Struct, frozen=True):
    """A document that was changed by hand: where it lies, what it holds, and the name for a copy of it."""

    path: Path
    content: bytes
    copy_name: str


def changed_by_hand(folder: Path, documents: Mapping[str, bytes]) -> list[Changed]:
    """Return which of ``documents`` (new content by file name) stand in ``folder`` with changes made by hand.

    A document that is protected by a password cannot be judged and counts as changed.

    Raises:
        OSError: A document that is there cannot be read.
    """
    found = []
    for name, new in documents.items():
        path = folder / name
        if path.suffix != ".docx" or not path.is_file():
            continue
        old = path.read_bytes()
        if old != new and not is_as_drafted(old):
            found.append(Changed(path, old, _free_name(folder, path)))
    return found


def _free_name(folder: Path, path: Path) -> str:
    number = 1
    while (folder / f"{path.stem}-kept-{number}{path.suffix}").exists():
        number += 1
    return f"{path.stem}-kept-{number}{path.suffix}"
