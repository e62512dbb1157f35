"""One writer at a time: a lock file beside the patient file, made in one step on every system.

A program that is stopped in the middle leaves its lock behind. A lock is taken for left over
when its maker no longer runs on this machine, or when it stood unchanged for longer than any
writing takes, measured by the watch of the one who waits and never by the clock of a server.
"""

from __future__ import annotations

import contextlib
import os
import secrets
import socket
import time
from collections.abc import Callable, Iterator
from pathlib import Path

from handoff.files import CannotWrite, runs

LEFT_OVER_AFTER_S = 30.0
GIVE_UP_AFTER_S = 90.0
TELL_AFTER_S = 2.0
_PAUSE_S = 0.03
_TRIES = 30


def lock_path(path: Path) -> Path:
    """Return the lock file of ``path``."""
    return path.parent / f".{path.name}.lock"


@contextlib.contextmanager
def locked(
    path: Path,
    left_over_after_s: float = LEFT_OVER_AFTER_S,
    give_up_after_s: float = GIVE_UP_AFTER_S,
    on_wait: Callable[[], object] | None = None,
) -> Iterator[None]:
    """Hold the lock of ``path``; ``on_wait`` is called once where that takes a while.

    Raises:
        CannotWrite: Another program keeps it, or the folder cannot be written.
    """
    lock = lock_path(path)
    mark = f"{socket.gethostname()} {os.getpid()} {secrets.token_hex(8)}"
    _take(lock, mark, left_over_after_s, give_up_after_s, on_wait or (lambda: None))
    try:
        yield
    finally:
        if _mark_of(lock) == mark:
            _unlinked(lock)


def _take(
    lock: Path,
    mark: str,
    left_over_after_s: float,
    give_up_after_s: float,
    on_wait: Callable[[], object],
) -> None:
    begun = seen_since = time.monotonic()
    seen = ""
    is_told = False
    while not _made(lock, mark):
        now = time.monotonic()
        other = _mark_of(lock)
        if not is_told and now - begun > TELL_AFTER_S:
            on_wait()
            is_told = True
        if other != seen:
            seen, seen_since = other, now
        if _is_gone(other) or now - seen_since > left_over_after_s:
            _remove(lock, other)
        elif now - begun > give_up_after_s:
            raise CannotWrite(
                f"another program is writing {lock.name.removeprefix('.').removesuffix('.lock')}; "
                f"try again, and if no other runs, delete {lock} and {_sweeper(lock)}"
            )
        else:
            time.sleep(_PAUSE_S)


def _made(lock: Path, mark: str) -> bool:
    """Make the lock file, or return False where there is one."""
    try:
        handle = os.open(lock, os.O_CREAT | os.O_EXCL | os.O_WRONLY, 0o600)
    except FileExistsError:
        return False
    except PermissionError:
        if os.name == "nt" and lock.exists():
            return False  # Windows says so while the file is being deleted
        raise CannotWrite(_cannot_write(lock)) from None
    except OSError:
        raise CannotWrite(_cannot_write(lock)) from None
    with os.fdopen(handle, "w", encoding="utf-8") as file:
        file.write(mark)
    return True


def _cannot_write(lock: Path) -> str:
    return f"the folder {lock.parent} cannot be written; check that you may change files there"


def _mark_of(lock: Path) -> str:
    try:
        return lock.read_text(encoding="utf-8")
    except OSError:
        return ""


def _is_gone(mark: str) -> bool:
    """Whether the maker of a lock ran on this machine and runs no more."""
    host, _, rest = mark.partition(" ")
    number = rest.partition(" ")[0]
    return host == socket.gethostname() and number.isdigit() and not runs(int(number))


def _remove(lock: Path, mark: str) -> None:
    """Remove a lock that was left over; of several that wait, one does it."""
    if not _made(_sweeper(lock), mark):
        time.sleep(_PAUSE_S)
        return
    try:
        if _mark_of(lock) == mark:
            _unlinked(lock)
    finally:
        _unlinked(_sweeper(lock))


def _sweeper(lock: Path) -> Path:
    return lock.with_name(f"{lock.name}.sweep")


def _unlinked(lock: Path) -> None:
    """Delete a lock; Windows refuses while somebody reads it, so it is tried for a moment."""
    for _ in range(_TRIES):
        try:
            lock.unlink(missing_ok=True)
        except OSError:
            time.sleep(_PAUSE_S)
        else:
            return
