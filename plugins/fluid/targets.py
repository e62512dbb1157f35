"""The urine target in force: the ordered one, else the named set for this patient, with pigment apart."""

from __future__ import annotations

from collections.abc import Callable
from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Source, amount, child

from .bands import Band, Facts, pick
from .orders import SETS_URINE, ended_at, orders, sets
from .say import ml_h, ml_kg_h, span
from .urine import Charted

ROUNDING = 1e-9
"""Binary fractions: urine of exactly the target is in the target."""


class Target(Struct, frozen=True):
    """A urine target: both ends in mL/kg/h (None for an open end), how it is printed, whose it is."""

    low_ml_kg_h: float | None
    high_ml_kg_h: float | None
    shown: str
    name: str
    sources: tuple[Source, ...]
    may_flag: bool = True
    cautions: tuple[str, ...] = ()
    line: int = 0

    def judged(self, ml_kg_h_value: float) -> str:
        """Return ``below``, ``in`` or ``above`` for urine in mL/kg/h."""
        if self.low_ml_kg_h is not None and ml_kg_h_value < self.low_ml_kg_h - ROUNDING:
            return "below"
        if self.high_ml_kg_h is not None and ml_kg_h_value > self.high_ml_kg_h + ROUNDING:
            return "above"
        return "in"


class NoTarget(Struct, frozen=True):
    """Why no target is named, and what to say about it."""

    shown: str


def is_pigmented(case: Case, charted: Charted) -> bool | None:
    """Return whether the latest urine whose colour was charted is pigmented; None where none was."""
    latest = charted.latest_colour
    return None if latest is None else latest.colour in case.parameters["urine.pigmented"].value


def target(case: Case, kg: float | None, facts: Facts, pigmented: bool | None) -> Target | NoTarget:
    """Return the urine target in force for a patient of ``kg`` (the weight that urine goes by)."""
    ordered = _ordered(case, kg)
    if ordered is not None:
        return ordered
    if kg is None:
        return NoTarget("no target without a weight")
    usual = _named(case, "urine_target", case.chosen("urine_target").name, kg, facts)
    if not pigmented:
        return usual
    return _for_pigment(case, kg, facts, usual)


def _for_pigment(case: Case, kg: float, facts: Facts, usual: Target | NoTarget) -> Target | NoTarget:
    name = case.chosen("pigment_target").name
    found = _named(case, "pigment_target", name, kg, facts, usual)
    if isinstance(found, Target) and found.may_flag:
        return found
    caution = "Pigmented urine: the usual target may be low; ask the prescriber for the target."
    if isinstance(usual, Target):
        return Target(
            usual.low_ml_kg_h, None, usual.shown, usual.name, usual.sources, usual.may_flag, (caution,)
        )
    return NoTarget(f"{usual.shown}; {caution}")


def _ordered(case: Case, kg: float | None) -> Target | None:
    named = [row for row in orders(case) if sets(row.entry, SETS_URINE)]
    if not named:
        return None
    row = named[-1]
    if ended_at(case, row) is not None:
        return None
    said = f"order of {_time(case, row.at)}"
    source = case.parameters.source_of("urine.check_every")
    by_weight = child(row.entry, "urine_target_per_kg")
    if by_weight is not None:
        low, high = (amount(child(by_weight, key), "mL/kg/h") for key in ("from", "to"))
        return Target(low, high, _range(low, high, ml_kg_h), said, (source,), line=row.line)
    node = child(row.entry, "urine_target")
    low, high = (amount(child(node, key), "mL/h") for key in ("from", "to"))
    if kg is None:
        return None
    return Target(
        None if low is None else low / kg,
        None if high is None else high / kg,
        _range(low, high, ml_h),
        said,
        (source,),
        line=row.line,
    )


def _time(case: Case, at: datetime) -> str:
    return case.clock.time(at, case.now)


def _named(
    case: Case, choice: str, name: str, kg: float, facts: Facts, usual: Target | NoTarget | None = None
) -> Target | NoTarget:
    identifier = f"{choice}.{name}"
    parameter = case.parameters[identifier]
    picked = pick(parameter.value, {**facts, "kg": kg})
    if picked.band is None:
        reason = (
            f"missing {', '.join(picked.missing)}" if picked.missing else "it has no line for this patient"
        )
        return NoTarget(f"no target by {name}: {reason}")
    may_flag = parameter.kind != "from memory" or case.chosen(choice).by_policy
    return _of_band(picked.band, name, kg, parameter.source, may_flag, usual)


def _of_band(
    band: Band, name: str, kg: float, source: Source, may_flag: bool, usual: Target | NoTarget | None
) -> Target | NoTarget:
    if "times_usual" in band:
        if not isinstance(usual, Target) or usual.low_ml_kg_h is None:
            return NoTarget(f"no target by {name}: the usual target has no lower end")
        times = float(band["times_usual"])
        low, high = usual.low_ml_kg_h * times, (usual.high_ml_kg_h or usual.low_ml_kg_h) * times
        shown = _range(low, high, ml_kg_h)
        return Target(low, high, shown, f"{name} of {usual.name}", (source, *usual.sources), may_flag)
    low_h, high_h = (_number(band, f"{end}_ml_h") for end in ("low", "high"))
    low_kg, high_kg = (_number(band, f"{end}_ml_kg_h") for end in ("low", "high"))
    low_said = ml_h(low_h) if low_h is not None else ml_kg_h(low_kg) if low_kg is not None else ""
    high_said = ml_h(high_h) if high_h is not None else ml_kg_h(high_kg) if high_kg is not None else ""
    return Target(
        low_h / kg if low_h is not None else low_kg,
        high_h / kg if high_h is not None else high_kg,
        _ends(low_said, high_said),
        f"{name}, {band['who']}",
        (source,),
        may_flag,
    )


def _number(band: Band, key: str) -> float | None:
    return float(band[key]) if key in band else None


def _range(low: float | None, high: float | None, said: Callable[[float], str]) -> str:
    return _ends("" if low is None else said(low), "" if high is None else said(high))


def _ends(low: str, high: str) -> str:
    if low and high:
        return span(low, high)
    return f"{low} or more" if low else f"up to {high}"
