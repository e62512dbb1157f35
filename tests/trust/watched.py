"""Run a command in a process of its own that has no network, and hear what it opens."""

from __future__ import annotations

import os
import sys
import traceback
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import NamedTuple

PASSWORD = "four plain words here"  # noqa: S105 (of a test)
NETWORK = ("socket.", "urllib.", "http.", "ftplib.", "smtplib.", "ssl.")
HARMLESS = ("socket.gethostname",)


class Ran(NamedTuple):
    """How a command ended, what it printed, what it reached for, what it opened to write."""

    code: int
    said: str
    reached: list[str]
    written: list[Path]


def run(folder: Path, arguments: Sequence[object], first: Callable[[], object] = int) -> Ran:
    """Run ``handoff`` in ``folder`` with an open umask, ``TMPDIR`` below it and every socket refused.

    ``first`` is called in the new process before the command, to put something in its way.
    """
    said, heard = folder / ".said", folder / ".heard"
    (folder / "temporary").mkdir(exist_ok=True)
    sys.stdout.flush()
    child = os.fork()
    if child == 0:
        _become(folder, arguments, said, heard, first)
    _, status = os.waitpid(child, 0)
    lines = heard.read_text(encoding="utf-8").splitlines()
    told = said.read_text(encoding="utf-8", errors="replace")
    said.unlink()
    heard.unlink()
    return Ran(
        os.waitstatus_to_exitcode(status),
        told,
        [line.removeprefix("reached ") for line in lines if line.startswith("reached ")],
        [Path(line.removeprefix("wrote ")) for line in lines if line.startswith("wrote ")],
    )


def _become(
    folder: Path, arguments: Sequence[object], said: Path, heard: Path, first: Callable[[], object]
) -> None:
    code = 70
    try:
        os.chdir(folder)
        os.umask(0)
        os.environ["TMPDIR"] = str(folder / "temporary")
        import tempfile

        tempfile.tempdir = None
        out = os.open(said, os.O_CREAT | os.O_WRONLY | os.O_TRUNC, 0o600)
        nothing = os.open(os.devnull, os.O_RDWR)
        for stream, target in ((0, nothing), (1, out), (2, out)):
            os.dup2(target, stream)
        sys.stdin, sys.stdout, sys.stderr = (
            open(stream, mode, encoding="utf-8", closefd=False)  # noqa: SIM115
            for stream, mode in ((0, "r"), (1, "w"), (2, "w"))
        )
        sys.argv = ["handoff", *map(str, arguments)]
        from handoff.cli import main
        from handoff.privacy import protect

        protect.ask_password.__defaults__ = (lambda _: PASSWORD,)
        protect.ask_password.__globals__["sys"] = _Terminal() if "sys" in vars(protect) else sys
        log = os.open(heard, os.O_CREAT | os.O_WRONLY | os.O_TRUNC | os.O_APPEND, 0o600)
        _hear(log)
        first()
        main()
        code = 0
    except SystemExit as left:
        code = left.code if isinstance(left.code, int) else 1
    except BaseException:
        traceback.print_exc()
    finally:
        sys.stdout.flush()
        sys.stderr.flush()
        os._exit(code)


class _Terminal:
    """Stands for ``sys`` where a password is asked for: there is somebody at the terminal."""

    class stdin:  # noqa: N801
        @staticmethod
        def isatty() -> bool:
            return True

    stderr = stdin

    def __getattr__(self, name: str) -> object:
        return getattr(sys, name)


def _hear(log: int) -> None:
    def hook(event: str, given: tuple[object, ...]) -> None:
        if event.startswith(NETWORK) and event not in HARMLESS:
            os.write(log, f"reached {event}\n".encode())
            raise PermissionError(f"no network here: {event}")
        if event == "open" and len(given) > 2 and isinstance(given[2], int):
            writes = given[2] & (os.O_WRONLY | os.O_RDWR | os.O_CREAT)
            if writes and isinstance(given[0], (str, bytes, os.PathLike)):
                os.write(log, f"wrote {os.fsdecode(given[0])}\n".encode())

    sys.addaudithook(hook)
