"""What is wrong in a file, where, and what to do about it."""

from __future__ import annotations

from enum import StrEnum

from msgspec import Struct

LONGEST = 600
"""Characters of a message, file name and place not counted."""


class Severity(StrEnum):
    """Whether a finding stops the work or is shown in the document."""

    FAULT = "fault"
    UNUSUAL = "unusual"


class Fault(Struct, frozen=True, order=True):
    """One line for the nurse: where, what is wrong, what to do."""

    line: int
    column: int
    path: str
    what: str
    cure: str
    severity: Severity = Severity.FAULT

    def said(self, file: str) -> str:
        """Return the fault as ``file:line:col: path: what is wrong; what to do``."""
        where = f"{file}:{self.line}:{self.column}: "
        middle = f"{self.path}: " if self.path else ""
        return where + _on_one_line(f"{middle}{self.what}; {self.cure}")


def _on_one_line(text: str) -> str:
    """Return ``text`` without line breaks and codes; a long value that it quotes is cut in the middle."""
    line = "".join(char if char.isprintable() else "?" for char in " ".join(text.split()))
    return line if len(line) <= LONGEST else f"{line[: LONGEST // 2]} ... {line[-LONGEST // 2 :]}"


class StateFaults(Exception):
    """The state file cannot be used; carries every fault found in one run."""

    def __init__(self, file: str, faults: list[Fault]) -> None:
        super().__init__(f"{len(faults)} faults")
        self.file = file
        self.faults = sorted(faults)
