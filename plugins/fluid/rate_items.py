"""The rate of the plan now and what is due by now; a range where the burn time or the order is not there."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import Flag, Item, Source, Working, number_text

from . import formula
from .course import Course, burn_moments
from .plan import Plan
from .plan_items import RANK_NO_ORDER, inputs, no_figure, range_said, weight_caution
from .say import figure, ml, ml_h, once, span, unflagged

RATE = ("rate_now", "Planned rate now")
DUE = ("due_by_now", "Due by now")


def items(course: Course) -> tuple[Item, ...]:
    """Return the rate now and what is due by now; each says what is missing where it cannot be worked out."""
    return (_rate_now(course), _due(course))


def _rate_now(course: Course) -> Item:
    key, label = RATE
    nothing = no_figure(course, key, label, burn_needed=True)
    if nothing is not None:
        return nothing
    plan = course.plan
    if plan is None or not plan.by_order:
        return _rate_range(course, key, label)
    moments = burn_moments(course)
    if not moments:  # a rate that was ordered needs no time of the burn
        moments = (course.now,)
    rates = [plan.rate_ml_h(moment, course.now) for moment in moments]
    known = [rate for rate in rates if rate is not None]
    if not known:
        period = number_text(course.period_h)
        return unflagged(
            key,
            label,
            f"the formula ends at {period} h; no rate by it now",
            sources=_plan_sources(course, plan),
        )
    is_one = len(known) == len(rates) and min(known) == max(known)
    said = ml_h(known[0]) if is_one else span(ml_h(min(known)), ml_h(max(known)))
    if len(known) < len(rates):
        said = f"{span(ml_h(min(known)), ml_h(max(known)))}, or none: the plan may have ended"
    ordered = any(rate.at <= course.now for rate in plan.rates)
    estimate = "" if ordered else "formula estimate; "
    return figure(
        key,
        "Planned rate now, as ordered" if ordered else label,
        value=known[0] if is_one else None,
        unit="mL/h",
        shown=f"{said}{_until(course, plan)} ({estimate}{plan.said}){_rounded(course, known, is_one and not ordered)}",
        as_of=course.now,
        working=Working(
            formula="volume of the period / hours of the period, counted from the burn; an ordered rate replaces it",
            sum=_rate_sum(course, plan, said),
            inputs=inputs(course, with_burn=True),
            rule=plan.said,
        ),
        sources=_plan_sources(course, plan),
        cautions=tuple(dict.fromkeys((*course.cautions, *_uncertain(course), *weight_caution(course)))),
    )


def _rounded(course: Course, rates: list[float], applies: bool) -> str:
    """The rate as the policy's rule rounds it, beside the exact one."""
    name = course.case.chosen("rounding").name
    step = course.number(f"rounding.{name}")
    if not applies or not step:
        return ""
    return f"; {ml_h(formula.rounded_up_ml_h(rates[0], step))} rounded up by {name}"


def _plan_sources(course: Course, plan: Plan) -> tuple[Source, ...]:
    volumes = plan.volume.sources if plan.volume else ()
    return once((*volumes, *([course.source("order.in_force")] if plan.by_order else [])))


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
    hours = [number_text(_since(course, moment), 2) for moment in burn_moments(course)]
    return f"{'; '.join(periods)}; now {' to '.join(dict.fromkeys(hours))} h since the burn: {said}"


def _since(course: Course, burn: datetime) -> float:
    return course.case.hours_between(burn, course.now)


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
    moments = burn_moments(course)
    rates = [
        volume.rate_at(_since(course, moment))
        for volume in (course.published[0], course.published[-1])
        for moment in moments
    ]
    period = number_text(course.period_h)
    if max(rates) == 0:
        return unflagged(key, label, f"{course.no_order}; the formulas end at {period} h")
    said = span(ml_h(min(rates)), ml_h(max(rates)))
    return figure(
        key,
        label,
        unit="mL/h",
        shown=f"{course.no_order}; {said} by the published coefficients{_policy_said(course)}",
        as_of=course.now,
        flag=Flag.REVIEW,
        rank=None if course.ended else RANK_NO_ORDER,  # the order that was ended stands there already
        working=Working(
            formula="lowest and highest rate of the published coefficients at this time since the burn",
            sum=f"{range_said(course)}: {course.published[0].sum} and {course.published[-1].sum} in 24 h: {said} now",
            inputs=inputs(course, with_burn=True),
            rule="no order in force: a range, no single rate",
        ),
        sources=once((*course.published[0].sources, *course.published[-1].sources)),
        cautions=tuple(dict.fromkeys((*course.cautions, *_uncertain(course), *weight_caution(course)))),
    )


def _policy_said(course: Course) -> str:
    plan = course.plan
    if plan is None or plan.volume is None:
        return ""
    rates = [plan.volume.rate_at(_since(course, moment)) for moment in burn_moments(course)]
    return f"; {plan.said} would start from {span(ml_h(min(rates)), ml_h(max(rates)))}"


def _due(course: Course) -> Item:
    key, label = DUE
    nothing = no_figure(course, key, label, burn_needed=True)
    if nothing is not None:
        return nothing
    moments = burn_moments(course)
    plan = course.plan
    if plan is None:
        dues: list[float | None] = [
            volume.due_ml(_since(course, moment))
            for volume in (course.published[0], course.published[-1])
            for moment in moments
        ]
        prefix, rule = f"{course.no_order}; ", "no order in force: a range, no single figure"
        sources = once((*course.published[0].sources, *course.published[-1].sources))
    else:
        dues = [plan.due_ml(moment, course.now) for moment in moments or (course.now,)]
        prefix, rule, sources = "", plan.said, _plan_sources(course, plan)
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
        shown=f"{prefix}{said} {_counted_from(course)}",
        as_of=course.now,
        working=Working(
            formula="share of each period gone by since the burn x its volume; an ordered rate x its hours",
            sum=f"{_due_sum(course)}{said}",
            inputs=inputs(course, with_burn=True),
            rule=rule,
        ),
        sources=sources,
        cautions=tuple(
            dict.fromkeys((*_gaps(course), *course.cautions, *_uncertain(course), *weight_caution(course)))
        ),
    )


def _counted_from(course: Course) -> str:
    """From when it counts, as what was given is counted: the burn, or the first ordered rate."""
    since = course.plan.since if course.plan else None
    if since is None:
        return "since the burn (formula estimate)"
    given = f"; given since then {ml(course.given_ml())}" if course.given.charted else ""
    return f"since the order of {course.time(since)} (ordered rate){given}"


def _gaps(course: Course) -> tuple[str, ...]:
    """The times between orders in which none was in force: nothing is due for them."""
    spans = course.plan.gaps(course.now) if course.plan else ()
    return tuple(
        f"No order was in force from {course.time(start)} to {course.time(end)}: nothing is due for that time."
        for start, end in spans
    )


def _due_sum(course: Course) -> str:
    hours = [number_text(_since(course, moment), 2) for moment in burn_moments(course)]
    since = course.plan.since if course.plan else None
    if since is not None:
        return f"{number_text(_since(course, since), 2)} h since the order of {course.time(since)}: "
    return f"{' to '.join(dict.fromkeys(hours))} h since the burn: " if hours else ""
