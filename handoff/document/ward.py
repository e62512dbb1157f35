"""The page of a ward as finished strings."""

from __future__ import annotations

from msgspec import Struct

from handoff.document.sections import Band


class WardFrame(Struct, frozen=True):
    """What stands on every page of it: which document, of which unit, made when."""

    title: str
    unit: str
    made_at: str
    caution: str


class WardRow(Struct, frozen=True):
    """One patient: who and where, how sick in the nurse's word, what first, how much is overdue, what comes."""

    patient: str
    place: str
    severity: str
    first: str
    overdue: str
    next: str


class Ward(Struct, frozen=True):
    """Everything that the page prints."""

    frame: WardFrame
    count: str
    bands: tuple[Band, ...]
    rows: tuple[WardRow, ...]
