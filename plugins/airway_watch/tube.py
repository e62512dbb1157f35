"""The tube: size, mark and how far it moved, cuff, ties; and how far the head of the bed is raised."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    Reading,
    Row,
    System,
    Urgency,
    Working,
    amount,
    number,
    number_text,
    with_unit,
    words,
)

from . import charted, formula, say, tube_lines
from .exposure import Exposure
from .schedule import Watch

RANK = 10
AFTER_A_TURN = "Recheck after every turn: position changes the pressure."
MARK = "The mark that was confirmed at placement beats any formula for depth."


def items(case: Case, seen: Exposure, run: Watch) -> tuple[Item, ...]:
    """Return the tube as charted with its checks, and the head of the bed."""
    head = _head_up(case, seen)
    since = run.tube.since
    if since is None:
        return head
    checks = tuple(row for row in charted.block_rows(case, "tube_checks") if row.at >= since)
    read = (_cuff(case, run, checks), _ties(case, run, checks))
    lines = tube_lines.items(case, _entry(run))
    return (_tube(case, run, since), *_depth(case, run, checks), *lines, *read, *head)


def _entry(run: Watch) -> Map:
    """The charted tube; an intubation that is only an event has none."""
    return run.tube.entry if run.tube.entry is not None else Map.at()


def _tube(case: Case, run: Watch, since: datetime) -> Item:
    entry = _entry(run)
    mark = words(entry.get("at_mark"))
    wanted = {
        "size": words(entry.get("size")),
        "route": words(entry.get("route")),
        "cuff": {"yes": "cuffed", "no": "without cuff"}.get(words(entry.get("cuffed")), ""),
        "mark at placement": " at the ".join(part for part in (words(entry.get("depth")), mark) if part),
        "cut or uncut": {"yes": "uncut", "no": "cut"}.get(words(entry.get("uncut")), ""),
        "how the position was confirmed": words(entry.get("position_confirmed")),
    }
    said = [text for text in wanted.values() if text]
    missing = [name for name, text in wanted.items() if not text]
    shown = f"{', '.join(said) or 'tube'}, since {say.at(case, since)}"
    if missing:
        shown += f"; not recorded: {', '.join(missing)}"
    return say.fact(
        "airway_watch.tube",
        "Tube in the airway",
        shown,
        as_of=since,
        line=entry.line,
        cautions=(MARK,),
        flag=Flag.NOT_RECORDED if missing else Flag.NONE,
    )


def _marks(run: Watch, checks: tuple[Row, ...]) -> list[tuple[datetime, float, str]]:
    entry, found = _entry(run), []
    since = run.tube.since
    placed = amount(entry.get("depth"), "cm")
    mark = words(entry.get("at_mark"))
    if placed is not None and since is not None:
        found.append((since, placed, mark))
    for row in checks:
        depth = amount(row.entry.get("depth"), "cm")
        if depth is not None:
            found.append((row.at, depth, words(row.entry.get("at_mark")) or mark))
    return found


def _depth(case: Case, run: Watch, checks: tuple[Row, ...]) -> tuple[Item, ...]:
    key, label = "airway_watch.tube_depth", "Tube mark"
    marks = _marks(run, checks)
    if not marks:
        return (say.gap(key, label, unit="cm"),)
    at, depth, mark = marks[-1]
    where = f" at the {mark}" if mark else ""
    item = say.fact(
        key,
        label,
        f"{with_unit(depth, 'cm', say.PLACES)}{where}, {say.at(case, at)}",
        value=depth,
        unit="cm",
        as_of=at,
        flag=Flag.REVIEW if run.is_old(at) else Flag.NONE,
        cautions=(MARK,),
        sources=(case.parameters.source_of("tube.check_interval"),),
    )
    return (item, _drift(case, marks))


def _drift(case: Case, marks: list[tuple[datetime, float, str]]) -> Item:
    key, label = "airway_watch.tube_drift", "Tube moved since the last check"
    if len(marks) < 2:
        return say.gap(key, label, "one mark only is recorded", unit="cm")
    (first_at, first, first_mark), (before_at, before, before_mark), (at, depth, mark) = (
        marks[0],
        marks[-2],
        marks[-1],
    )
    if mark != before_mark:
        return say.gap(key, label, f"the marks were read at the {before_mark} and at the {mark}", unit="cm")
    moved, limit = formula.drift_cm(depth, before), case.parameters.number("tube.drift")
    said = f"{_way(moved)} since {say.at(case, before_at)}"
    whole = moved
    if len(marks) > 2 and first_mark == mark:
        whole = formula.drift_cm(depth, first)
        said += f", {_way(whole)} since placement {say.at(case, first_at)}"
    far = max(abs(moved), abs(whole)) >= limit
    return say.fact(
        key,
        label,
        said + (": tell the doctor now, check both sides of the chest" if far else ""),
        value=moved,
        unit="cm",
        as_of=at,
        flag=Flag.ACTION if far else Flag.NONE,
        rank=RANK if far else None,
        working=Working(
            formula="mark now - mark before; deeper is positive",
            sum=f"{number_text(depth, 1)} - {number_text(before, 1)} = {number_text(moved, 1)} cm",
            rule=f"a move of {with_unit(limit, 'cm', say.PLACES)} or more is told",
        ),
        sources=(case.parameters.source_of("tube.drift"),),
    )


def _way(moved: float) -> str:
    if moved == 0:
        return "not moved"
    return f"{with_unit(abs(moved), 'cm', say.PLACES)} {'deeper' if moved > 0 else 'further out'}"


def _cuff(case: Case, run: Watch, checks: tuple[Row, ...]) -> Item:
    key, label = "airway_watch.cuff_pressure", "Cuff pressure"
    read = [
        (row, value)
        for row in checks
        if (value := amount(row.entry.get("cuff_pressure"), "cmH2O")) is not None
    ]
    if words(_entry(run).get("cuffed")) == "no":
        return say.fact(key, label, "tube without cuff", unit="cmH2O")
    if not read:
        return say.gap(key, label, unit="cmH2O", cautions=(AFTER_A_TURN,))
    row, value = read[-1]
    low, high = (float(edge) for edge in case.parameters["cuff.range"].value)
    outside, old = formula.is_outside(value, low, high), run.is_old(row.at)
    said = f"{with_unit(value, 'cmH2O', say.PLACES)} at {say.at(case, row.at)}"
    said += f", range {number_text(low)} to {number_text(high)}"
    if outside:
        said += f", {'below' if value < low else 'above'} it"
    return say.fact(
        key,
        label,
        said + (", not rechecked since" if old else ""),
        value=value,
        unit="cmH2O",
        as_of=row.at,
        flag=Flag.ACTION if outside else Flag.REVIEW if old else Flag.NONE,
        rank=RANK if outside else None,
        sources=(case.parameters.source_of("cuff.range"),),
        cautions=(AFTER_A_TURN,),
        line=row.line,
    )


def _ties(case: Case, run: Watch, checks: tuple[Row, ...]) -> Item:
    key, label = "airway_watch.tube_ties", "Tube ties"
    read = [row for row in checks if words(row.entry.get("ties")) not in ("", "not assessed")]
    if not read:
        return say.gap(key, label)
    row, state = read[-1], words(read[-1].entry.get("ties"))
    old = run.is_old(row.at)
    when = say.at(case, row.at)
    shown = f"not reassessed since {when}" if old and state == "secure" else f"{state} {when}"
    needs = state in ("tight", "loose")
    return say.fact(
        key,
        label,
        shown,
        as_of=row.at,
        flag=Flag.ACTION if needs else Flag.REVIEW if old else Flag.NONE,
        rank=RANK if needs else None,
        cautions=("Swelling tightens ties and later loosens them; tape does not hold on a burned face.",),
        line=row.line,
    )


def _head_up(case: Case, seen: Exposure) -> tuple[Item, ...]:
    key, label = "airway_watch.head_up", "Head of the bed"
    if not seen.watched:
        return ()
    readings: tuple[Reading, ...] = case.state.series("head_up_degrees")
    if not readings:
        return (say.gap(key, label, unit="degrees"),)
    last = readings[-1]
    degrees = number(last.node) or 0.0
    low, high = (float(edge) for edge in case.parameters["head_up.range"].value)
    short = degrees < low
    said = f"{number_text(degrees)} degrees at {say.at(case, last.at)}, range {number_text(low)} to {number_text(high)}"
    return (
        say.fact(
            key,
            label,
            f"{said}, below it" if short else said,
            value=degrees,
            unit="degrees",
            as_of=last.at,
            flag=Flag.REVIEW if short else Flag.NONE,
            sources=(case.parameters.source_of("head_up.range"),),
            cautions=("Only where spine, blood pressure and other injuries allow it.",),
        ),
    )


def actions(case: Case, seen: Exposure) -> tuple[Action, ...]:
    """Return how the patient is to be positioned."""
    if not seen.watched:
        return ()
    low, high = (number_text(float(edge)) for edge in case.parameters["head_up.range"].value)
    return (
        Action(
            key="airway_watch.raise_head",
            area="Airway",
            text=f"Head of the bed {low} to {high} degrees where the spine is cleared",
            why="less swelling of face and neck, easier breathing",
            system=System.AIRWAY,
            urgency=Urgency.ONGOING,
            sources=(case.parameters.source_of("head_up.range"),),
        ),
    )
