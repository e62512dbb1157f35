"""A child's breaths, pulse and pressure against one named table of ranges by age."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from handoff.plugin import (
    Age,
    Case,
    Flag,
    Item,
    Node,
    Parameter,
    Reading,
    Source,
    System,
    Working,
    amount,
    fact,
    number_text,
    pressure_pair,
)

from . import formula, patient

RANK_HYPOTENSION, RANK_BREATHS = 34, 24
SIGNS = (
    ("resp", "resp", "Breaths for age", "/min", System.BREATHING),
    ("pulse", "pulse", "Pulse for age", "/min", System.CIRCULATION),
    ("bp", "systolic", "Systolic pressure for age", "mmHg", System.CIRCULATION),
)
AWAKE = "Ranges are for a child awake and at rest; crying, pain and fever raise them."
LATE = "In a child low pressure is a late sign; look at refill, pulse and urine."


def items(case: Case) -> tuple[Item, ...]:
    """Return each sign of a child against its range; nothing for an adult or where no age is known."""
    age = patient.age_at(case, case.now)
    if age is None or not patient.is_child(case, case.now):
        return ()
    chosen = case.chosen("child_ranges")
    table = None if chosen.name == "none" else case.parameters[f"child_ranges.{chosen.name}"]
    found = []
    for name, column, label, unit, system in SIGNS:
        readings = [one for one in case.state.series(name) if _read(name)(one.node) is not None]
        if readings:
            found.append(
                _sign(case, readings[-1], name, column, label, unit, system, table, age, chosen.by_policy)
            )
    return tuple(one for one in found if one is not None)


def _read(name: str) -> Callable[[Node], float | None]:
    if name == "bp":
        return lambda node: pair[0] if (pair := pressure_pair(node)) else None
    return lambda node: amount(node, "/min")


def _sign(
    case: Case,
    reading: Reading,
    name: str,
    column: str,
    label: str,
    unit: str,
    system: System,
    table: Parameter | None,
    age: Age,
    by_policy: bool,
) -> Item | None:
    value = _read(name)(reading.node) or 0.0
    band = _band(table.value.get(column, ()), age) if table else None
    said, flag, rank, cautions = "", Flag.NONE, None, [AWAKE]
    sources: list[Source] = []
    if table and band:
        where = formula.against_range(value, band["low"], band["high"], table.value["ends_inside"])
        edge = "to" if table.value["ends_inside"] else "to under"
        said = (
            f"{where} {number_text(band['low'])} {edge} {number_text(band['high'])} ({table.value['title']})"
        )
        decides = table.kind != "from memory" or by_policy
        flag = Flag.REVIEW if where != formula.WITHIN and decides else Flag.NONE
        sources = [table.source, case.parameters.source_of("child_ranges.caution")]
    elif table and column in table.value:
        said = f"{table.value['title']} prints no range for this age"
        sources = [table.source]
    line_said, crossed, line_sources = _line(case, column, value, age)
    if crossed:
        flag = Flag.NONE if case.comfort else Flag.ACTION
        rank = RANK_HYPOTENSION if column == "systolic" else RANK_BREATHS
        rank = None if case.comfort else rank
    if column == "systolic":
        cautions = [LATE]
    said = "; ".join(part for part in (said, line_said) if part)
    if not said:
        return None
    return fact(
        f"early_warning.child_{column}",
        label,
        f"{number_text(value)} {unit} at {age.shown()}: {said}",
        system=system,
        value=value,
        unit=unit,
        as_of=reading.at,
        flag=flag,
        working=Working(
            formula="the charted sign against the printed range of its age",
            sum=said,
            inputs=(case.input(label, reading.node),),
            rule=str(table.value["title"]) if table else "none",
        ),
        sources=[*sources, *line_sources],
        cautions=cautions,
        rank=rank,
        detail=flag is Flag.NONE,
        line=reading.node.line,
    )


def _band(bands: Any, age: Age) -> Mapping[str, Any] | None:
    months = age.months if age.months is not None else age.years * 12
    for band in bands:
        if band.get("from_months", 0) <= months < band["under_months"]:
            found: Mapping[str, Any] = band
            return found
    return None


def _line(case: Case, column: str, value: float, age: Age) -> tuple[str, bool, tuple[Source, ...]]:
    """The one line of each sign that holds whatever table is chosen: said, crossed, sources."""
    if column == "resp":
        top = case.parameters.number("resp.any_age_above")
        if value <= top:
            return "", False, ()
        source = case.parameters.source_of("resp.any_age_above")
        return f"above {number_text(top)} /min, too fast at any age", True, (source,)
    if column != "systolic":
        return "", False, ()
    low, names = hypotension_line(case, age)
    crossed = value < low
    said = f"{'below' if crossed else 'not below'} the line of low pressure for this age, {number_text(low)} mmHg"
    return said, crossed, tuple(case.parameters.source_of(name) for name in names)


def hypotension_line(case: Case, age: Age) -> tuple[float, tuple[str, ...]]:
    """Return the systolic pressure in mmHg under which a child of ``age`` is hypotensive, and its parameters."""
    number = case.parameters.number
    months = age.months if age.months is not None else age.years * 12
    if age.days is not None and age.days <= number("hypotension.neonate_days"):
        return number("hypotension.under_29_days"), ("hypotension.under_29_days",)
    if months < 12:
        return number("hypotension.infant"), ("hypotension.infant",)
    if age.years <= number("hypotension.child_to"):
        base, each = number("hypotension.child_base"), number("hypotension.child_each_year")
        return formula.hypotension_line_mmhg(age.years, base, each), ("hypotension.child_base",)
    return number("hypotension.older"), ("hypotension.older",)
