"""Carboxyhaemoglobin: the measured series, the level expected now with its range, and the level at the burn."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Input,
    Item,
    Source,
    System,
    Urgency,
    Working,
    hours_text,
    line_of,
    number_text,
    words,
)

from . import charted, formula, oxygen, say
from .charted import CO
from .decay import Expected, Monoxide, half_life
from .exposure import Exposure
from .oxygen import Stretch

RANK_UNKNOWN, RANK_RAISED = 21, 20
ONE_PHASE = (
    "One half-life is a simplification: after a brief exposure the fall is steeper first and slower later."
)
OPEN_BEFORE = (
    "Time without charted oxygen is counted as room air; the range is wide because that oxygen is not known, "
    "and nothing is decided by it."
)
FLOOR = "The body's own level is left out of the sum."


def items(case: Case, seen: Exposure, gas: Monoxide) -> tuple[Item, ...]:
    """Return the measured series, the level expected now, and the level at the time of the burn."""
    if gas.expected is None:
        if not seen.smoke_recorded and not seen.smoke_open:
            return (say.not_asked(f"airway_watch.{CO}_now", "Carboxyhaemoglobin", "%"),)
        rank = RANK_UNKNOWN if seen.smoke_recorded else None
        caution = ("After smoke exposure an oximeter may read falsely high until it is measured.",)
        return (
            say.gap(
                f"airway_watch.{CO}_now",
                "Carboxyhaemoglobin",
                unit="%",
                system=System.BREATHING,
                rank=rank,
                cautions=caution if seen.smoke_recorded else (),
            ),
        )
    return (_series(case, gas), _now(case, seen, gas, gas.expected), *_at_burn(case, seen, gas))


def _series(case: Case, gas: Monoxide) -> Item:
    shown = ", ".join(f"{say.pct(level.pct)} at {say.at(case, level.at)}" for level in gas.levels)
    last = gas.levels[-1]
    given = _antidote_before(case, last.at)
    cautions = (
        (f"Hydroxocobalamin was given {given}: blood co-oximetry may misread after it.",) if given else ()
    )
    return say.fact(
        f"airway_watch.{CO}_measured",
        "Carboxyhaemoglobin, measured",
        shown,
        value=last.pct,
        unit="%",
        as_of=last.at,
        system=System.BREATHING,
        cautions=cautions,
        line=line_of(last.node),
    )


def _antidote_before(case: Case, moment: datetime) -> str:
    rows = [row for row in charted.block_rows(case, "antidotes") if row.at <= moment]
    rows = [row for row in rows if words(row.entry.get("drug")) == "hydroxocobalamin"]
    return say.at(case, rows[-1].at) if rows else ""


def _chamber(case: Case) -> str:
    """Who may be thought of for a pressure chamber, while it is early enough; the doctor decides."""
    burn, hours = case.state.burn_time, case.parameters.number("pressure_chamber")
    if burn is None or case.hours_between(burn.earliest, case.now) > hours:
        return ""
    return (
        f"A pressure chamber is weighed within {number_text(hours)} h where the patient was unconscious, has nerve "
        "signs or heart ischaemia, or is pregnant; the evidence is mixed, and a large burn counts against it."
    )


def _now(case: Case, seen: Exposure, gas: Monoxide, expected: Expected) -> Item:
    level = expected.level
    key, label = f"airway_watch.{CO}_now", "Carboxyhaemoglobin expected now"
    span = _range(case, expected.low, expected.high)
    after = f"{hours_text(case.hours_between(level.at, case.now))} after {say.pct(level.pct)}"
    flag, rank = (Flag.ACTION, RANK_RAISED) if gas.raised and not seen.comfort else (Flag.NONE, None)
    if not expected.known:
        missing = f"oxygen since {say.at(case, level.at)} (whatever it was: {span})"
        return say.gap(key, label, missing, unit="%", system=System.BREATHING, rank=RANK_UNKNOWN)
    cautions = [ONE_PHASE, FLOOR]
    kinds = [part.kind for part in expected.parts]
    if oxygen.UNCHARTED in kinds:
        cautions.append("Time without charted oxygen is counted as room air, the slower fall.")
    if oxygen.PART in kinds:
        cautions.append(
            "No half-life is published between room air and 100 % oxygen: counted as room air, the slower fall."
        )
    chamber = _chamber(case) if flag is Flag.ACTION else ""
    if chamber:
        cautions.append(chamber)
    return say.fact(
        key,
        label,
        f"expected {_level(case, expected.central)} ({span}), {after}",
        value=expected.central,
        unit="%",
        as_of=level.at,
        flag=flag,
        rank=rank,
        system=System.BREATHING,
        working=_working(case, expected),
        sources=[
            *_sources(case, kinds),
            *([case.parameters.source_of("pressure_chamber")] if chamber else []),
        ],
        cautions=cautions,
    )


def _level(case: Case, pct: float) -> str:
    """A level under the body's own is not printed as a figure that nobody could measure."""
    floor = case.parameters.number("background")
    return f"below {say.pct(floor)}" if pct < floor else say.pct(pct)


