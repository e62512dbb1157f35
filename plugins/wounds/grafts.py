"""Grafts and donor sites: since when, when the graft is looked at first, how the donor site is."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    Row,
    System,
    Urgency,
    Working,
    child,
    fact,
    number_text,
    words,
)

from . import formula

BAD = ("oozing", "soaked", "smells")


def _latest(case: Case, name: str) -> tuple[Row, ...]:
    rows: dict[str, Row] = {}
    for row in case.state.dated(child(case.block, name)):
        rows[words(row.entry.get("where")).lower()] = row
    return tuple(rows.values())


def first_look(case: Case, entry: Map, at: datetime) -> datetime:
    """Return when a graft is to be looked at first: as charted, or the days of the table after it was placed."""
    charted = case.when(entry.get("first_look"))
    days = case.parameters.number("graft.first_look")
    return charted or at + timedelta(hours=formula.interval_hours(days))


def items(case: Case) -> tuple[Item, ...]:
    """Return each graft and each donor site; nothing where there is none."""
    return (
        *(_graft(case, index, row) for index, row in enumerate(_latest(case, "grafts"), start=1)),
        *(_donor(case, index, row) for index, row in enumerate(_latest(case, "donors"), start=1)),
    )


def _graft(case: Case, index: int, row: Row) -> Item:
    entry, due = row.entry, first_look(case, row.entry, row.at)
    looked, taken = case.when(entry.get("looked")), words(entry.get("taken"))
    late = looked is None and due < case.now and not case.comfort
    said = [f"{words(entry.get('kind')) or 'kind not recorded'}, placed {case.clock.day_and_time(row.at)}"]
    if looked is not None:
        said.append(f"looked at {case.clock.day_and_time(looked)}, taken {taken or 'not recorded'}")
    else:
        how = "as charted" if "first_look" in entry else "by the days of the table"
        said.append(f"first look {case.clock.day_and_time(due)} ({how}){', overdue' if late else ''}")
    return fact(
        f"wounds.graft.{index}",
        f"Graft: {words(entry.get('where'))}",
        "; ".join(said),
        system=System.WOUND,
        value=due if looked is None else None,
        unit="time" if looked is None else "",
        as_of=looked or row.at,
        flag=Flag.REVIEW if late else Flag.NONE,
        working=Working(
            formula="time of the graft + days that its dressing stays",
            sum=f"{case.clock.day_and_time(row.at)} + {number_text(case.parameters.number('graft.first_look'))} d",
            inputs=(case.input("graft", entry.get("at")),),
        ),
        sources=(case.parameters.source_of("graft.first_look"),),
        cautions=("The surgeon decides when a graft is looked at first.",),
        line=entry.line,
    )


def _donor(case: Case, index: int, row: Row) -> Item:
    entry = row.entry
    state, product = words(entry.get("state")), words(entry.get("product"))
    low, high = case.parameters["donor.left"].value
    days = int(case.hours_between(row.at, case.now) // 24)
    said = [f"taken {case.clock.day_and_time(row.at)}, {days} d ago", product or "dressing not recorded"]
    said.append(state or "state not recorded")
    if state != "healed":
        said.append(f"left in place until healed, usually {number_text(low)} to {number_text(high)} d")
    bad = state in BAD and not case.comfort
    return fact(
        f"wounds.donor.{index}",
        f"Donor site: {words(entry.get('where'))}",
        "; ".join(said),
        system=System.WOUND,
        value=days,
        unit="days",
        as_of=case.when(entry.get("checked")) or row.at,
        flag=Flag.REVIEW if bad else Flag.NONE,
        sources=(case.parameters.source_of("donor.left"),),
        line=entry.line,
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the first look at each graft, its protection, and the look at each donor site."""
    if case.comfort:
        return ()
    made = []
    for index, row in enumerate(_latest(case, "grafts"), start=1):
        where = words(row.entry.get("where"))
        if "looked" in row.entry:
            continue
        made.append(
            Action(
                key=f"wounds.graft_look.{index}",
                area="Wounds",
                text=f"First look at the graft of {where} with the surgical team; until then no rubbing, no pressure, "
                "splint on, part raised",
                why="a graft that slides or bleeds underneath does not take",
                system=System.WOUND,
                first_due=first_look(case, row.entry, row.at),
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("graft.first_look"),),
            )
        )
    for index, row in enumerate(_latest(case, "donors"), start=1):
        state, where = words(row.entry.get("state")), words(row.entry.get("where"))
        if state == "healed":
            continue
        bad = state in BAD
        made.append(
            Action(
                key=f"wounds.donor_look.{index}",
                area="Wounds",
                text=f"Ask the surgical team about the donor site of {where}: {state}"
                if bad
                else f"Look at the donor site of {where} from outside: oozing, smell, slipped; leave the dressing on",
                why=f"charted as {state}"
                if bad
                else "the dressing is left until the skin under it has healed",
                system=System.WOUND,
                urgency=Urgency.NOW if bad else Urgency.SHIFT,
                sources=(case.parameters.source_of("donor.left"),),
            )
        )
    return tuple(made)
