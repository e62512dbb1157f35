"""A key or an entry that became a part of the text above it: a line was joined, or stands too far in."""

from __future__ import annotations

import re
from collections.abc import Iterator

from handoff.state.characters import Lines
from handoff.state.faults import Fault, Severity
from handoff.state.nodes import List, Map, Node, Text

_KEY = re.compile(r"(?:\n *|  +)(?P<entry>[a-z]+(?:_[a-z]+)*:) *(?=\n|$)")
_ENTRY = re.compile(r"\S  +(?P<entry>- +\S)")
_MOST_FAULTS = 20


def entries_in_texts(text: str, root: Map) -> list[Fault]:
    """Return a warning for each key or list entry that stands inside an unquoted text, the first 20."""
    found: list[tuple[int, str]] = []
    for node in _texts(root):
        if "\n" not in node and "  " not in node:
            continue
        raw = text[node.start : node.end]
        if raw[:1] in ("'", '"'):
            continue
        for pattern in (_KEY, _ENTRY):
            found += [(node.start + match.start("entry"), match["entry"]) for match in pattern.finditer(raw)]
    lines = Lines(text) if found else None
    return [
        Fault(
            *lines.place(place),
            "",
            f"'{entry}' stands inside a text and is not read as {'a key' if entry[0] != '-' else 'an entry'}",
            "put it on a line of its own below the others; if it is text, begin it with a capital letter",
            Severity.UNUSUAL,
        )
        for place, entry in found[:_MOST_FAULTS]
        if lines is not None
    ]


def _texts(node: Node) -> Iterator[Text]:
    if isinstance(node, Map):
        for value in node.values():
            if isinstance(value, Text):
                yield value
            else:
                yield from _texts(value)
    elif isinstance(node, List):
        for value in node:
            yield from _texts(value)
    else:
        yield node
