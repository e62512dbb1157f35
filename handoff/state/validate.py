"""Check a file's nodes against the merged schema: every fault in one run, each with its place and cure."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from handoff.state.faults import Fault, Severity
from handoff.state.keywords import is_blank, make_validator
from handoff.state.moments import Moments
from handoff.state.nodes import List, Map, Node, path_text


def check(root: Map, schema: Mapping[str, Any], now: datetime) -> list[Fault]:
    """Return every fault and every unusual, unconfirmed value of ``root``, in the order of the file."""
    validator = make_validator(Moments(root, now))(schema)
    faults = []
    for error in validator.iter_errors(root):
        path = list(error.absolute_path)
        node, parent = _at(root, path)
        if error.severity is Severity.UNUSUAL and isinstance(parent, Map) and parent.get("confirmed") == "yes":
            continue
        place = error.key if error.key is not None else node
        if error.key is not None:
            path.append(str(error.key))
        faults.append(Fault(place.line, place.column, path_text(path), error.message, error.cure, error.severity))
    return sorted(faults)


def _at(root: Node, path: list[str | int]) -> tuple[Node, Node | None]:
    parent: Node | None = None
    node = root
    for step in path:
        parent, node = node, node[step]  # type: ignore[index,call-overload]
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
