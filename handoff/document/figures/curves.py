"""Smooth lines through points, and the closed paths that are put together from pieces of them."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from itertools import pairwise
from typing import NamedTuple

from msgspec import Struct

ROUNDNESS = 1 / 6
"""How far a smooth line leaves a point along its direction, in parts of the way between its neighbours."""

CIRCLE = 0.5523
"""Handle with which four curves keep to a circle, in radii."""


class Point(NamedTuple):
    """A place: x to the right, y down."""

    x: float
    y: float


class Step(NamedTuple):
    """One piece of a path to ``end``, bent by two handles (both None: straight)."""

    end: Point
    first: Point | None = None
    second: Point | None = None


class Path(Struct, frozen=True):
    """A path from ``start`` along ``steps``; closed paths end where they began."""

    start: Point
    steps: tuple[Step, ...]

    def moved(self, change: Callable[[Point], Point]) -> Path:
        """Return the path with every point and handle moved by ``change``."""
        steps = (Step(*(None if point is None else change(point) for point in step)) for step in self.steps)  # type: ignore[arg-type]
        return Path(change(self.start), tuple(steps))

    def box(self) -> tuple[float, float, float, float]:
        """Return left, top, right and bottom of a box that holds every point and handle."""
        points = [self.start, *(point for step in self.steps for point in step if point is not None)]
        xs, ys = [point.x for point in points], [point.y for point in points]
        return min(xs), min(ys), max(xs), max(ys)


class Line:
    """A smooth open line through points; neighbouring regions share pieces of it."""

    def __init__(self, *points: tuple[float, float]) -> None:
        self.points = tuple(Point(*point) for point in points)

    def _slope(self, index: int) -> Point:
        before, after = self.points[max(index - 1, 0)], self.points[min(index + 1, len(self.points) - 1)]
        return Point((after.x - before.x) * ROUNDNESS, (after.y - before.y) * ROUNDNESS)

    def part(self, start: int, end: int) -> Path:
        """Return the piece from point ``start`` to point ``end``; backwards where ``end`` is the smaller."""
        way = 1 if end >= start else -1
        steps = []
        for index in range(start, end, way):
            here, there = self.points[index], self.points[index + way]
            out, back = self._slope(index), self._slope(index + way)
            first = Point(here.x + way * out.x, here.y + way * out.y)
            steps.append(Step(there, first, Point(there.x - way * back.x, there.y - way * back.y)))
        return Path(self.points[start], tuple(steps))

    def whole(self) -> Path:
        """Return the line from its first point to its last."""
        return self.part(0, len(self.points) - 1)

    def back(self) -> Path:
        """Return the line from its last point to its first."""
        return self.part(len(self.points) - 1, 0)


def closed(*pieces: Path) -> Path:
    """Return the closed path along ``pieces``; a gap between two of them becomes a straight line."""
    return Path(pieces[0].start, tuple(_joined(pieces)))


def _joined(pieces: Sequence[Path]) -> Iterable[Step]:
    at = pieces[0].start
    for piece in pieces:
        if piece.start != at:
            yield Step(piece.start)
        yield from piece.steps
        at = piece.steps[-1].end


def loop(*points: tuple[float, float]) -> Path:
    """Return the smooth closed path through ``points``."""
    return Line(points[-1], *points, points[0], points[1]).part(1, len(points) + 1)


def mirrored(path: Path) -> Path:
    """Return the path on the other side of the middle (x = 0)."""
    return path.moved(lambda point: Point(-point.x, point.y))


def oval(centre: Point, across: float, along: float, turn: float = 0.0) -> Path:
    """Return an ellipse of half width ``across`` and half height ``along``, turned by ``turn`` radians."""
    sine, cosine = math.sin(turn), math.cos(turn)

    def place(x: float, y: float) -> Point:
        x, y = x * across, y * along
        return Point(centre.x + x * cosine - y * sine, centre.y + x * sine + y * cosine)

    corners = ((1, 0), (0, 1), (-1, 0), (0, -1), (1, 0))
    steps = (
        Step(
            place(c, d),
            place(a + CIRCLE * c, b + CIRCLE * d),
            place(c + CIRCLE * a, d + CIRCLE * b),
        )
        for (a, b), (c, d) in pairwise(corners)
    )
    return Path(place(1, 0), tuple(steps))
