"""The next painful procedure: by when to give what is prescribed, and the checks before and after."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    Part,
    System,
    Urgency,
    Working,
    hours_text,
    line_of,
    number_text,
    words,
)

from .charted import Charted
from .premedication import (
    Premedication,
    Timed,
    next_procedure,
    premedications,
    unclosed_procedures,
)
from .reassess import interval
from .sedation import breathing, latest_level

PROCEDURE, GIVE_BY, UNCLOSED = "pain.next_procedure", "pain.give_by", "pain.procedure_not_closed"
GIVE_LABEL = "Premedication, give by"
PART, SYSTEM = Part.RECOMMENDATION, System.PAIN


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return the next procedure, by when each premedication is to be given, and procedures left open."""
    found = next_procedure(case)
    if found is None:
        return (_none_charted(), _not_timed("no procedure charted"), *_unclosed(case))
    at, entry = found
    before = premedications(case, charted, at, entry)
    return (_procedure(case, at, entry, before), _give_by(case, at, before), *_unclosed(case))


def _none_charted() -> Item:
    return Item(
        key=PROCEDURE, label="Next painful procedure", part=PART, system=SYSTEM,
        unit="time", shown="not recorded", flag=Flag.NOT_RECORDED, repeats=True,
    )  # fmt: skip


def _not_timed(why: str) -> Item:
    return Item(
        key=GIVE_BY, label=GIVE_LABEL, part=PART, system=SYSTEM,
        unit="time", shown=f"not computed: {why}", flag=Flag.NOT_RECORDED,
    )  # fmt: skip


def _procedure(case: Case, at: datetime, entry: Map, before: tuple[Premedication, ...]) -> Item:
    said = f"{words(entry.get('what'))}, {case.clock.time(at, case.now)}; premedication: "
    said += "; ".join(one.prescribed() for one in before) or "none charted"
    return Item(
        key=PROCEDURE,
        label="Next painful procedure",
        part=PART,
        system=SYSTEM,
        value=at,
        unit="time",
        shown=said,
        as_of=case.now,
        flag=Flag.NONE if before else Flag.REVIEW,
        repeats=True,
        line=line_of(entry),
    )


def _unclosed(case: Case) -> tuple[Item, ...]:
    found = unclosed_procedures(case)
    if not found:
        return ()
    said = "; ".join(f"{words(entry.get('what'))}, {case.clock.time(at, case.now)}" for at, entry in found)
    return (
        Item(
            key=UNCLOSED,
            label="Procedures not charted as done or not done",
            part=Part.ASSESSMENT,
            system=SYSTEM,
            value=len(found),
            shown=said,
            as_of=found[-1][0],
            flag=Flag.REVIEW,
            repeats=True,
            line=line_of(found[-1][1]),
        ),
    )


def _give_by(case: Case, at: datetime, before: tuple[Premedication, ...]) -> Item:
    waiting = [(one, one.timed) for one in before if one.timed is not None and one.given_at is None]
    given = [(one, one.given_at) for one in before if one.given_at is not None]
    if waiting:
        return _to_give(case, at, waiting)
    if given:
        said = "; ".join(
            f"{one.prescribed()} given {case.clock.time(when, case.now)}, "
            f"{hours_text(case.hours_between(when, at))} before"
            for one, when in given
        )
        return Item(
            key=GIVE_BY, label=GIVE_LABEL, part=PART, system=SYSTEM,
            unit="time", shown=said, as_of=given[-1][1], repeats=True,
        )  # fmt: skip
    missing = ", ".join(f"{one.drug.name} {one.route}" for one in before)
    return _not_timed(f"no lead time for {missing}" if missing else "no premedication charted")


def _to_give(case: Case, at: datetime, waiting: list[tuple[Premedication, Timed]]) -> Item:
    first, timed = waiting[0]
    clock, now, lead = case.clock, case.now, timed.lead
    late = timed.give_by < now and case.parameters[lead.identifier].kind != "from memory"
    said = "; ".join(one.when(case) for one, _ in waiting)
    sources = dict.fromkeys(case.parameters.source_of(when.lead.identifier) for _, when in waiting)
    return Item(
        key=GIVE_BY,
        label=GIVE_LABEL,
        part=PART,
        system=SYSTEM,
        value=timed.give_by,
        unit="time",
        shown=f"{said}{', the time has passed' if late else ''}. Before giving: {_safety(case)}",
        as_of=now,
        flag=Flag.REVIEW if late else Flag.NONE,
        working=Working(
            formula="time of the procedure less the lead time of the drug and route",
            sum=f"{clock.time(at, now)} - {number_text(lead.latest)} min = {clock.time(timed.give_by, now)}",
            inputs=(case.input("prescribed", first.node, first.prescribed()),),
            rule=lead.identifier,
        ),
        sources=tuple(sources),
        cautions=(
            "the prescriber decides drug and dose; with deep sedation or slow breathing, call before giving",
        ),
    )


def _safety(case: Case) -> str:
    """Sedation and breathing as they were last charted, which stand beside every time to give."""
    level, breaths = latest_level(case), breathing(case)
    sedated = "sedation not recorded"
    if level is not None:
        sedated = f"sedation {level.called} {level.written} at {case.clock.time(level.at, case.now)}"
    breathed = "breathing not recorded"
    if breaths is not None:
        breathed = f"breaths {number_text(breaths[1])} /min at {case.clock.time(breaths[0].at, case.now)}"
    return f"{sedated}, {breathed}"


def actions(case: Case, charted: Charted) -> tuple[Action, ...]:
    """Return what to do before and after the next procedure."""
    found = next_procedure(case)
    if found is None:
        return ()
    at, entry = found
    before = premedications(case, charted, at, entry)
    what = words(entry.get("what"))
    why = f"{what} at {case.clock.time(at, case.now)}"
    waiting = [one for one in before if one.given_at is None]
    made = [_give(case, one, index, why) for index, one in enumerate(waiting, start=1)]
    if not before:
        made.append(_ask(what, why))
    return (*made, _after(case, at, before, what))


def _ask(what: str, why: str) -> Action:
    return Action(
        key="pain.premedication",
        area="pain",
        text=f"Ask the prescriber about analgesia before: {what}",
        why=f"{why}, none charted",
        system=SYSTEM,
        urgency=Urgency.SHIFT,
    )


def _give(case: Case, one: Premedication, index: int, why: str) -> Action:
    return Action(
        key=f"pain.premedicate.{index}",
        area="pain",
        text=f"Check sedation and breathing, then give as prescribed: {one.when(case)}",
        why=why,
        system=SYSTEM,
        first_due=one.timed.give_from if one.timed else None,
        urgency=Urgency.TIMED,
        sources=(case.parameters.source_of(one.timed.lead.identifier),) if one.timed else (),
    )


def _after(case: Case, at: datetime, before: tuple[Premedication, ...], what: str) -> Action:
    """Checks after a procedure, as close together as the quickest route that was used before it asks for."""
    routes = [one.route for one in before] or ["IV"]
    found = [after for route in routes if (after := interval(case, route)) is not None]
    every = min(found, key=lambda after: after.minutes, default=None)
    again = f" and again every {number_text(every.minutes)} min" if every else ""
    return Action(
        key="pain.after_procedure",
        area="pain",
        text=f"After {what}: sedation, breathing and pain at its end{again} until awake and settled; "
        "chart the worst pain of the procedure",
        why="the stimulus ends while the drug still works",
        system=SYSTEM,
        first_due=at,
        urgency=Urgency.TIMED,
        sources=(case.parameters.source_of(every.identifier),) if every else (),
    )
