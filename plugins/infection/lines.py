"""How many days each line has been in, and which goes through burned skin."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Case, Flag, Item, Map, System, Urgency, entries, fact, words

from . import formula


def in_place(case: Case) -> tuple[Map, ...]:
    """Return the lines, tubes and drains that are not removed."""
    return tuple(line for line in entries(case.state.root.get("lines")) if "removed" not in line)


def day_of(case: Case, line: Map) -> int | None:
    """Return which day of the line it is; None where its placing is not recorded."""
    placed = case.when(line.get("placed"))
    if placed is None:
        return None
    first, today = (case.clock.local(moment).date().toordinal() for moment in (placed, case.now))
    return formula.day_of_line(first, today)


def items(case: Case) -> tuple[Item, ...]:
    """Return the days of every line in one item; nothing where no line is charted."""
    found = in_place(case)
    if not found:
        return ()
    days = [(line, day_of(case, line)) for line in found]
    oldest = max((day for _, day in days if day is not None), default=None)
    ordered = sorted(days, key=lambda pair: (-(pair[1] or 0), words(pair[0].get("what")), pair[0].line))
    missing = any(day is None for _, day in days)
    burned = any(words(line.get("through_burn")) == "yes" for line, _ in days)
    flag = Flag.REVIEW if missing or burned else Flag.NONE
    return (
        fact(
            "infection.line_days",
            "Days of lines",
            "; ".join(_said(line, day) for line, day in ordered),
            system=System.INFECTION,
            value=oldest,
            unit="days, the oldest",
            as_of=case.now,
            flag=Flag.NONE if case.comfort else flag,
            detail=flag is Flag.NONE,
            sources=(case.parameters.source_of("lines.every"),),
            line=ordered[0][0].line,
        ),
    )


def _name(line: Map) -> str:
    return " ".join(part for part in (words(line.get("what")), words(line.get("site"))) if part)


def _said(line: Map, day: int | None) -> str:
    parts = [f"day {day}" if day is not None else "day of placing not recorded"]
    if words(line.get("through_burn")) == "yes":
        parts.append("through burned skin")
    return f"{_name(line)}: {', '.join(parts)}"


def actions(case: Case) -> tuple[Action, ...]:
    """Return the daily question whether each line is still needed."""
    found = in_place(case)
    if not found or case.comfort:
        return ()
    hours = case.parameters.number("lines.every")
    names = ", ".join(_name(line) for line in found)
    return (
        Action(
            key="infection.line_need",
            area="Infection",
            text=f"Ask at the ward round whether each line is still needed: {names}",
            why="each day in place adds a chance of infection, through burned skin most of all",
            system=System.INFECTION,
            every=timedelta(hours=hours),
            first_due=case.now,
            urgency=Urgency.SHIFT,
            sources=(case.parameters.source_of("lines.every"),),
        ),
    )
