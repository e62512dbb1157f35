"""Sedation and breathing under opioids: levels as charted, with the published prompts to hold and call."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Map,
    Node,
    Part,
    Reading,
    Source,
    System,
    Working,
    amount,
    line_of,
    number,
    number_text,
    words,
    yes,
)

from . import formula
from .charted import Charted, mg_text
from .given import PUMP
from .infusions import Run
from .names import OPIOID
from .reassess import Due, interval, unwatched_for_long
from .scores import scale_of

SEDATION, BREATHING = "pain.sedation", "pain.breathing"
RANK_STOP, RANK = 8, 15
SEDATIVE = "sedative"
COMFORT = "the goal of care is comfort: ask which depth of sedation is intended"


class Level(Struct, frozen=True):
    """The latest sedation level: its scale, when, what the published prompt is, and whether that decides a flag."""

    at: datetime
    called: str
    written: str
    ranged: str
    prompt: str
    urgent: bool
    sources: tuple[Source, ...]
    node: Node
    reduce: bool = False
    stop: bool = False


def latest_level(case: Case) -> Level | None:
    """Return the latest sedation level, or None."""
    readings = [
        (reading, node)
        for reading in case.state.series("sedation")
        if isinstance(node := reading.node, Map) and "struck" not in node
    ]
    if not readings:
        return None
    last, node = readings[-1]
    name = words(node.get("scale"))
    if name == "poss":
        return _poss(case, last, node)
    if name == "rass":
        return _rass(case, last, node)
    scale = scale_of(case, node.get("scale"))
    if scale is None:
        return None
    return Level(last.at, scale.called, words(node.get("score")), scale.range_text(), "", False, (), node)


def _poss(case: Case, reading: Reading, node: Map) -> Level:
    table: Mapping[str, Any] = case.parameters.table("sedation.poss")
    written = words(node.get("score"))
    prompt = ""
    if written == table["reduce"]:
        low, high = case.parameters["sedation.poss_reduction"].value
        prompt = (
            "not acceptable: watch sedation and breathing closely, call the prescriber; "
            f"the published prompt is {number_text(low)} % to {number_text(high)} % less opioid"
        )
    if written == table["stop"]:
        prompt = "not acceptable: stop the opioid, stay with the patient, call the emergency team"
    sources = tuple(case.parameters.source_of(name) for name in ("sedation.poss", "sedation.poss_reduction"))
    ranged = ", ".join(table["levels"])
    reduce = written == table["reduce"]
    return Level(
        reading.at,
        "POSS",
        written,
        ranged,
        prompt,
        bool(prompt),
        sources[: 1 + reduce],
        node,
        reduce,
        written == table["stop"],
    )


def _rass(case: Case, reading: Reading, node: Map) -> Level:
    table, hold = case.parameters.table("sedation.rass"), case.parameters["sedation.rass_hold"]
    points = number(node.get("score"))
    sources: tuple[Source, ...] = (case.parameters.source_of("sedation.rass"),)
    prompt = ""
    if points is not None and points <= float(hold.value) and not yes(node.get("planned")):
        prompt = "deep and not charted as planned: hold and call"
        sources += (hold.source,)
    ranged = f"{number_text(table['lowest'])} to +{number_text(table['highest'])}"
    urgent = bool(prompt) and hold.kind != "from memory"
    return Level(reading.at, "RASS", words(node.get("score")), ranged, prompt, urgent, sources, node)


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return the latest sedation level and the latest breathing rate, each held against its prompt."""
    return _sedation_item(case, charted), _breathing_item(case, charted)


def last_opioid(case: Case, charted: Charted) -> datetime | None:
    """Return when an opioid was last given in the last 24 h; now while an infusion of one is not stopped."""
    if any(run.drug.group == OPIOID for run in charted.runs if run.open):
        return case.now
    moments = [portion.at for portion in charted.of(OPIOID)]
    ends = [run.end for run in charted.runs if run.drug.group == OPIOID and run.hours_in_day_to(case.now) > 0]
    return max([*moments, *ends], default=None)


def stale(case: Case, charted: Charted, at: datetime) -> bool:
    """Return whether a check at ``at`` came before an opioid dose whose interval has passed since."""
    for one in charted.given:
        after = interval(case, one.route, one.release)
        if one.drug.group != OPIOID or one.how == PUMP or after is None or one.latest < at:
            continue
        if unwatched_for_long(case, Due(one, after)):
            return True
    return False


def _sedation_item(case: Case, charted: Charted) -> Item:
    label, level = "Sedation level", latest_level(case)
    opioid = last_opioid(case, charted)
    if level is None:
        shown = "not recorded, and an opioid was given" if opioid else "not recorded"
        return Item(
            key=SEDATION, label=label, part=Part.ASSESSMENT, system=System.PAIN, unit="level",
            shown=shown, flag=Flag.NOT_RECORDED, repeats=True,
        )  # fmt: skip
    at = case.clock.time(level.at, case.now)
    shown = f"{level.called} {level.written} ({level.ranged}), {at}"
    old = stale(case, charted, level.at)
    if old:
        shown += f"; not reassessed since {at}, an opioid was given after it"
    if level.prompt:
        shown += f"; {COMFORT if case.comfort else level.prompt}"
    flag = Flag.REVIEW if old and not case.comfort else Flag.NONE
    if level.urgent:
        flag = Flag.REVIEW if case.comfort else Flag.ACTION
    return Item(
        key=SEDATION,
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=level.written,
        unit="level",
        shown=shown,
        as_of=level.at,
        flag=flag,
        working=_reduction(case, charted, level),
        sources=level.sources,
        cautions=("rising sedation comes before slow breathing",),
        repeats=True,
        rank=(RANK_STOP if level.stop else RANK) if flag is Flag.ACTION else None,
        line=line_of(level.node),
    )


