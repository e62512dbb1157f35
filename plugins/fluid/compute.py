"""What the fluid plugin returns: plan, given, urine, balance, and what to do about them."""

from __future__ import annotations

from msgspec.structs import replace

from handoff.plugin import Case, Findings, Item, not_asked

from . import (
    abdomen_items,
    balance_items,
    feeding,
    given_items,
    index_items,
    other_intake,
    plan_items,
    pressure_items,
    rate_items,
    second_day,
    titration_items,
    tubes,
    urine_items,
    watch_items,
)
from .actions import actions
from .course import Course, read_course
from .hours import hour_rows
from .targets import Target

BY_WEIGHT = (
    "fluid.catch_up_rate",
    "fluid.given_index",
    "fluid.projected_24h",
    "fluid.projected_per_kg",
    "fluid.evaporation",
    "fluid.maintenance_rate",
    "fluid.second_day_colloid",
    "fluid.protein",
)
"""Figures by weight whose weight is said here; those of the plan and of urine say it where they are made."""


def compute(case: Case) -> Findings:
    """Return the items and actions of fluid; ``values`` holds the course by the hour and what others read."""
    course = read_course(case)
    found = Findings(
        items=_weighed(
            course,
            *plan_items.items(course),
            *rate_items.items(course),
            *given_items.items(course),
            *other_intake.items(course),
            *urine_items.items(course),
            *titration_items.items(course),
            *pressure_items.items(course),
            *index_items.items(course),
            *balance_items.items(course),
            *abdomen_items.items(course),
            *watch_items.items(course),
            *second_day.items(course),
            *feeding.items(course),
            *tubes.items(course),
        ),
        actions=(
            *actions(course),
            *abdomen_items.actions(course),
            *second_day.actions(course),
            *feeding.actions(course),
            *tubes.actions(course),
        ),
        values=_values(course),
    )
    return replace(found, items=tuple(not_asked(one) for one in found.items)) if case.comfort else found


def _weighed(course: Course, *items: Item) -> tuple[Item, ...]:
    """The items, each figure by weight with the weight that it used, and with another that differs from it."""
    weight = course.person.weight
    if weight is None:
        return items
    said = (f"Weight used: {weight.name}.", *weight.others)
    return tuple(
        replace(item, cautions=tuple(dict.fromkeys((*item.cautions, *said))))
        if item.key in BY_WEIGHT and item.value is not None
        else item
        for item in items
    )


def _values(course: Course) -> dict[str, object]:
    """What other plugins and the documents read; None where it is not known."""
    volume = course.plan.volume if course.plan else None
    weight = course.person.weight
    return {
        "hours": hour_rows(course),
        "plan_total_ml": volume.due_ml(course.period_h) if volume and volume.total_ml is not None else None,
        "weight_kg": weight.kg if weight else None,
        "weight_name": weight.name if weight else "",
        "urine_in_target": course.urine_in_target,
        "urine_target_ml_h": _target_ml_h(course),
        "given_ml": course.given.total_ml(course.counted),
        "not_confirmed_ml": course.given.total_ml(course.counted, confirmed=False),
        "pigmented": course.pigmented,
        "comfort": course.comfort,
    }


def _target_ml_h(course: Course) -> tuple[float | None, float | None] | None:
    """The ends of the urine target in mL/h, each None where it is open; None without a target."""
    aimed, used = course.target, course.urine_kg
    if not isinstance(aimed, Target) or used is None or course.comfort:
        return None
    low, high = aimed.low_ml_kg_h, aimed.high_ml_kg_h
    return None if low is None else low * used.kg, None if high is None else high * used.kg
