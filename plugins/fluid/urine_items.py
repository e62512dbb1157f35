"""Urine as items: the last measure by the hour and by weight against its target, runs out of range, old ones."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Flag, Input, Item, Working, hours_text, number_text

from . import formula
from .course import Course
from .say import absent, figure, ml_h, ml_kg_h, once, unflagged
from .targets import Target
from .urine import Urine

RANK_LOW = 44
TREND = 4


def items(course: Course) -> tuple[Item, ...]:
    """Return the items of urine; not recorded where there is none."""
    return (_rate(course), _hourly(course), _target(course), *_run(course), *_colour(course))


def _old(course: Course) -> bool:
    last = course.urine.last
    every = timedelta(hours=course.number("urine.check_every"))
    return last is not None and course.now - last.at > every and _watched(course)


def _watched(course: Course) -> bool:
    """Whether urine is asked for by the hour: a plan that runs, or a catheter."""
    return course.plan is not None or course.urine.catheter is not None or bool(course.given.running)


def _not_since(course: Course) -> str:
    last = course.urine.last
    return f"; not measured since {course.time(last.at)}" if last is not None and _old(course) else ""


def _long_since(course: Course, last: Urine) -> str:
    """Where the interval was not written and is long: the measure or the catheter from which it is counted."""
    long = last.since is not None and (last.hours or 0.0) > course.number("urine.check_every")
    return f", counted from {course.time(last.since)}, none charted between" if long and last.since else ""


def _rate(course: Course) -> Item:
    key, label = "urine_rate", "Urine by weight, last measure"
    last = course.urine.last
    if last is None:
        return absent(key, label, *_only_words(course))
    if last.ml_h is None:
        return absent(key, label, f"not computed: {last.shown()}", as_of=last.at, line=last.line)
    used = course.urine_kg
    if used is None:
        return absent(key, label, "not computed: missing weight", as_of=last.at, line=last.line)
    value = formula.urine_rate_ml_kg_h(last.ml or 0.0, used.kg, last.hours or 0.0)
    judged = course.judged(last)
    aimed = course.target
    words_for = {"below": "below the target", "above": "above the target", "in": "within the target"}
    against = f"; {words_for[judged]} of {aimed.shown}" if judged else f"; {aimed.shown}"
    run = _run_hours(course, judged) if judged in ("below", "above") else 0.0
    said = f"{last.shown()}{_long_since(course, last)}"
    against = "" if course.comfort else against
    against += f" for {hours_text(run)} without a break" if against and run > (last.hours or 0.0) else ""
    return figure(
        key,
        label,
        value=value,
        unit="mL/kg/h",
        shown=f"{ml_kg_h(value)} ({said}){against}{_trend(course, used.kg)}{_not_since(course)}",
        as_of=last.at,
        flag=_flag(course, judged),
        rank=RANK_LOW if judged == "below" and _flag(course, judged) is not Flag.NONE else None,
        working=Working(
            formula="urine / weight / hours over which it was collected",
            sum=(
                f"{number_text(last.ml or 0.0, 1)} mL / {used.name} / "
                f"{hours_text(last.hours or 0.0)} = {ml_kg_h(value)}"
            ),
            inputs=(Input("urine", last.shown(), last.line), used.input),
            rule=aimed.name if isinstance(aimed, Target) else aimed.shown,
        ),
        sources=once(aimed.sources) if isinstance(aimed, Target) else (course.source("urine.check_every"),),
        cautions=_cautions(course, last),
        line=last.line,
    )


def _only_words(course: Course) -> tuple[str, ...]:
    said = [one for one in course.urine.readings if one.word]
    return (f"not recorded; charted as {said[-1].word} at {course.time(said[-1].at)}",) if said else ()


def _flag(course: Course, judged: str) -> Flag:
    if course.comfort:
        return Flag.NONE
    may = isinstance(course.target, Target) and course.target.may_flag
    if judged == "below" and may:
        return Flag.ACTION if _run_hours(course, "below") >= course.number("urine.low_run") else Flag.REVIEW
    if (judged == "above" and may) or _old(course):
        return Flag.REVIEW
    return Flag.NONE


def _cautions(course: Course, last: Urine) -> tuple[str, ...]:
    found = []
    used = course.urine_kg
    if used is not None:
        found.append(f"Weight used for urine: {used.name}.")
        found += used.others
    if last.how:
        found.append("Urine of a pad by weight.")
    if course.urine.drained_ml:
        found.append("What drained when the catheter was placed is left out.")
    if isinstance(course.target, Target):
        found += course.target.cautions
    if course.person.is_electrical and course.pigmented is None:
        found.append(
            "Electrical injury and no colour of the urine charted: pigmented urine has another target."
        )
    return tuple(found)


def _trend(course: Course, kg: float) -> str:
    earlier = [one for one in course.urine.measured[-TREND:-1] if one.ml_h is not None]
    said = [f"{number_text((one.ml_h or 0.0) / kg, 2)} at {course.time(one.at)}" for one in earlier]
    return f"; before: {', '.join(said)}" if said else ""


def _hourly(course: Course) -> Item:
    key, label = "urine_last", "Urine by the hour, last measure"
    last = course.urine.last
    if last is None:
        return absent(key, label, *_only_words(course))
    if last.ml_h is None:
        return absent(key, label, f"not computed: {last.shown()}", as_of=last.at, line=last.line)
    return figure(
        key,
        label,
        value=last.ml_h,
        unit="mL/h",
        shown=f"{ml_h(last.ml_h)} ({last.shown()})",
        as_of=last.at,
        working=Working(
            formula="urine / hours over which it was collected",
            sum=f"{number_text(last.ml or 0.0, 1)} mL / {hours_text(last.hours or 0.0)} = {ml_h(last.ml_h)}",
            inputs=(Input("urine", last.shown(), last.line),),
        ),
        sources=(course.source("urine.check_every"),),
        line=last.line,
        detail=True,
    )


def _target(course: Course) -> Item:
    key, label = "urine_target", "Urine target"
    aimed = course.target
    if not isinstance(aimed, Target):
        return unflagged(key, label, aimed.shown, detail=True)
    return figure(
        key,
        label,
        value=aimed.shown,
        shown=f"{aimed.shown} ({aimed.name})",
        sources=once(aimed.sources),
        cautions=aimed.cautions,
        line=aimed.line,
    )


def _run_hours(course: Course, side: str) -> float:
    """Hours of the latest measures without a break that lie on ``side`` of the target."""
    hours = 0.0
    for one in reversed(course.urine.measured):
        if course.judged(one) != side:
            break
        hours += one.hours or 0.0
    return hours


def _run(course: Course) -> tuple[Item, ...]:
    """A run of hours out of the target, where there is one."""
    if not isinstance(course.target, Target):
        return ()
    for side in ("below", "above"):
        hours = _run_hours(course, side)
        if not hours:
            continue
        in_run = [one for one in course.urine.measured if course.judged(one) == side]
        return (
            figure(
                "urine_run",
                f"Urine {side} its target without a break",
                value=hours,
                unit="h",
                shown=f"{hours_text(hours)} up to {course.time(in_run[-1].at)}",
                as_of=in_run[-1].at,
                sources=once((course.source("urine.low_run"), *course.target.sources)),
                detail=True,
            ),
        )
    return ()


def _colour(course: Course) -> tuple[Item, ...]:
    latest = course.urine.latest_colour
    if latest is None:
        if not course.person.is_electrical:
            return ()
        return (absent("urine_colour", "Colour of the urine (electrical injury)"),)
    pigmented = bool(course.pigmented)
    flag = course.flagged(Flag.ACTION) if pigmented else Flag.NONE
    shown = f"{latest.colour}{': pigmented' if pigmented else ''}"
    if not pigmented:
        return (unflagged("urine_colour", "Colour of the urine", shown, as_of=latest.at, line=latest.line),)
    return (
        figure(
            "urine_colour",
            "Colour of the urine",
            value=latest.colour,
            shown=shown,
            as_of=latest.at,
            flag=flag,
            sources=(course.source("urine.pigmented"),),
            cautions=(
                "Pigmented urine can harm the kidney; a dipstick stays positive longer than the colour.",
            ),
            line=latest.line,
        ),
    )
