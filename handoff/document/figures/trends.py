"""Charted values over time, ready to be drawn: each variable with its values, gaps kept."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from datetime import datetime, timedelta
from itertools import pairwise

from msgspec import Struct
from msgspec.structs import replace

from handoff.plugin import (
    List,
    Map,
    Node,
    PatientState,
    amount,
    child,
    entries,
    number,
    number_text,
    pressure_pair,
    words,
)

WINDOW = timedelta(hours=24)
"""Values older than this are not drawn."""

FEWEST = 2
"""A single value is no trend."""

GAP = 3
"""A time without a value that is longer than so many usual intervals leaves a gap in the line."""

Reader = Callable[[Node], "tuple[float, ...] | None"]


class Value(Struct, frozen=True):
    """One charted moment; ``numbers`` holds one number, or systolic and diastolic pressure, or None: no number."""

    at: datetime
    numbers: tuple[float, ...] | None


class Trend(Struct, frozen=True):
    """One variable over time.

    ``least`` is how far its axis spans at least; ``ends`` are the ends of an axis that has fixed ones.
    """

    name: str
    unit: str
    places: int
    least: float
    values: tuple[Value, ...]
    ends: tuple[float, float] | None = None

    @property
    def known(self) -> tuple[Value, ...]:
        """The moments that have a number."""
        return tuple(value for value in self.values if value.numbers is not None)

    @property
    def last(self) -> Value:
        """The latest moment that has a number."""
        return self.known[-1]

    def said(self, value: Value) -> str:
        """Return a value as printed, without its unit: ``118``, ``112/66``."""
        return "/".join(number_text(each, self.places) for each in value.numbers or ())

    def runs(self) -> tuple[tuple[Value, ...], ...]:
        """Return the values in runs that a line may join: none over a missing value or a long silence."""
        known = self.known
        waits = sorted(wait for a, b in pairwise(known) if (wait := b.at - a.at))
        longest = GAP * waits[len(waits) // 2] if waits else WINDOW
        runs: list[list[Value]] = [[]]
        for value in self.values:
            if value.numbers is None or (runs[-1] and value.at - runs[-1][-1].at > longest):
                runs.append([])
            if value.numbers is not None:
                runs[-1].append(value)
        return tuple(tuple(run) for run in runs if run)


def trends(state: PatientState, now: datetime) -> tuple[tuple[Trend, ...], tuple[str, ...]]:
    """Return the trends of the last day, and the names of the variables with too few values to draw."""
    drawn, few = [], []
    for trend in _all(state):
        recent = tuple(value for value in trend.values if now - WINDOW <= value.at <= now)
        kept = replace(trend, values=recent)
        if len(kept.known) >= FEWEST:
            drawn.append(kept)
        else:
            few.append(trend.name)
    return tuple(drawn), tuple(few)


def _all(state: PatientState) -> Iterator[Trend]:
    for name, called, unit, places, least, read in VARIABLES:
        readings = state.series(name)
        yield Trend(called, unit, places, least, tuple(Value(one.at, read(one.node)) for one in readings))
    yield from _pain(state)
    yield from _urine(state)


def _single(unit: str) -> Reader:
    def read(node: Node) -> tuple[float, ...] | None:
        found = amount(node, unit)
        return None if found is None else (found,)

    return read


VARIABLES: tuple[tuple[str, str, str, int, float, Reader], ...] = (
    ("pulse", "Pulse", "/min", 0, 20, _single("/min")),
    ("bp", "Blood pressure", "mmHg", 0, 30, pressure_pair),
    ("resp", "Breaths", "/min", 0, 8, _single("/min")),
    ("spo2", "SpO2", "%", 0, 6, _single("%")),
    ("temp", "Temperature", "C", 1, 1, _single("C")),
)
"""Name in the file, name in print, unit, decimals, least span of the axis, how it is read."""


def _pain(state: PatientState) -> Iterator[Trend]:
    """One trend for each scale and circumstance: scores of different scales are never joined."""
    found: dict[str, list[Value]] = {}
    for reading in state.series("pain"):
        for score in entries(reading.node):
            scale = child(score, "scale")
            called = words(child(scale, "name")) if isinstance(scale, Map) else words(scale)
            during = words(score.get("during"))
            name = ", ".join(part for part in (f"Pain, {called}", during) if part)
            points = _points(score)
            found.setdefault(name, []).append(Value(reading.at, None if points is None else (points,)))
    for name, values in found.items():
        top = max((value.numbers[0] for value in values if value.numbers), default=0.0)
        yield Trend(name, "", 1, 1, tuple(values), (0.0, max(top, 10.0)))
    if not found:
        yield Trend("Pain", "", 1, 1, ())


def _points(score: Map) -> float | None:
    """The score, or the sum of the points of its items."""
    parts = score.get("parts")
    items = [number(part) for part in parts] if isinstance(parts, List) else []
    known = [item for item in items if item is not None]
    total = sum(known) if known and len(known) == len(items) else None
    written = number(score.get("score"))
    return total if written is None else written


def _urine(state: PatientState) -> Iterator[Trend]:
    """Urine as it was measured, each over its own time; pads by weight apart from volumes."""
    volumes, pads = [], []
    for reading in state.series("urine"):
        node = reading.node
        if child(node, "pad") is not None:
            wet, dry = amount(child(node, "pad"), "g"), amount(child(node, "dry"), "g") or 0.0
            pads.append(Value(reading.at, None if wet is None else (max(wet - dry, 0.0),)))
            continue
        found = amount(child(node, "volume") if isinstance(node, Map) else node, "mL")
        volumes.append(Value(reading.at, None if found is None else (found,)))
    if pads:
        yield Trend("Urine by pad", "g", 0, 10, tuple(pads))
    if volumes or not pads:
        yield Trend("Urine", "mL", 0, 20, tuple(volumes))
