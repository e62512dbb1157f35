"""Balance, maintenance of a child and evaporation: measured and estimated kept apart."""

from __future__ import annotations

import math
from datetime import datetime, timedelta

from handoff.plugin import Case, Flag, Item, Working, amount, child, number_text

from . import formula
from .bands import pick
from .course import Course
from .say import absent, figure, ml, ml_h, once, unflagged, why_not
from .surface import surface_m2
from .weights import kg_text

HOUR = timedelta(hours=1)
HOURS_A_DAY = 24


def items(course: Course) -> tuple[Item, ...]:
    """Return the items of balance, maintenance and evaporation."""
    return (_maintenance(course), _balance(course), *_shift(course), _evaporation(course))


def losses_ml(case: Case, start: datetime | None = None, end: datetime | None = None) -> float:
    """Return the measured losses other than urine after ``start`` up to ``end``, in mL."""
    rows = case.state.dated(child(case.block, "losses"))
    return math.fsum(
        amount(row.entry.get("volume"), "mL") or 0.0
        for row in rows
        if (start is None or row.at > start) and (end is None or row.at <= end)
    )


def _charted(course: Course) -> bool:
    charted = course.given.charted or course.urine.measured or course.urine.drained_ml
    return bool(charted or losses_ml(course.case))


def _balance(course: Course) -> Item:
    key, label = "balance", "Measured balance since the burn"
    if not _charted(course):
        return absent(key, label)
    intake = course.given.total_ml()
    urine, drained = course.urine.total_ml(), course.urine.drained_ml
    lost = losses_ml(course.case)
    value = formula.balance_ml(intake, urine + drained + lost)
    open_ml, unseen = course.unconfirmed_ml(), course.long_unconfirmed()
    parts = [f"in {ml(intake)}", f"out {ml(urine + drained + lost)}"]
    shown = f"{_signed(value)} ({', '.join(parts)})"
    if open_ml:
        shown += f"; {ml(open_ml)} more in, not confirmed"
    if unseen:
        shown += f"; a line {unseen}"
    return figure(
        key,
        label,
        value=value,
        unit="mL",
        shown=shown,
        as_of=course.now,
        working=Working(
            formula="everything confirmed in - (urine + drained at insertion + other measured losses)",
            sum=f"{ml(intake)} - ({ml(urine)} + {ml(drained)} + {ml(lost)}) = {_signed(value)}",
        ),
        sources=(course.source("balance.what_counts"),),
        cautions=("Evaporation and what went into the tissue are not measured and not in it.",),
    )


def _signed(value: float) -> str:
    return f"{'+' if value > 0 else ''}{ml(value)}"


def _shift(course: Course) -> tuple[Item, ...]:
    """Balance since the last handover, and since the chart day began."""
    found = []
    earlier = [row.at for row in course.case.state.dated(course.case.state.root.get("handovers"))]
    before = [at for at in earlier if at < course.now]
    if before:
        found.append(
            _between(course, "balance_shift", "Measured balance since the last handover", before[-1])
        )
    name = course.case.chosen("chart_day").name
    start = _chart_day(course, int(course.number(f"chart_day.{name}")))
    found.append(
        _between(course, "balance_chart_day", f"Measured balance since the chart day began at {name}", start)
    )
    return tuple(found)


def _chart_day(course: Course, hour: int) -> datetime:
    clock = course.case.clock
    local = clock.local(course.now)
    begin = local.replace(hour=hour, minute=0, second=0, microsecond=0)
    if begin > local:
        begin = (begin.replace(hour=0) - HOUR).replace(hour=hour)
    return begin.astimezone(course.now.tzinfo)


def _between(course: Course, key: str, label: str, start: datetime) -> Item:
    if not _charted(course):
        return absent(key, label, detail=True)
    intake = course.given.between_ml(start, course.now)
    output = (
        course.urine.total_ml(start, course.now)
        + course.urine.drained_after_ml(start)
        + losses_ml(course.case, start, course.now)
    )
    value = formula.balance_ml(intake, output)
    return figure(
        key,
        label,
        value=value,
        unit="mL",
        shown=f"{_signed(value)} (in {ml(intake)}, out {ml(output)}; from {course.time(start)})",
        as_of=course.now,
        working=Working(
            formula="everything confirmed in - everything measured out, since that moment",
            sum=f"{ml(intake)} - {ml(output)} = {_signed(value)}",
        ),
        sources=(course.source("balance.what_counts"),),
        detail=key == "balance_chart_day",
    )


