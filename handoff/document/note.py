"""The nursing note of a shift as finished strings."""

from __future__ import annotations

from dataclasses import dataclass

from handoff.document.identity import Frame


@dataclass(frozen=True, slots=True)
class NoteLine:
    """One entry: when it happened, and what was charted, in words."""

    time: str
    text: str


@dataclass(frozen=True, slots=True)
class NoteSystem:
    """What was charted in one system of the body."""

    title: str
    lines: tuple[NoteLine, ...]


@dataclass(frozen=True, slots=True)
class Note:
    """Everything that the note prints; ``silent`` names the systems without an entry."""

    frame: Frame
    window: str
    rule: str
    systems: tuple[NoteSystem, ...]
    silent: str
