"""Write files so that the old or the new one is whole: temporary file beside it, sync, replace."""

from __future__ import annotations

import contextlib
import errno
import os
import stat
import tempfile
from collections.abc import Mapping, Sequence
from pathlib import Path

PART = ".handoff-"
"""What a temporary file is called; the number of the process that made it follows."""

OWNER_ONLY = stat.S_IRUSR | stat.S_IWUSR


class CannotWrite(Exception):
    """A file could not be written; says which, why and what to do. Nothing half-written stays."""


def write_all(folder: Path, contents: Mapping[str, bytes]) -> list[Path]:
    """Write each (name, bytes) into ``folder`` and return the paths; made files are the owner's alone.

    Every file is written beside its place first; only when all of them are on the disk does each
    take its place, so that a full disk or a folder in the way leaves the old set whole.

    Raises:
        CannotWrite: The folder or a file cannot be written; names what was already replaced.
    """
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise CannotWrite(
            f"the folder {folder} cannot be made ({error.strerror}); name another with --out"
        ) from None
    for place in {(folder / name).parent for name in contents}:
        _sweep(place)
    ready: list[tuple[Path, Path, Path]] = []
    replaced: list[Path] = []
    try:
        for name, content in contents.items():
            path = folder / name
            target = _inside(path)
            ready.append((path, target, _beside(path, target, content)))
        for path, target, temporary in ready:
            _replace(path, target, temporary, replaced)
            replaced.append(path)
    finally:
        for _, _, temporary in ready[len(replaced) :]:
            with contextlib.suppress(OSError):
                temporary.unlink()
    return replaced


def write_file(path: Path, content: bytes) -> None:
    """Replace ``path`` by ``content`` in one step; an existing file keeps its permissions.

    Raises:
        CannotWrite: The file cannot be written; an existing one is unchanged.
    """
    if not path.parent.is_dir():
        raise CannotWrite(
            f"{path} could not be written (there is no such folder); check the name and try again"
        )
    write_all(path.parent, {path.name: content})


def _beside(path: Path, target: Path, content: bytes) -> Path:
    """Return a synced temporary file with ``content`` in the folder of ``target``."""
    temporary = ""
    try:
        if target.is_dir():
            raise IsADirectoryError(errno.EISDIR, os.strerror(errno.EISDIR))
        mode = stat.S_IMODE(target.stat().st_mode) if target.exists() else OWNER_ONLY
        handle, temporary = tempfile.mkstemp(
            prefix=f"{PART}{os.getpid()}-", suffix=".part", dir=target.parent
        )
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        Path(temporary).chmod(mode)
    except OSError as error:
        if temporary:
            with contextlib.suppress(OSError):
                Path(temporary).unlink()
        raise _refused(path, error) from None
    return Path(temporary)


def _replace(path: Path, target: Path, temporary: Path, replaced: list[Path]) -> None:
    try:
        temporary.replace(target)
    except OSError as error:
        raise _refused(path, error, replaced) from None
    _sync_folder(target.parent)


def _sweep(folder: Path) -> None:
    """Remove what a killed process left half-written: it may hold patient data and is of no use to anybody."""
    for left in folder.glob(f"{PART}*.part"):
        number = left.name.removeprefix(PART).partition("-")[0]
        if not (number.isdigit() and runs(int(number))):
            with contextlib.suppress(OSError):
                left.unlink()


def runs(number: int) -> bool:
    """Return whether a process of that number may still run on this machine; on Windows nobody can say."""
    if os.name == "nt":
        return True
    try:
        os.kill(number, 0)
    except ProcessLookupError:
        return False
    except OSError:
        return True
    return True


def _refused(path: Path, error: OSError, replaced: Sequence[Path] = ()) -> CannotWrite:
    reason = error.strerror or type(error).__name__
    new = f"; already new: {', '.join(one.name for one in replaced)}" if replaced else ""
    return CannotWrite(
        f"{path} could not be written ({reason}); close it in other programs, check the disk, and try again{new}"
    )


def _inside(path: Path) -> Path:
    """Return the real file behind ``path``; a link that leads out of its folder is refused."""
    try:
        if not path.is_symlink():
            return path
        real = path.resolve(strict=True)
    except (OSError, RuntimeError) as error:
        if isinstance(error, OSError) and error.errno == errno.ENAMETOOLONG:
            raise _refused(path, error) from None
        raise CannotWrite(f"{path} is a link that leads nowhere; delete it and try again") from None
    if real.parent != path.parent.resolve():
        raise CannotWrite(f"{path} is a link out of its folder; write into the real folder with --out")
    return real


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
