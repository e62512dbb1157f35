"""Characters that do not mean what they look like: hidden, unprintable, or another alphabet's.

The first group may not stand anywhere in a file. The second is harmless in free text, and
named where a figure, a time, a key or a word of a closed list is due.
"""

from __future__ import annotations

import re
import unicodedata
from bisect import bisect_right

from handoff.state.faults import Fault

SPACES = "\u00a0\u1680\u2000-\u200a\u202f\u205f\u3000"
"""Spaces that look like a space and are none, as the inside of a pattern's brackets."""

_TAB = "\t"
_BREAK = "\x85\u2028\u2029"
_HIDDEN = "\xad\u180e\u200b\u200e\u200f\u2060-\u2064\ufeff"
_TURNING = "\u202a-\u202e\u2066-\u2069"
_UNPRINTABLE = "\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x84\x86-\x9f\ud800-\udfff\ufffe\uffff"
_REFUSED = re.compile(f"[{_TAB}{_BREAK}{_HIDDEN}{_TURNING}{_UNPRINTABLE}]")
_COMMENT = re.compile(r"(?:^|\s)#")
_LINE_END = re.compile(r"\r\n|\r|\n")
_MOST_FAULTS = 50

_SAID = (
    (_TAB, "a tab", "use spaces"),
    (_BREAK, "a line break that editors do not show", "delete it and press Enter"),
    (
        _HIDDEN,
        "a character that cannot be seen",
        "delete from the character before to the one after, and type them again",
    ),
    (_TURNING, "a hidden character that turns the reading direction", "delete it, and type the text again"),
    (_UNPRINTABLE, "an unprintable character", "delete it"),
)
_NAMED = tuple((re.compile(f"[{among}]"), what, cure) for among, what, cure in _SAID)


class Lines:
    """The places of a text by its offsets; a line ends with LF, CR LF or CR."""

    def __init__(self, text: str) -> None:
        self._starts = [0, *(match.end() for match in _LINE_END.finditer(text))]

    def place(self, offset: int) -> tuple[int, int]:
        """Return line and column, counted from 1, of the character at ``offset``, counted from 0."""
        line = bisect_right(self._starts, offset)
        return line, offset - self._starts[line - 1] + 1

    def start(self, line: int) -> int | None:
        """Return the offset at which ``line`` begins; None after the last."""
        return self._starts[line - 1] if line <= len(self._starts) else None


def line_of(text: str, line: int) -> str:
    """Return the text of ``line``, counted from 1."""
    lines = Lines(text)
    return text[lines.start(line) : lines.start(line + 1)]


def refused_characters(text: str) -> list[Fault]:
    """Return what may stand nowhere in a file, the first of each line; a tab may stand in a comment."""
    if _REFUSED.search(text) is None:
        return []
    lines, faults, done, comment = Lines(text), list[Fault](), 0, (0, 0)
    for match in _REFUSED.finditer(text):
        line, column = lines.place(match.start())
        if line == done:
            continue
        if match[0] == _TAB:
            if comment[0] != line:
                comment = line, _comment(text, lines, line)
            if column > comment[1]:
                continue
        what, cure = next((what, cure) for among, what, cure in _NAMED if among.match(match[0]))
        faults.append(Fault(line, column, "", what, cure))
        done = line
        if len(faults) == _MOST_FAULTS:
            break
    return faults


def _comment(text: str, lines: Lines, line: int) -> int:
    """Return the column after which ``line`` is a comment."""
    found = _COMMENT.search(text[lines.start(line) : lines.start(line + 1)])
    return found.end() if found else len(text)


def unprintable(text: str) -> bool:
    """Return whether a value that was read holds what no document can show; a tab and a line break it may."""
    return any(char not in "\t\n" for char in _REFUSED.findall(text))


def look_alike(text: str) -> tuple[str, str] | None:
    """Return what is foreign in a figure, a time, a key or a closed word, with its cure; None where all is plain.

    A no-break space, a minus sign, a digit or a letter of another alphabet looks like the
    character on the keyboard, so the message names it.
    """
    if text.isascii():
        return None
    for index, char in enumerate(text):
        if char.isascii() or char in "°µμ":
            continue
        if re.match(f"[{SPACES}]", char):
            return f"'{text}' holds a no-break space (character {index + 1})", "type an ordinary space there"
        name = unicodedata.name(char, f"U+{ord(char):04X}").lower()
        return f"'{text}' holds '{char}' ({name})", "type it again with plain letters, digits and signs"
    return None
