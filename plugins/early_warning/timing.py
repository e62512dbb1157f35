"""When the score is due again, and what the step that it reached asks for."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import Case, Flag, Item, Part, System, Working, fact, hours_text

from .score import ASK, Scored, answered

FLOOR = "A minimum: it never makes the burn unit's own checks rarer."


def every_hours(case: Case, step: str) -> tuple[float, str]:
    """Return the longest time between two scores in h (0: continuous), and the parameter it comes from."""
    name = f"news2.every.{step}"
    if step == "low":
        name = f"low_score_interval.{case.chosen('low_score_interval').name}"
    return case.parameters.number(name), name


def items(case: Case, found: Scored | None) -> tuple[Item, ...]:
    """Return when the score is due again and what its step asks for; nothing where there is no step."""
    if found is None or found.step is None:
        return ()
    hours, name = every_hours(case, found.step)
    return (_due(case, found, hours, name), *_response(case, found))


def _due(case: Case, found: Scored, hours: float, name: str) -> Item:
    at = found.signs.at
    source = case.parameters.source_of(name)
    label = "Early warning score due again"
    if hours == 0:
        return fact(
            "early_warning.next_due",
            label,
            "continuous monitoring of the signs",
            system=System.GENERAL,
            part=Part.RECOMMENDATION,
            as_of=at,
            sources=(source,),
            cautions=(FLOOR,),
        )
    due = at + timedelta(hours=hours)
    late = case.hours_between(due, case.now)
    shown = f"by {case.clock.time(due, case.now)} (at least every {hours_text(hours)})"
    if late > 0:
        shown += f", overdue by {hours_text(late)}"
    return fact(
        "early_warning.next_due",
        label,
        shown,
        system=System.GENERAL,
        part=Part.RECOMMENDATION,
        value=due,
        unit="time",
        as_of=at,
        flag=Flag.REVIEW if late > 0 else Flag.NONE,
        working=_working(case, at, hours, due, name),
        sources=(source,),
        cautions=(FLOOR,),
    )


def _working(case: Case, at: datetime, hours: float, due: datetime, name: str) -> Working:
    return Working(
        formula="time of the set + longest interval of its step",
        sum=f"{case.clock.day_and_time(at)} + {hours_text(hours)} = {case.clock.day_and_time(due)}",
        rule=name,
    )


def _response(case: Case, found: Scored) -> tuple[Item, ...]:
    if found.step not in ASK:
        return ()
    said = answered(case, found)
    return (
        fact(
            "early_warning.response",
            "What the early warning score asks for",
            f"{ASK[found.step]}. {said or 'no call or review recorded since'}",
            system=System.GENERAL,
            part=Part.RECOMMENDATION,
            as_of=found.signs.at,
            sources=(case.parameters.source_of("news2.response"),),
            detail=True,  # the care plan holds it as a line
        ),
    )
