"""Short printed references of the care plan (F3): the same actions always give the same ones."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from string import ascii_uppercase

from handoff.plugin import Action, System

LIKE_DIGITS = "IO"
"""Letters that a pen makes look like digits; no reference begins with them."""

BY_HAND = "X"
"""The letter of rows that are added by hand; no area gets it."""

_SYSTEMS = [system for system in System if system is not System.GENERAL] + [System.GENERAL]


def by_area(actions: Sequence[Action]) -> list[tuple[str, list[Action]]]:
    """Return the actions grouped by problem area, what can kill first on top, each group as it came."""
    groups: dict[str, list[Action]] = {}
    for action in actions:
        groups.setdefault(action.area, []).append(action)
    return sorted(groups.items(), key=lambda group: min(_SYSTEMS.index(action.system) for action in group[1]))


def references(actions: Sequence[Action]) -> dict[str, str]:
    """Return the printed reference of each action by its key: a letter for its area and a number."""
    found: dict[str, str] = {}
    used: set[str] = set()
    for area, group in by_area(actions):
        letter = _letter(area, used)
        used.add(letter)
        for number, action in enumerate(group, start=1):
            found[action.key] = f"{letter}{number}"
    return found


def _letter(area: str, used: set[str]) -> str:
    words = area.upper().split()
    wanted: Iterable[str] = [word[0] for word in words] + list("".join(words)) + list(ascii_uppercase)
    free = [letter for letter in wanted if letter in ascii_uppercase and letter not in LIKE_DIGITS + BY_HAND]
    single = next((letter for letter in free if letter not in used), None)
    if single:
        return single
    return next(a + b for a in ascii_uppercase for b in ascii_uppercase if a + b not in used)
