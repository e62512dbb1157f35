"""How something from outside ended that gave no answer; told without patient data."""

from __future__ import annotations

import traceback
from pathlib import Path


class Stopped(Exception):
    """It gave no answer that can be used; the text says why and holds no patient data."""


def place_of(error: BaseException) -> str:
    """Return where ``error`` was raised, as ``(file.py, line 3)``; empty where nobody knows."""
    frames = traceback.extract_tb(error.__traceback__)
    theirs = [frame for frame in frames if Path(frame.filename).parent != Path(__file__).parent]
    if not theirs:
        return ""
    last = theirs[-1]
    return f"({Path(last.filename).name}, line {last.lineno})"
