"""What went in, against the plan: given, not confirmed, behind or ahead, catching up, and what else ran."""

from __future__ import annotations

from handoff.plugin import Flag, Input, Item, Working, number_text

from . import formula
from .course import COMFORT, Course
from .portions import Portion
from .say import absent, figure, ml, ml_h, once, span, unflagged, why_not

COUNTED = "rate x hours to the stop, the next rate on the line or when last seen running; single volumes"
URINE_LEADS = "Urine and perfusion come first; this difference alone changes no rate."


def items(course: Course) -> tuple[Item, ...]:
    """Return the items of what was given."""
    return (_given(course), _not_confirmed(course), _against(course), _catch_up(course))


def _portions(course: Course, confirmed: bool) -> tuple[Portion, ...]:
    return tuple(
        p for p in course.given.portions if p.purpose in course.counted and p.confirmed is confirmed and p.ml
    )


def input_of(course: Course, portion: Portion) -> Input:
    """Return a portion as the input of a sum, with its line."""
    where = "before arrival" if portion.before_arrival else portion.name or portion.fluid or portion.purpose
    if portion.end > portion.start:
        when = f"{course.time(portion.start)} to {course.time(portion.end)}"
    else:
        when = f"by {course.time(portion.start)}" if portion.before_arrival else course.time(portion.start)
    return Input(f"{where}, {when}", ml(portion.ml), portion.line)


def sum_of(portions: tuple[Portion, ...], total: float) -> str:
    """Return the sum of the portions as printed."""
    parts = [number_text(portion.ml, 1) for portion in portions]
    return f"{' + '.join(parts) or '0'} = {ml(total)}"


def _given(course: Course) -> Item:
    label = "Resuscitation fluid given since the burn, confirmed"
    if not course.given.charted:
        return absent("given", label)
    confirmed = _portions(course, confirmed=True)
    total = course.given.total_ml(course.counted)
    before = sum(p.ml for p in confirmed if p.before_arrival)
    boluses = [p for p in confirmed if p.is_bolus]
    shown = ml(total)
    if before:
        shown += f"; {ml(before)} of it before arrival, credited"
    if boluses:
        shown += f"; {ml(sum(p.ml for p in boluses))} of it as bolus"
    return figure(
        "given",
        label,
        value=total,
        unit="mL",
        shown=shown,
        as_of=course.given.seen(course.counted),
        working=Working(
            formula=COUNTED,
            sum=sum_of(confirmed, total),
            inputs=tuple(input_of(course, portion) for portion in confirmed),
            rule=", ".join(sorted(course.counted)),
        ),
        sources=(course.source("line.seen_running"),),
        line=confirmed[0].line if confirmed else 0,
    )


def _not_confirmed(course: Course) -> Item:
    label = "Resuscitation fluid not confirmed"
    if not course.given.charted:
        return absent("not_confirmed", label)
    portions = _portions(course, confirmed=False)
    total = course.given.total_ml(course.counted, confirmed=False)
    return figure(
        "not_confirmed",
        label,
        value=total,
        unit="mL",
        shown=_unconfirmed_said(course) if total else ml(total),
        as_of=course.now if total else None,
        flag=course.flagged(Flag.REVIEW) if total else Flag.NONE,
        working=Working(
            formula="rate x hours since the line was last seen running",
            sum=sum_of(portions, total),
            inputs=tuple(input_of(course, portion) for portion in portions),
        ),
        sources=(course.source("line.seen_running"), course.source("line.not_confirmed_longest")),
        cautions=("Not counted as given: see the line running and chart it.",) if total else (),
    )


def _unconfirmed_said(course: Course) -> str:
    """What may have run on, with its lines; a line long unseen without a volume, which nobody can believe."""
    short, long = [], []
    for line in course.given.running:
        if line.purpose not in course.counted:
            continue
        name = f"{line.name or line.fluid or line.purpose} {ml_h(line.ml_h)}"
        seen = f"last seen running {course.time(line.seen)}"
        if course.is_long(line.seen):
            long.append(f"{name}, {seen}: {course.unseen_said(line.seen)}")
        else:
            short.append(f"{name}, {seen}")
    ran_on = [f"{ml(course.unconfirmed_ml(course.counted))} if it has run on: {'; '.join(short)}"]
    return "; ".join([*(ran_on if short else []), *long])


def _bounds(course: Course) -> tuple[float, float] | None:
    """Least and most due by now over the possible times of the burn; None where nothing is due by a plan."""
    plan, burn = course.plan, course.burn
    if plan is None or burn is None or course.comfort:
        return None
    dues = [plan.due_ml(moment, course.now) for moment in (burn.earliest, burn.latest)]
    known = [due for due in dues if due is not None]
    return (min(known), max(known)) if known else None


