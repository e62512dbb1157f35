"""Doses and drug rates far outside what is usual are asked about once; most often the point has slipped."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from handoff.plugin import Case, Map, Node, Problem, Severity, number_text, words

from . import formula
from .charted import mg_text
from .given import mass_mg
from .infusions import runs
from .limits import WEIGHTS
from .living import BLOCK, Path, living
from .names import drug_of, factor_heading, route_of

CURE = "check it; if it is right, add confirmed: yes beside it"
PLACES = 5


def unusual_dose(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    """Yield a warning for each part of a single dose outside the lines for its drug and route."""
    if words(entry.get("confirmed")) == "yes":
        return
    heading = factor_heading(case, route_of(case, entry.get("route")))
    contents = entry.get("contains")
    parts = list(living(contents, (*path, "contains"))) if contents is not None else [(entry, path)]
    for part, place in parts:
        drug, dose = drug_of(case, part.get("drug")), part.get("dose")
        mg, _ = mass_mg(dose, entry.get("concentration"))
        if dose is None or drug is None or mg is None:
            continue
        why = _outside(case, drug.name, heading, mg)
        if why:
            by = words(entry.get("route"))
            what = f"{words(dose)} of {drug.name} {by} is unusual ({why})"
            yield Problem(dose, (*place, "dose"), what, CURE, Severity.UNUSUAL)


def _outside(case: Case, drug: str, heading: str, mg: float) -> str:
    """Why a dose is asked about: above or below the line in mg, or the lines by weight; empty for neither."""
    most = case.parameters.table("unusual_dose").get(drug, {}).get(heading)
    least = case.parameters.table("unusual_dose_below").get(drug)
    if most is not None and formula.exceeds(mg, float(most)):
        return f"above {mg_text(float(most))}"
    if least is not None and mg > 0 and formula.exceeds(float(least), mg):
        return f"below {mg_text(float(least))}"
    weight = case.state.weight(*WEIGHTS)
    lines = case.parameters.table("unusual_dose_by_weight").get(drug, {}).get(heading)
    if weight is None or lines is None:
        return ""
    return _by_weight(mg, weight.kg, lines, "mg/kg", f"{number_text(weight.kg, 1)} kg {weight.kind}")


def _by_weight(mg: float, kg: float, lines: Mapping[str, Any], unit: str, weight: str) -> str:
    """Why an amount is asked about for this weight; empty where it lies within the lines, or is nothing."""
    low, high = float(lines["from"]), float(lines["to"])
    if mg <= 0 or not (formula.exceeds(mg, high * kg) or formula.exceeds(low * kg, mg)):
        return ""
    each = number_text(mg / kg, PLACES)
    return (
        f"{each} {unit} at {weight}; usual {number_text(low, PLACES)} to {number_text(high, PLACES)} {unit}"
    )


def unusual_rates(case: Case) -> Iterator[Problem]:
    """Yield a warning for each rate of a drug infusion outside the lines by weight."""
    block = case.block
    written: Node | None = block.get("infusions") if isinstance(block, Map) else None
    paths = {id(entry): path for entry, path in living(written, (*BLOCK, "infusions"))}
    weight = case.state.weight(*WEIGHTS)
    for run in runs(case):
        lines = case.parameters.table("unusual_rate_by_weight").get(run.drug.name)
        heading = factor_heading(case, run.route)
        entry, path = run.node, paths.get(id(run.node))
        if (
            not isinstance(entry, Map)
            or lines is None
            or heading != "parenteral"
            or run.mg_h is None
            or weight is None
        ):
            continue
        rate = entry.get("rate")
        if rate is None or path is None or words(entry.get("confirmed")) == "yes":
            continue
        said = f"{number_text(weight.kg, 1)} kg {weight.kind}"
        why = _by_weight(run.mg_h, weight.kg, lines, "mg/kg/h", said)
        if why:
            what = f"{words(rate)} of {run.drug.name} is unusual ({why})"
            yield Problem(rate, (*path, "rate"), what, CURE, Severity.UNUSUAL)
