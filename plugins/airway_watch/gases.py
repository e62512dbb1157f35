"""Oxygenation: the saturation with its doubt, P/F, S/F and ROX."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Input,
    Item,
    Node,
    Reading,
    Row,
    System,
    Working,
    amount,
    hours_text,
    line_of,
    number_text,
    words,
)

from . import charted, formula, oxygen, rox, say
from .decay import Monoxide, doubt_at, expected_at
from .exposure import Exposure
from .oxygen import OPEN_DEVICE, Fraction

RANK = 22
NOT_ARDS = "A range of a ratio is not a diagnosis: that needs PEEP, imaging, timing and a doctor."


class Breathed(Struct, frozen=True):
    """A measurement with the inspired oxygen that goes with it."""

    at: datetime
    value: float
    node: Node
    given: Fraction


def given_at(case: Case, moment: datetime, row: Row | None = None) -> tuple[Fraction | None, str]:
    """Return the inspired oxygen at ``moment`` (written beside the result, or charted), or what is missing."""
    beside = amount(row.entry.get("fio2"), "%") if row is not None else None
    if beside is not None:
        return Fraction(beside, beside, False, "as written beside the result", None, say.pct(beside)), ""
    held = oxygen.holding(case, moment)
    if held is None:
        return None, f"oxygen at {say.at(case, moment)}"
    return oxygen.fraction(case, held)


def items(case: Case, seen: Exposure, gas: Monoxide) -> tuple[Item, ...]:
    """Return saturation, P/F, S/F and ROX."""
    saturation = _latest_spo2(case)
    doubt = doubt_text(case, seen, gas, saturation.at) if saturation else ""
    return (
        *_spo2(case, gas, saturation, doubt),
        _pf(case, seen),
        *_sf(case, saturation, doubt),
        *rox.items(case, saturation, doubt),
    )


def _latest_spo2(case: Case) -> Reading | None:
    readings = [reading for reading in case.state.series("spo2") if amount(reading.node, "%") is not None]
    return max(readings, key=lambda reading: (reading.at, -(amount(reading.node, "%") or 0)), default=None)


def doubt_text(case: Case, seen: Exposure, gas: Monoxide, moment: datetime) -> str:
    """Return the label of everything made from a saturation while carbon monoxide is unknown or raised."""
    doubt = doubt_at(case, seen, gas.levels, moment)
    return f"may read falsely high: {doubt}" if doubt else ""


def doubts(case: Case, seen: Exposure, gas: Monoxide) -> dict[datetime, str]:
    """Return the label of every saturation that carbon monoxide makes doubtful, by its moment."""
    said = {one.at: doubt_text(case, seen, gas, one.at) for one in case.state.series("spo2")}
    return {moment: text for moment, text in said.items() if text}


def _spo2(case: Case, gas: Monoxide, reading: Reading | None, doubt: str) -> tuple[Item, ...]:
    """The reading itself is a vital sign and printed with them: here it stands for its doubt."""
    key, label = "airway_watch.spo2", "Oxygen saturation, whether to trust it"
    if reading is None:
        return ()
    pct = amount(reading.node, "%") or 0.0
    shown = f"{say.pct(pct)} at {say.at(case, reading.at)}" + (f", {doubt}" if doubt else "")
    cautions = ["It cannot tell carbon monoxide from oxygen: blood co-oximetry does."] if doubt else []
    hidden = _hidden(case, gas, reading.at, pct) if doubt else ""
    if hidden:
        cautions.append(hidden)
    return (
        say.fact(
            key,
            label,
            shown,
            value=pct,
            unit="%",
            as_of=reading.at,
            flag=Flag.REVIEW if doubt else Flag.NONE,
            rank=RANK if doubt and gas.doubt else None,
            detail=not doubt,
            system=System.BREATHING,
            sources=(case.parameters.source_of("oximeter"),) if doubt else (),
            cautions=cautions,
            line=line_of(reading.node),
        ),
    )


def _hidden(case: Case, gas: Monoxide, moment: datetime, pct: float) -> str:
    before = [level for level in gas.levels if level.at <= moment]
    if not before:
        return ""
    level = expected_at(case, before[-1], moment).central
    most = formula.oxyhaemoglobin_pct(pct, level)
    return f"Carboxyhaemoglobin about {say.pct(level)} then: oxygenated haemoglobin at most about {say.pct(most)}."


def _pf(case: Case, seen: Exposure) -> Item:
    key, label = "airway_watch.pf_ratio", "P/F"
    rows = [row for row in case.state.results if row.entry.get("pao2") is not None]
    rows = [row for row in rows if words(row.entry.get("specimen")) in ("", "arterial")]
    rows.sort(key=lambda row: (row.at, -(amount(row.entry.get("pao2"), "mmHg") or 0)))
    pao2 = amount(rows[-1].entry.get("pao2"), "mmHg") if rows else None
    if pao2 is None and not _asks_for_gas(case, seen):
        return say.not_asked(key, label, "mmHg")
    if pao2 is None:
        return say.gap(key, label, unit="mmHg", system=System.BREATHING)
    row = rows[-1]
    given, missing = given_at(case, row.at, row)
    if given is None:
        return say.gap(key, label, missing, unit="mmHg", system=System.BREATHING)
    return _pf_item(case, row, pao2, given)


def _asks_for_gas(case: Case, seen: Exposure) -> bool:
    """Whether smoke, a tube or oxygen beyond room air makes a missing blood gas a gap."""
    held = oxygen.holding(case, case.now)
    on_oxygen = held is not None and held.device != oxygen.ROOM_AIR
    return seen.smoke_recorded or seen.smoke_open or charted.tube(case).in_place or on_oxygen


def _pf_item(case: Case, row: Row, pao2: float, given: Fraction) -> Item:
    # With an estimated oxygen the highest estimate counts: it gives the lowest ratio.
    value = formula.pf_ratio_mmhg(pao2, given.high)
    best = formula.pf_ratio_mmhg(pao2, given.low)
    said = f"{number_text(value)} mmHg ({number_text(formula.kilopascals(value), say.PLACES)} kPa)"
    if best > value:
        said = f"about {number_text(value)} to {number_text(best)} mmHg"
    limits = [float(limit) for limit in case.parameters["berlin"].value]
    band = pf_range(value, limits)
    shown = f"{said}, P/F {band}, at {say.at(case, row.at)} on {given.shown()}"
    if band != pf_range(best, limits):
        shown = (
            f"{said} (estimated FiO2) at {say.at(case, row.at)}; "
            "no range named because the estimate crosses ranges"
        )
    old_after = timedelta(hours=case.parameters.number("gas.old_after"))
    if case.now - row.at > old_after:
        shown += f"; no gas for {hours_text((case.now - row.at) / timedelta(hours=1))}"
    flag = _pf_flag(value, best, limits)
    sources = [case.parameters.source_of("berlin")] + ([given.source] if given.source else [])
    pao2_said = words(row.entry.get("pao2"))
    by = number_text(given.high / 100, 2)
    equal = formula.room_air_equivalent_mmhg(value, case.parameters.number("fio2.room_air_handbook"))
    return say.fact(
        "airway_watch.pf_ratio",
        "P/F",
        shown,
        value=value,
        unit="mmHg",
        as_of=row.at,
        flag=flag,
        rank=RANK if flag is Flag.ACTION else None,
        system=System.BREATHING,
        working=Working(
            formula="arterial oxygen pressure / inspired oxygen fraction",
            sum=f"{number_text(pao2, say.PLACES)} mmHg / {by} = {number_text(value, say.PLACES)} mmHg",
            inputs=(
                case.input("Arterial oxygen pressure", row.entry.get("pao2"), pao2_said),
                case.input("Inspired oxygen", row.entry.get("fio2"), given.shown()),
                Input("Arterial pressure of the same ratio on room air", f"about {number_text(equal)} mmHg"),
            ),
            rule=given.table,
        ),
        sources=sources,
        cautions=(
            NOT_ARDS,
            _peep(case, row.at),
            *((OPEN_DEVICE,) if given.estimated else ()),
        ),
        line=row.line,
    )


def _pf_flag(lowest: float, highest: float, limits: list[float]) -> Flag:
    """The two lower ranges ask for action; where only the cautious estimate lies there, for a look."""
    middle = sorted(limits)[-2]
    if highest <= middle:
        return Flag.ACTION
    return Flag.REVIEW if lowest <= middle else Flag.NONE


def pf_range(value: float, limits: list[float]) -> str:
    """Return where a P/F in mmHg lies: ``in the 100 to 200 mmHg range``; a limit belongs below itself."""
    edges = [0.0, *sorted(limits)]
    top = formula.at_or_below(value, edges)
    if top is None:
        return f"in the range above {number_text(edges[-1])} mmHg"
    return f"in the {number_text(edges[edges.index(top) - 1])} to {number_text(top)} mmHg range"


def _peep(case: Case, moment: datetime) -> str:
    """What is charted of the pressure that the definition behind the ranges asks for."""
    least = number_text(case.parameters.number("berlin.peep"))
    read = [
        value
        for row in charted.block_rows(case, "ventilator")
        if row.at <= moment and (value := amount(row.entry.get("peep"), "cmH2O")) is not None
    ]
    charted_as = f"{number_text(read[-1], say.PLACES)} cmH2O charted" if read else "not recorded"
    return f"The ranges were defined with PEEP or CPAP of {least} cmH2O or more; PEEP {charted_as}."


def _sf(case: Case, reading: Reading | None, doubt: str) -> tuple[Item, ...]:
    if reading is None:
        return ()
    key, label = "airway_watch.sf_ratio", "S/F"
    pct = amount(reading.node, "%") or 0.0
    given, _ = given_at(case, reading.at)
    if given is None:
        return ()
    highest = case.parameters.number("sf.highest_spo2")
    value = formula.sf_ratio(pct, given.high, highest)
    sources = [case.parameters.source_of("sf.highest_spo2")] + ([given.source] if given.source else [])
    if value is None:
        shown = f"withheld: saturation {say.pct(pct)} is above {say.pct(highest)}"
        return (
            say.fact(
                key,
                label,
                shown,
                unit="1",
                as_of=reading.at,
                system=System.BREATHING,
                sources=sources,
                detail=True,
            ),
        )
    by = number_text(given.high / 100, 2)
    cut_offs = case.parameters["sf.cut_offs"].value
    line = case.parameters.table("sf.equation")
    near = " and ".join(
        f"{number_text(sf)} for P/F {number_text(pf)} "
        f"(the equation gives {number_text(formula.sf_from_pf(pf, line['intercept'], line['slope']))})"
        for pf, sf in cut_offs
    )
    limit = formula.pf_limit_for(value, cut_offs)
    stands = f"stands for P/F {number_text(limit)} mmHg or below" if limit else "above the published cut-offs"
    said = f"{number_text(value)} at {say.at(case, reading.at)} on {given.shown()}, {stands}"
    return (
        say.fact(
            key,
            label,
            said + (f", {doubt}" if doubt else ""),
            value=value,
            unit="1",
            as_of=reading.at,
            system=System.BREATHING,
            detail=True,
            working=Working(
                formula="saturation / inspired oxygen fraction",
                sum=f"{number_text(pct, say.PLACES)} / {by} = {number_text(value, say.PLACES)}",
                inputs=(
                    case.input("Saturation", reading.node),
                    case.input("Inspired oxygen", None, given.shown()),
                ),
                rule=given.table,
            ),
            sources=(*sources, case.parameters.source_of("sf.cut_offs")),
            cautions=(
                f"Stands in for P/F only where no arterial gas is to be had: published {near}.",
                *((OPEN_DEVICE,) if given.estimated else ()),
            ),
        ),
    )
