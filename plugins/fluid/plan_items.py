"""The plan as items: volume of 24 h, first 8 h, rate now, due by now, the formula beside the order."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import Flag, Input, Item, Source, Working, number_text

from . import formula
from .course import COMFORT, Course
from .plan import Plan
from .rules import NoVolume, Volume
from .say import absent, figure, inputs_of, ml, ml_h, once, span, unflagged, why_not

TOTAL = ("total_24h", "Resuscitation fluid in 24 h, formula estimate")
FIRST = ("first_8h", "First 8 h from the burn, formula estimate")
RATE = ("rate_now", "Planned rate now, formula estimate")
DUE = ("due_by_now", "Due by now, formula estimate")
RANK_NO_ORDER = 34


def items(course: Course) -> tuple[Item, ...]:
    """Return the items of the plan; each says what is missing where it cannot be worked out."""
    return (
        _order(course),
        _volume(course, TOTAL, course.period_h),
        _volume(course, FIRST, course.number("plan.first_period")),
        _rate_now(course),
        _due(course),
        _beside(course),
    )


def _order(course: Course) -> Item:
    plan = course.plan
    label = "Fluid order in force"
    if course.comfort:
        return unflagged("order", label, COMFORT)
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
        repeats=True,
        line=plan.line,
        cautions=(f"{course.no_plan.removeprefix('no plan: ')}.",) if course.no_plan else (),
    )


def _no_figure(course: Course, key: str, label: str, burn_needed: bool) -> Item | None:
    """The item where there is nothing to work out: comfort, below the start line, or something missing."""
    if course.comfort:
        return unflagged(key, label, COMFORT)
    if course.plan is None and course.no_plan:
        return unflagged(key, label, course.no_plan, sources=_start_sources(course))
    problem = course.plan.problem if course.plan else None
    if problem is not None and not (course.plan and course.plan.rates):
        shown = why_not(problem.missing) if problem.missing else f"not computed: {problem.shown}"
        return absent(key, label, shown)
    missing = course.missing() if burn_needed else course.missing()[0 if course.burn else 1 :]
    if missing and (course.plan is None or course.plan.volume is not None):
        return absent(key, label, why_not(missing))
    if course.plan is None and not course.published:
        return absent(key, label, f"not computed: {_formula_said(course)}")
    return None


def _formula_said(course: Course) -> str:
    return course.formula.shown if isinstance(course.formula, NoVolume) else "no order recorded"


def _start_sources(course: Course) -> tuple[Source, ...]:
    return (course.source(f"start.{course.case.chosen('start').name}"),)


def _inputs(course: Course, with_burn: bool) -> tuple[Input, ...]:
    weight, burn, plan = course.person.weight, course.burn, course.plan
    order = Input("order", plan.said, plan.line) if plan and plan.by_order else None
    when = None
    if with_burn and burn is not None:
        clock = course.case.clock
        said = clock.day_and_time(burn.earliest)
        said = said if burn.certain else f"between {said} and {clock.day_and_time(burn.latest)}"
        when = course.case.input("time of the burn", burn.node, said)
    return inputs_of(weight.input if weight else None, course.person.pct_input, when, order)


def _weight_caution(course: Course) -> tuple[str, ...]:
    weight = course.person.weight
    return (f"Weight used: {weight.name}.",) if weight else ()


def _volume(course: Course, what: tuple[str, str], hours: float) -> Item:
    key, label = what
    nothing = _no_figure(course, key, label, burn_needed=False)
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
    cautions = [*course.cautions, *_weight_caution(course), *volume.cautions]
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
            inputs=_inputs(course, with_burn=False),
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
        shown=f"no order recorded; {said} by the published coefficients ({_range_said(course)})",
        flag=Flag.NONE,
        working=Working(
            formula="lowest and highest of the published coefficients that hold for this patient",
            sum=f"{low.rule}: {low.sum}; {high.rule}: {high.sum}",
            inputs=_inputs(course, with_burn=False),
            rule="no order in force: a range, no single figure",
        ),
        sources=once((*low.sources, *high.sources)),
        cautions=(*course.cautions, *_weight_caution(course)),
    )


def _range_said(course: Course) -> str:
    low, high = course.published[0], course.published[-1]
    return low.said if low.rule == high.rule else f"{low.said} to {high.said}"


def _rate_now(course: Course) -> Item:
    key, label = RATE
    nothing = _no_figure(course, key, label, burn_needed=True)
    if nothing is not None:
        return nothing
    plan = course.plan
    if plan is None:
        return _rate_range(course, key, label)
    moments = _burn_moments(course)
    if not moments:  # a rate that was ordered needs no time of the burn
        moments = (course.now,)
    rates = [plan.rate_ml_h(moment, course.now) for moment in moments]
    known = [rate for rate in rates if rate is not None]
    if not known:
        period = number_text(course.period_h)
        return unflagged(
            key, label, f"the formula ends at {period} h; no rate by it now", sources=_plan_sources(plan)
        )
    is_one = len(known) == len(rates) and min(known) == max(known)
    said = ml_h(known[0]) if is_one else span(ml_h(min(known)), ml_h(max(known)))
    if len(known) < len(rates):
        said = f"{span(ml_h(min(known)), ml_h(max(known)))}, or none: the plan may have ended"
    return figure(
        key,
        label,
        value=known[0] if is_one else None,
        unit="mL/h",
        shown=f"{said}{_until(course, plan)} (formula estimate; {plan.said})",
        as_of=course.now,
        working=Working(
            formula="volume of the period / hours of the period, counted from the burn; an ordered rate replaces it",
            sum=_rate_sum(course, plan, said),
            inputs=_inputs(course, with_burn=True),
            rule=plan.said,
        ),
        sources=_plan_sources(plan),
        cautions=tuple(dict.fromkeys((*course.cautions, *_uncertain(course), *_weight_caution(course)))),
    )


def _plan_sources(plan: Plan) -> tuple[Source, ...]:
    return once(plan.volume.sources) if plan.volume else ()


def _rate_sum(course: Course, plan: Plan, said: str) -> str:
    ordered = [rate for rate in plan.rates if rate.at <= course.now]
    if ordered:
        return f"ordered at {course.time(ordered[-1].at)}: {ml_h(ordered[-1].ml_h)}"
    if plan.volume is None:
        return said
    periods, start = [], 0.0
    for end, share in zip(plan.volume.schedule.ends_h, plan.volume.schedule.shares, strict=True):
        rate = ml_h(plan.volume.rate_at(start))
        part = (plan.volume.total_ml or 0.0) * share
        periods.append(
            f"{number_text(start)} to {number_text(end)} h: "
            f"{ml(part)} / {number_text(end - start)} h = {rate}"
        )
        start = end
    hours = [number_text(_since(course, moment), 2) for moment in _burn_moments(course)]
    return f"{'; '.join(periods)}; now {' to '.join(dict.fromkeys(hours))} h since the burn: {said}"


def _since(course: Course, burn: datetime) -> float:
    return course.case.hours_between(burn, course.now)


def _burn_moments(course: Course) -> tuple[datetime, ...]:
    if course.burn is None:
        return ()
    both = (course.burn.earliest, course.burn.latest)
    return both[:1] if course.burn.certain else both


def _uncertain(course: Course) -> tuple[str, ...]:
    if course.burn is None or course.burn.certain:
        return ()
    return ("The time of the burn is uncertain: this is a range.",)


def _until(course: Course, plan: Plan) -> str:
    if plan.rates or plan.volume is None or course.burn is None or not course.burn.certain:
        return ""
    hours = _since(course, course.burn.earliest)
    ends = [end for end in plan.volume.schedule.ends_h if end > hours]
    if not ends:
        return ""
    left = ends[0] - hours
    moment = course.now + (course.now - course.burn.earliest) * (left / hours) if hours else course.now
    return f" until {course.time(moment)}" if hours else ""


def _rate_range(course: Course, key: str, label: str) -> Item:
    moments = _burn_moments(course)
    rates = [
        volume.rate_at(_since(course, moment))
        for volume in (course.published[0], course.published[-1])
        for moment in moments
    ]
    period = number_text(course.period_h)
    if max(rates) == 0:
        return unflagged(key, label, f"no order recorded; the formulas end at {period} h")
    said = span(ml_h(min(rates)), ml_h(max(rates)))
    return figure(
        key,
        label,
        unit="mL/h",
        shown=f"no order recorded; {said} by the published coefficients ({_range_said(course)})",
        as_of=course.now,
        flag=Flag.REVIEW,
        rank=RANK_NO_ORDER,
        working=Working(
            formula="lowest and highest rate of the published coefficients at this time since the burn",
            sum=f"{course.published[0].sum} and {course.published[-1].sum} in 24 h: {said} now",
            inputs=_inputs(course, with_burn=True),
            rule="no order in force: a range, no single rate",
        ),
        sources=once((*course.published[0].sources, *course.published[-1].sources)),
        cautions=tuple(dict.fromkeys((*course.cautions, *_uncertain(course), *_weight_caution(course)))),
    )


def _due(course: Course) -> Item:
    key, label = DUE
    nothing = _no_figure(course, key, label, burn_needed=True)
    if nothing is not None:
        return nothing
    moments = _burn_moments(course)
    plan = course.plan
    if plan is None:
        dues: list[float | None] = [
            volume.due_ml(_since(course, moment))
            for volume in (course.published[0], course.published[-1])
            for moment in moments
        ]
        prefix, rule = "no order recorded; ", "no order in force: a range, no single figure"
        sources = once((*course.published[0].sources, *course.published[-1].sources))
    else:
        dues = [plan.due_ml(moment, course.now) for moment in moments or (course.now,)]
        prefix, rule, sources = "", plan.said, _plan_sources(plan)
    known = [due for due in dues if due is not None]
    if not known:
        return unflagged(key, label, f"not computed: {plan.said if plan else ''} sets a rate, not a volume")
    is_one = plan is not None and min(known) == max(known)
    said = span(ml(min(known)), ml(max(known)))
    return figure(
        key,
        label,
        value=known[0] if is_one else None,
        unit="mL",
        shown=f"{prefix}{said} (formula estimate)",
        as_of=course.now,
        working=Working(
            formula="share of each period gone by since the burn x its volume; an ordered rate x its hours",
            sum=f"{_due_sum(course)}{said}",
            inputs=_inputs(course, with_burn=True),
            rule=rule,
        ),
        sources=sources or (course.source("plan.period"),),
        cautions=tuple(dict.fromkeys((*course.cautions, *_uncertain(course), *_weight_caution(course)))),
    )


def _due_sum(course: Course) -> str:
    hours = [number_text(_since(course, moment), 2) for moment in _burn_moments(course)]
    return f"{' to '.join(dict.fromkeys(hours))} h since the burn: " if hours else ""


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
            return unflagged(key, label, made.shown, sources=(course.source(f"starting_rate.{made.rule}"),))
        return absent(key, label, why_not(made.missing))
    total = made.due_ml(course.period_h) if made.total_ml is not None else None
    rate = made.rate_at(course.hours) if course.hours is not None else None
    parts = [f"{ml(total)} in {number_text(course.period_h)} h"] if total is not None else []
    parts += [f"{ml_h(rate)} now"] if rate else []
    return figure(
        key,
        label,
        value=total if total is not None else rate,
        unit="mL" if total is not None else "mL/h",
        shown=f"{made.said}: {', '.join(parts)} (formula estimate){_difference(course, total)}",
        working=Working(
            formula=made.formula, sum=made.sum, inputs=_inputs(course, with_burn=False), rule=made.said
        ),
        sources=once(made.sources),
        cautions=tuple(dict.fromkeys((*course.cautions, *made.cautions, *_weight_caution(course)))),
    )


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