def _maintenance(course: Course) -> Item:
    key, label = "maintenance_rate", "Child maintenance, beside the burn fluid"
    rule = course.case.chosen("maintenance_for").name
    picked = pick(course.case.parameters[f"maintenance_for.{rule}"].value, course.facts)
    rule_source = course.source(f"maintenance_for.{rule}")
    if course.comfort:
        return unflagged(key, label, "not prompted: the goal of care is comfort")
    if course.person.is_child is False:
        return unflagged(key, label, "none: adult", sources=(rule_source,), detail=True)
    if picked.band is None:
        if picked.missing:
            return absent(key, label, why_not(picked.missing))
        return unflagged(key, label, f"none by the rule {rule}", sources=(rule_source,))
    volume = course.plan.volume if course.plan else None
    if volume is not None and volume.holds_maintenance:
        return unflagged(
            key, label, f"none added: {volume.rule} holds maintenance already", sources=(rule_source,)
        )
    weight = course.person.weight
    if weight is None:
        return absent(key, label, why_not(("weight",)))
    form = course.case.chosen("maintenance").name
    rate, said = _maintenance_rate(course, form, weight.kg)
    return figure(
        key,
        label,
        value=rate,
        unit="mL/h",
        shown=f"{ml_h(rate)} ({form}; rule {rule}, formula estimate)",
        working=Working(
            formula=f"maintenance by {form}",
            sum=f"{kg_text(weight.kg)}: {said}",
            inputs=(weight.input,),
            rule=f"{rule} ({picked.band['who']})",
        ),
        sources=once((course.source(f"maintenance.{form}"), rule_source)),
        cautions=(
            "Maintenance is beside the burn fluid, holds glucose as prescribed, and is not titrated to urine.",
            f"Weight used: {weight.name}.",
            *([] if not weight.cautions else weight.cautions),
        ),
    )


def _maintenance_rate(course: Course, form: str, kg: float) -> tuple[float, str]:
    table = course.case.parameters.table(f"maintenance.{form}")
    widths, values = [float(w) for w in table["widths_kg"]], [float(v) for v in table["per_kg"]]
    if "most_ml_h" in table:
        rate = formula.maintenance_rate_ml_h(kg, widths, values, float(table["most_ml_h"]))
        bands = "-".join(number_text(value) for value in values)
        return rate, f"{bands} mL/kg/h by bands = {ml_h(rate)}"
    day = formula.maintenance_24h_ml(kg, widths, values, float(table["most_ml"]))
    return day / HOURS_A_DAY, f"{ml(day)} in 24 h / 24 = {ml_h(day / HOURS_A_DAY)}"


def _evaporation(course: Course) -> Item:
    key, label = "evaporation", "Estimated evaporation, not measured"
    name = course.case.chosen("evaporation").name
    weight, pct = course.person.weight, course.person.pct
    body = surface_m2(course.case, weight.kg) if weight else None
    missing = [] if weight else ["weight"]
    missing += [] if pct is not None else [course.person.pct_missing]
    missing += [] if body or not weight else ["height"]
    if weight is None or pct is None or body is None:
        return unflagged(key, label, why_not(missing), detail=True)
    constant = course.number(f"evaporation.{name}")
    value = formula.evaporation_ml_h(constant, pct, body.m2)
    since = f"; about {ml(value * course.hours)} since the burn" if course.hours is not None else ""
    return figure(
        key,
        label,
        value=value,
        unit="mL/h",
        shown=f"{ml_h(value)}{since} (constant {name}, body surface by {body.name})",
        flag=Flag.NONE,
        working=Working(
            formula="(constant + burned area in %) x body surface in m2",
            sum=(
                f"({number_text(constant)} + {number_text(pct, 2)}) x {number_text(body.m2, 3)} m2 = {ml_h(value)}"
            ),
            inputs=(weight.input,),
            rule=name,
        ),
        sources=once((course.source(f"evaporation.{name}"), *body.sources)),
        cautions=("The constant differs between prints (15, 25); ask the unit which it uses.",),
        detail=True,
    )
