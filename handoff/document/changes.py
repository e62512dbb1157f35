"""What changed since an earlier document, as finished strings."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Change:
    """One thing that changed: what, before, now, and how (up, down, a flag that is new)."""

    what: str
    before: str
    now: str
    how: str


@dataclass(frozen=True, slots=True)
class ChangedSystem:
    """What changed in one system of the body."""

    title: str
    rows: tuple[Change, ...]


@dataclass(frozen=True, slots=True)
class Changes:
    """What changed between two moments of one patient; without a title there is nothing to print."""

    title: str = ""
    notes: tuple[str, ...] = ()
    systems: tuple[ChangedSystem, ...] = ()
    new_tasks: tuple[str, ...] = ()
    ended_tasks: tuple[str, ...] = ()
