"""The page of a ward as finished strings."""

from __future__ import annotations

from dataclasses import dataclass

from handoff.document.sections import Band


@dataclass(frozen=True, slots=True)
class WardFrame:
    """What stands on every page of it: which document, of which unit, made when."""

    title: str
    unit: str
    made_at: str
    caution: str


@dataclass(frozen=True, slots=True)
class WardRow:
    """One patient: who and where, how sick in the nurse's word, what first, how much is overdue, what comes."""

    patient: str
    place: str
    severity: str
    first: str
    overdue: str
    next: str


@dataclass(frozen=True, slots=True)
class Ward:
    """Everything that the page prints."""

    frame: WardFrame
    count: str
    bands: tuple[Band, ...]
    rows: tuple[WardRow, ...]
