"""What stands in a file: the entries of a moment, and the words that lines and drugs go by."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from datetime import datetime

from msgspec import Struct

from handoff.chart import shape
from handoff.chart.drafting import Path
from handoff.chart.entries import ROWS, rows_at
from handoff.chart.shape import Schema
from handoff.state.clock import Clock, ClockError
from handoff.state.nodes import List, Map, Text, walk

CONFIDENTIAL = "confidential"
"""What stands there is never told on a screen."""


class Standing(Struct, frozen=True):
    """One entry that stands in a file, not struck out: where, and in which list (or the observations)."""

    path: Path
    entry: Map
    place: str

    @property
    def by(self) -> str:
        """Who charted it."""
        return str(self.entry.get("by", ""))


def stands(entry: Map, key: str) -> bool:
    """Whether ``entry`` has a value under ``key`` that was not struck out."""
    value = entry.get(key)
    return value is not None and not (isinstance(value, Map) and "struck" in value)


def listed_entries(root: Map, path: Sequence[str]) -> Iterator[tuple[Path, Map]]:
    """Yield the entries of the list at ``path`` with their paths, struck-out ones left aside."""
    node: object = root
    for name in path:
        node = node.get(name) if isinstance(node, Map) else None
    if isinstance(node, List):
        for index, entry in enumerate(node):
            if isinstance(entry, Map) and "struck" not in entry:
                yield (*path, index), entry


def words_that_stand(root: Map) -> dict[tuple[str, str], tuple[str, ...]]:
    """Return the words that stand in the file, by the place of their list and their key."""
    found: dict[tuple[str, str], dict[str, None]] = {}
    for path, node in walk(root):
        if isinstance(node, List) and all(isinstance(step, str) for step in path):
            for _, entry in listed_entries(root, [str(step) for step in path]):
                for key, value in entry.items():
                    if isinstance(value, Text) and value:
                        found.setdefault((".".join(map(str, path)), str(key)), {})[str(value)] = None
    return {place: tuple(words) for place, words in found.items()}


def standing_at(root: Map, at: datetime, clock: Clock, schema: Schema) -> list[Standing]:
    """Return every entry of the file with that moment, in the order of the file."""
    found = [Standing(path, row, ROWS) for path, row in rows_at(root, at, clock) if "struck" not in row]
    for path, node in walk(root):
        names = [str(step) for step in path]
        if names[:1] in ([ROWS], [CONFIDENTIAL]) or not all(isinstance(step, str) for step in path):
            continue
        form = shape.at(schema, names) or shape.NOTHING
        entry_form = (shape.list_form(form) or shape.NOTHING) if isinstance(node, List) else form
        if "struck" not in shape.keys_of(entry_form):
            continue
        times = shape.times_of(entry_form)
        for place, entry in _entries_of(root, node, names):
            if any(_is_at(entry.get(key), at, clock) for key in times):
                found.append(Standing(place, entry, ".".join(names)))
    return sorted(found, key=lambda one: one.entry.line)


def _entries_of(root: Map, node: object, names: list[str]) -> Iterator[tuple[Path, Map]]:
    """The entries of a list, or the one entry that a group is."""
    if isinstance(node, List):
        yield from listed_entries(root, names)
    elif isinstance(node, Map) and "struck" not in node:
        yield tuple(names), node


def _is_at(value: object, at: datetime, clock: Clock) -> bool:
    try:
        return isinstance(value, Text) and bool(value) and clock.read(str(value)) == at
    except ClockError:
        return False
