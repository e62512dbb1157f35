"""Every dated entry of a state file, whichever plugin it belongs to, struck-out ones too."""

from __future__ import annotations

import re
from collections.abc import Iterator
from datetime import datetime

from msgspec import Struct

from handoff.plugin import List, Map, Node, PatientState, Text
from handoff.state.clock import Clock, ClockError

Path = tuple[str | int, ...]

NOT_FOR_READERS = ("handoff", "clock", "confidential", "collected")
"""Blocks that are no part of a note: the format, what is confidential, what the tool brought back."""

ABOUT_THE_ENTRY = ("by", "written", "note", "confirmed", "corrects", "struck")
"""Keys that any entry may carry beside what was charted."""

ROWS = "observations"

_INSTANT = re.compile(r"\d{4}-\d{2}-\d{2}[T ]\d{2}:\d{2}(?: ?(?:Z|[+-]\d{2}:\d{2}))?")


class Entry(Struct, frozen=True):
    """One dated entry: its path, when it happened, when it was written, and what stands there."""

    path: Path
    happened: tuple[datetime, ...]
    touched: tuple[datetime, ...]
    node: Map

    @property
    def at(self) -> datetime:
        """The first moment that the entry speaks of."""
        return min(self.happened or self.touched)

    def first_within(self, start: datetime, end: datetime) -> datetime | None:
        """Return the first moment from ``start`` to ``end`` at which it happened; None for none."""
        return min((moment for moment in self.happened if start <= moment <= end), default=None)

    def was_touched(self, start: datetime, end: datetime) -> bool:
        """Return whether it was written, corrected or struck out from ``start`` to ``end``."""
        return any(start <= moment <= end for moment in self.touched)


def entries_of(state: PatientState) -> Iterator[Entry]:
    """Yield every dated entry of the file, each observation row as one, in the order of the file."""
    for key, node in state.written.items():
        if key in NOT_FOR_READERS:
            continue
        if key == ROWS and isinstance(node, Map):
            yield from _rows(node, state.clock)
        else:
            yield from _below(node, (str(key),), state.clock)


def moment_at(node: Node | None, clock: Clock) -> datetime | None:
    """Return the instant written at ``node``; None where something else stands there."""
    if not isinstance(node, Text) or _INSTANT.fullmatch(node) is None:
        return None
    try:
        return clock.read(str(node))
    except ClockError:
        return None


def latest_moment(state: PatientState, until: datetime) -> datetime | None:
    """Return the latest moment up to ``until`` of which the file speaks; None for none."""
    moments = [m for entry in entries_of(state) for m in (*entry.happened, *entry.touched) if m <= until]
    return max(moments, default=None)


def _rows(observations: Map, clock: Clock) -> Iterator[Entry]:
    for day, times in observations.items():
        if not isinstance(times, Map):
            continue
        for time, written in times.items():
            at = clock.read_time(day, time)
            rows = written if isinstance(written, List) else (written,)
            for index, row in enumerate(rows):
                if isinstance(row, Map):
                    yield Entry((ROWS, str(day), str(time), index), (at,), _touched(row, clock), row)


def _below(node: Node, path: Path, clock: Clock) -> Iterator[Entry]:
    if isinstance(node, Map):
        happened, touched = _happened(node, clock), _touched(node, clock)
        if happened or any(name in node for name in ("written", "corrects", "struck")):
            yield Entry(path, happened, touched, node)
            return
        for key, value in node.items():
            yield from _below(value, (*path, str(key)), clock)
    elif isinstance(node, List):
        for index, value in enumerate(node):
            yield from _below(value, (*path, index), clock)


def _happened(node: Map, clock: Clock) -> tuple[datetime, ...]:
    found = []
    for key, value in node.items():
        if key in ABOUT_THE_ENTRY:
            continue
        if isinstance(value, Map) and set(value) == {"earliest", "latest"}:
            found += [moment_at(value["earliest"], clock), moment_at(value["latest"], clock)]
        else:
            found.append(moment_at(value, clock))
    return tuple(moment for moment in found if moment is not None)


def _touched(node: Node, clock: Clock) -> tuple[datetime, ...]:
    """Return when an entry, or anything inside it, was written, corrected or struck out."""
    found: list[datetime | None] = []
    if isinstance(node, Map):
        found.append(moment_at(node.get("written"), clock))
        for name in ("corrects", "struck"):
            inside = node.get(name)
            if isinstance(inside, Map):
                found.append(moment_at(inside.get("at"), clock))
        for key, value in node.items():
            if key not in ABOUT_THE_ENTRY:
                found += _touched(value, clock)
    elif isinstance(node, List):
        for value in node:
            found += _touched(value, clock)
    return tuple(moment for moment in found if moment is not None)
