"""Texts to put into a state file: an insertion, and entries as they are safely written."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from typing import TypeAlias

from msgspec import Struct

_PLAIN = re.compile(r"[A-Za-z0-9][A-Za-z0-9 _./%+\-()']*(?::[0-9][A-Za-z0-9 _./%+\-()]*)*")
_HAZARD = re.compile(r" #|: |\s$|:$")
_ESCAPED = {"\\": "\\\\", '"': '\\"', "\n": "\\n", "\t": "\\t", "\r": "\\r"}
_BREAKS_AND_MARKS = "\x85\u2028\u2029\ufeff"
_READ_AS_NOTHING = frozenset({"true", "false", "on", "off", "null", "none", "nil"})

Value: TypeAlias = "str | Mapping[str, Value] | Sequence[Value]"
Entry: TypeAlias = Mapping[str, Value]


class Insertion(Struct, frozen=True, order=True):
    """A text to be put before the character at ``place`` (an offset from 0)."""

    place: int
    text: str


def scalar(value: str) -> str:
    """Return ``value`` as it is safely written in a state file: plain where possible, else in quotes."""
    is_word = value.lower() in _READ_AS_NOTHING or (value.lower() in ("yes", "no") and not value.islower())
    if _PLAIN.fullmatch(value) and not _HAZARD.search(value) and not is_word:
        return value
    return f'"{"".join(map(_escaped, value))}"'


def _escaped(char: str) -> str:
    if char in _ESCAPED:
        return _ESCAPED[char]
    if char < " " or char == "\x7f" or char in _BREAKS_AND_MARKS:
        return f"\\u{ord(char):04x}"
    return char


def flow(value: Value) -> str:
    """Return ``value`` on one line: ``4 mg``, ``{drug: morphine, dose: 4 mg}`` or ``[a, b]``."""
    if isinstance(value, str):
        return scalar(value)
    if isinstance(value, Mapping):
        return f"{{{pairs(value)}}}"
    return f"[{', '.join(map(flow, value))}]"


def pairs(entry: Entry) -> str:
    """Return the keys and values of ``entry`` without the braces around them."""
    return ", ".join(f"{scalar(key)}: {flow(value)}" for key, value in entry.items())


def applied(text: str, insertions: Iterable[Insertion]) -> str:
    """Return ``text`` with every insertion put in, each at its place in the unchanged text."""
    return "".join(part for part, _ in woven(text, insertions))


def woven(text: str, insertions: Iterable[Insertion]) -> list[tuple[str, bool]]:
    """Return the parts of the new text in order, each with whether it stood in ``text``."""
    parts: list[tuple[str, bool]] = []
    done = 0
    for insertion in sorted(insertions, key=lambda one: one.place):
        parts += [(text[done : insertion.place], True), (insertion.text, False)]
        done = insertion.place
    return [*parts, (text[done:], True)]
