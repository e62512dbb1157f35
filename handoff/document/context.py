"""Finished sections as the plain data that a template reads, every text made printable."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TypeAlias

from msgspec import Struct

from handoff.document.printable import visible
from handoff.document.sections import Mark

Data: TypeAlias = "str | bool | list[Data] | dict[str, Data]"


def context(section: Struct) -> dict[str, Data]:
    """Return a section (a Struct of texts, truths, tuples and further sections) as plain data."""
    return {field: _plain(getattr(section, field)) for field in section.__struct_fields__}


def texts(data: Data, path: str = "") -> Iterator[tuple[str, str]]:
    """Yield every text that must stand on a page with its path (``identity.name``), empty ones left out."""
    if isinstance(data, dict):
        for name, value in data.items():
            yield from texts(value, f"{path}.{name}" if path else name)
    elif isinstance(data, list):
        for index, value in enumerate(data, start=1):
            yield from texts(value, f"{path}[{index}]")
    elif isinstance(data, str) and data and not isinstance(data, Mark):
        yield path, data


def _plain(value: object) -> Data:
    if isinstance(value, (bool, Mark)):
        return value
    if isinstance(value, str):
        return visible(value)
    if isinstance(value, tuple):
        return [_plain(entry) for entry in value]
    if isinstance(value, Struct):
        return context(value)
    raise TypeError(f"a document holds texts, not {type(value).__name__}")
