"""The nursing note of a shift as finished strings."""

from __future__ import annotations

from msgspec import Struct

from handoff.document.identity import Frame


class NoteLine(Struct, frozen=True):
    """One entry: when it happened, and what was charted, in words."""

    time: str
    text: str


class NoteSystem(Struct, frozen=True):
    """What was charted in one system of the body."""

    title: str
    lines: tuple[NoteLine, ...]


class Note(Struct, frozen=True):
    """Everything that the note prints; ``silent`` names the systems without an entry."""

    frame: Frame
    window: str
    rule: str
    systems: tuple[NoteSystem, ...]
    silent: str
