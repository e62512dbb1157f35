"""Daily limits of paracetamol and ibuprofen by one named rule set, for this age and this weight."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Any

from msgspec import Struct, field

from handoff.plugin import Age, Case, Input, Weight, child, number_text, with_unit, yes

from . import formula

WEIGHTS = ("before burn", "today", "ideal")
LIVER = "liver disease"


class Limit(Struct, frozen=True):
    """A limit in mg for 24 h and for one dose; ``daily_mg`` is None where ``missing`` says why.

    ``interval_h`` is the least time between two doses where the rule set has one."""

    identifier: str
    called: str
    row: str = ""
    daily_mg: float | None = None
    single_mg: float | None = None
    interval_h: float | None = None
    missing: str = ""
    sum: str = ""
    weight: str = ""
    inputs: tuple[Input, ...] = ()
    cautions: tuple[str, ...] = ()
    decides: bool = True


class _Patient(Struct, frozen=True):
    age: Age | None
    weight: Weight | None
    inputs: tuple[Input, ...] = field(default=())


def limit(case: Case, identifiers: tuple[str, ...], by_policy: bool) -> Limit:
    """Return the limit of the first rule set of ``identifiers`` that has a row for this patient.

    ``identifiers`` are parameters whose value is ``{called, rows}``; a limit from memory
    decides a flag only where the policy chose it.
    """
    found = [_of_set(case, identifier, by_policy) for identifier in identifiers]
    return next((one for one in found if one.daily_mg is not None), found[0])


def _of_set(case: Case, identifier: str, by_policy: bool) -> Limit:
    parameter = case.parameters[identifier]
    table = case.parameters.table(identifier)
    called = str(table["called"])
    patient = _patient(case, tuple(table.get("weights", WEIGHTS)))
    for row in table["rows"]:
        fits, missing = _fits(row, patient)
        if missing:
            return Limit(identifier, called, missing=missing)
        if fits:
            decides = by_policy or parameter.kind != "from memory"
            return _limit(case, identifier, called, row, patient, decides)
    age = patient.age.shown() if patient.age else "age not recorded"
    return Limit(identifier, called, missing=f"{called} has no row for {age}")


def _patient(case: Case, kinds: tuple[str, ...]) -> _Patient:
    age, weight = case.state.age_at(case.now), case.state.weight(*kinds)
    node = case.state.patient.get("born") or case.state.patient.get("estimated_age")
    inputs = [Input("age", age.shown(), case.input("age", node).line)] if age else []
    if weight is not None:
        inputs.append(case.input(f"weight {weight.kind}, {weight.known}", weight.node.get("value")))
    return _Patient(age, weight, tuple(inputs))


def _fits(row: Mapping[str, Any], patient: _Patient) -> tuple[bool, str]:
    """Whether the row is for this patient, and what is missing to tell."""
    by_age = any(
        name in row for name in ("from_years", "below_years", "from_months", "above_days", "up_to_days")
    )
    if by_age:
        if patient.age is None:
            return False, "age not recorded"
        if not _age_fits(row, patient.age):
            return False, ""
    by_weight = any(name.endswith("_kg") for name in row)
    if by_weight and patient.weight is None:
        return False, "weight not recorded"
    return patient.weight is None or _weight_fits(row, patient.weight.kg), ""


def _age_fits(row: Mapping[str, Any], age: Age) -> bool:
    if not row.get("from_years", 0) <= age.years < row.get("below_years", math.inf):
        return False
    # An estimated age has no months or days; from one year on it is beyond every limit in months and days.
    months = age.months if age.months is not None else (math.inf if age.years else 0)
    days = age.days if age.days is not None else (math.inf if age.years else 0)
    in_days = row.get("above_days", -1) < days <= row.get("up_to_days", math.inf)
    return bool(in_days and row.get("from_months", 0) <= months)


def _weight_fits(row: Mapping[str, Any], kg: float) -> bool:
    if not row.get("above_kg", -1) < kg <= row.get("up_to_kg", math.inf):
        return False
    return bool(row.get("from_kg", 0) <= kg < row.get("below_kg", math.inf))


def _limit(
    case: Case, identifier: str, called: str, row: Mapping[str, Any], patient: _Patient, decides: bool
) -> Limit:
    kg = patient.weight.kg if patient.weight else 0.0
    daily, said = _amount(row, "daily", kg)
    single, _ = _amount(row, "single", kg)
    cautions = []
    liver = row.get("daily_liver_risk_mg")
    if liver is not None:
        at_risk = _liver_risk(case)
        lower = with_unit(float(liver), "mg")
        if at_risk:
            daily, said = float(liver), f"{lower} a day with a liver-risk factor"
        elif at_risk is None:
            cautions.append(f"{lower} with a liver-risk factor; liver risk is not recorded")
    if patient.weight is not None and patient.weight.known == "estimated":
        cautions.append("the weight is estimated")
    return Limit(
        identifier=identifier,
        called=called,
        row=str(row["row"]),
        daily_mg=daily,
        single_mg=single,
        interval_h=None if row.get("interval_h") is None else float(row["interval_h"]),
        sum=said,
        weight=f"{number_text(kg, 2)} kg {patient.weight.kind}" if patient.weight else "",
        inputs=patient.inputs,
        cautions=tuple(cautions),
        decides=decides,
    )


def _amount(row: Mapping[str, Any], what: str, kg: float) -> tuple[float | None, str]:
    flat, per_kg, cap = row.get(f"{what}_mg"), row.get(f"{what}_mg_per_kg"), row.get(f"{what}_cap_mg")
    if flat is not None:
        return float(flat), f"{with_unit(float(flat), 'mg')} a day"
    if per_kg is None:
        return None, ""
    found = formula.by_weight_mg(kg, float(per_kg), math.inf if cap is None else float(cap))
    said = f"{number_text(kg, 2)} kg x {number_text(per_kg, 1)} mg/kg"
    if cap is not None:
        said += f", not above {with_unit(float(cap), 'mg')},"
    return found, f"{said} = {with_unit(found, 'mg', 1)}"


def _liver_risk(case: Case) -> bool | None:
    conditions = case.state.texts(case.state.patient.get("conditions"))
    if LIVER in conditions:
        return True
    return yes(child(case.block, "liver_risk"))
