"""Labels beside a figure with lines that lead to it: placed in two columns, none over another."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from msgspec import Struct

from handoff.document.figures.burned import Label
from handoff.document.figures.curves import Point
from handoff.document.figures.shapes import BLACK, WHITE, Look, Words, box, disc, label, shorten, stroke

SHARE_PT = 8.0
NAME_HIGH, SHARE_HIGH, GAP = 8.6, 10.2, 4.0
SWATCH_WIDE, SWATCH_HIGH = 15.0, 8.0
MIDDLE_PT = 6.0
"""What lies nearer than this to the middle of the figure may be labelled on either side."""

LETTERS = 26
"""Longer names are cut; the table has them whole."""


class Column(Struct, frozen=True):
    """Where labels of one side stand; ``towards`` is the edge that faces the figure."""

    left: float
    right: float
    top: float
    bottom: float
    is_left: bool

    @property
    def towards(self) -> float:
        """The edge that faces the figure."""
        return self.right if self.is_left else self.left


class Placed(Struct, frozen=True):
    """A label with its place: its upper edge, and the point that its line leads to."""

    label: Label
    column: Column
    top: float
    target: Point


def height(one: Label) -> float:
    """Return the height of a label in points."""
    small = 1 + len(one.notes) + sum(len(extent.below) for extent in one.extents)
    return NAME_HIGH * small + SHARE_HIGH * len(one.extents)


def place(
    labels: Sequence[Label], targets: Mapping[str, Point], middle: float, columns: tuple[Column, Column]
) -> tuple[list[Placed], int]:
    """Return the labels with their places in the left or the right column, and how many found none.

    Args:
        labels: The labels of one face.
        targets: Where each drawn region is pointed at.
        middle: x of the middle of the figure.
        columns: The left and the right column.
    """
    sides: tuple[list[Label], list[Label]] = ([], [])
    open_ones = []
    for one in labels:
        away = targets[one.points_at].x - middle
        if abs(away) < MIDDLE_PT:
            open_ones.append(one)
        else:
            sides[away > 0].append(one)
    for one in open_ones:
        used = [sum(height(other) for other in side) for side in sides]
        sides[used[1] < used[0]].append(one)
    placed: list[Placed] = []
    lost = 0
    for side, column in zip(sides, columns, strict=True):
        kept = _fitting(side, column)
        lost += len(side) - len(kept)
        placed += _stacked(sorted(kept, key=lambda one: targets[one.points_at].y), targets, column)
    return placed, lost


def _fitting(side: list[Label], column: Column) -> list[Label]:
    kept = sorted(side, key=lambda one: -one.share_pct)
    while kept and sum(height(one) + GAP for one in kept) > column.bottom - column.top:
        kept.pop()
    return kept


def _stacked(labels: Sequence[Label], targets: Mapping[str, Point], column: Column) -> list[Placed]:
    tops: list[float] = []
    free = column.top
    for one in labels:
        wanted = targets[one.points_at].y - height(one) / 2
        tops.append(max(wanted, free))
        free = tops[-1] + height(one) + GAP
    end = column.bottom
    for index in range(len(labels) - 1, -1, -1):
        tops[index] = min(tops[index], end - height(labels[index]))
        end = tops[index] - GAP
    return [Placed(one, column, top, targets[one.points_at]) for one, top in zip(labels, tops, strict=True)]


def leader(placed: Placed, several: bool) -> str:
    """Return the line from a label to its region; it ends in a dot, or in a plus where depths meet."""
    name, column = f"line of {placed.label.name}", placed.column
    start = Point(column.towards + (2 if column.is_left else -2), placed.top + NAME_HIGH / 2)
    ends = (start, placed.target)
    drawn = stroke(f"halo of {name}", ends, Look(line=WHITE, width_pt=2.5)) + stroke(
        name, ends, Look(width_pt=0.6)
    )
    if not several:
        return drawn + disc(f"end of {name}", placed.target, 2.2, Look(fill=BLACK, line=WHITE, width_pt=0.75))
    return drawn + plus(f"end of {name}", placed.target)


def plus(name: str, at: Point) -> str:
    """Return the mark of a region with several depths."""
    reach = 2.6
    across = (Point(at.x - reach, at.y), Point(at.x + reach, at.y))
    upright = (Point(at.x, at.y - reach), Point(at.x, at.y + reach))
    look = Look(width_pt=1.5)
    ground = disc(name, at, 4.6, Look(fill=WHITE, width_pt=0.75))
    return ground + stroke(f"{name}, across", across, look) + stroke(f"{name}, upright", upright, look)


def written(placed: Placed) -> str:
    """Return the label itself: region, a swatch with each share, notes."""
    one, column = placed.label, placed.column
    name = one.name
    drawn = [_words(f"label of {name}", column, placed.top, Words(shorten(one.title, LETTERS)))]
    top = placed.top + NAME_HIGH
    for number, extent in enumerate(one.extents, start=1):
        left = column.towards - (SWATCH_WIDE if column.is_left else 0)
        edge = top + (SHARE_HIGH - SWATCH_HIGH) / 2
        drawn.append(
            box(f"shading {number} of {name}", left, edge, SWATCH_WIDE, SWATCH_HIGH, extent.depth.look)
        )
        share = Words(extent.said, SHARE_PT, bold=True)
        drawn.append(_words(f"share {number} of {name}", column, top, share, beside=SWATCH_WIDE + 3))
        top += SHARE_HIGH
        for below in extent.below:
            drawn.append(_words(f"{below}: {name}", column, top, Words(below)))
            top += NAME_HIGH
    for note in one.notes:
        drawn.append(_words(f"{note}: {name}", column, top, Words(note)))
        top += NAME_HIGH
    return "".join(drawn)


def _words(name: str, column: Column, top: float, words: Words, beside: float = 0.0) -> str:
    left = column.left + (0 if column.is_left else beside)
    high = SHARE_HIGH if words.bold else NAME_HIGH
    wide = column.right - column.left - beside
    return label(name, left, top, wide, high, [words], align="right" if column.is_left else "left")
