"""One set of signs: each part of the score as last charted near one moment, with its points."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime, timedelta

from msgspec import Struct
from msgspec.structs import replace

from handoff.plugin import (
    Case,
    Input,
    Node,
    Reading,
    Source,
    amount,
    line_of,
    number_text,
    pressure_pair,
    words,
)

from . import formula
from .oxygen import Oxygen, oxygen_at

SIGNS = ("resp", "spo2", "bp", "pulse", "consciousness", "temp")
"""The observations that a set is made of, in the order in which the parts are printed."""


class SetPart(Struct, frozen=True):
    """One part of the score: what was charted and its points; ``missing`` says why there are none."""

    name: str
    shown: str
    points: int | None
    missing: str
    at: datetime | None
    node: Node | None
    source: Source
    older: str = ""

    def said(self) -> str:
        """Return the part with its points, and its time where it is older than the set: ``breaths 22 /min (2)``."""
        return " ".join(part for part in (self.name, self.shown, self.older, f"({self.points})") if part)

    def input(self) -> Input:
        """Return it as an input of the sum."""
        shown = " ".join(part for part in (self.shown, self.older, f"= {self.points}") if part)
        return Input(self.name, shown, line_of(self.node))


class SignSet(Struct, frozen=True):
    """The parts of the score at one moment."""

    at: datetime
    parts: tuple[SetPart, ...]
    scale: str

    @property
    def missing(self) -> tuple[SetPart, ...]:
        """The parts without points."""
        return tuple(part for part in self.parts if part.points is None)

    @property
    def points(self) -> tuple[int, ...]:
        """The points of the parts that have them."""
        return tuple(part.points for part in self.parts if part.points is not None)

    @property
    def at_least(self) -> int:
        """The sum of the points there are; the score itself where no part is missing."""
        return sum(self.points)

    @property
    def total(self) -> int | None:
        """The score; None while a part is missing."""
        return None if self.missing else formula.total_points(self.points)


def set_times(case: Case) -> tuple[datetime, ...]:
    """Return the moments at which a sign of the score was charted, oldest first."""
    times = {row.at for row in case.state.rows if any(_charted(row.entry.get(name)) for name in SIGNS)}
    return tuple(sorted(times))


def _charted(node: Node | None) -> bool:
    return words(node) not in ("", "not measured", "no trace")


def sign_set(case: Case, moment: datetime) -> SignSet:
    """Return the set of signs at ``moment``: of each, the last one charted within the window before it."""
    window = timedelta(minutes=case.parameters.number("news2.set_window"))

    def latest(name: str) -> Reading | None:
        found = [one for one in case.state.series(name) if moment - window <= one.at <= moment]
        kept = [one for one in found if _charted(one.node)] or found
        return kept[-1] if kept else None

    oxygen = oxygen_at(case, moment, window)
    scale = _scale(case, moment)
    parts = (
        _measured(case, "breaths", latest("resp"), "resp", "news2.resp", _per_minute),
        _saturation(case, latest("spo2"), scale, oxygen.on),
        _oxygen(case, oxygen),
        _measured(case, "systolic", latest("bp"), "systolic", "news2.systolic", _systolic),
        _measured(case, "pulse", latest("pulse"), "pulse", "news2.pulse", _per_minute),
        _consciousness(case, latest("consciousness")),
        _measured(case, "temperature", latest("temp"), "temp", "news2.temp", _celsius),
    )
    return SignSet(moment, tuple(_aged(case, part, moment) for part in parts), scale)


def _aged(case: Case, part: SetPart, moment: datetime) -> SetPart:
    """Return the part with its own time where it was charted before the others."""
    if part.at is None or part.at == moment:
        return part
    return replace(part, older=f"at {case.clock.time(part.at, case.now)}")


def _scale(case: Case, moment: datetime) -> str:
    node = case.block.get("scale_2") if isinstance(case.block, dict) else None
    if not isinstance(node, dict) or "struck" in node:
        return "scale 1"
    start, end = case.when(node.get("at")), case.when(node.get("ended"))
    confirmed = words(node.get("hypercapnic_failure")) == "confirmed"
    in_force = start is not None and start <= moment and (end is None or moment < end)
    return "scale 2" if confirmed and in_force else "scale 1"


def _per_minute(node: Node) -> float | None:
    return amount(node, "/min")


def _celsius(node: Node) -> float | None:
    return amount(node, "C")


def _systolic(node: Node) -> float | None:
    pair = pressure_pair(node)
    return pair[0] if pair else None


def _measured(
    case: Case,
    name: str,
    reading: Reading | None,
    place: str,
    table: str,
    read: Callable[[Node], float | None],
) -> SetPart:
    source = case.parameters.source_of(table)
    if reading is None:
        return SetPart(name, "", None, name, None, None, source)
    value = read(reading.node)
    if value is None:
        return SetPart(name, "", None, f"{name} ({words(reading.node)})", reading.at, reading.node, source)
    places = int(case.parameters.table("news2.places")[place])
    used = formula.rounded(value, places)
    points = formula.band_points(used, case.parameters[table].value)
    unit = case.parameters[table].unit
    return SetPart(name, f"{number_text(used, places)} {unit}", points, "", reading.at, reading.node, source)


def _saturation(case: Case, reading: Reading | None, scale: str, on: bool | None) -> SetPart:
    if scale == "scale 1":
        return _percent(case, reading, scale, "news2.spo2_scale_1")
    on_air = _percent(case, reading, scale, "news2.spo2_scale_2_on_air")
    on_oxygen = _percent(case, reading, scale, "news2.spo2_scale_2_on_oxygen")
    if on is None and on_air.points != on_oxygen.points:
        missing = "SpO2 (scale 2 needs air or oxygen)"
        return SetPart(on_air.name, "", None, missing, on_air.at, on_air.node, on_air.source)
    return on_oxygen if on else on_air


def _percent(case: Case, reading: Reading | None, scale: str, table: str) -> SetPart:
    return _measured(case, f"SpO2 ({scale})", reading, "spo2", table, lambda node: amount(node, "%"))


def _oxygen(case: Case, found: Oxygen) -> SetPart:
    source = case.parameters.source_of("news2.oxygen")
    if found.on is None:
        return SetPart("oxygen", "", None, "air or oxygen", None, None, source)
    points = int(case.parameters.table("news2.oxygen")["yes" if found.on else "no"])
    name = "on oxygen" if found.on else "on air"
    return SetPart(name, found.said, points, "", found.at, found.node, source)


def _consciousness(case: Case, reading: Reading | None) -> SetPart:
    source = case.parameters.source_of("news2.consciousness")
    if reading is None:
        return SetPart("consciousness", "", None, "consciousness", None, None, source)
    said = words(reading.node)
    points = case.parameters.table("news2.consciousness").get(said)
    if points is None:
        return SetPart(
            "consciousness", "", None, f"consciousness (charted as {said})", reading.at, reading.node, source
        )
    return SetPart("consciousness", said, int(points), "", reading.at, reading.node, source)
