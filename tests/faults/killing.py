"""Run a command in a process of its own and kill it at a chosen step on the file system."""

from __future__ import annotations

import os
import signal
import sys
from collections.abc import Sequence
from pathlib import Path

WATCHED = ("open", "os.rename", "os.remove", "os.mkdir", "os.chmod", "os.link", "os.truncate")
"""Audit events of the interpreter that touch a file system; syncing is watched beside them."""


class Steps:
    """Counts the steps that touch what lies below a folder, and kills the process before a chosen one."""

    def __init__(self, folder: Path, deadly: int) -> None:
        self.folder = str(folder)
        self.deadly = deadly
        self.count = 0
        sys.addaudithook(self._heard)
        real = os.fsync

        def fsync(handle: int) -> None:
            self._step()
            real(handle)

        os.fsync = fsync  # type: ignore[assignment]

    def _heard(self, event: str, given: tuple[object, ...]) -> None:
        if event in WATCHED and given and self.folder in str(given[0]) and not _reads(event, given):
            self._step()

    def _step(self) -> None:
        self.count += 1
        if self.count == self.deadly:
            os.kill(os.getpid(), signal.SIGKILL)


def _reads(event: str, given: tuple[object, ...]) -> bool:
    """Return whether a file is only opened for reading: nothing can be lost there."""
    mode, flags = given[1:3] if event == "open" else (None, None)
    writes = os.O_WRONLY | os.O_RDWR | os.O_CREAT
    return (
        event == "open"
        and not (isinstance(flags, int) and flags & writes)
        and str(mode) in ("r", "rb", "None")
    )


def was_killed(arguments: Sequence[object], folder: Path, step: int) -> bool:
    """Return whether ``handoff`` was killed before its ``step``-th step below ``folder``; else it ran to its end."""
    sys.stdout.flush()
    child = os.fork()
    if child == 0:
        _become(arguments, folder, step)
    _, status = os.waitpid(child, 0)
    return os.WIFSIGNALED(status)


def _become(arguments: Sequence[object], folder: Path, step: int) -> None:
    code = 1
    try:
        nothing = os.open(os.devnull, os.O_RDWR)
        for stream in (0, 1, 2):
            os.dup2(nothing, stream)
        sys.stdin, sys.stdout, sys.stderr = (open(nothing, mode) for mode in ("r", "w", "w"))  # noqa: SIM115, PTH123
        sys.argv = ["handoff", *map(str, arguments)]
        from handoff.cli import main

        Steps(folder, step)
        main()
    except SystemExit as left:
        code = left.code if isinstance(left.code, int) else 1
    finally:
        os._exit(code)
