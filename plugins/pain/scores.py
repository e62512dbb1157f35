"""Pain scores as they were charted, each with its scale and the range of that scale."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, FormulaInputError, List, Map, Node, number, number_text, words

from . import formula

PREFIX = "scale."
DURING = ("rest", "movement", "procedure")


class Scale(Struct, frozen=True):
    """A scale: how the file names it, how it is printed, its range, its words or its items."""

    key: str
    called: str
    lowest: float = 0
    highest: float = 0
    step: float = 1
    words: tuple[str, ...] = ()
    self_report: bool = False
    parts: int = 0
    part_lowest: float = 0
    part_highest: float = 0
    listed: bool = True

    def range_text(self) -> str:
        """Return the range as it is printed: ``0 to 10``, or the words of the scale."""
        if self.words:
            return ", ".join(self.words)
        return f"{number_text(self.lowest)} to {number_text(self.highest)}"


class Score(Struct, frozen=True):
    """One charted score; ``points`` is None on a scale of words."""

    at: datetime
    scale: Scale
    points: float | None
    written: str
    during: str
    site: str
    node: Node

    def value(self) -> float | str:
        """Return the points, or the word of a scale of words."""
        return self.written if self.points is None else self.points

    def shown(self) -> str:
        """Return ``6 (numeric rating scale, 0 to 10), at rest``; never a bare number."""
        said = self.written if self.points is None else number_text(self.points, 1)
        where = f", {self.site}" if self.site else ""
        return f"{said} ({self.scale.called}, {self.scale.range_text()}){during_text(self.during)}{where}"


def during_text(during: str) -> str:
    """Return how the moment of a score is printed: ``, at rest``; the gap itself when it is not recorded."""
    said = {"rest": "at rest", "movement": "on movement", "procedure": "in a procedure"}
    return f", {said[during]}" if during in said else ", rest or movement not recorded"


def scale_of(case: Case, node: Node | None) -> Scale | None:
    """Return the scale written at ``node``; one that is not in our tables by its own name and range."""
    if isinstance(node, Map):
        name, lowest, highest = (
            words(node.get("name")),
            number(node.get("lowest")),
            number(node.get("highest")),
        )
        if not name or lowest is None or highest is None:
            return None
        return Scale(name, name, lowest, highest, listed=False)
    name = words(node)
    if PREFIX + name not in case.parameters:
        return None
    entry = case.parameters.table(PREFIX + name)
    return Scale(
        key=name,
        called=str(entry["called"]),
        lowest=float(entry.get("lowest", 0)),
        highest=float(entry.get("highest", 0)),
        step=float(entry.get("step", 1)),
        words=tuple(entry.get("words", ())),
        self_report=bool(entry["self_report"]),
        parts=int(entry.get("parts", 0)),
        part_lowest=float(entry.get("part_lowest", 0)),
        part_highest=float(entry.get("part_highest", 0)),
    )


def points_of(scale: Scale, node: Map) -> float | None:
    """Return the score in points, from ``score`` or from the points of the items; None if neither."""
    points = number(node.get("score"))
    if points is not None:
        return points
    parts = item_points(node)
    if not parts or not scale.parts:
        return None
    try:
        return formula.scale_total(parts, scale.parts, scale.part_lowest, scale.part_highest)
    except FormulaInputError:
        return None


def item_points(node: Map) -> tuple[float, ...]:
    """Return the points of the items as charted."""
    parts = node.get("parts")
    if not isinstance(parts, List):
        return ()
    return tuple(points for part in parts if (points := number(part)) is not None)


def pain_scores(case: Case) -> tuple[Score, ...]:
    """Return every pain score in time order; within a minute self-report before what was observed."""
    return tuple(sorted(_pain_scores(case), key=_order))


def _order(score: Score) -> tuple[datetime, bool, str, int, float, str]:
    during = DURING.index(score.during) if score.during in DURING else len(DURING)
    return score.at, not score.scale.self_report, score.scale.key, during, score.points or 0, score.written


def _pain_scores(case: Case) -> Iterator[Score]:
    for reading in case.state.series("pain"):
        for node in reading.node if isinstance(reading.node, List) else (reading.node,):
            score = _score(case, reading.at, node) if isinstance(node, Map) and "struck" not in node else None
            if score is not None:
                yield score


def _score(case: Case, at: datetime, node: Map) -> Score | None:
    scale = scale_of(case, node.get("scale"))
    if scale is None:
        return None
    written, during, site = words(node.get("score")), words(node.get("during")), words(node.get("site"))
    if scale.words:
        return Score(at, scale, None, written, during, site, node) if written else None
    points = points_of(scale, node)
    if points is None:
        return None
    return Score(at, scale, points, written or number_text(points, 1), during, site, node)
