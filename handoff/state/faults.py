"""What is wrong in a file, where, and what to do about it."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Severity(StrEnum):
    """Whether a finding stops the work or is shown in the document."""

    FAULT = "fault"
    UNUSUAL = "unusual"


@dataclass(frozen=True, slots=True, order=True)
class Fault:
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
        return f"{where}{middle}{self.what}; {self.cure}"


class StateFaults(Exception):
    """The state file cannot be used; carries every fault found in one run."""

    def __init__(self, file: str, faults: list[Fault]) -> None:
        super().__init__(f"{len(faults)} faults")
        self.file = file
        self.faults = sorted(faults)
