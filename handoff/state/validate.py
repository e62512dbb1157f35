"""Check a file's nodes against the merged schema: every fault in one run, each with its place and cure."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from datetime import datetime
from typing import Any

from handoff.state.faults import Fault, Severity
from handoff.state.findings import is_blank
from handoff.state.keywords import make_validator
from handoff.state.moments import Moments
from handoff.state.nodes import List, Map, Node, path_text

MOST_FAULTS = 1000
"""So many faults are named in one run; who has more has lost the shape of the file, and names take time to find."""


def check(root: Map, schema: Mapping[str, Any], now: datetime, refused: Iterable[Fault] = ()) -> list[Fault]:
    """Return every fault and every unusual, unconfirmed value of ``root``, in the order of the file.

    After a thousand faults no more are sought.

    Args:
        root: The file as it was read.
        schema: The merged schema.
        now: The moment the file is read for.
        refused: What the reader refused; nothing more is said of those places.
    """
    validator = make_validator(Moments(root, now))(schema)
    faults = []
    left = MOST_FAULTS
    done = {(fault.line, fault.column) for fault in refused}
    for error in validator.iter_errors(root):
        path = list(error.absolute_path)
        node, parent = _at(root, path)
        if (
            error.severity is Severity.UNUSUAL
            and isinstance(parent, Map)
            and parent.get("confirmed") == "yes"
        ):
            continue
        place = error.key if error.key is not None else node
        if error.key is not None:
            path.append(str(error.key))
        if (place.line, place.column) in done:
            continue
        faults.append(
            Fault(place.line, place.column, path_text(path), error.message, error.cure, error.severity)
        )
        left -= error.severity is Severity.FAULT
        if not left:
            break
    return sorted(faults)


def _at(root: Node, path: list[str | int]) -> tuple[Node, Node | None]:
    parent: Node | None = None
    node: Any = root
    for step in path:
        parent, node = node, node[step]
    return node, parent


def without_blanks(node: Node) -> Node:
    """Return ``node`` without keys that were left blank: blank means not recorded."""
    if isinstance(node, Map):
        kept = [(key, without_blanks(value)) for key, value in node.items() if not is_blank(value)]
        return Map.at(kept, node.line, node.column, node.start, node.end, node.flow)  # type: ignore[arg-type]
    if isinstance(node, List):
        kept_values = [without_blanks(value) for value in node if not is_blank(value)]
        return List.at(kept_values, node.line, node.column, node.start, node.end, node.flow)
    return node
