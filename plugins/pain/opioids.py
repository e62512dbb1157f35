"""The opioid total: exposure only, by one named table of factors, never a partial sum."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Part,
    System,
    Working,
    hours_text,
    joined,
    number_text,
)

from . import formula
from .charted import Charted, Portion, total_text
from .names import OPIOID, factor_heading
from .pumps import pumps

KEY = "pain.opioid_equivalent_24h"
LABEL = "Opioid exposure in 24 h"
MOST_PLACES = 6
UNITS = {"": "mg", "_per_mcg": "mcg", "_per_mcg_h": "mcg/h"}


def item(case: Case, charted: Charted) -> Item:
    """Return the oral morphine equivalent of every opioid of the last 24 h, in mg; None if one has no factor."""
    chosen = case.chosen("opioid_factors")
    identifier = f"factors.{chosen.name}"
    table, called = case.parameters.table(identifier), str(case.parameters.table(identifier)["called"])
    portions = charted.of(OPIOID)
    terms = [_term(case, table, portion) for portion in portions]
    gaps = [
        gap for portion, term in zip(portions, terms, strict=True) if (gap := _gap(portion, term, called))
    ]
    common: dict[str, Any] = {
        "key": KEY,
        "label": LABEL,
        "part": Part.ASSESSMENT,
        "system": System.PAIN,
        "unit": "mg",
        "sources": (case.parameters.source_of(identifier),),
        "cautions": _cautions(case, charted),
    }
    if not charted.any_doses:
        return Item(**common, shown="not recorded", flag=Flag.NOT_RECORDED)
    if gaps:
        return Item(**common, shown=f"not computed: {'; '.join(dict.fromkeys(gaps))}", flag=Flag.NOT_RECORDED)
    total = formula.total_mg([equivalent for equivalent, _ in (term for term in terms if term)])
    return Item(
        **common,
        value=total,
        shown=_shown(charted, total, called, bool(portions)),
        as_of=case.now,
        working=Working(
            formula="oral morphine equivalent: each amount times its factor, added",
            sum=" + ".join(said for _, said in (term for term in terms if term))
            + f" = {total_text(total, 2)}"
            if portions
            else "no opioid charted: 0 mg",
            inputs=tuple(portion.input() for portion in portions),
            rule=f"{called} ({_by(chosen.by_policy)})",
        ),
    )


def _term(case: Case, table: Mapping[str, Any], portion: Portion) -> tuple[float, str] | None:
    """The equivalent of one portion in mg and how it is written in the sum; None without amount or factor."""
    factors = table.get(factor_heading(case, portion.route), {})
    for suffix, unit in UNITS.items():
        factor = factors.get(portion.drug.name + suffix)
        if factor is not None and portion.mg is not None and portion.drug.listed:
            amount = _in_unit(portion.mg, suffix)
            said = f"{portion.drug.name} {portion.route} {_amount_text(amount)} {unit} x {number_text(factor, 3)}"
            return formula.opioid_equivalent_mg(amount, float(factor)), said
    return None


def _amount_text(amount: float) -> str:
    """An amount of the sum to 2 places; a smaller one above 0 with those it needs."""
    said = number_text(amount, 2)
    return number_text(amount, MOST_PLACES) if said == "0" and amount > 0 else said


def _in_unit(mg: float, suffix: str) -> float:
    if not suffix:
        return mg
    return mg * formula.MCG_IN_MG if suffix == "_per_mcg" else formula.mean_rate_mcg_h(mg * formula.MCG_IN_MG)


def _gap(portion: Portion, term: tuple[float, str] | None, called: str) -> str:
    if term is not None:
        return ""
    if portion.mg is None:
        return f"{portion.missing} of {portion.drug.name} {portion.route} ({portion.said})"
    return f"no factor for {portion.drug.name} {portion.route} in {called}"


def _shown(charted: Charted, total: float, called: str, any_opioid: bool) -> str:
    hours = f"{hours_text(charted.hours)} charted"
    if not any_opioid:
        return f"0 mg: no opioid charted in the last 24 h ({hours})"
    return f"{total_text(total)} oral morphine equivalent in 24 h ({hours}), factors: {called}"


def _by(by_policy: bool) -> str:
    return "chosen by the local policy" if by_policy else "default"


def _cautions(case: Case, charted: Charted) -> tuple[str, ...]:
    said = ["exposure only: never used to choose a dose or to change from one opioid to another"]
    age = case.state.age_at(case.now)
    if age is not None and age.years < case.parameters.number("adult_from"):
        said.append("the factors were made in adults")
    open_lines = [run.line for run in charted.unconfirmed(case.now) if run.drug.group == OPIOID]
    if open_lines:
        said.append(
            f"what ran on {joined(list(dict.fromkeys(open_lines)))} since it was last seen is not in the total"
        )
    unread = [pump for pump in pumps(case) if pump.drug.group == OPIOID and pump.unread_since(case.now)]
    if unread:
        said.append("what a patient-controlled pump gave since it was last read is not in the total")
    return tuple(said)
