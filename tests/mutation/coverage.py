"""Which test runs which line of the files that are mutated, and how long it takes."""

from __future__ import annotations

import sys
from collections.abc import Callable
from dataclasses import dataclass, field
from types import FrameType
from typing import Any


@dataclass
class Seen:
    """What one test ran: (file, line) pairs, and its seconds while it was watched."""

    seconds: float = 0.0
    passed: bool = True
    lines: set[tuple[str, int]] = field(default_factory=set)


def watching(files: frozenset[str], seen: Seen) -> Callable[[FrameType, str, Any], Any]:
    """Return a trace function that notes the lines of ``files`` alone in ``seen``."""

    def line(frame: FrameType, event: str, argument: Any) -> Any:
        seen.lines.add((frame.f_code.co_filename, frame.f_lineno))
        return line

    def call(frame: FrameType, event: str, argument: Any) -> Any:
        return line(frame, event, argument) if frame.f_code.co_filename in files else None

    return call


def traced(files: frozenset[str], seen: Seen, run: Callable[[], bool]) -> None:
    """Run a test while the lines are noted."""
    before = sys.gettrace()
    sys.settrace(watching(files, seen))
    try:
        seen.passed = run()
    finally:
        sys.settrace(before)
