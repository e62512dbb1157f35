"""Walk the entries of a block with their paths, without those that were struck out."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TypeAlias

from handoff.plugin import List, Map, Node

Path: TypeAlias = tuple[str | int, ...]
BLOCK: Path = ("pain",)


def living(node: Node | None, path: Path) -> Iterator[tuple[Map, Path]]:
    """Yield the entries at ``node``, one or a list, with their paths; what was struck out is left aside."""
    if isinstance(node, Map) and "struck" not in node:
        yield node, path
    elif isinstance(node, List):
        for index, entry in enumerate(node):
            yield from living(entry, (*path, index))
