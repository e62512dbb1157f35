"""The fall of carboxyhaemoglobin: half-lives by oxygen, the level expected at a moment, and when it is in doubt."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Parameter, number_text

from . import charted, formula, oxygen, say
from .charted import Level
from .exposure import Exposure
from .oxygen import Stretch


class Expected(Struct, frozen=True):
    """The level expected now in %, its range, and whether a half-life from memory went into it."""

    level: Level
    central: float
    low: float
    high: float
    parts: tuple[Stretch, ...]
    from_memory: bool

    @property
    def known(self) -> bool:
        """Whether any oxygen is charted for the time since the measurement."""
        return not self.parts or any(part.kind != oxygen.UNCHARTED for part in self.parts)


class Monoxide(Struct, frozen=True):
    """What is known of carbon monoxide, and why a saturation by oximeter cannot be trusted (empty: no reason)."""

    levels: tuple[Level, ...]
    expected: Expected | None
    doubt: str

    @property
    def raised(self) -> bool:
        """Whether the level is, or may still be, above the limit in use."""
        return bool(self.doubt) and bool(self.levels)


class HalfLife(Struct, frozen=True):
    """Low, central and high half-life in min, and the parameters that they come from."""

    low: float
    central: float
    high: float
    origin: tuple[Parameter, ...]

    def shown(self) -> str:
        """Return it as printed: ``74 min (26 to 148)``."""
        low, central, high = (number_text(value, say.PLACES) for value in (self.low, self.central, self.high))
        return f"{central} min ({low} to {high})"


def half_life(case: Case, kind: str) -> HalfLife:
    """Return the half-life for a kind of oxygen.

    No half-life is published between room air and 100 % oxygen: the range reaches from the one
    to the other, and the central line counts such time as room air, the slower.
    """
    full = case.parameters[f"half_life.{case.chosen('half_life').name}"]
    air = case.parameters["half_life.room_air"]
    chamber = case.parameters["half_life.hyperbaric"]
    one = {oxygen.FULL: full, oxygen.AIR: air, oxygen.CHAMBER: chamber}.get(kind)
    fast, slow = (one, one) if one is not None else (full, air)
    origin = (one,) if one is not None else (full, air)
    return HalfLife(float(fast.value["low"]), float(slow.value["central"]), float(slow.value["high"]), origin)


def expected_at(case: Case, level: Level, moment: datetime) -> Expected:
    """Return the level expected at ``moment`` from one measurement before it."""
    parts = oxygen.stretches(case, level.at, moment)
    lives = [half_life(case, part.kind) for part in parts]
    spans = [part.minutes for part in parts]
    low = formula.decayed_pct(level.pct, spans, [life.low for life in lives])
    central = formula.decayed_pct(level.pct, spans, [life.central for life in lives])
    high = formula.decayed_pct(level.pct, spans, [life.high for life in lives])
    memory = any(parameter.kind == "from memory" for life in lives for parameter in life.origin)
    return Expected(level, central, low, high, parts, memory)


def monoxide(case: Case, seen: Exposure) -> Monoxide:
    """Return what is known of carbon monoxide now."""
    levels = charted.levels(case)
    expected = expected_at(case, levels[-1], case.now) if levels else None
    return Monoxide(levels, expected, doubt_at(case, seen, levels, case.now))


def doubt_at(case: Case, seen: Exposure, levels: tuple[Level, ...], moment: datetime) -> str:
    """Return why a saturation of ``moment`` may read falsely high; empty where nothing recorded says so."""
    earlier = [level for level in levels if level.at <= moment]
    if not levels:
        return "carboxyhaemoglobin is not recorded after smoke exposure" if seen.smoke_recorded else ""
    limit = limit_pct(case)
    level = earlier[-1] if earlier else levels[0]
    raised = f"carboxyhaemoglobin {say.pct(level.pct)} at {say.at(case, level.at)}, above {say.pct(limit)}"
    if not earlier:
        unknown = f"carboxyhaemoglobin was not measured before {say.at(case, level.at)}"
        return raised if level.pct > limit else unknown if seen.smoke_recorded else ""
    expected = expected_at(case, level, moment)
    # A half-life from memory may keep a raised level raised; it must not declare it cleared.
    still = expected.high > limit or expected.from_memory or not expected.known
    return raised if level.pct > limit and still else ""


def limit_pct(case: Case) -> float:
    """Return the level in % above which carboxyhaemoglobin counts as raised."""
    return case.parameters.number(f"raised.{case.chosen('raised').name}")
