"""Run one of our own modules in a process of its own, on data from outside; its end is always seen."""

from __future__ import annotations

import contextlib
import os
import signal
import subprocess
import sys
from pathlib import Path
from threading import Thread
from typing import IO

from handoff.outside.stopped import Stopped

MOST_BYTES = 200_000_000
"""How long an answer may be; a document with every picture takes a hundredth of it."""

PIECE_BYTES = 65_536
"""How much of an answer is read at once."""

_KEPT = ("SYSTEMROOT", "PATH", "LANG", "LC_ALL")


def answer_of(module: str, asked: bytes, seconds: float) -> bytes:
    """Return what ``module``, run in a process of its own, answers to ``asked``.

    Nothing of this process is handed on but the way to the interpreter: no variable that could
    hold a password, no open file. Whatever happens, the process has ended on return.

    Raises:
        Stopped: It did not answer in ``seconds``, or its process ended without an answer.
    """
    kept = {key: os.environ[key] for key in _KEPT if key in os.environ}
    house = str(Path(__file__).resolve().parents[2])
    # A fixed seed of the hash: the same question has the same answer where sets are printed.
    environment = {**kept, "PYTHONPATH": house, "PYTHONHASHSEED": "0"}
    process = subprocess.Popen(  # noqa: S603 (our own module; what is foreign travels as data)
        [sys.executable, "-m", module],
        stdin=subprocess.PIPE,
        stdout=subprocess.PIPE,
        stderr=subprocess.DEVNULL,
        env=environment,
        start_new_session=os.name != "nt",
    )
    said = bytearray()
    writer = Thread(target=_write, args=(process.stdin, asked), daemon=True)
    reader = Thread(target=_read, args=(process.stdout, said), daemon=True)
    try:
        writer.start()
        reader.start()
        reader.join(seconds)
        is_late = reader.is_alive()
    finally:
        _end(process)
    writer.join()
    reader.join()
    for stream in (process.stdin, process.stdout):
        with contextlib.suppress(OSError):
            if stream:
                stream.close()
    if is_late:
        raise Stopped("it does not come to an end")
    if not said or len(said) > MOST_BYTES:
        raise Stopped("it took too much time or memory, or ended its own process")
    return bytes(said)


def _write(stream: IO[bytes], asked: bytes) -> None:
    with contextlib.suppress(OSError, ValueError):  # it may end before it has read the question
        stream.write(asked)
        stream.close()


def _read(stream: IO[bytes], said: bytearray) -> None:
    with contextlib.suppress(OSError, ValueError):
        while len(said) <= MOST_BYTES and (piece := os.read(stream.fileno(), PIECE_BYTES)):
            said.extend(piece)


def _end(process: subprocess.Popen[bytes]) -> None:
    """End the process and whatever it started."""
    if os.name == "nt":
        process.kill()
    else:
        with contextlib.suppress(ProcessLookupError, PermissionError):
            os.killpg(process.pid, signal.SIGKILL)
    process.wait()
