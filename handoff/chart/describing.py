"""Entries in words, for what is said to the nurse and for what a correction keeps."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from handoff.state.schema import ENTRY

SIGNED = tuple(key for key in ENTRY if key != "note")
MOMENTS = ("at", "from", "to", "running", "stopped", "placed", "started", "removed", "answered")


def named(key: str) -> str:
    """Return a key as it is said."""
    return key.replace("_", " ")


def described(value: Any) -> str:
    """Return a value of plain data in words: ``36.4 C, site tympanic``."""
    if isinstance(value, str):
        return value
    if isinstance(value, Mapping):
        said = [
            describe_key(key, part) for key, part in value.items() if key not in SIGNED and key != "value"
        ]
        return ", ".join([described(value["value"]), *said] if "value" in value else said)
    return "; ".join(map(described, value))


def describe_key(key: str, value: Any) -> str:
    """Return one key with its value: ``pulse 118 /min``."""
    return f"{named(key)} {described(value)}"


def describe_entry(entry: Mapping[str, Any]) -> str:
    """Return what an entry charts, without who signed it and when."""
    return ", ".join(
        describe_key(key, value) for key, value in entry.items() if key not in SIGNED and key not in MOMENTS
    )


def same(one: Any, other: Any) -> bool:
    """Whether two values of plain data say the same, however they were spelled."""
    if isinstance(one, Mapping) and isinstance(other, Mapping):
        a, b = _bare(one), _bare(other)
        return a.keys() == b.keys() and all(same(a[key], b[key]) for key in a)
    if isinstance(one, Mapping) and set(_bare(one)) == {"value"}:
        return same(one["value"], other)
    if isinstance(other, Mapping):
        return set(_bare(other)) == {"value"} and same(one, other["value"])
    if isinstance(one, str) and isinstance(other, str):
        return _folded(one) == _folded(other)
    return (
        isinstance(one, list)
        and isinstance(other, list)
        and len(one) == len(other)
        and all(map(same, one, other))
    )


def _bare(value: Mapping[str, Any]) -> dict[str, Any]:
    return {key: part for key, part in value.items() if key not in SIGNED}


def _folded(text: str) -> str:
    return "".join(text.split()).casefold()
