"""Feeding: how soon it began, how much protein a day, and glucose in a small child."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Flag, Item, System, Urgency, Working, hours_text, number_text, unit_of

from . import formula
from .bands import pick
from .course import COMFORT, Course
from .say import absent, figure, unflagged
from .weights import kg_text

HOUR = timedelta(hours=1)
NUTRITION = System.NUTRITION


def items(course: Course) -> tuple[Item, ...]:
    """Return the start of feeding, protein a day, and glucose of the small child."""
    return (_start(course), _protein(course), *_glucose(course))


def _start(course: Course) -> Item:
    key, label = "feeding_start", "Feeding by mouth or tube"
    begun = course.given.first(("feed",))
    if begun is not None:
        since = course.case.hours_between(course.burn.earliest, begun) if course.burn else None
        after = f", {hours_text(since)} after the burn" if since is not None else ""
        return unflagged(key, label, f"feed since {course.time(begun)}{after}", system=NUTRITION, as_of=begun)
    if course.comfort:
        return unflagged(key, label, COMFORT, system=NUTRITION)
    chosen = course.case.chosen("feeding_line")
    parameter = course.case.parameters[f"feeding_line.{chosen.name}"]
    if course.hours is None or course.plan is None:
        return unflagged(key, label, "no feed recorded", system=NUTRITION, detail=True)
    late = course.hours >= course.number(parameter.id)
    may_flag = parameter.kind != "from memory" or chosen.by_policy
    left = f"{number_text(course.number(parameter.id))} h after the burn ({chosen.name})"
    return figure(
        key,
        label,
        system=NUTRITION,
        value="no feed recorded",
        shown=f"no feed recorded; asked about within {left}",
        flag=Flag.REVIEW if late and may_flag else Flag.NONE,
        sources=(parameter.source,),
    )


def _protein(course: Course) -> Item:
    key, label = "protein", "Protein a day, estimate by weight"
    weight = course.person.weight
    if course.comfort:
        return unflagged(key, label, COMFORT, system=NUTRITION, detail=True)
    if weight is None or course.person.is_child is None:
        lacking = "weight" if weight is None else "age"
        return absent(key, label, f"not computed: missing {lacking}", system=NUTRITION, detail=True)
    who = "child" if course.person.is_child else "adult"
    table = course.case.parameters.table(f"protein.{who}")
    low, high = formula.per_day_range(weight.kg, float(table["low"]), float(table["high"]))
    said = number_text(low) if low == high else f"{number_text(low)} to {number_text(high)}"
    return figure(
        key,
        label,
        system=NUTRITION,
        value=low if low == high else None,
        unit="g",
        shown=f"{said} g a day (estimate; the dietitian decides)",
        working=Working(
            formula="g/kg/day x weight",
            sum=f"{number_text(float(table['low']), 1)} to {number_text(float(table['high']), 1)} g/kg "
            f"x {kg_text(weight.kg)} = {said} g",
            inputs=(weight.input,),
            rule=who,
        ),
        sources=(course.source(f"protein.{who}"),),
        cautions=(f"Weight used: {weight.name}.",),
        detail=True,
    )


def _small(course: Course) -> bool:
    rule = course.case.chosen("maintenance_for").name
    return pick(course.case.parameters[f"maintenance_for.{rule}"].value, course.facts).band is not None


def _still_asked(course: Course) -> bool:
    """Whether glucose of the small child is asked for: the first days, or while fluid runs by a line."""
    recent = course.hours is None or course.hours <= course.number("child_glucose.to")
    return recent or bool(course.given.running)


def _glucose(course: Course) -> tuple[Item, ...]:
    if course.comfort or not _small(course) or not _still_asked(course):
        return ()
    readings = [r for r in course.case.state.result_series("glucose") if unit_of(r.node)]
    if readings:
        return ()
    return (absent("glucose_small_child", "Glucose of the small child", system=NUTRITION),)


def actions(course: Course) -> tuple[Action, ...]:
    """Return the watch on glucose of a small child."""
    if course.comfort or not _small(course) or not _still_asked(course):
        return ()
    readings = [r for r in course.case.state.result_series("glucose") if unit_of(r.node)]
    said = f"last {course.time(readings[-1].at)}" if readings else "none recorded"
    return (
        Action(
            key="fluid.glucose",
            area="Nutrition and glucose",
            text=f"Glucose: check, and ask how often ({said})",
            why="a small child runs out of glucose soon",
            system=NUTRITION,
            urgency=Urgency.SHIFT,
            sources=(course.source("maintenance_for.below-4-years"),),
        ),
    )
