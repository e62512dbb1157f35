"""What the care plan asks for: urine by the hour, lines seen running, and who to tell."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, System, Urgency, joined

from .course import Course
from .index_items import over_line
from .say import ml_h
from .targets import Target
from .watch_items import kinase_due

AREA = "Fluid and urine"


def actions(course: Course) -> tuple[Action, ...]:
    """Return the actions of fluid and urine; none where comfort is the goal of care."""
    if course.comfort:
        return ()
    return (
        *_urine(course),
        *_lines(course),
        *_step(course),
        *_low(course),
        *_no_order(course),
        *_pigment(course),
        *_too_much(course),
    )


def _urine(course: Course) -> tuple[Action, ...]:
    if course.plan is None and course.urine.catheter is None and not course.published:
        return ()
    if course.plan is None and course.no_plan and course.urine.catheter is None:
        return ()
    every = timedelta(hours=course.number("urine.check_every"))
    last = course.urine.last
    aimed = course.target
    goal = f"target {aimed.shown}" if isinstance(aimed, Target) else aimed.shown
    colour = " and colour" if course.person.is_electrical or course.pigmented else ""
    return (
        Action(
            key="fluid.urine_hourly",
            area=AREA,
            text=f"Urine{colour}: measure, write mL and the interval; {goal}",
            why="urine leads the rate",
            system=System.FLUID,
            first_due=last.at + every if last else course.now,
            every=every,
            urgency=Urgency.TIMED,
            sources=(course.source("urine.check_every"),),
        ),
    )


def _lines(course: Course) -> tuple[Action, ...]:
    if not course.given.running:
        return ()
    every = timedelta(hours=course.number("line.check_every"))
    names = [
        f"{line.name or line.fluid or line.purpose} ({line.purpose}, last charted {ml_h(line.ml_h)})"
        for line in course.given.running
    ]
    return (
        Action(
            key="fluid.lines_running",
            area=AREA,
            text=f"See running and chart it: {joined(names)}; look at the site",
            why="only what was seen running counts as given",
            system=System.FLUID,
            first_due=min(line.seen for line in course.given.running) + every,
            every=every,
            urgency=Urgency.TIMED,
            sources=(course.source("line.check_every"),),
        ),
    )


def _step(course: Course) -> tuple[Action, ...]:
    """Ask for the rate of the next period before the plan changes to it."""
    plan, burn = course.plan, course.burn
    if plan is None or plan.volume is None or plan.rates or burn is None or not burn.certain:
        return ()
    if plan.volume.total_ml is None or plan.volume.rate_ml_h is not None:
        return ()
    steps = [burn.earliest + timedelta(hours=hours) for hours in plan.volume.schedule.ends_h[:-1]]
    ahead = [step for step in steps if step > course.now]
    if not ahead:
        return ()
    rate = plan.rate_ml_h(burn.earliest, ahead[0])
    if rate is None:
        return ()
    return (
        Action(
            key="fluid.plan_step",
            area=AREA,
            text="The plan steps down: ask the prescriber for the rate from now on, with urine and perfusion",
            why=f"by the plan {ml_h(rate)} from here, formula estimate; the urine decides",
            system=System.FLUID,
            first_due=ahead[0],
            urgency=Urgency.TIMED,
            cautions=("A formula estimate is a starting point to check, not an order.",),
        ),
    )


def _low(course: Course) -> tuple[Action, ...]:
    last = course.urine.last
    aimed = course.target
    if last is None or course.judged(last) != "below" or not isinstance(aimed, Target) or not aimed.may_flag:
        return ()
    return (
        Action(
            key="fluid.urine_low",
            area=AREA,
            text=(
                "Urine below its target: check catheter or pad, pulse, pressure and perfusion; "
                "tell the prescriber and ask about the rate"
            ),
            why=f"last urine {last.shown()} at {course.time(last.at)}, target {aimed.shown}",
            system=System.FLUID,
            urgency=Urgency.NOW,
            sources=aimed.sources,
        ),
    )


def _no_order(course: Course) -> tuple[Action, ...]:
    if course.plan is not None or course.no_plan or not course.published:
        return ()
    return (
        Action(
            key="fluid.ask_order",
            area=AREA,
            text="Ask the prescriber for a fluid order and a urine target; none is recorded",
            why=course.start_said,
            system=System.FLUID,
            urgency=Urgency.NOW,
            sources=(course.source(f"start.{course.case.chosen('start').name}"),),
        ),
    )


def _pigment(course: Course) -> tuple[Action, ...]:
    if not course.pigmented:
        return ()
    last, every = kinase_due(course)
    said = f"last {last.shown}" if last else "none recorded"
    return (
        Action(
            key="fluid.creatine_kinase",
            area=AREA,
            text=f"Ask for creatine kinase and potassium while the urine is pigmented ({said})",
            why="muscle breakdown harms kidney and heart",
            system=System.FLUID,
            every=every,
            urgency=Urgency.TIMED,
            sources=(course.source("creatine_kinase.check_every"),),
        ),
    )


def _too_much(course: Course) -> tuple[Action, ...]:
    if not over_line(course):
        return ()
    return (
        Action(
            key="fluid.too_much",
            area=AREA,
            text=(
                "Tell the prescriber that fluid reaches, or at this rate would reach, a warning line; "
                "look at belly, breathing and limbs"
            ),
            why="too much fluid swells airway, belly and limbs",
            system=System.FLUID,
            urgency=Urgency.SHIFT,
            sources=(course.source("line.per_kg"), course.source("line.index")),
        ),
    )
