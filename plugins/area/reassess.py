"""When the burn is due to be looked at again, because depth evolves and early figures run high."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Part,
    System,
    Urgency,
    Working,
    entries,
    hours_text,
    number_text,
)

from .assessment import Assessment
from .goal import is_comfort

LABEL = "Reassessment of area and depth"


def items(case: Case, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return when the reassessment is due; overdue ones are due for review."""
    if assessment is None:
        return ()
    due, rule = due_at(case, assessment)
    late = case.hours_between(due, case.now)
    last = last_look(case, assessment)
    said = f"overdue by {hours_text(late)}" if late > 0 else "due"
    source = case.parameters.source_of("reassess.after")
    return (
        Item(
            key="area.reassess_due",
            label=LABEL,
            part=Part.RECOMMENDATION,
            system=System.BURN,
            value=due,
            shown=f"{said}: {case.clock.day_and_time(due)}; last assessed {case.clock.day_and_time(last)}",
            as_of=last,
            flag=Flag.REVIEW if late > 0 else Flag.NONE,
            working=Working(
                formula="last assessment + interval, or the time charted",
                sum=case.clock.day_and_time(due),
                rule=rule,
            ),
            sources=(source,),
            line=assessment.line,
        ),
    )


def last_look(case: Case, assessment: Assessment) -> datetime:
    """Return the time of the latest assessment of burns or wounds."""
    rows = case.state.dated(case.block)
    return max([assessment.at, *(row.at for row in rows)])


def due_at(case: Case, assessment: Assessment) -> tuple[datetime, str]:
    """Return when the next look is due and by which rule: the earliest charted time, or the interval."""
    last = last_look(case, assessment)
    charted = [case.when(burn.get("reassess")) for burn in entries(assessment.entry.get("burns"))]
    asked = sorted(moment for moment in charted if moment is not None and moment > last)
    if asked:
        return asked[0], "time charted with the burn"
    hours = case.parameters.number("reassess.after")
    return last + timedelta(hours=hours), f"{number_text(hours)} h after the last assessment"


def actions(case: Case, assessment: Assessment | None) -> tuple[Action, ...]:
    """Return the reassessment as a line of the care plan."""
    if assessment is None or is_comfort(case):
        return ()
    due, _ = due_at(case, assessment)
    return (
        Action(
            key="area.reassess",
            area="burn area and depth",
            text="Reassess area and depth with a second assessor; leave plain redness out of the count; "
            "take photographs where consent is recorded",
            why="depth evolves, and early figures often run high",
            system=System.BURN,
            first_due=due,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of("reassess.after"),),
        ),
    )
