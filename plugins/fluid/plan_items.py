"""The plan as items: volume of 24 h, first 8 h, rate now, due by now, the formula beside the order."""

from __future__ import annotations

from handoff.plugin import Flag, Input, Item, Source, Working, number_text

from . import formula
from .course import COMFORT, Course, burn_moments
from .orders import Ended
from .plan import Plan
from .rules import NoVolume, Volume
from .say import absent, figure, inputs_of, ml, ml_h, once, span, unflagged, why_not

TOTAL = ("total_24h", "Resuscitation fluid in 24 h")
FIRST = ("first_8h", "First 8 h from the burn")
RANK_NO_ORDER = 45


def items(course: Course) -> tuple[Item, ...]:
    """Return the items of the plan; each says what is missing where it cannot be worked out."""
    return (
        _order(course),
        _volume(course, TOTAL, course.period_h),
        _volume(course, FIRST, course.number("plan.first_period")),
        _beside(course),
    )


def _order(course: Course) -> Item:
    plan = course.plan
    label = "Fluid order in force"
    if course.comfort:
        return unflagged("order", label, COMFORT)
    if course.ended is not None:
        return _ended(course, course.ended)
    if plan is None or not plan.by_order:
        if course.no_plan:
            return unflagged("order", label, f"none recorded; {course.no_plan}")
        return absent("order", label)
    return figure(
        "order",
        label,
        value=plan.said,
        shown=plan.said.removeprefix("order of "),
        as_of=plan.at,
        line=plan.line,
        cautions=(f"{course.no_plan.removeprefix('no plan: ')}.",) if course.no_plan else (),
    )


def _ended(course: Course, ended: Ended) -> Item:
    """The last order where it was ended; asked about while an earlier one is open or the formulas still run."""
    over = course.hours is not None and course.hours >= course.period_h
    asked = ended.earlier is not None or not (over or course.no_plan)
    return figure(
        "order",
        "Fluid order",
        shown=ended.said(course.case),
        as_of=ended.at,
        flag=Flag.REVIEW if asked else Flag.NONE,
        rank=RANK_NO_ORDER if asked else None,
        sources=(course.source("order.in_force"),),
        line=ended.row.line,
        cautions=(f"{course.no_plan.removeprefix('no plan: ')}.",) if course.no_plan else (),
    )


def no_figure(course: Course, key: str, label: str, burn_needed: bool) -> Item | None:
    """Return the item where there is nothing to work out: comfort, below the start line, or something missing."""
    if course.comfort:
        return unflagged(key, label, COMFORT)
    if course.plan is None and course.no_plan:
        return unflagged(
            key, label, course.no_plan, sources=_start_sources(course), cautions=_small_burn(course)
        )
    problem = course.plan.problem if course.plan else None
    if problem is not None and not (course.plan and course.plan.rates):
        shown = why_not(problem.missing) if problem.missing else f"not computed: {problem.shown}"
        return absent(key, label, shown)
    missing = course.missing() if burn_needed else course.missing()[0 if course.burn else 1 :]
    if missing and (course.plan is None or course.plan.volume is not None):
        return absent(key, label, why_not(missing))
    if (course.plan is None or not course.plan.by_order) and burn_needed and not course.published:
        return absent(key, label, f"not computed: {_formula_said(course)}")
    if course.plan is None and not course.published:
        return absent(key, label, f"not computed: {_formula_said(course)}")
    return None


def _small_burn(course: Course) -> tuple[str, ...]:
    """What a small burned area does not show."""
    found = []
    if course.person.is_electrical:
        found.append("Electrical injury: the skin does not show how much is burned below it.")
    if course.person.inhalation:
        found.append("Inhalation injury: some rules start fluid at a smaller burn.")
    return tuple(found)


def _formula_said(course: Course) -> str:
    return course.formula.shown if isinstance(course.formula, NoVolume) else course.no_order


def _start_sources(course: Course) -> tuple[Source, ...]:
    return (course.source(f"start.{course.case.chosen('start').name}"),)


def inputs(course: Course, with_burn: bool) -> tuple[Input, ...]:
    """Return what went into a figure of the plan: weight, area, order, and the burn where it counts."""
    weight, burn, plan = course.person.weight, course.burn, course.plan
    order = Input("order", plan.said, plan.line) if plan and plan.by_order else None
    when = None
    if with_burn and burn is not None:
        clock = course.case.clock
        said = clock.day_and_time(burn.earliest)
        said = said if burn.certain else f"between {said} and {clock.day_and_time(burn.latest)}"
        when = course.case.input("time of the burn", burn.node, said)
    return inputs_of(weight.input if weight else None, course.person.pct_input, when, order)


def weight_caution(course: Course) -> tuple[str, ...]:
    """Return which weight a figure used."""
    weight = course.person.weight
    return (f"Weight used: {weight.name}.",) if weight else ()


