"""The slips of one key that a text can suffer: a key missed, hit twice, swapped, or its neighbour hit."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

_ROWS = ("`1234567890-=", "qwertyuiop[]", "asdfghjkl;'", "zxcvbnm,./")
STRUCTURE = " :\"',#-."
"""What is put in by mistake: the signs that give a file its shape."""

_INDENT = (1, 2)


@dataclass(frozen=True, slots=True)
class Slip:
    """One slip: its kind, where it happened (offsets of what it takes the place of), what stands there now."""

    kind: str
    start: int
    end: int
    typed: str

    def done_to(self, text: str) -> str:
        """Return ``text`` with the slip in it."""
        return text[: self.start] + self.typed + text[self.end :]


def slips(text: str) -> Iterator[Slip]:
    """Yield every slip that changes ``text``, in the order of the text."""
    for place, char in enumerate(text):
        following = text[place + 1 : place + 2]
        if char == "\n":
            yield Slip("line joined", place, place + 1, "")
            yield from _indented(text, place + 1)
            continue
        yield Slip("missed", place, place + 1, "")
        if following != char:
            yield Slip("hit twice", place, place, char)
            if following not in ("", "\n"):
                yield Slip("swapped", place, place + 2, following + char)
        for typed in neighbours(char):
            yield Slip("neighbour hit", place, place + 1, typed)
        for sign in STRUCTURE:
            if sign not in (char, text[place - 1 : place]):
                yield Slip(f"{NAMES[sign]} put in", place, place, sign)


NAMES = {
    " ": "space",
    ":": "colon",
    '"': "quote",
    "'": "apostrophe",
    ",": "comma",
    "#": "hash",
    "-": "hyphen",
    ".": "point",
}


def _indented(text: str, start: int) -> Iterator[Slip]:
    depth = len(text[start:]) - len(text[start:].lstrip(" "))
    for step in _INDENT:
        yield Slip(f"indent {step} more", start, start, " " * step)
        if depth >= step:
            yield Slip(f"indent {step} less", start, start + step, "")


def neighbours(char: str) -> list[str]:
    """Return what stands beside a key of an English keyboard: left and right, and the row above and below.

    A digit has the next digit up and down too, which is the slip of reading and not of typing.
    """
    lower = char.lower()
    found: list[str] = []
    for number, row in enumerate(_ROWS):
        at = row.find(lower)
        if at < 0:
            continue
        beside = [row[at - 1 : at] if at else "", row[at + 1 : at + 2]]
        above = _ROWS[number - 1][at + (number == 1) :][:1] if number > 1 else ""
        below = _ROWS[number + 1][max(at - (number == 0), 0) :][:1] if 0 < number < len(_ROWS) - 1 else ""
        found = [one for one in (*beside, above, below) if one]
    if char.isdigit():
        found += [str(other) for other in (int(char) - 1, int(char) + 1) if 0 <= other <= 9]
    elif char.isupper():
        found = [one.upper() for one in found] + [lower]
    return [one for one in dict.fromkeys(found) if one != char]
