"""Urine as charted: each measure over its true interval; what was drained at insertion is left out of the hour."""

from __future__ import annotations

import math
from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Map, Node, Reading, amount, child, entries, hours_text, words

from . import formula
from .say import ml

HOUR = timedelta(hours=1)
NOT_MEASURED = "not measured"
LOST = "lost"
CATHETER = "urinary catheter"
NAMES = (
    ("urin", "cath"),
    ("bladder", "cath"),
    ("urethra", "cath"),
    ("suprapubic",),
    ("indwelling", "cath"),
    ("foley",),
    ("idc",),
)
"""Words that together name a urinary catheter, where no kind is written."""


class Urine(Struct, frozen=True):
    """One measure: when, how much, over how many hours (None where that is not known), and its colour."""

    at: datetime
    ml: float | None
    hours: float | None
    colour: str
    line: int
    how: str
    word: str = ""
    count: int = 1
    since: datetime | None = None

    @property
    def ml_h(self) -> float | None:
        """Urine in mL/h over its interval; None where volume or interval is missing."""
        if self.ml is None or self.hours is None or self.hours <= 0:
            return None
        return formula.urine_rate_ml_h(self.ml, self.hours)

    def shown(self) -> str:
        """Return the measure as printed: ``41 mL over 1 h``."""
        if self.ml is None:
            return self.word or NOT_MEASURED
        over = f" over {hours_text(self.hours)}" if self.hours else ", interval not recorded"
        entries_said = f" ({self.count} entries of that minute added)" if self.count > 1 else ""
        return f"{ml(self.ml)}{over}{entries_said}"


class Charted(Struct, frozen=True):
    """All measures of urine, and the catheter."""

    readings: tuple[Urine, ...]
    drained: tuple[tuple[datetime | None, float], ...]
    catheter: datetime | None

    @property
    def drained_ml(self) -> float:
        """What drained when catheters were placed, in mL; also where the time was not charted."""
        return math.fsum(volume for _, volume in self.drained)

    def drained_after_ml(self, start: datetime) -> float:
        """Return what drained from catheters placed after ``start``, in mL; an undated one counts as before."""
        return math.fsum(volume for at, volume in self.drained if at is not None and at > start)

    @property
    def measured(self) -> tuple[Urine, ...]:
        """The readings that hold a volume."""
        return tuple(one for one in self.readings if one.ml is not None)

    @property
    def last(self) -> Urine | None:
        """The latest reading that holds a volume, or None."""
        return self.measured[-1] if self.measured else None

    @property
    def latest_colour(self) -> Urine | None:
        """The latest reading with a colour, or None."""
        coloured = [one for one in self.readings if one.colour]
        return coloured[-1] if coloured else None

    def total_ml(self, start: datetime | None = None, end: datetime | None = None) -> float:
        """Return the urine charted after ``start`` up to ``end``, in mL, without what drained at insertion."""
        return math.fsum(
            one.ml
            for one in self.readings
            if one.ml is not None and (start is None or one.at > start) and (end is None or one.at <= end)
        )


def read_urine(case: Case) -> Charted:
    """Return every measure of urine with its true interval."""
    catheters = _catheters(case)
    placed = [at for at, _ in catheters if at is not None]
    grouped: dict[datetime, list[Reading]] = {}
    for reading in case.state.series("urine"):
        grouped.setdefault(reading.at, []).append(reading)
    found: list[Urine] = []
    since: datetime | None = None
    for at, readings in grouped.items():
        start = max(
            [moment for moment in (since, *placed) if moment is not None and moment < at], default=None
        )
        one = _merged([_read(case, reading, start) for reading in readings])
        found.append(one)
        if one.ml is not None or one.word == LOST:
            since = at
    last = max(placed) if placed else None
    return Charted(tuple(found), tuple(catheters), last)


def is_catheter(entry: Map) -> bool:
    """Return whether a line of the file is a urinary catheter: by its kind, by what drained, or by its name."""
    if "drained_at_insertion" in entry or words(entry.get("kind")) == CATHETER:
        return True
    what = words(entry.get("what")).lower()
    if words(entry.get("kind")) or "drain" in what:
        return False
    return any(all(part in what for part in parts) for parts in NAMES)


def _catheters(case: Case) -> list[tuple[datetime | None, float]]:
    return [
        (case.when(entry.get("placed")), amount(entry.get("drained_at_insertion"), "mL") or 0.0)
        for entry in entries(case.state.root.get("lines"))
        if is_catheter(entry)
    ]


def _read(case: Case, reading: Reading, start: datetime | None) -> Urine:
    node = reading.node
    colour = words(child(node, "colour"))
    volume = _volume(case, node)
    over = amount(child(node, "over"), "h")
    hours = over if over is not None else (reading.at - start) / HOUR if start is not None else None
    is_lost = words(child(node, "lost")) == "yes" or words(node) == LOST
    word = LOST if is_lost else NOT_MEASURED if volume is None else ""
    how = "pad by weight" if child(node, "pad") is not None else ""
    return Urine(
        reading.at,
        volume,
        None if volume is None or is_lost else hours,
        colour,
        getattr(node, "line", reading.row.line),
        how,
        word,
        since=None if over is not None else start,
    )


def _volume(case: Case, node: Node) -> float | None:
    """The volume of an entry in mL: as written, or a pad by the weight it gained."""
    pad = amount(child(node, "pad"), "g")
    if pad is not None:
        gained = max(0.0, pad - (amount(child(node, "dry"), "g") or 0.0))
        return gained * case.parameters.number("urine.pad_ml_per_g")
    if isinstance(node, Map):
        return amount(node.get("volume"), "mL")
    return amount(node, "mL")


def _merged(same: list[Urine]) -> Urine:
    """Entries of one minute as one: two nurses may chart the same minute, and both volumes count."""
    if len(same) == 1:
        return same[0]
    held = [one for one in same if one.ml is not None]
    first = held[0] if held else same[0]
    return Urine(
        first.at,
        math.fsum(one.ml or 0.0 for one in held) if held else None,
        max((one.hours for one in held if one.hours is not None), default=None),
        next((one.colour for one in same if one.colour), ""),
        first.line,
        "pad by weight" if any(one.how for one in same) else "",
        LOST if any(one.word == LOST for one in same) else first.word,
        len(held),
        first.since,
    )
