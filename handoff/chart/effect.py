"""What a new entry changed: the figures worth saying, and every new flag."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from fnmatch import fnmatchcase

from handoff.assess import Assessment
from handoff.plugin import Flag, Item

_MARKS = {Flag.ACTION: "ACTION: ", Flag.REVIEW: "REVIEW: "}
_LONGEST = 140


def changes(before: Assessment, after: Assessment, totals: Sequence[str]) -> Iterator[str]:
    """Yield a line for each new flag, and for each figure of ``totals`` that is another than before.

    ``totals`` are keys of items; ``*`` at the end stands for any ending.
    """
    old = {item.key: item for item in before.items}
    flagged: list[str] = []
    figures: list[str] = []
    for item in after.items:
        was = old.get(item.key)
        if item.flag in _MARKS and (was is None or was.flag is not item.flag):
            flagged.append(_line(item, was))
        elif any(fnmatchcase(item.key, total) for total in totals) and _head(item) != _head(was):
            figures.append(_line(item, was))
    yield from flagged
    yield from figures


def _line(item: Item, was: Item | None) -> str:
    before = f" (was: {_head(was)})" if was and _head(was) not in ("", _head(item)) else ""
    return f"{_MARKS.get(item.flag, '')}{item.label}: {_short(item.shown)}{before}"


def _head(item: Item | None) -> str:
    """The figure itself, without what explains it."""
    return re.split(r"[;:] ", " ".join(item.shown.split()), maxsplit=1)[0] if item else ""


def _short(text: str) -> str:
    """The figure with its first remark: ``0.41 mL/kg/h (34 mL over 1 h); below the target of 0.5``."""
    said = "; ".join(" ".join(text.split()).split("; ")[:2])
    head = re.split(r": ", said, maxsplit=1)[0]
    said = said if len(said) <= _LONGEST else head
    return said if len(said) <= _LONGEST else f"{said[: _LONGEST - 4]} ..."
