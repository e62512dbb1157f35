"""Results and pressures against named lines: what has crossed one, with its trend, and which lines are in use."""

from __future__ import annotations

import operator
from collections.abc import Iterator
from datetime import timedelta

from msgspec import Struct

from handoff.plugin import (
    NOT_RECORDED,
    Flag,
    Input,
    Item,
    Parameter,
    Reading,
    System,
    amount,
    number_text,
    words,
)

from .bands import Band, pick
from .course import COMFORT, Course
from .say import figure, once, unflagged

TREND = 3
BEYOND = {"from": operator.ge, "above": operator.gt, "below": operator.lt, "to": operator.le}
RANK = {"potassium": 33, "glucose": 38, "sodium": 47}
RANK_OTHER = 47
HOUR = timedelta(hours=1)


class Analyte(Struct, frozen=True):
    """A result to watch: its name, unit and places (SI, conventional), and its tables of lines."""

    name: str
    label: str
    unit: str
    kind: str
    places: int
    tables: tuple[str, ...]
    conventional: str = ""
    conventional_places: int = 0


ANALYTES = (
    Analyte("potassium", "Potassium", "mmol/L", "electrolyte", 1, ("watch_potassium.*",), "mEq/L", 1),
    Analyte(
        "sodium",
        "Sodium",
        "mmol/L",
        "electrolyte",
        0,
        ("watch_sodium.*", "watch_sodium.hypernatraemia", "watch_sodium.early-fall"),
        "mEq/L",
    ),
    Analyte(
        "glucose",
        "Glucose",
        "mmol/L",
        "glucose",
        1,
        ("watch_glucose.survey-means", "watch_glucose.espen-target"),
        "mg/dL",
    ),
    Analyte(
        "lactate",
        "Lactate",
        "mmol/L",
        "lactate",
        1,
        ("watch_lactate.houston", "watch_lactate.bc-childrens", "watch_lactate.clear-by"),
        "mg/dL",
    ),
    Analyte(
        "haematocrit",
        "Haematocrit",
        "",
        "fraction",
        2,
        ("watch_haematocrit.survey-and-hospital", "watch_haematocrit.rise"),
        "%",
    ),
    Analyte("haemoglobin", "Haemoglobin", "g/L", "haemoglobin", 0, ("watch_haemoglobin.houston",), "g/dL", 1),
    Analyte("creatine_kinase", "Creatine kinase", "U/L", "enzyme", 0, ("watch_creatine_kinase.remembered",)),
    Analyte(
        "base_excess", "Base excess", "mmol/L", "electrolyte", 0, ("watch_base_excess.remembered",), "mEq/L"
    ),
)


def items(course: Course) -> tuple[Item, ...]:
    """Return the results that crossed a line, and one item that names the lines in use."""
    crossed = [item for analyte in ANALYTES if (item := _crossed(course, analyte)) is not None]
    return (_summary(course, crossed), *crossed)


def _value(analyte: Analyte, reading: Reading) -> float | None:
    return amount(reading.node, analyte.unit, analyte.kind)


def _readings(course: Course, analyte: Analyte) -> list[Reading]:
    return [r for r in course.case.state.result_series(analyte.name) if _value(analyte, r) is not None]


def shown(course: Course, analyte: Analyte, reading: Reading) -> str:
    """Return a result in the units that the policy shows (SI or conventional)."""
    if course.case.chosen("result_units").name == "conventional" and analyte.conventional:
        value = amount(reading.node, analyte.conventional, analyte.kind)
        return f"{number_text(value or 0.0, analyte.conventional_places)} {analyte.conventional}"
    value = _value(analyte, reading)
    return f"{number_text(value or 0.0, analyte.places)} {analyte.unit}".strip()


def _tables(course: Course, analyte: Analyte) -> Iterator[Parameter]:
    for name in analyte.tables:
        identifier = (
            name.replace("*", course.case.chosen(name.partition(".")[0]).name) if "*" in name else name
        )
        yield course.case.parameters[identifier]


