"""Cyanide after smoke: findings that published sets name, shown to the prescriber; no doses."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Input,
    Item,
    Row,
    System,
    Urgency,
    Working,
    amount,
    line_of,
    number_text,
    pressure_pair,
    with_unit,
    words,
)

from . import charted, exposure, facts, say
from .exposure import Exposure
from .facts import Fact
from .schedule import Watch

RANK = 23
BLOOD_FIRST = (
    "Blood is taken before an antidote: afterwards co-oximetry and colour tests can misread, "
    "and urine and skin turn red."
)


class Pointers(Struct, frozen=True):
    """The findings of one set: each recorded, recorded as not so, or not recorded; and whether they ask."""

    entries: tuple[tuple[str, Fact], ...]
    asks: bool

    def said(self) -> str:
        """Return what is recorded as one phrase; empty where nothing stands beside the smoke."""
        met = [fact.said for _, fact in self.entries if fact.met]
        return say.and_list(met) if len(met) > 1 else ""


def pointers(case: Case, seen: Exposure, run: Watch) -> Pointers | None:
    """Return the findings that point to cyanide; None where no smoke exposure is recorded."""
    if not seen.smoke_recorded or not seen.watched:
        return None
    entries = _entries(case, seen, run)
    asks = _prompts(case, entries) and not _antidote(case) and not is_history(case)
    return Pointers(entries, asks)


def is_history(case: Case) -> bool:
    """Return whether the hours after the fire have passed in which its findings ask for an answer now."""
    burn = case.state.burn_time
    return burn is not None and case.now > burn.latest + _first(case)


def items(case: Case, seen: Exposure, run: Watch) -> tuple[Item, ...]:
    """Return the findings that point to cyanide, where smoke exposure is recorded."""
    found = pointers(case, seen, run)
    measured = _measured(case)
    if found is None:
        return measured
    missing = [name for name, fact in found.entries if fact.met is None]
    met = [name for name, fact in found.entries if fact.met]
    given = _antidote(case)
    said = found.said()
    parameter = case.parameters[f"cyanide.{case.chosen('cyanide').name}"]
    shown = f"for the prescriber: {said}" if said else "no finding beside the smoke is recorded as met"
    if missing:
        shown += f"; not recorded: {', '.join(missing)}"
    if given:
        shown += f"; {given}"
    if said and is_history(case):
        hours = number_text(case.parameters.number("cyanide.first_hours"))
        shown = f"of the first {hours} h after the fire, history now: {shown.removeprefix('for the prescriber: ')}"
    return (
        *measured,
        say.fact(
            "airway_watch.cyanide",
            "Cyanide after smoke, findings to weigh",
            shown,
            value=len(met),
            unit="entries",
            flag=Flag.ACTION if found.asks else Flag.NONE,
            rank=RANK if found.asks else None,
            detail=not found.asks,
            system=System.BREATHING,
            working=Working(
                formula="findings named by a published set, recorded or not",
                sum=f"{len(met)} recorded, {len(missing)} not recorded",
                inputs=tuple(Input(name, fact.shown(), fact.line) for name, fact in found.entries),
                rule=str(parameter.value["title"]),
            ),
            sources=(
                parameter.source,
                case.parameters.source_of("cyanide.lactate_above"),
                case.parameters.source_of("cyanide.first_hours"),
            ),
            cautions=(*_limits(case), BLOOD_FIRST),
        ),
    )


def _measured(case: Case) -> tuple[Item, ...]:
    readings = case.state.result_series("cyanide")
    if not readings:
        return ()
    last = readings[-1]
    level, mass = amount(last.node, "umol/L"), amount(last.node, "mg/L")
    if level is None or mass is None:
        return ()
    said = f"{with_unit(level, 'umol/L', say.PLACES)} ({with_unit(mass, 'mg/L', 2)})"
    return (
        say.fact(
            "airway_watch.cyanide_measured",
            "Blood cyanide, measured",
            f"{said} at {say.at(case, last.at)}",
            value=level,
            unit="umol/L",
            as_of=last.at,
            system=System.BREATHING,
            line=line_of(last.node),
        ),
    )


def _limits(case: Case) -> tuple[str, ...]:
    edge = case.parameters.number("cyanide.lactate_burn_below")
    pct = exposure.counted_pct(case)
    if pct is None or pct < edge:
        return ()
    return (
        f"The lactate limit was published for burns below {number_text(edge)} %TBSA; "
        f"this burn is {number_text(pct, say.PLACES)} %.",
    )


def _entries(case: Case, seen: Exposure, run: Watch) -> tuple[tuple[str, Fact], ...]:
    about = facts.record(case, seen, run)
    service = case.chosen("cyanide").name == "service"
    table = case.parameters.table("cyanide.service")
    coma = _coma(case, float(table["coma score at most"])) if service else facts.altered_ever(about)
    limit = float(table["lactate at least"]) if service else case.parameters.number("cyanide.lactate_above")
    return (
        ("smoke", Fact(True, seen.smoke[0])),
        ("consciousness", coma),
        ("blood pressure", _low_pressure(case, float(table["systolic at most"]))),
        ("lactate", _lactate(case, limit, at_least=service)),
    )


def _prompts(case: Case, entries: tuple[tuple[str, Fact], ...]) -> bool:
    """The service's set asks for one finding beside the smoke; otherwise lactate, or both of the others."""
    met = {name for name, fact in entries if fact.met}
    if case.chosen("cyanide").name == "service":
        return len(met) > 1
    return "lactate" in met or {"consciousness", "blood pressure"} <= met


