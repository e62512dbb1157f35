"""Make a file that was not there before, for the eyes of its owner alone."""

from __future__ import annotations

import contextlib
import os
from pathlib import Path

from handoff.files import OWNER_ONLY, CannotWrite
from handoff.state.clock import Clock, ClockError

_NOWHERE = ("UTC", "UCT", "Universal", "Zulu", "GMT")


def refuse_existing(path: Path) -> None:
    """Raise CannotWrite where something stands at ``path`` already, or its folder is not there."""
    if os.path.lexists(path):
        raise CannotWrite(f"{path} is there already and was not touched; take another name")
    if not path.parent.is_dir():
        raise CannotWrite(f"{path} cannot be made (there is no such folder); check the name and try again")


def make_file(path: Path, text: str) -> None:
    """Write ``text`` into the new file ``path``, readable by its owner alone.

    Raises:
        CannotWrite: Something is there already, which stays as it is, or it cannot be written.
    """
    refuse_existing(path)
    try:
        handle = os.open(path, os.O_CREAT | os.O_EXCL | os.O_WRONLY | getattr(os, "O_BINARY", 0), OWNER_ONLY)
    except FileExistsError:
        refuse_existing(path)
        raise CannotWrite(f"{path} is there already and was not touched; take another name") from None
    except OSError as error:
        raise CannotWrite(
            f"{path} cannot be made ({error.strerror}); check the name and the folder"
        ) from None
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(text.encode())
            file.flush()
            os.fsync(file.fileno())
    except OSError as error:
        with contextlib.suppress(OSError):
            path.unlink()
        raise CannotWrite(f"{path} could not be written ({error.strerror}); nothing was kept") from None


def local_zone() -> str:
    """Return the name of this computer's time zone, or an empty string where it does not tell.

    Universal time is the setting of a machine that nobody told where it stands, and is not offered.
    """
    named = os.environ.get("TZ", "").removeprefix(":")
    with contextlib.suppress(OSError):
        named = named or Path("/etc/localtime").resolve().as_posix().partition("/zoneinfo/")[2]
    try:
        Clock(named)
    except ClockError:
        return ""
    return "" if named.rpartition("/")[2] in _NOWHERE else named
