"""A legend: symbols with their words, set in lines as wide as the figure."""

from __future__ import annotations

from collections.abc import Callable, Sequence

from msgspec import Struct

from handoff.document.figures.shapes import Words, label

SIZE_PT, LINE_HIGH = 7.5, 12.0
SYMBOL_WIDE, SYMBOL_HIGH = 18.0, 8.5
LETTER_WIDE = 0.5
"""Mean width of a letter in parts of its height; the boxes leave room for more."""


class Entry(Struct, frozen=True):
    """One symbol of a legend, drawn under a name in a box of left, top, width and height; and its words."""

    symbol: Callable[[str, float, float, float, float], str]
    words: str


def legend(entries: Sequence[Entry], top: float, wide: float) -> tuple[str, float]:
    """Return the legend as shapes, and its height in points."""
    drawn, left, line = [], 0.0, 0
    for entry in entries:
        long = SYMBOL_WIDE + 4 + width_of(entry.words) + 8
        if left and left + long > wide:
            left, line = 0.0, line + 1
        edge = top + line * LINE_HIGH
        name = f"legend symbol: {entry.words}"
        drawn.append(entry.symbol(name, left, edge + (LINE_HIGH - SYMBOL_HIGH) / 2, SYMBOL_WIDE, SYMBOL_HIGH))
        words = [Words(entry.words, SIZE_PT)]
        room = long - SYMBOL_WIDE - 4
        drawn.append(
            label(
                f"legend: {entry.words}", left + SYMBOL_WIDE + 4, edge, room, LINE_HIGH, words, anchor="ctr"
            )
        )
        left += long
    return "".join(drawn), (line + 1) * LINE_HIGH if entries else 0.0


def width_of(words: str, size_pt: float = SIZE_PT) -> float:
    """Return about how wide a line of text is in points."""
    return len(words) * LETTER_WIDE * size_pt
