"""Bladder pressure: graded by the published scale, with perfusion, and never a diagnosis."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Flag, Item, System, Urgency, Working, amount, child, number_text, words

from . import formula
from .course import Course
from .index_items import over_line
from .pressure_items import latest_mean
from .say import absent, figure, unflagged

GRADES = ("I", "II", "III")
RANK_HIGH = 35
AREA = "Fluid and urine"
NAME = "bladder_pressure"
LABEL = "Bladder pressure"


def items(course: Course) -> tuple[Item, ...]:
    """Return the latest bladder pressure with its grade; nothing where none was asked for or measured."""
    readings = course.case.state.series(NAME)
    if not readings:
        if not is_wanted(course):
            return ()
        return (absent(NAME, LABEL),)
    last = readings[-1]
    value = amount(last.node, "mmHg")
    if value is None:
        return (unflagged(NAME, LABEL, words(last.node), as_of=last.at),)
    failing = words(child(last.node, "new_organ_failure"))
    who = "child" if course.person.is_child else "adult"
    syndrome = float(course.case.parameters.table("abdomen.syndrome")[who])
    raised = float(course.case.parameters.table("abdomen.raised")[who])
    above = value > syndrome
    is_raised = value > raised if who == "child" else value >= raised
    flag = course.flagged(Flag.ACTION if above else Flag.REVIEW if is_raised else Flag.NONE)
    said = [f"{number_text(value, 1)} mmHg", grade_said(course, value)]
    if who == "child" and is_raised:
        said.append(f"above the line of the child ({number_text(raised)} mmHg)")
    if above:
        said.append(
            f"above {number_text(syndrome)} mmHg; with a new organ failure this is a surgical matter "
            f"(new organ failure: {failing or 'not recorded'})"
        )
    said += _perfusion(course, value)
    return (
        figure(
            NAME,
            LABEL,
            value=value,
            unit="mmHg",
            shown="; ".join(part for part in said if part),
            as_of=last.at,
            flag=flag,
            rank=RANK_HIGH if flag is Flag.ACTION else None,
            working=Working(
                formula="bladder pressure against the grades of the consensus",
                sum=f"{words(last.node)} = {number_text(value, 1)} mmHg",
                rule=f"{who}",
            ),
            sources=(course.source("abdomen.grades"), course.source("abdomen.syndrome")),
            cautions=(
                "A grade needs a sustained pressure: lying flat, end of a breath, zero at the mid-axilla.",
            ),
            line=last.row.line,
        ),
    )


def grade_said(course: Course, mmhg: float) -> str:
    """Return the grade of a bladder pressure in words; between two grades it says so."""
    table = course.case.parameters.table("abdomen.grades")
    low, high = [float(v) for v in table["from_mmhg"]], [float(v) for v in table["to_mmhg"]]
    index = formula.grade_index(mmhg, low, high)
    if index:
        return f"grade {GRADES[index - 1]}"
    if mmhg < low[0]:
        return "below grade I"
    if mmhg > high[-1]:
        return "grade IV"
    below = max(i for i, edge in enumerate(high) if mmhg > edge)
    return f"between grade {GRADES[below]} and {GRADES[below + 1]}, as the scale is printed"


def _perfusion(course: Course, mmhg: float) -> list[str]:
    mean = latest_mean(course)
    if mean is None:
        return []
    value = formula.abdominal_perfusion_mmhg(mean.mmhg, mmhg)
    line = number_text(course.number("abdomen.perfusion"))
    return [f"abdominal perfusion pressure {number_text(value)} mmHg (line {line})"]


def is_wanted(course: Course) -> bool:
    """Return whether bladder pressure is asked for: by area, or since too much fluid is in sight."""
    if course.comfort or course.person.pct is None:
        return False
    if course.case.chosen("abdomen_check").name == "all-from-20":
        return course.person.pct >= course.number("abdomen.check_from")
    return bool(course.case.state.series(NAME)) or over_line(course)


def actions(course: Course) -> tuple[Action, ...]:
    """Return the check of bladder pressure where it is asked for."""
    if not is_wanted(course):
        return ()
    every = timedelta(hours=course.number("abdomen.check_every"))
    readings = course.case.state.series(NAME)
    return (
        Action(
            key="fluid.bladder_pressure_check",
            area=AREA,
            text="Ask whether bladder pressure is to be measured; if so, lying flat, at the end of a breath",
            why="much fluid can close the abdomen",
            system=System.FLUID,
            first_due=readings[-1].at + every if readings else course.now,
            every=every,
            urgency=Urgency.TIMED,
            sources=(course.source("abdomen.check_every"),),
        ),
    )
