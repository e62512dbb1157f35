"""The files of ``valid`` and ``invalid``, and what the reader says of one."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

from handoff.state.faults import StateFaults
from handoff.state.file_text import NotAStateFile
from handoff.state.load import Loaded
from handoff.work import open_file
from tests.small_patient import setup_of

HERE = Path(__file__).parent
AT = "2026-03-14 19:30"
PLUGINS = ("overview", "area")


def loaded(path: Path, at: str = AT) -> Loaded:
    """Return the state in ``path``, checked by the core and the plugin of the burned area."""
    return open_file(path, setup_of(PLUGINS), at)


def said_of(path: Path) -> list[str]:
    """Return the messages on ``path`` with the bare file name, and the exit code as a last line."""
    try:
        found = loaded(path)
    except StateFaults as refused:
        return [*(fault.said(path.name) for fault in refused.faults), "exit 1"]
    except NotAStateFile as refused:
        return [str(refused), "exit 2"]
    return [*(fault.said(path.name) for fault in found.unusual), "exit 0"]


def command(*arguments: object) -> subprocess.CompletedProcess[str]:
    """Return what ``handoff`` did with ``arguments``."""
    line = [sys.executable, "-m", "handoff", *map(str, arguments)]
    return subprocess.run(
        line, capture_output=True, text=True, encoding="utf-8", errors="replace", check=False, timeout=120
    )
