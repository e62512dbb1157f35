"""Write files so that the old or the new one is whole: temporary file beside it, sync, replace."""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from collections.abc import Mapping
from pathlib import Path

OWNER_ONLY = stat.S_IRUSR | stat.S_IWUSR


class CannotWrite(Exception):
    """A file could not be written; says which, why and what to do. Nothing half-written stays."""


def write_all(folder: Path, contents: Mapping[str, bytes]) -> list[Path]:
    """Write each (name, bytes) into ``folder`` and return the paths; made files are the owner's alone.

    Raises:
        CannotWrite: The folder or a file cannot be written.
    """
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise CannotWrite(
            f"the folder {folder} cannot be made ({error.strerror}); name another with --out"
        ) from None
    written = []
    for name, content in contents.items():
        path = folder / name
        write_file(path, content)
        written.append(path)
    return written


def write_file(path: Path, content: bytes) -> None:
    """Replace ``path`` by ``content`` in one step; an existing file keeps its permissions.

    Raises:
        CannotWrite: The file cannot be written; an existing one is unchanged.
    """
    target = _inside(path)
    temporary = ""
    try:
        mode = stat.S_IMODE(target.stat().st_mode) if target.exists() else OWNER_ONLY
        handle, temporary = tempfile.mkstemp(prefix=".handoff-", suffix=".part", dir=target.parent)
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        Path(temporary).chmod(mode)
        Path(temporary).replace(target)
        temporary = ""
        _sync_folder(target.parent)
    except OSError as error:
        reason = error.strerror or type(error).__name__
        raise CannotWrite(
            f"{path} could not be written ({reason}); close it in other programs, check the disk, and try again"
        ) from None
    finally:
        if temporary:
            with contextlib.suppress(OSError):
                Path(temporary).unlink()


def _inside(path: Path) -> Path:
    """Return the real file behind ``path``; a link that leads out of its folder is refused."""
    if path.is_symlink():
        real = path.resolve()
        if real.parent != path.parent.resolve():
            raise CannotWrite(f"{path} is a link out of its folder; write into the real folder with --out")
        return real
    return path


def _sync_folder(folder: Path) -> None:
    if os.name == "nt":
        return
    # Some network folders cannot be synced; the file itself was, and is in its place by now.
    with contextlib.suppress(OSError):
        handle = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(handle)
        finally:
            os.close(handle)