def _volume(course: Course, what: tuple[str, str], hours: float) -> Item:
    key, label = what
    nothing = no_figure(course, key, label, burn_needed=False)
    if nothing is not None:
        return nothing
    plan = course.plan
    if plan is None:
        return _volume_range(course, key, label, hours)
    if plan.volume is None or plan.volume.total_ml is None:
        shown = f"not computed: {plan.said} sets a rate, not a volume"
        return unflagged(key, label, shown, as_of=plan.at)
    return _volume_item(course, plan, plan.volume, what, hours)


def _volume_item(course: Course, plan: Plan, volume: Volume, what: tuple[str, str], hours: float) -> Item:
    key, label = what
    value = volume.due_ml(hours)
    whole = volume.schedule.ends_h[-1] == hours
    part = "" if whole else f"; of it by {number_text(hours)} h from the burn {ml(value)}"
    cautions = [*course.cautions, *weight_caution(course), *volume.cautions]
    if plan.rates:
        cautions.append(
            f"A rate of {ml_h(plan.rates[-1].ml_h)} was ordered at {course.time(plan.rates[-1].at)}; "
            "this is the volume of the formula before it."
        )
    return figure(
        key,
        label,
        value=value,
        unit="mL",
        shown=f"{ml(value)} (formula estimate; {volume.said})",
        working=Working(
            formula=volume.formula,
            sum=f"{volume.sum}{part}",
            inputs=inputs(course, with_burn=False),
            rule=plan.said,
        ),
        sources=once(volume.sources),
        cautions=tuple(dict.fromkeys(cautions)),
    )


def _volume_range(course: Course, key: str, label: str, hours: float) -> Item:
    low, high = course.published[0], course.published[-1]
    said = span(ml(low.due_ml(hours)), ml(high.due_ml(hours)))
    return figure(
        key,
        label,
        unit="mL",
        shown=f"{course.no_order}; {said} by the published coefficients ({range_said(course)})",
        flag=Flag.NONE,
        working=Working(
            formula="lowest and highest of the published coefficients that hold for this patient",
            sum=f"{low.rule}: {low.sum}; {high.rule}: {high.sum}",
            inputs=inputs(course, with_burn=False),
            rule="no order in force: a range, no single figure",
        ),
        sources=once((*low.sources, *high.sources)),
        cautions=(*course.cautions, *weight_caution(course)),
    )


def range_said(course: Course) -> str:
    """Return the lowest and the highest published rule that hold for the patient, by name."""
    low, high = course.published[0], course.published[-1]
    return low.said if low.rule == high.rule else f"{low.said} to {high.said}"


def _beside(course: Course) -> Item:
    """The formula's own figure beside the order, with the difference."""
    key, label = "formula_figure", "Named formula, beside the order"
    if course.comfort:
        return unflagged(key, label, COMFORT)
    if course.plan is None and course.no_plan:
        return unflagged(key, label, course.no_plan, sources=_start_sources(course), detail=True)
    made = course.formula
    if isinstance(made, NoVolume):
        if made.between:
            return unflagged(
                key,
                label,
                f"{made.shown}{_between_said(course)}",
                sources=(course.source(f"starting_rate.{made.rule}"),),
            )
        return unflagged(key, label, why_not(made.missing), detail=True)
    total = made.due_ml(course.period_h) if made.total_ml is not None else None
    rates = [made.rate_at(course.case.hours_between(one, course.now)) for one in burn_moments(course)]
    parts = [f"{ml(total)} in {number_text(course.period_h)} h"] if total is not None else []
    parts += [f"{span(ml_h(min(rates)), ml_h(max(rates)))} by that formula"] if any(rates) else []
    return figure(
        key,
        label,
        value=total if total is not None else rates[0] if rates else None,
        unit="mL" if total is not None else "mL/h",
        shown=f"{made.said}: {', '.join(parts)} (formula estimate){_difference(course, total)}",
        working=Working(
            formula=made.formula, sum=made.sum, inputs=inputs(course, with_burn=False), rule=made.said
        ),
        sources=once(made.sources),
        cautions=tuple(dict.fromkeys((*course.cautions, *made.cautions, *weight_caution(course)))),
    )


def _between_said(course: Course) -> str:
    """The lowest and highest figure of the bands that the patient falls between."""
    bands = course.case.parameters[f"starting_rate.{course.formula.rule}"].value
    coefficients = [float(band["crystalloid"]) for band in bands if set(band) & {"crystalloid"}]
    weight, pct = course.person.weight, course.person.pct
    if weight is None or pct is None or not coefficients:
        return ""
    ends = (min(coefficients), max(coefficients))
    low, high = (formula.crystalloid_24h_ml(weight.kg, pct, one) for one in ends)
    return f"; {span(ml(low), ml(high))} in {number_text(course.period_h)} h, no single figure"


def _difference(course: Course, total: float | None) -> str:
    plan = course.plan
    if plan is None or not plan.by_order or plan.volume is None or total is None:
        return ""
    if plan.volume.total_ml is None:
        return ""
    more = formula.surplus_ml(total, plan.volume.due_ml(course.period_h))
    if round(more) == 0:
        return "; the order is the same"
    return f"; the order is {ml(abs(more))} {'more' if more > 0 else 'less'}"
