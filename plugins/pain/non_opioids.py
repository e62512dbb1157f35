"""Paracetamol and ibuprofen: the total of the last 24 h by every route, and the limit it is held against."""

from __future__ import annotations

from datetime import timedelta
from itertools import pairwise

from msgspec import Struct

from handoff.plugin import (
    Case,
    Chosen,
    Flag,
    Item,
    Part,
    System,
    Working,
    number_text,
    with_unit,
)

from . import formula
from .charted import Charted, Portion, total_text
from .early import unasked
from .limits import Limit, limit
from .names import IBUPROFEN, PARACETAMOL

OVER_RANK = 65
NOT_ASKED = "doses from home, ambulance and combination products: not asked about"


class _Total(Struct, frozen=True):
    drug: str
    portions: tuple[Portion, ...]
    limit: Limit
    chosen: Chosen
    mg: float
    unknown: tuple[Portion, ...]

    @property
    def key(self) -> str:
        return f"pain.{self.drug}"

    @property
    def over(self) -> bool:
        daily = self.limit.daily_mg
        return daily is not None and formula.exceeds(self.mg, daily)

    @property
    def over_single(self) -> tuple[Portion, ...]:
        single = self.limit.single_mg
        if single is None:
            return ()
        return tuple(one for one in self.portions if one.mg is not None and formula.exceeds(one.mg, single))

    @property
    def too_close(self) -> tuple[tuple[Portion, Portion], ...]:
        """Two doses charted to the minute that lie closer together than the rule set has it."""
        least = self.limit.interval_h
        known = [portion for portion in self.portions if portion.certain]
        return tuple(
            (first, second)
            for first, second in pairwise(known)
            if least is not None and timedelta(0) < second.at - first.at < timedelta(hours=least)
        )


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return the totals and limits of paracetamol and ibuprofen, in mg for 24 h."""
    found: list[Item] = []
    for drug in (PARACETAMOL, IBUPROFEN):
        total = _total(case, charted, drug)
        if drug == PARACETAMOL or total.portions:
            found += [_total_item(case, charted, total), _limit_item(case, total)]
    return tuple(found)


def rule_sets(case: Case, drug: str, name: str) -> tuple[str, ...]:
    """Return the parameters that hold the rule set ``name``: one, or one for adults and one for children."""
    whole = f"{drug}.{name}"
    parts = tuple(f"{whole}.{part}" for part in ("adult", "child") if f"{whole}.{part}" in case.parameters)
    return parts or (whole,)


def _total(case: Case, charted: Charted, drug: str) -> _Total:
    portions = tuple(portion for portion in charted.portions if portion.drug.name == drug)
    chosen = case.chosen(f"{drug}_limit")
    return _Total(
        drug=drug,
        portions=portions,
        limit=limit(case, rule_sets(case, drug, chosen.name), chosen.by_policy),
        chosen=chosen,
        mg=formula.total_mg([portion.mg for portion in portions if portion.mg is not None]),
        unknown=tuple(portion for portion in portions if portion.mg is None),
    )


def _total_item(case: Case, charted: Charted, total: _Total) -> Item:
    key, label = f"{total.key}_24h", f"{total.drug.capitalize()} in 24 h, all routes"
    source = case.parameters.source_of(total.limit.identifier)
    if not charted.any_doses:
        return Item(
            key=key, label=label, part=Part.ASSESSMENT, system=System.PAIN, unit="mg",
            shown="not recorded", flag=Flag.NOT_RECORDED, sources=(source,),
        )  # fmt: skip
    flag = _flag(total)
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=None if total.unknown else total.mg,
        unit="mg",
        shown=_shown(case, total),
        as_of=case.now,
        flag=flag,
        working=_working(total),
        sources=(source,),
        cautions=_cautions(case, total),
        rank=OVER_RANK if flag is Flag.ACTION else None,
    )


def _flag(total: _Total) -> Flag:
    if total.limit.decides and total.over:
        return Flag.ACTION
    if total.limit.decides and (total.over_single or total.too_close):
        return Flag.REVIEW
    return Flag.NOT_RECORDED if total.unknown else Flag.NONE


def _shown(case: Case, total: _Total) -> str:
    mg = total_text(total.mg)
    if total.unknown:
        gaps = "; ".join(f"{portion.missing}: {portion.said}" for portion in total.unknown)
        said = f"not computed: {gaps}; at least {mg}"
    elif not total.portions:
        return f"0 mg: none charted in the last 24 h{_not_asked(case)}"
    else:
        said = mg
    if total.over and total.limit.daily_mg is not None:
        said += f", over the limit of {with_unit(total.limit.daily_mg, 'mg', 1)} ({total.limit.called})"
    for portion in total.over_single:
        said += f"; {portion.said} is above one dose of {with_unit(total.limit.single_mg or 0, 'mg', 1)}"
    for first, second in total.too_close:
        apart = f"less than {number_text(total.limit.interval_h or 0, 1)} h apart"
        said += (
            f"; {case.clock.time(first.at, case.now)} and {case.clock.time(second.at, case.now)} are {apart}"
        )
    last = total.portions[-1]
    return f"{said}; last {last.said}{_not_asked(case)}"


def _not_asked(case: Case) -> str:
    return f"; {NOT_ASKED}" if unasked(case) else ""


def _working(total: _Total) -> Working:
    terms = [total_text(portion.mg) for portion in total.portions if portion.mg is not None]
    return Working(
        formula="sum of every dose of the last 24 h, all routes and products",
        sum=f"{' + '.join(terms) or '0 mg'} = {total_text(total.mg)}",
        inputs=tuple(portion.input() for portion in total.portions),
        rule=_rule(total),
    )


def _rule(total: _Total) -> str:
    return f"{total.limit.called} ({'chosen by the local policy' if total.chosen.by_policy else 'default'})"


def _cautions(case: Case, total: _Total) -> tuple[str, ...]:
    said = []
    if unasked(case):
        said.append("ask about doses at home, in the ambulance and in combination products")
    if total.limit.missing:
        said.append(f"not held against a limit: {total.limit.missing}")
    if total.drug == IBUPROFEN:
        said += [str(case.parameters[name].value) for name in ("ibuprofen.hold", "ibuprofen.burn_warning")]
    return tuple(said)


def _limit_item(case: Case, total: _Total) -> Item:
    found = total.limit
    label = f"Limit of {total.drug} in 24 h"
    source = case.parameters.source_of(found.identifier)
    if found.daily_mg is None:
        return Item(
            key=f"{total.key}_limit_24h", label=label, part=Part.ASSESSMENT, system=System.PAIN, unit="mg",
            shown=f"not computed: {found.missing}", flag=Flag.NOT_RECORDED, sources=(source,), detail=True,
        )  # fmt: skip
    who = ", ".join(part for part in (found.called, found.row, found.weight) if part)
    return Item(
        key=f"{total.key}_limit_24h",
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=found.daily_mg,
        unit="mg",
        shown=f"{with_unit(found.daily_mg, 'mg', 1)} in 24 h ({who})",
        as_of=case.now,
        working=Working(
            formula="published daily limit for this age and weight, all routes and products",
            sum=found.sum,
            inputs=found.inputs,
            rule=_rule(total),
        ),
        sources=(source,),
        cautions=found.cautions,
        detail=True,
    )