def _against(course: Course) -> Item:
    """Given against due; nothing is called behind while urine is in its target."""
    label = "Given against due by now"
    if course.comfort:
        return unflagged("against_plan", label, COMFORT)
    if course.plan is None and course.no_plan:
        return unflagged("against_plan", label, course.no_plan)
    if not course.given.charted and course.plan is not None:
        return unflagged("against_plan", label, "nothing given is recorded: blank is not zero")
    bounds = _bounds(course)
    if bounds is None:
        missing = list(course.missing())
        if course.plan is None and not missing:
            return unflagged("against_plan", label, f"{course.no_order}: nothing to set it against")
        return unflagged("against_plan", label, why_not(missing), detail=True)
    given, since = course.given_ml(), course.plan.since if course.plan else None
    low, high = (formula.surplus_ml(due, given) for due in reversed(bounds))
    is_one = low == high
    behind, urine = low < 0, course.urine_in_target
    state = _urine_said(urine)
    if is_one:
        said = f"{ml(abs(low))} {'less' if low < 0 else 'more'} than due" if round(low) else "as due"
    else:
        said = f"from {_signed(low)} to {_signed(high)} against due"
    if since is not None:
        said += f" since the order of {course.time(since)}"
    flag = Flag.REVIEW if behind and urine is False else Flag.NONE
    word = "Behind the plan: " if flag is Flag.REVIEW else ""
    return figure(
        "against_plan",
        label,
        value=low if is_one else None,
        unit="mL",
        shown=f"{word}{said}; {state}",
        as_of=course.now,
        flag=flag,
        working=Working(
            formula="given, confirmed - due by now",
            sum=f"{ml(given)} - {span(ml(bounds[0]), ml(bounds[1]))} = {span(_signed(low), _signed(high))}",
            rule=course.plan.said if course.plan else "",
        ),
        sources=(course.source("line.seen_running"),),
        cautions=(URINE_LEADS,),
    )


def _signed(value: float) -> str:
    return f"{'+' if value > 0 else ''}{ml(value)}"


def _urine_said(in_target: bool | None) -> str:
    if in_target is None:
        return "urine cannot be set against a target"
    if in_target:
        return "the last urine is not below its target, so this is not called behind"
    return "the last urine is below its target"


def _catch_up(course: Course) -> Item:
    """The rate that would bring the first period in on time: detail only, never below 0, none after it."""
    key, label = "catch_up_rate", "Rate to bring the first period in on time"
    plan = course.plan
    if course.comfort:
        return unflagged(key, label, COMFORT, detail=True)
    if plan is None or not plan.by_order:
        if course.no_plan:
            return unflagged(key, label, course.no_plan, detail=True)
        missing = course.missing()
        shown = why_not(missing) if missing else f"{course.no_order}: no catch-up is worked out"
        return (
            absent(key, label, shown, detail=True) if missing else unflagged(key, label, shown, detail=True)
        )
    chosen = course.case.chosen("catch_up").name
    hours_to = course.number(f"catch_up.{chosen}")
    if not hours_to:
        return unflagged(key, label, f"none: the policy's rule is not to catch up ({chosen})", detail=True)
    if plan.volume is None or plan.volume.total_ml is None or plan.rates:
        if plan.problem:
            return absent(key, label, why_not(plan.problem.missing) or plan.problem.shown, detail=True)
        return unflagged(key, label, "none: a rate is ordered", detail=True)
    if plan.volume.schedule.ends_h[0] != hours_to:
        return unflagged(key, label, "none: this formula has no first 8 h half", detail=True)
    if course.burn is None or not course.given.charted:
        lacking = [*course.missing(), *([] if course.given.charted else ["what was given"])]
        return absent(key, label, why_not(lacking), detail=True)
    return _catch_up_figure(course, hours_to)


def _catch_up_figure(course: Course, hours_to: float) -> Item:
    key, label = "catch_up_rate", "Rate to bring the first period in on time"
    plan, burn = course.plan, course.burn
    if plan is None or plan.volume is None or burn is None:
        raise ValueError("a catch-up rate needs a plan with a volume and the time of the burn")
    due = plan.volume.due_ml(hours_to)
    given = course.given.total_ml(course.counted)
    gone = [course.case.hours_between(moment, course.now) for moment in (burn.earliest, burn.latest)]
    sources = once((course.source("catch_up.into-first-period"), *plan.volume.sources))
    short = formula.surplus_ml(due, given)
    end = number_text(hours_to)
    if max(gone) >= hours_to:
        said = f"shortfall at {end} h {ml(-short)}" if short < 0 else f"surplus at {end} h {ml(short)}"
        return unflagged(
            key,
            label,
            f"none: {end} h {'have' if min(gone) >= hours_to else 'may have'} passed and no published rule "
            f"follows; {said}, with what was given up to now",
            sources=sources,
            detail=True,
        )
    if short >= 0:
        return unflagged(
            key,
            label,
            f"none: {ml(short)} more than the first {end} h were given",
            sources=sources,
            detail=True,
        )
    rates = [formula.catch_up_rate_ml_h(due, given, hours_to - one) for one in gone]
    is_one = burn.certain
    cautions = [URINE_LEADS, "Some services do not catch up; ask before any rate is raised."]
    many = max(rates) / plan.volume.rate_at(0.0) if plan.volume.rate_at(0.0) else 0.0
    if many > course.number("catch_up.flag_multiple"):
        cautions.append(f"It is {number_text(many, 1)} times the planned rate, because little time is left.")
    said = span(ml_h(min(rates)), ml_h(max(rates)))
    left = " to ".join(dict.fromkeys(number_text(hours_to - one, 2) for one in gone))
    return figure(
        key,
        label,
        value=rates[0] if is_one else None,
        unit="mL/h",
        shown=f"{said} (formula estimate; detail only)",
        as_of=course.now,
        working=Working(
            formula="(due by the end of the first period - given, confirmed) / hours left in it",
            sum=f"({ml(due)} - {ml(given)}) / {left} h = {said}",
            rule=plan.said,
        ),
        sources=sources,
        cautions=tuple(dict.fromkeys((*cautions, *course.cautions))),
        detail=True,
    )
