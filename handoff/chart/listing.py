"""Everything that can be said, as lines for a terminal and as rows for a page."""

from __future__ import annotations

import re
from collections.abc import Iterator

from handoff.chart.meanings import Lexicon, Meaning

_KIND = re.compile(r"<(\w+):\w+>")


def rows(meanings: tuple[Meaning, ...]) -> Iterator[tuple[str, str, str]]:
    """Yield for each meaning how it is said (the first way, then the others), what it means and an example."""
    for meaning in meanings:
        says = [_KIND.sub(r"<\1>", say).replace("_", " ") for say in meaning.says]
        yield "; ".join(says), meaning.means, meaning.examples[0]


def by_group(words: Lexicon) -> Iterator[tuple[str, tuple[Meaning, ...]]]:
    """Yield the meanings of each plugin under its title."""
    for group in words.groups:
        meanings = tuple(meaning for meaning in words.meanings if meaning.group == group)
        if meanings:
            yield group, meanings


def lines(words: Lexicon) -> Iterator[str]:
    """Yield the lines of the list: each example with what it means, and the other ways to say it."""
    for group, meanings in by_group(words):
        yield f"{group}:"
        for says, means, example in rows(meanings):
            yield f'  "{example}"  {means}'
            yield f"      {says}"
        yield ""
    yield "Quantities carry their unit; listed words may be written in capitals or not."
    yield "The time comes from --at, the name from --by."
