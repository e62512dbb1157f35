"""Patients of one set who could be taken for each other."""

from __future__ import annotations

import unicodedata
from collections.abc import Sequence
from difflib import SequenceMatcher
from itertools import combinations

from handoff.shift.people import UNKNOWN, Person, plain_name

ENOUGH_LETTERS = 4
"""In a shorter surname one letter makes another name."""

ALIKE = 0.85
"""Share of equal letters from which two whole names are read as alike."""


def mixed_up(patients: Sequence[tuple[str, Person]]) -> tuple[str, ...]:
    """Return a line for each two patients who could be taken for each other, in the order given.

    Args:
        patients: What each is called in the line (name, birth date, number, file), and who it is.
    """
    lines = []
    for (first, one), (second, other) in combinations(patients, 2):
        if is_same(one, other):
            lines.append(f"the same patient twice: {first} and {second}")
        elif plain_name(one.name) == plain_name(other.name) == UNKNOWN:
            lines.append(
                f"two unidentified patients, told apart by their numbers alone: {first} and {second}"
            )
        elif names_alike(one.name, other.name):
            lines.append(f"two patients with similar names: {first} and {second}")
    return tuple(lines)


def is_same(one: Person, other: Person) -> bool:
    """Return whether two files are of one patient: a number in common, or name and birth date."""
    numbers = {number for _, number in one.identifiers if number}
    if any(number in numbers for _, number in other.identifiers):
        return True
    named = plain_name(one.name) == plain_name(other.name) != UNKNOWN
    return named and bool(one.born) and one.born == other.born


def names_alike(one: str, other: str) -> bool:
    """Return whether two names are easily mixed up: surname alike, parts exchanged, or nearly the same letters."""
    first, second = _parts(one), _parts(other)
    if not first or not second or [UNKNOWN] in (first, second):
        return False
    if sorted(first) == sorted(second) or _near(first[-1], second[-1]):
        return True
    return SequenceMatcher(None, " ".join(first), " ".join(second)).ratio() >= ALIKE


def _parts(name: str) -> list[str]:
    """Return the parts of a name without case and accents, the surname last."""
    surname, comma, given = name.partition(",")
    bare = unicodedata.normalize("NFKD", f"{given} {surname}" if comma else name)
    letters = "".join(letter for letter in bare if not unicodedata.combining(letter))
    return letters.casefold().replace("-", " ").replace("'", "").split()


def _near(one: str, other: str) -> bool:
    """Return whether two words are equal or, if long enough, one letter or two exchanged letters apart."""
    if one == other:
        return True
    if min(len(one), len(other)) < ENOUGH_LETTERS or abs(len(one) - len(other)) > 1:
        return False
    same = next(
        (i for i, (a, b) in enumerate(zip(one, other, strict=False)) if a != b), min(len(one), len(other))
    )
    rest, other_rest = one[same:], other[same:]
    exchanged = rest[:2] == other_rest[1::-1] and rest[2:] == other_rest[2:]
    return exchanged or rest[1:] == other_rest[1:] or rest[1:] == other_rest or rest == other_rest[1:]
