"""The limits that a process sets itself before it runs anything from outside."""

from __future__ import annotations

import contextlib
import os
import sys

LARGEST_BYTES = 1_000_000_000
"""Address space that the process may have; one of our own templates takes a fifth of it."""

AFTER_S = 20
"""Seconds of work after which the system ends the process."""

_REACHING = (
    "socket.",
    "subprocess.",
    "os.system",
    "os.exec",
    "os.fork",
    "os.posix_spawn",
    "os.spawn",
    "os.startfile",
    "os.kill",
    "signal.pthread_kill",
    "os.remove",
    "os.rename",
    "os.rmdir",
    "os.mkdir",
    "os.link",
    "os.symlink",
    "os.truncate",
    "os.chmod",
    "os.chown",
    "os.utime",
    "shutil.",
    "ctypes.dlopen",
)
_WRITING = os.O_WRONLY | os.O_RDWR | os.O_CREAT | os.O_TRUNC | os.O_APPEND


class ReachedOut(RuntimeError):
    """Code from outside reached for the network, another program, or a file to change."""


def limit() -> None:
    """Limit memory and time of this process, and let it write no file; Windows knows no such limits."""
    with contextlib.suppress(ImportError):
        import resource  # noqa: PLC0415

        resource.setrlimit(resource.RLIMIT_AS, (LARGEST_BYTES, LARGEST_BYTES))
        resource.setrlimit(resource.RLIMIT_CPU, (AFTER_S, AFTER_S))
        resource.setrlimit(resource.RLIMIT_FSIZE, (0, 0))


def keep_in() -> None:
    """Refuse, from here on, the network, other programs and every change of a file, for good.

    This stops ordinary Python code. It is no wall against a library in machine code.
    """
    sys.dont_write_bytecode = True
    sys.addaudithook(_refuse)


def _refuse(event: str, given: tuple[object, ...]) -> None:
    if event.startswith(_REACHING) or (event == "open" and _writes(given)):
        raise ReachedOut(f"it reaches for {event}")


def _writes(given: tuple[object, ...]) -> bool:
    flags = given[2] if len(given) > 2 else 0
    return isinstance(flags, int) and bool(flags & _WRITING)
