"""The next operation: fasting times by the named table, consent, mark, anaesthetist, blood."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

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
    child,
    fact,
    hours_text,
    joined,
    words,
)

from . import formula

KINDS = ("food", "other milk", "breast milk", "clear")
SAID = {"food": "food", "other milk": "other milk", "breast milk": "breast milk", "clear": "clear drinks"}
LONG = "A burned patient is not left fasting for longer than this: ask when theatre is late."
ORDER = "The anaesthetist's order goes before the table; opioids and a sick stomach empty slowly."


class Intake(Struct, frozen=True):
    """The last time something of one kind was taken."""

    kind: str
    at: datetime
    entry: Map


def next_operation(case: Case) -> tuple[Map, datetime] | None:
    """Return the next operation that is not done, and its planned start; None where none is planned."""
    rows = case.state.dated(child(case.block, "planned"))
    coming = [row for row in rows if words(row.entry.get("done")) != "yes"]
    return (coming[0].entry, coming[0].at) if coming else None


def table(case: Case) -> tuple[str, dict[str, float], str]:
    """Return the name of the chosen table's parameter, its hours by kind, and its title."""
    name = f"fasting.{case.chosen('fasting').name}"
    found = case.parameters.table(name)
    return name, {kind: float(found[kind]) for kind in KINDS}, str(found["title"])


def intakes(case: Case) -> tuple[Intake, ...]:
    """Return the last food and the last drink as charted."""
    found = []
    food, drink = case.state.at_path("nutrition", "last_food"), child(case.block, "last_drink")
    for node, kind in ((food, "food"), (drink, words(child(drink, "kind")))):
        at = case.when(child(node, "at"))
        if isinstance(node, Map) and "struck" not in node and at is not None:
            found.append(Intake("food" if kind == "other" else kind, at, node))
    return tuple(found)


def items(case: Case) -> tuple[Item, ...]:
    """Return the next operation with what is ready and the fasting times; nothing where none is planned."""
    found = next_operation(case)
    if found is None:
        return _blood(case, None)
    entry, start = found
    return (_operation(case, entry, start), _fasting(case, entry, start), *_blood(case, start))


def _missing(entry: Map) -> list[str]:
    asked = (
        (
            "consent",
            "consent",
            ("signed", "in the patient's best interest", "by holder of parental responsibility"),
        ),
        ("marked", "site marked", ("yes",)),
        ("seen_by_anaesthetist", "seen by the anaesthetist", ("yes",)),
    )
    return [name for key, name, ready in asked if words(entry.get(key)) not in ready]


def _soon(case: Case, start: datetime) -> bool:
    return case.hours_between(case.now, start) <= case.parameters.number("window")


def _operation(case: Case, entry: Map, start: datetime) -> Item:
    missing = _missing(entry)
    said = [f"{words(entry.get('what'))}, planned {case.clock.day_and_time(start)}"]
    said += [f"consent {words(entry.get('consent'))}"] if "consent" in entry else []
    said += (
        [f"not ready or not recorded: {joined(missing)}"]
        if missing
        else ["consent, mark and anaesthetist charted"]
    )
    if start < case.now:
        said.append("its time is past and it is not charted as done")
    ask = (bool(missing) and _soon(case, start)) or start < case.now
    return fact(
        "theatre.operation",
        "Next operation",
        "; ".join(said),
        system=System.GENERAL,
        part=Part.RECOMMENDATION,
        value=start,
        unit="time",
        flag=Flag.REVIEW if ask else Flag.NONE,
        sources=(case.parameters.source_of("window"),),
        line=entry.line,
    )


