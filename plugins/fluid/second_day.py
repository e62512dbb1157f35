"""The second 24 hours: colloid by the printed bands, and the watch on sodium."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Flag, Item, System, Urgency, Working, amount, number_text

from . import formula
from .course import Course
from .say import absent, figure, ml, ml_h, span, unflagged, why_not

HOUR = timedelta(hours=1)
HOURS_A_DAY = 24
KEY, LABEL = "second_day_colloid", "Colloid of the second 24 h by the printed bands"


def items(course: Course) -> tuple[Item, ...]:
    """Return colloid and sodium of the second day, from shortly before it begins."""
    hours = course.hours
    if hours is None or course.comfort or hours < course.number("second_day.shown_from"):
        return ()
    if hours > course.number("second_day.to"):
        return ()
    return (_colloid(course), *_sodium(course, hours))


def coefficients(course: Course, pct: float) -> list[float]:
    """Return the coefficients of the bands that hold ``pct``; two where the print overlaps, none below it."""
    table = course.case.parameters.table("second_day.colloid")
    bands = zip(table["from_pct"], table["to_pct"], table["coefficient"], strict=True)
    return [float(value) for low, high, value in bands if float(low) <= pct <= float(high)]


def _colloid(course: Course) -> Item:
    weight, pct = course.person.weight, course.person.pct
    if weight is None or pct is None:
        lacking = [] if weight else ["weight"]
        return absent(
            KEY, LABEL, why_not([*lacking, *([] if pct is not None else [course.person.pct_missing])])
        )
    source = course.source("second_day.colloid")
    found = coefficients(course, pct)
    if not found:
        return unflagged(KEY, LABEL, "none below 30 %TBSA by this table", sources=(source,), detail=True)
    volumes = [formula.colloid_second_day_ml(weight.kg, pct, value) for value in found]
    said = span(ml(min(volumes)), ml(max(volumes)))
    rates = span(ml_h(min(volumes) / HOURS_A_DAY), ml_h(max(volumes) / HOURS_A_DAY))
    values = " or ".join(number_text(value, 2) for value in found)
    overlap = " (the print puts this area in two bands)" if len(found) > 1 else ""
    return figure(
        KEY,
        LABEL,
        value=volumes[0] if len(volumes) == 1 else None,
        unit="mL",
        shown=f"{said} in 24 h, {rates}{overlap} (formula estimate); confirm with prescriber",
        working=Working(
            formula="mL/kg/% of the band x weight x burned area",
            sum=f"{values} x {weight.name} x {number_text(pct, 2)} % = {said}",
            inputs=(weight.input,),
        ),
        sources=(source,),
        cautions=(
            "A starting point to check, not an order: some guidelines give albumin earlier, one not routinely.",
            *weight.cautions,
        ),
        detail=True,
    )


def _sodium(course: Course, hours: float) -> tuple[Item, ...]:
    start = course.number("second_day.from")
    if hours < start:
        return ()
    since = course.now - timedelta(hours=hours - start)
    readings = [
        r
        for r in course.case.state.result_series("sodium")
        if r.at >= since and amount(r.node, "mmol/L", "electrolyte") is not None
    ]
    if readings:
        return ()
    return (
        figure(
            "sodium_watch",
            "Sodium since the first 24 h",
            shown="not recorded since the first 24 h passed; it can rise as water is lost",
            flag=Flag.NOT_RECORDED,
            as_of=course.now,
        ),
    )


def actions(course: Course) -> tuple[Action, ...]:
    """Return the watch on sodium once the second day has begun."""
    hours = course.hours
    if hours is None or course.comfort or course.plan is None:
        return ()
    if not course.number("second_day.from") <= hours <= course.number("second_day.to"):
        return ()
    return (
        Action(
            key="fluid.sodium",
            area="Fluid and urine",
            text="Sodium: look up the last result and its trend; ask when the next is due",
            why="evaporation through the burn raises sodium from the second day",
            system=System.FLUID,
            urgency=Urgency.SHIFT,
            sources=(course.source("watch_sodium.hypernatraemia"),),
        ),
    )