def _first(case: Case) -> timedelta:
    return timedelta(hours=case.parameters.number("cyanide.first_hours"))


def _early(case: Case, rows: tuple[Row, ...]) -> tuple[Row, ...]:
    """Findings long after the fire have other causes."""
    burn = case.state.burn_time
    if burn is None:
        return rows
    last = burn.latest + _first(case)
    return tuple(row for row in rows if row.at <= last)


def _coma(case: Case, at_most: float) -> Fact:
    totals = [
        (total, row.at)
        for row in _early(case, case.state.rows)
        if (total := charted.gcs_total(row)) is not None
    ]
    if not totals:
        return facts.UNKNOWN
    total, at = min(totals)
    said = f"coma score {total} ({say.at(case, at)})"
    if total > at_most:
        return Fact(False, f"{said}, above the line of {number_text(at_most)}", at)
    return Fact(True, said, at)


def _low_pressure(case: Case, at_most: float) -> Fact:
    age = case.state.age_at(case.now)
    if age is None or age.years < case.parameters.number("adult_from"):
        return facts.UNKNOWN
    pairs = [
        (pair[0], row.at)
        for row in _early(case, case.state.rows)
        if (pair := pressure_pair(row.entry.get("bp"))) is not None
    ]
    if not pairs:
        return facts.UNKNOWN
    systolic, at = min(pairs)
    said = f"systolic {number_text(systolic)} mmHg ({say.at(case, at)})"
    if systolic > at_most:
        return Fact(False, f"{said}, above the line of {number_text(at_most)} mmHg", at)
    return Fact(True, said, at)


def _lactate(case: Case, limit: float, at_least: bool) -> Fact:
    values: list[tuple[float, datetime]] = []
    for row in _early(case, case.state.results):
        value = amount(row.entry.get("lactate"), "mmol/L", "lactate")
        if value is not None:
            values.append((value, row.at))
    if not values:
        return facts.UNKNOWN
    value, at = max(values)
    met = value >= limit if at_least else value > limit
    said = f"lactate {with_unit(value, 'mmol/L', say.PLACES)} ({say.at(case, at)})"
    if met:
        return Fact(True, said, at)
    below = "below" if at_least else "not above"
    return Fact(False, f"{said}, {below} the line of {with_unit(limit, 'mmol/L', say.PLACES)}", at)


def _antidote(case: Case) -> str:
    rows = charted.block_rows(case, "antidotes")
    return "; ".join(f"{words(row.entry.get('drug'))} charted {say.at(case, row.at)}" for row in rows)


def actions(case: Case, seen: Exposure, run: Watch) -> tuple[Action, ...]:
    """Return the question to the prescriber, where the findings ask for it."""
    found = pointers(case, seen, run)
    if found is None or not found.asks:
        return ()
    parameter = case.parameters[f"cyanide.{case.chosen('cyanide').name}"]
    return (
        Action(
            key="airway_watch.tell_prescriber",
            area="Breathing",
            text="Tell the prescriber the findings that go with cyanide after smoke; ask what is planned",
            why=found.said(),
            system=System.BREATHING,
            urgency=Urgency.NOW,
            sources=(parameter.source, case.parameters.source_of("cyanide.lactate_above")),
            cautions=(BLOOD_FIRST,),
        ),
    )
