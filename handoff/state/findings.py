"""What a keyword of the schema found, in a nurse's words."""

from __future__ import annotations

from jsonschema import ValidationError

from handoff.state.characters import look_alike
from handoff.state.faults import Severity
from handoff.state.nodes import List, Map, Text


class Finding(ValidationError):
    """An error with its cure; ``key`` is the key at fault where it is a key."""

    def __init__(
        self, what: str, cure: str, severity: Severity = Severity.FAULT, key: Text | None = None
    ) -> None:
        super().__init__(what)
        self.cure = cure
        self.severity = severity
        self.key = key


def closed(written: str, what: str, cure: str, key: Text | None = None) -> Finding:
    """Return the finding on a word, key, number or time, or what is foreign among its characters."""
    return Finding(*(look_alike(written) or (what, cure)), key=key)


def is_blank(node: object) -> bool:
    """Return whether nothing is written here; spaces in quotes are nothing."""
    return isinstance(node, Text) and (not node or node.isspace())


def kind_of(node: object) -> str:
    """Return what ``node`` is called."""
    if isinstance(node, Map):
        return "a group of keys"
    return "a list" if isinstance(node, List) else "text"