def _fasting(case: Case, entry: Map, start: datetime) -> Item:
    name, hours, title = table(case)
    times = {kind: start - timedelta(hours=hours[kind]) for kind in KINDS}
    said = [f"{SAID[kind]} until {case.clock.time(times[kind], case.now)}" for kind in KINDS]
    short = _short(case, start, hours)
    order = words(entry.get("fasting"))
    shown = "; ".join(([f"ordered: {order}"] if order else []) + said + short)
    if not intakes(case):
        shown += "; last food and drink not recorded"
    return fact(
        "theatre.fasting",
        f"Fasting before theatre ({title})",
        shown,
        system=System.NUTRITION,
        part=Part.RECOMMENDATION,
        value=times["food"],
        unit="time",
        as_of=case.now,
        flag=Flag.REVIEW
        if short
        else Flag.NONE
        if intakes(case) or not _soon(case, start)
        else Flag.NOT_RECORDED,
        working=Working(
            formula="planned start - shortest fast of each kind",
            sum="; ".join(f"{case.clock.day_and_time(start)} - {hours_text(hours[kind])}" for kind in KINDS),
            inputs=(
                case.input("planned start", entry.get("at")),
                *(case.input(f"last {one.kind}", one.entry.get("at")) for one in intakes(case)),
            ),
            rule=title,
        ),
        sources=(case.parameters.source_of(name),),
        cautions=(ORDER, LONG),
        line=entry.line,
    )


def _short(case: Case, start: datetime, hours: dict[str, float]) -> list[str]:
    said = []
    for one in intakes(case):
        fasted = case.hours_between(one.at, start)
        left = formula.hours_short(fasted, hours[one.kind]) if fasted >= 0 else 0.0
        if left > 0:
            at = case.clock.time(one.at, case.now)
            said.append(f"last {SAID[one.kind]} at {at}, {hours_text(left)} short at the planned start")
    return said


def _blood(case: Case, start: datetime | None) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "blood"))
    if not rows:
        if start is None or not _soon(case, start):
            return ()
        return (
            fact(
                "theatre.blood",
                "Blood for theatre",
                "not recorded",
                system=System.GENERAL,
                flag=Flag.NOT_RECORDED,
            ),
        )
    last = rows[-1].entry
    until = case.when(last.get("valid_until"))
    over = until is not None and until < (start or case.now)
    said = [f"sample taken {case.clock.day_and_time(rows[-1].at)}"]
    said.append(f"valid until {case.clock.day_and_time(until)}" if until else "validity not recorded")
    said += ["not valid at the planned start"] if over and start else ["no longer valid"] if over else []
    said.append(words(last.get("ready")) or "what is ready is not recorded")
    return (
        fact(
            "theatre.blood",
            "Blood for theatre" if start else "Blood sample",
            "; ".join(said),
            system=System.GENERAL,
            as_of=rows[-1].at,
            flag=Flag.REVIEW if over else Flag.NONE,
            line=last.line,
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the times to stop food and drink, and what is not yet ready."""
    found = next_operation(case)
    if found is None or found[1] < case.now:
        return ()
    entry, start = found
    name, hours, title = table(case)
    made = []
    for kind, key in (("food", "stop_food"), ("clear", "stop_clear")):
        moment = start - timedelta(hours=hours[kind])
        if moment >= case.now:
            made.append(
                Action(
                    key=f"theatre.{key}",
                    area="Theatre",
                    text=f"Last {SAID[kind]} before theatre"
                    + ("; offer a drink until then" if kind == "clear" else "; ask about tube feed"),
                    why=f"{words(entry.get('what'))} at {case.clock.time(start, case.now)} ({title})",
                    system=System.NUTRITION,
                    first_due=moment,
                    urgency=Urgency.TIMED,
                    sources=(case.parameters.source_of(name),),
                    cautions=(ORDER,),
                )
            )
    missing = _missing(entry)
    if missing and _soon(case, start):
        made.append(
            Action(
                key="theatre.ready",
                area="Theatre",
                text=f"Get ready for theatre: {joined(missing)}",
                why=f"planned {case.clock.day_and_time(start)}",
                system=System.GENERAL,
                first_due=max(case.now, start - timedelta(hours=hours["clear"])),
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("window"),),
            )
        )
    return tuple(made)