def _may_judge(course: Course, table: Parameter) -> bool:
    """A line from memory decides nothing, unless the policy took such lines as its own."""
    chosen = course.case.chosen("watch_from_memory")
    return table.kind != "from memory" or (chosen.by_policy and chosen.name == "judged")


def _line_crossed(course: Course, table: Parameter, value: float) -> Band | None:
    for line in table.value:
        conditions = {key: part for key, part in line.items() if key not in BEYOND}
        if pick((conditions,), course.facts).band is None:
            continue
        if all(BEYOND[key](value, float(limit)) for key, limit in line.items() if key in BEYOND):
            return dict(line)
    return None


def _line_said(line: Band, unit: str) -> str:
    words_for = {"from": "from", "above": "above", "below": "below", "to": "up to"}
    parts = [f"{words_for[key]} {number_text(float(line[key]), 2)}" for key in words_for if key in line]
    return f"{line['said']} ({', '.join(parts)} {unit})".replace(" )", ")")


def _crossed(course: Course, analyte: Analyte) -> Item | None:
    readings = _readings(course, analyte)
    if not readings:
        return None
    last = readings[-1]
    value = _value(analyte, last) or 0.0
    found = [
        (table, line)
        for table in _tables(course, analyte)
        if _may_judge(course, table) and (line := _line_crossed(course, table, value)) is not None
    ]
    if not found:
        return None
    acts = any(line.get("act") for _, line in found)
    said = "; ".join(
        f"{_line_said(line, analyte.unit)}, {table.id.partition('.')[2]}" for table, line in found
    )
    earlier = ", ".join(f"{shown(course, analyte, r)} at {course.time(r.at)}" for r in readings[-TREND:-1])
    before = f"; before: {earlier}" if earlier else ""
    flag = course.flagged(Flag.ACTION if acts else Flag.REVIEW)
    return figure(
        f"watch_{analyte.name}",
        f"{analyte.label} beyond a line",
        system=System.CIRCULATION,
        value=value,
        unit=analyte.unit,
        shown=f"{shown(course, analyte, last)}: {said}{before}",
        as_of=last.at,
        flag=flag,
        rank=RANK.get(analyte.name, RANK_OTHER) if flag is Flag.ACTION else None,
        sources=once(table.source for table, _ in found),
        cautions=("The line is a published call line of others; the unit's own line decides.",),
        line=last.row.line,
    )


def _summary(course: Course, crossed: list[Item]) -> Item:
    key, label = "results_watched", "Results watched, lines in use"
    seen = [(analyte, readings[-1]) for analyte in ANALYTES if (readings := _readings(course, analyte))]
    if course.comfort:
        return unflagged(key, label, COMFORT, detail=True)
    if not seen:
        return unflagged(key, label, NOT_RECORDED, detail=True)
    sources = once(
        table.source for analyte, _ in seen for table in _tables(course, analyte) if _may_judge(course, table)
    )
    parts = [
        f"{analyte.label.lower()} {shown(course, analyte, last)} at {course.time(last.at)}"
        + (
            ""
            if any(_may_judge(course, table) for table in _tables(course, analyte))
            else " (no line in use)"
        )
        for analyte, last in seen
    ]
    count = f"{len(crossed)} beyond a line" if crossed else "no line crossed at these times"
    return figure(
        key,
        label,
        value=len(crossed),
        unit="results",
        shown=f"{'; '.join(parts)}; {count}",
        as_of=max(last.at for _, last in seen),
        sources=sources or (course.source("watch_glucose.survey-means"),),
        detail=True,
    )


def kinase_due(course: Course) -> tuple[Input | None, timedelta]:
    """Return the last creatine kinase and how often it is repeated while urine is pigmented."""
    every = timedelta(hours=course.number("creatine_kinase.check_every"))
    readings = _readings(course, next(one for one in ANALYTES if one.name == "creatine_kinase"))
    if not readings:
        return None, every
    return Input("creatine kinase", words(readings[-1].node), readings[-1].row.line), every