def _range(case: Case, low: float, high: float) -> str:
    top = _level(case, high)
    bottom = _level(case, low)
    return f"range {bottom}" if bottom == top else f"range {bottom} to {top}"


def _sources(case: Case, kinds: Iterable[str]) -> tuple[Source, ...]:
    used = [parameter.source for kind in kinds for parameter in half_life(case, kind).origin]
    extra = [case.parameters.source_of("half_life.two_phases"), case.parameters.source_of("background")]
    first = [] if used else [case.parameters.source_of(f"half_life.{case.chosen('half_life').name}")]
    return tuple(dict.fromkeys([*first, *used, *extra]))


def _working(case: Case, expected: Expected) -> Working:
    factors = ""
    for part in expected.parts:
        central = half_life(case, part.kind).central
        factors += f" x 0.5^({number_text(part.minutes)} / {number_text(central, say.PLACES)})"
    return Working(
        formula="level x 0.5^(minutes / half-life), one half-life for each stretch of oxygen",
        sum=f"{say.pct(expected.level.pct)}{factors} = {say.pct(expected.central)}",
        inputs=(
            case.input("Measured", expected.level.node, f"{say.pct(expected.level.pct)}"),
            *(_stretch_input(case, part) for part in expected.parts),
        ),
        rule=f"half-life {case.chosen('half_life').name.replace('-', ' ')}",
    )


def _stretch_input(case: Case, part: Stretch) -> Input:
    shown = f"{number_text(part.minutes)} min, half-life {half_life(case, part.kind).shown()}"
    return Input(part.said, shown, part.line)


def _at_burn(case: Case, seen: Exposure, gas: Monoxide) -> tuple[Item, ...]:
    burn, first = case.state.burn_time, gas.levels[0]
    if not seen.smoke_recorded or burn is None or not burn.certain or first.at < burn.latest:
        return ()
    parts = oxygen.stretches(case, burn.latest, first.at)
    if parts and all(part.kind == oxygen.UNCHARTED for part in parts):
        return ()
    unknown = any(part.kind == oxygen.UNCHARTED for part in parts)
    lives = [half_life(case, part.kind) for part in parts]
    spans = [part.minutes for part in parts]
    high, high_capped = formula.backdated_pct(first.pct, spans, [life.low for life in lives])
    central, central_capped = formula.backdated_pct(first.pct, spans, [life.central for life in lives])
    low, _ = formula.backdated_pct(first.pct, spans, [life.high for life in lives])
    top = "over 100 %, which is not possible and is not used" if high_capped else say.pct(high)
    shown = f"about {say.pct(central)} (from {say.pct(low)} to {top})"
    if central_capped:
        shown = f"not plausible by this sum (over 100 %); at least {say.pct(low)}"
    return (
        say.fact(
            f"airway_watch.{CO}_at_burn",
            "Carboxyhaemoglobin at the time of the burn, worked back",
            shown,
            value=None if central_capped else central,
            unit="%",
            as_of=burn.latest,
            system=System.BREATHING,
            detail=True,
            working=Working(
                formula="level x 2^(minutes / half-life), never above 100 %",
                sum=f"{say.pct(first.pct)} worked back over {number_text(sum(spans))} min = {say.pct(central)}",
                inputs=(
                    case.input("First measured", first.node, say.pct(first.pct)),
                    case.input("Burn", burn.node),
                    *(_stretch_input(case, part) for part in parts),
                ),
            ),
            sources=_sources(case, [part.kind for part in parts]),
            cautions=(
                "Exposure is taken to end at the burn; rescue may have been later.",
                *((OPEN_BEFORE,) if unknown else ()),
                ONE_PHASE,
            ),
        ),
    )


def actions(case: Case, seen: Exposure, gas: Monoxide) -> tuple[Action, ...]:
    """Return what carbon monoxide asks of the care plan."""
    if seen.comfort or not gas.doubt:
        return ()
    found = []
    if not gas.levels:
        found.append(
            Action(
                key="airway_watch.measure_carboxyhaemoglobin",
                area="Breathing",
                text="Ask for carboxyhaemoglobin by blood co-oximetry",
                why="smoke exposure is recorded and no level is",
                system=System.BREATHING,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("oximeter"),),
            )
        )
    found.append(_oxygen_action(case, gas))
    return tuple(found)


def _oxygen_action(case: Case, gas: Monoxide) -> Action:
    now = oxygen.holding(case, case.now)
    full = now is not None and oxygen.kind_of(case, now) in (oxygen.FULL, oxygen.CHAMBER)
    if full:
        text = "Keep 100 % oxygen going as prescribed; do not turn it down on the saturation alone"
    else:
        text = "Ask the prescriber now about 100 % oxygen: the chart does not show it"
    return Action(
        key="airway_watch.full_oxygen",
        area="Breathing",
        text=text,
        why=gas.doubt,
        system=System.BREATHING,
        urgency=Urgency.ONGOING if full else Urgency.NOW,
        sources=(case.parameters.source_of("oxygen.start"),),
    )
