"""Toxic-shock prompts in a burned child: temperature, and the signs looked for since."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    NOT_RECORDED,
    Action,
    Case,
    Flag,
    Item,
    Source,
    System,
    Urgency,
    amount,
    child,
    fact,
    joined,
    words,
)

from . import formula, patient
from .temperature import latest

RANK = 34
LABEL = "Toxic-shock signs in a child"
SMALL = "It comes with small burns too, and looks like an ordinary childhood illness at first."


def items(case: Case) -> tuple[Item, ...]:
    """Return what speaks for toxic shock in a child; nothing for an adult."""
    if not patient.is_child(case):
        return ()
    present, absent, looked = _signs(case)
    hot = _hot(case)
    found = [*present, *([hot] if hot else [])]
    if not looked and not found:
        return (
            fact(
                "infection.toxic_shock", LABEL, NOT_RECORDED, system=System.INFECTION, flag=Flag.NOT_RECORDED
            ),
        )
    said = [f"present: {joined(found)}"] if found else []
    said += [f"looked for and absent: {joined(absent)}"] if absent else []
    asks = bool(found) and not case.comfort
    reading = latest(case)
    return (
        fact(
            "infection.toxic_shock",
            LABEL,
            "; ".join(said) or "looked for, nothing assessed",
            system=System.INFECTION,
            value=len(found),
            unit="signs present",
            as_of=looked or (reading.at if reading else None),
            flag=Flag.ACTION if asks else _age_flag(case, looked),
            sources=_sources(case),
            cautions=(SMALL,),
            rank=RANK if asks else None,
        ),
    )


def _age_flag(case: Case, looked: datetime | None) -> Flag:
    every = timedelta(hours=case.parameters.number("toxic_shock.every"))
    return Flag.REVIEW if looked is not None and looked + every < case.now else Flag.NONE


def _sources(case: Case) -> tuple[Source, ...]:
    names = ("toxic_shock.temperature", "toxic_shock.signs", "toxic_shock.every")
    return tuple(case.parameters.source_of(name) for name in names)


def _signs(case: Case) -> tuple[list[str], list[str], datetime | None]:
    rows = case.state.dated(child(case.block, "toxic_shock"))
    present: list[str] = []
    absent: list[str] = []
    for name in case.parameters["toxic_shock.signs"].value:
        charted = [(row.at, words(row.entry.get(name))) for row in rows]
        known = [(at, said) for at, said in charted if said in ("present", "absent")]
        if known:
            at, said = known[-1]
            (present if said == "present" else absent).append(f"{name} at {case.clock.time(at, case.now)}")
    return present, absent, rows[-1].at if rows else None


def _hot(case: Case) -> str:
    reading = latest(case)
    celsius = amount(reading.node, "C") if reading else None
    if reading is None or celsius is None:
        return ""
    line = case.parameters.number("toxic_shock.temperature")
    if not formula.is_beyond(celsius, formula.ABOVE, line):
        return ""
    return f"{words(reading.node)} at {case.clock.time(reading.at, case.now)}, above {line} C"


def actions(case: Case) -> tuple[Action, ...]:
    """Return the look for toxic-shock signs in a child, and the call where one is there."""
    if not patient.is_child(case) or case.comfort:
        return ()
    present, _, looked = _signs(case)
    hot = _hot(case)
    every = timedelta(hours=case.parameters.number("toxic_shock.every"))
    made = [
        Action(
            key="infection.toxic_shock_look",
            area="Infection",
            text="Look for new rash, vomiting, loose stool, off feeds, drowsy or irritable; ask the parent whether "
            "the child is themselves; take the temperature",
            why="toxic shock is the commonest cause of unexpected death in children with small burns",
            system=System.INFECTION,
            first_due=(looked + every) if looked else case.now,
            every=every,
            urgency=Urgency.TIMED,
            sources=_sources(case),
        )
    ]
    if present or hot:
        made.append(
            Action(
                key="infection.toxic_shock_call",
                area="Infection",
                text="Tell the children's doctor and the burn service now: toxic shock to be thought of",
                why="; ".join([*present, *([hot] if hot else [])]),
                system=System.INFECTION,
                urgency=Urgency.NOW,
                sources=_sources(case),
                cautions=(SMALL,),
            )
        )
    return tuple(made)
