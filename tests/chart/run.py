"""Run ``handoff`` as a script does, and as a nurse does in a terminal."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path


def run(*arguments: object, by: str = "") -> subprocess.CompletedProcess[str]:
    """Return what ``handoff`` did with ``arguments`` where nobody can answer."""
    environment = {key: value for key, value in os.environ.items() if key != "HANDOFF_BY"}
    return subprocess.run(
        [sys.executable, "-m", "handoff", *map(str, arguments)],
        stdin=subprocess.DEVNULL,
        capture_output=True,
        text=True,
        encoding="utf-8",
        env={**environment, **({"HANDOFF_BY": by} if by else {})},
        check=False,
    )


def in_terminal(answers: dict[str, str], *arguments: object) -> tuple[int, str]:
    """Return the exit code and the screen of ``handoff`` in a pseudo-terminal, each question answered once."""
    import pty

    pid, screen = pty.fork()
    if pid == 0:  # pragma: no cover  (the child becomes handoff)
        os.environ.pop("HANDOFF_BY", None)
        os.environ["TERM"] = "dumb"
        os.execv(sys.executable, [sys.executable, "-m", "handoff", *map(str, arguments)])  # noqa: S606
    shown = ""
    waiting = dict(answers)
    while True:
        try:
            data = os.read(screen, 4096)
        except OSError:  # the terminal of a program that ended
            break
        if not data:
            break
        shown += data.decode("utf-8", errors="replace")
        for question in [one for one in waiting if one in " ".join(shown.split())]:
            os.write(screen, f"{waiting.pop(question)}\n".encode())
    os.close(screen)
    _, status = os.waitpid(pid, 0)
    return os.waitstatus_to_exitcode(status), " ".join(shown.split())


def write(path: Path, text: str) -> Path:
    """Write ``text`` and return ``path``."""
    path.write_bytes(text.encode())
    return path
