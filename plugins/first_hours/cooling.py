"""Whether a burn by heat was cooled for long enough, while cooling can still help."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Source,
    System,
    Urgency,
    Working,
    amount,
    child,
    entries,
    fact,
    line_of,
    number_text,
    words,
)

from . import formula

HEAT = ("flame", "scald", "contact", "flash")
COLD = "Cool the burn and not the patient: cover the rest; stop where the patient shivers or turns cold."


def _still_helps(case: Case) -> bool:
    burn = case.state.burn_time
    return burn is not None and case.hours_between(burn.latest, case.now) <= case.parameters.number(
        "cooling.within"
    )


def short_min(case: Case) -> float | None:
    """Return the minutes of cooling that are missing; None where heat was not the cause or nothing tells how long."""
    if not any(words(cause.get("kind")) in HEAT for cause in entries(case.state.injury.get("causes"))):
        return None
    aid = case.state.injury.get("first_aid")
    cooled = 0.0 if words(child(aid, "none")) == "yes" else amount(child(aid, "cooled_for"), "min")
    return (
        None if cooled is None else formula.minutes_short(case.parameters.number("cooling.minutes"), cooled)
    )


def _sources(case: Case) -> tuple[Source, ...]:
    return tuple(case.parameters.source_of(f"cooling.{name}") for name in ("minutes", "within", "evidence"))


def items(case: Case) -> tuple[Item, ...]:
    """Return the cooling that is missing while it can still help; nothing later, or where it was long enough."""
    short = short_min(case)
    if not short or case.comfort or not _still_helps(case):
        return ()
    wanted = number_text(case.parameters.number("cooling.minutes"))
    aid = case.state.injury.get("first_aid")
    return (
        fact(
            "first_hours.cooling",
            "Cooling of the burn",
            f"{number_text(short)} min short of {wanted} min; helps up to "
            f"{number_text(case.parameters.number('cooling.within'))} h from the burn",
            system=System.BURN,
            value=short,
            unit="min",
            flag=Flag.REVIEW,
            working=Working(
                formula="minutes wanted - minutes cooled",
                sum=f"{wanted} - {number_text(case.parameters.number('cooling.minutes') - short)}"
                f" = {number_text(short)} min",
                inputs=(case.input("cooled for", child(aid, "cooled_for") or aid),),
                rule="British Burn Association 2018",
            ),
            sources=_sources(case),
            cautions=(COLD, "Trials have not shown one duration to be best."),
            line=line_of(aid),
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the question about more cooling, while it can still help."""
    short = short_min(case)
    burn = case.state.burn_time
    if not short or burn is None or case.comfort or not _still_helps(case):
        return ()
    end = burn.latest + timedelta(hours=case.parameters.number("cooling.within"))
    return (
        Action(
            key="first_hours.cool",
            area="First-hours survey",
            text=f"Ask about cooling with running water for {number_text(short)} min more; keep the rest covered "
            "and take the temperature; stop where the patient turns cold",
            why=f"cooled for less than {number_text(case.parameters.number('cooling.minutes'))} min; "
            f"it helps until {case.clock.time(end, case.now)}",
            system=System.BURN,
            urgency=Urgency.NOW,
            sources=_sources(case),
            cautions=(COLD,),
        ),
    )
