"""A line put behind '#' that reads like an entry: it counts for nothing, so it is named."""

from __future__ import annotations

import re
from collections.abc import Iterator

from handoff.state.characters import Lines
from handoff.state.faults import Fault, Severity
from handoff.state.nodes import Map, Text, walk

_ENTRY = re.compile(
    r"^ *#+ *(?P<entry>- +[^\s#]|(?:[a-z_]+|[0-9]{2}:[0-9]{2}|[0-9]{4}-[0-9]{2}-[0-9]{2}):(?: +[^\s#]| *$))",
    re.MULTILINE,
)
_MOST_FAULTS = 20


def entries_behind_hash(text: str, root: Map) -> list[Fault]:
    """Return a warning for each comment line that reads like an entry of the file, the first 20.

    A line of a text that runs over several lines is no comment. A key without a value that has its own
    comment, as a new file offers it, holds nothing that could be lost.
    """
    found = list(_ENTRY.finditer(text))
    if not found:
        return []
    texts = [(node.start, node.end) for node in _texts(root) if node.end - node.start > 1]
    lines = Lines(text)
    outside = [
        match.start("entry")
        for match in found
        if not any(start < match.start("entry") < end for start, end in texts)
    ]
    return [
        Fault(
            *lines.place(place),
            "",
            "this line stands behind '#' and is not read",
            "take the # away; if it is a remark, begin it with a capital letter",
            Severity.UNUSUAL,
        )
        for place in outside[:_MOST_FAULTS]
    ]


def _texts(root: Map) -> Iterator[Text]:
    yield from (node for _, node in walk(root) if isinstance(node, Text))
