"""Everything that can be said, as lines for a terminal and as rows for a page."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Callable, Iterator, Mapping

from handoff.chart.meanings import Lexicon, Meaning
from handoff.chart.slots import Listed, Pairs, Slot

WIDTH = 80
_HANGING_WIDTH = 4
_KIND = re.compile(r"<(\w+):\w+>")


def rows(meanings: tuple[Meaning, ...]) -> Iterator[tuple[str, str, tuple[str, ...]]]:
    """Yield for each meaning an example, what it means, and every way to say it."""
    for meaning in meanings:
        says = tuple(_KIND.sub(r"<\1>", say).replace("_", " ") for say in meaning.says)
        yield meaning.examples[0], meaning.means, says


def listed_words(meanings: tuple[Meaning, ...]) -> dict[str, tuple[str, ...]]:
    """Return the listed words of each slot of ``meanings``, by what the slot is called."""
    found: dict[str, dict[str, None]] = {}
    for meaning in meanings:
        for name, slot in meaning.slots.items():
            for called, words in _words(name, slot):
                found.setdefault(called, {}).update(dict.fromkeys(words))
    return {called: tuple(words) for called, words in found.items()}


def _words(name: str, slot: Slot) -> Iterator[tuple[str, tuple[str, ...]]]:
    if isinstance(slot, Listed):
        yield slot.name, tuple(map(_with_short(slot.also), slot.words))
    elif isinstance(slot, Pairs):
        yield (
            name.replace("_", " "),
            tuple(word for word, (key, _) in slot.keys.items() if _is_own(word, key)),
        )
        for key, inner in slot.keys.values():
            yield from _words(key, inner)


def _with_short(also: Mapping[str, str]) -> Callable[[str], str]:
    def said(word: str) -> str:
        short = [one for one, long in also.items() if long == word]
        return f"{word} ({', '.join(short)})" if short else word

    return said


def _is_own(word: str, key: str) -> bool:
    return word.replace(" ", "_") == key.replace(" ", "_")


def by_group(words: Lexicon) -> Iterator[tuple[str, tuple[Meaning, ...]]]:
    """Yield the meanings of each plugin under its title."""
    for group in words.groups:
        meanings = tuple(meaning for meaning in words.meanings if meaning.group == group)
        if meanings:
            yield group, meanings


def lines(words: Lexicon) -> Iterator[str]:
    """Yield the lines of the list: each example with what it means, the ways to say it, the listed words."""
    for group, meanings in by_group(words):
        yield group.upper()
        for example, means, says in rows(meanings):
            yield from _wrapped(f'"{example}": {means}', 2)
            yield from _wrapped("say: " + "; ".join(says), 2 + _HANGING_WIDTH)
        for called, listed in listed_words(meanings).items():
            yield from _wrapped(f"words for {called}: {', '.join(listed)}", 2)
        yield ""
    yield from _wrapped("Quantities carry their unit. Capitals make no difference in listed words.", 0)
    yield from _wrapped("The time comes from --at, the name from --by or HANDOFF_BY.", 0)


def _wrapped(text: str, indent: int) -> list[str]:
    first, later = " " * indent, " " * (indent + _HANGING_WIDTH)
    return textwrap.wrap(text, WIDTH, initial_indent=first, subsequent_indent=later, break_on_hyphens=False)
