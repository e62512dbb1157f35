"""What was given in the last 24 h by drug and route, and the infusions and patches that run."""

from __future__ import annotations

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Part,
    System,
    Working,
    hours_text,
    line_of,
    with_unit,
)

from . import formula
from .charted import Charted, Portion, mg_text
from .infusions import Run
from .names import PATCH, unique_keys

FORMULA = "sum of every amount of one drug by one route in the last 24 h"


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return amounts of the last 24 h by drug and route, and each infusion and patch as last charted."""
    return (*_amounts(charted), *_infusions(case, charted))


def _amounts(charted: Charted) -> tuple[Item, ...]:
    groups: dict[tuple[str, str], list[Portion]] = {}
    for portion in charted.portions:
        groups.setdefault((portion.drug.name, portion.route), []).append(portion)
    keys = unique_keys(f"{drug} {route}" for drug, route in sorted(groups))
    return tuple(_amount(key, *name, groups[name]) for key, name in zip(keys, sorted(groups), strict=True))


def _amount(key: str, drug: str, route: str, portions: list[Portion]) -> Item:
    known = [portion.mg for portion in portions if portion.mg is not None]
    unknown = [portion for portion in portions if portion.mg is None]
    total = formula.total_mg(known)
    said = "; ".join(portion.said for portion in portions)
    head = f"not computed: {unknown[0].missing}" if unknown else mg_text(total)
    return Item(
        key=f"pain.given.{key}",
        label=f"{drug[:1].upper()}{drug[1:]} {route}, last 24 h",
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=None if unknown else total,
        unit="mg",
        shown=f"{head}: {said}",
        as_of=portions[-1].at,
        working=Working(
            formula=FORMULA,
            sum=f"{' + '.join(mg_text(mg) for mg in known) or '0 mg'} = {mg_text(total)}",
            inputs=tuple(portion.input() for portion in portions),
        ),
        repeats=True,
        line=line_of(portions[-1].node),
    )


def _infusions(case: Case, charted: Charted) -> tuple[Item, ...]:
    last: dict[str, Run] = {}
    for run in charted.runs:
        last[run.line] = run
    lines = sorted(last)
    return tuple(
        _infusion(case, key, last[line]) for key, line in zip(unique_keys(lines), lines, strict=True)
    )


def _infusion(case: Case, key: str, run: Run) -> Item:
    clock, now = case.clock, case.now
    what = "Patch" if run.route == PATCH else "Infusion"
    said = f"{run.drug.name} {run.route} {run.written}{_other_units(run)} from {clock.time(run.start, now)}"
    end = clock.time(run.end, now)
    unconfirmed = run.open and run.end < now
    if not run.open:
        said += f", stopped {end}{f': {run.why}' if run.why else ''}"
    elif run.end > run.start:
        said += f", last seen running {end}"
    else:
        said += ", not seen running since"
    if unconfirmed:
        said += f"; not confirmed for {hours_text(case.hours_between(run.end, now))}"
    return Item(
        key=f"pain.infusion.{key}",
        label=f"{what} on {run.line}",
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=(run.mg_h if run.open else 0.0) if run.mg_h is not None else None,
        unit="mg/h",
        shown=said,
        as_of=run.end,
        flag=Flag.REVIEW if unconfirmed else Flag.NONE,
        repeats=True,
        line=line_of(run.node),
    )


def _other_units(run: Run) -> str:
    """The rate in mcg/h, and by kg and minute with the weight that was used."""
    if run.mg_h is None or run.route == PATCH:
        return f" ({run.missing})" if run.missing else ""
    said = [] if run.written.endswith(" mcg/h") else [with_unit(run.mg_h * formula.MCG_IN_MG, "mcg/h", 1)]
    if run.kg and not run.written.endswith("mcg/kg/min"):
        per_kg = formula.rate_mcg_kg_min(run.mg_h, run.kg)
        said.append(with_unit(per_kg, "mcg/kg/min", 3))
    if run.weight:
        said.append(f"weight {run.weight}")
    return f" ({', '.join(said)})" if said else ""
