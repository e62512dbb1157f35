"""The free text of a state file, and where in the file a stretch of it stands."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from typing import Any

from msgspec import Struct

from handoff.plugin import List, Map, Node, Text

NOT_FREE = ("enum", "x-quantity", "x-instant", "x-date", "x-zone")
"""What a schema says of a text that is not free."""

NAMES = frozenset(
    (
        "by",
        "earlier_names",
        "identifiers",
        "name",
        "phone",
        "phone_to",
        "unit_number",
        "who",
        "ended_by",
        "clock",
    )
)
"""Keys that hold names, initials and numbers; nobody writes them otherwise."""

_LINE_END = re.compile(r"\r\n|\r|\n")


class FreeText(Struct, frozen=True):
    """One free text: the steps to it, its path without counts (``handovers.concerns``), the text."""

    steps: tuple[str | int, ...]
    path: str
    text: Text


def free_texts(root: Map, schema: Mapping[str, Any]) -> Iterator[FreeText]:
    """Yield every free text of a state, in the order of the file; struck-out entries left aside."""
    yield from _below(root, schema, ())


def place_of(text: Text, start: int, matched: str, raw: str) -> tuple[int, int]:
    """Return line and column of ``matched``, which begins at ``start`` of the value of ``text``.

    In a text that is folded or escaped the place is that of the same words in the file; where
    they are not found it is that of the text.
    """
    nth = str(text)[:start].count(matched)
    words = r"\s+".join(re.escape(word) for word in matched.split())
    found = re.compile(words).finditer(raw, text.start, max(text.end, text.start))
    for index, match in enumerate(found):
        if index == nth:
            return _line_and_column(raw, match.start())
    return text.line, text.column


def _below(node: Node, schema: Mapping[str, Any], steps: tuple[str | int, ...]) -> Iterator[FreeText]:
    schema = _branch(schema, node)
    if isinstance(node, Text):
        if schema.get("type") == "string" and not any(name in schema for name in NOT_FREE):
            yield FreeText(steps, ".".join(step for step in steps if isinstance(step, str)), node)
    elif isinstance(node, Map):
        if "struck" in node:
            return
        for key, value in node.items():
            if key not in NAMES:
                yield from _below(value, _of_key(schema, str(key), value), (*steps, str(key)))
    else:
        for index, value in enumerate(node):
            yield from _below(value, schema.get("items", {}), (*steps, index))


def _of_key(schema: Mapping[str, Any], key: str, value: Node) -> Mapping[str, Any]:
    if "x-row" in schema:
        return {"x-times": schema["x-row"]}
    if "x-times" in schema:
        row: Mapping[str, Any] = schema["x-times"]
        return {"items": row} if isinstance(value, List) else row
    properties: Mapping[str, Mapping[str, Any]] = schema.get("properties", {})
    return properties.get(key, {})


def _branch(schema: Mapping[str, Any], node: Node) -> Mapping[str, Any]:
    """Return the branch of a schema that speaks of a node of this kind."""
    kinds = {"object": Map, "array": List, "string": Text}
    while "if" in schema:
        asked = kinds.get(str(schema["if"].get("type")), Text)
        branch = schema.get("then" if isinstance(node, asked) else "else")
        if branch is None:
            return schema
        schema = branch
    return schema


def _line_and_column(raw: str, offset: int) -> tuple[int, int]:
    line, begin = 1, 0
    for match in _LINE_END.finditer(raw, 0, offset):
        line, begin = line + 1, match.end()
    return line, offset - begin + 1
