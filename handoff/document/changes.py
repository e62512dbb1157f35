"""What changed since an earlier document, as finished strings."""

from __future__ import annotations

from msgspec import Struct


class Change(Struct, frozen=True):
    """One thing that changed: what, before, now, and how (up, down, a flag that is new)."""

    what: str
    before: str
    now: str
    how: str


class ChangedSystem(Struct, frozen=True):
    """What changed in one system of the body."""

    title: str
    rows: tuple[Change, ...]


class Changes(Struct, frozen=True):
    """What changed between two moments of one patient; without a title there is nothing to print."""

    title: str = ""
    notes: tuple[str, ...] = ()
    systems: tuple[ChangedSystem, ...] = ()
    new_tasks: tuple[str, ...] = ()
    ended_tasks: tuple[str, ...] = ()