def _reduction(case: Case, charted: Charted, level: Level) -> Working | None:
    """The published reduction worked out for the one opioid infusion that runs, for the prescriber to weigh."""
    running = [run for run in charted.runs if run.open and run.drug.group == OPIOID and run.mg_h is not None]
    if not level.reduce or len(running) != 1 or case.comfort:
        return None
    run, (low, high) = running[0], case.parameters["sedation.poss_reduction"].value
    return Working(
        formula="published prompt at this level: less of the opioid; the prescriber decides",
        sum=_reduction_sum(run, float(low), float(high)),
        inputs=(case.input(f"{run.drug.name} {run.route}", run.node, run.written),),
        rule="sedation.poss",
    )


def _reduction_sum(run: Run, low_pct: float, high_pct: float) -> str:
    rate = run.mg_h or 0.0
    most, least = formula.reduced(rate, low_pct), formula.reduced(rate, high_pct)
    return (
        f"{mg_text(rate)}/h less {number_text(low_pct)} % is {mg_text(most)}/h; "
        f"less {number_text(high_pct)} % is {mg_text(least)}/h"
    )


def breathing(case: Case) -> tuple[Reading, float] | None:
    """Return the latest breathing rate in breaths a minute with its reading, or None."""
    found = [
        (reading, rate)
        for reading in case.state.series("resp")
        if (rate := amount(reading.node, "/min", "per_minute")) is not None
    ]
    return found[-1] if found else None


def _breathing_item(case: Case, charted: Charted) -> Item:
    label, latest = "Breathing under opioids", breathing(case)
    opioid = last_opioid(case, charted)
    if latest is None:
        shown = "not recorded, and an opioid was given" if opioid else "not recorded"
        return Item(
            key=BREATHING, label=label, part=Part.ASSESSMENT, system=System.PAIN, unit="/min",
            shown=shown, flag=Flag.NOT_RECORDED, repeats=True, detail=opioid is None,
        )  # fmt: skip
    reading, rate = latest
    at = case.clock.time(reading.at, case.now)
    shown = f"{number_text(rate)} /min, {at}"
    shown += "" if opioid else "; no opioid charted in the last 24 h"
    old = stale(case, charted, reading.at)
    if old:
        shown += f"; not reassessed since {at}, an opioid was given after it"
    flag = Flag.REVIEW if old and not case.comfort else Flag.NONE
    limit = case.parameters.number("respiration.hold_below")
    age = case.state.age_at(case.now)
    adult = age is not None and age.years >= case.parameters.number("adult_from")
    risks = _risks(case, charted, opioid)
    cautions = [f"raises the risk of slow breathing: {'; '.join(said for said, _ in risks)}"] if risks else []
    if opioid and adult and rate < limit:
        flag = Flag.REVIEW if case.comfort else Flag.ACTION
        shown += f"; under {number_text(limit)} with an opioid given: "
        shown += COMFORT if case.comfort else "the published prompt is oxygen, stop the infusion, call"
    elif opioid and not adult:
        cautions.append("no limit of this set is for a child: use the limit set for the child")
    return Item(
        key=BREATHING,
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=rate,
        unit="/min",
        shown=shown,
        as_of=reading.at,
        flag=flag,
        sources=(case.parameters.source_of("respiration.hold_below"), *(source for _, source in risks)),
        cautions=tuple(cautions),
        repeats=True,
        rank=RANK_STOP if flag is Flag.ACTION else None,
        detail=opioid is None,
        line=line_of(reading.node),
    )


def _risks(case: Case, charted: Charted, opioid: datetime | None) -> tuple[tuple[str, Source], ...]:
    """What raises the risk of slow breathing under an opioid, as prompts with their sources, never as a score."""
    if opioid is None:
        return ()
    said = []
    firsts = [one.earliest for one in charted.given if one.drug.group == OPIOID]
    firsts += [run.start for run in charted.runs if run.drug.group == OPIOID]
    if case.hours_between(min(firsts), case.now) <= case.parameters.number("opioid_risk.first_hours"):
        said.append(("first day of an opioid", case.parameters.source_of("opioid_risk.first_hours")))
    sedatives = sorted({portion.drug.name for portion in charted.of(SEDATIVE)})
    if sedatives:
        names = f"sedatives given too: {', '.join(sedatives)}"
        said.append((names, case.parameters.source_of("opioid_risk.sedatives")))
    if "kidney disease" in case.state.texts(case.state.patient.get("conditions")):
        said.append(("kidney disease", case.parameters.source_of("opioid_risk.kidney")))
    return tuple(said)
