"""Electrocardiogram and rhythm monitoring: done, running, asked for by the named list."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Row,
    System,
    Urgency,
    Working,
    child,
    fact,
    hours_text,
    joined,
    words,
)

from .injury import Injury, ecgs

RANK_RHYTHM, RANK_MONITOR, RANK_ECG = 30, 32, 35
CHILD_LIST = "monitoring.emergency-text"
NO_PROOF = "Creatine kinase, its heart fraction too, does not tell whether the heart is hurt."


def _list(case: Case) -> tuple[str, str, list[str]]:
    name = f"monitoring.{case.chosen('monitoring').name}"
    table = case.parameters.table(name)
    rows = [str(row) for row in table["rows"]]
    if name == CHILD_LIST and _is_child(case):
        rows += [str(row) for row in case.parameters["monitoring.child_rows"].value if row not in rows]
    return name, str(table["title"]), rows


def _is_child(case: Case) -> bool:
    age = case.state.age_at(case.now)
    return age is not None and age.years < case.parameters.number("child_under")


def met(case: Case, found: Injury) -> list[str]:
    """Return the criteria of the chosen list that are met."""
    return [row for row in _list(case)[2] if found.facts[row]]


def unknown(case: Case, found: Injury) -> list[str]:
    """Return the criteria of the chosen list that nothing says anything about."""
    return [row for row in _list(case)[2] if found.facts[row] is None]


def _spans(case: Case) -> tuple[Row, ...]:
    return case.state.dated(child(case.block, "monitoring"), "from")


def running(case: Case) -> datetime | None:
    """Return since when the rhythm is monitored without a break; None where it is not as charted."""
    spans = _spans(case)
    return spans[-1].at if spans and "until" not in spans[-1].entry else None


def _seen_on_monitor(case: Case, found: Injury) -> bool:
    """Whether an arrhythmia was read from a monitor of which no start is charted."""
    said = " ".join(words(row.entry.get("said")).lower() for row in found.rhythms)
    return "monitor" in said and not _spans(case)


def _last_rhythm(case: Case, found: Injury, between: str) -> str:
    last = found.rhythms[-1]
    return f"{words(last.entry.get('what'))} {between} {case.clock.time(last.at, case.now)}"


def _ecg_since(case: Case, found: Injury) -> str:
    """Return what to ask where no electrocardiogram was taken at or after the last arrhythmia."""
    if not found.rhythms or not ecgs(case) or any(row.at >= found.rhythms[-1].at for row in ecgs(case)):
        return ""
    return f"; 12-lead electrocardiogram after the {_last_rhythm(case, found, 'of')} not charted: ask"


def items(case: Case, found: Injury) -> tuple[Item, ...]:
    """Return arrhythmias, the electrocardiogram, and the monitoring."""
    return (*_rhythms(case, found), _ecg(case, found), _monitoring(case, found))


def _rhythms(case: Case, found: Injury) -> tuple[Item, ...]:
    if not found.rhythms:
        return ()
    last = found.rhythms[-1]
    recent = case.hours_between(last.at, case.now) <= case.parameters.number("monitoring.hours")
    said = [
        f"{words(row.entry.get('what'))} at {case.clock.time(row.at, case.now)}"
        + (f": {words(row.entry.get('said'))}" if words(row.entry.get("said")) else "")
        for row in found.rhythms
    ]
    asks = recent and not found.comfort
    return (
        fact(
            "electrical.rhythm",
            "Arrhythmia after electrical injury",
            "; ".join(said),
            system=System.ELECTRICAL,
            value=len(found.rhythms),
            unit="events",
            as_of=last.at,
            flag=Flag.ACTION if asks else Flag.NONE,
            sources=(case.parameters.source_of("monitoring.aba-2006"),),
            rank=RANK_RHYTHM if asks else None,
            line=last.entry.line,
        ),
    )


def _ecg(case: Case, found: Injury) -> Item:
    rows, source = ecgs(case), case.parameters.source_of("ecg.all")
    label = "12-lead electrocardiogram"
    if not rows:
        return fact(
            "electrical.ecg",
            label,
            "not recorded",
            system=System.ELECTRICAL,
            flag=Flag.NOT_RECORDED if found.comfort else Flag.ACTION,
            sources=(source,),
            rank=None if found.comfort else RANK_ECG,
        )
    last = rows[-1]
    said = words(last.entry.get("said")) or words(last.entry.get("ecg")) or "what it showed is not recorded"
    called = {"yes": ", called abnormal", "not read yet": ", not read yet"}.get(
        words(last.entry.get("abnormal")), ""
    )
    return fact(
        "electrical.ecg",
        label,
        f"{said}{called}",
        system=System.ELECTRICAL,
        value=len(rows),
        unit="recorded",
        as_of=last.at,
        flag=Flag.REVIEW if "not read" in called else Flag.NONE,
        sources=(source,),
        cautions=(NO_PROOF,),
        line=last.entry.line,
    )


def _monitoring(case: Case, found: Injury) -> Item:
    name, title, _ = _list(case)
    have, lack = met(case, found), unknown(case, found)
    since, hours = running(case), case.parameters.number("monitoring.hours")
    end = since + timedelta(hours=hours) if since else None
    asks = bool(have) and since is None and not _done(case, hours) and not found.comfort
    said = [_state(case, found, since, end)]
    said.append(f"asked for by {joined(have)} ({title})" if have else f"no criterion of {title} met")
    said += [f"cannot be judged: {joined(lack)}"] if lack else []
    flag = Flag.ACTION if asks else Flag.NONE
    if end is not None and end < case.now and not found.comfort:
        flag = Flag.REVIEW
    elif not asks and since is None and lack and not have and not _spans(case):
        flag = Flag.NOT_RECORDED
    return fact(
        "electrical.monitoring",
        "Rhythm monitoring",
        "; ".join(said),
        system=System.ELECTRICAL,
        value=end,
        unit="time",
        as_of=since,
        flag=flag,
        working=Working(
            formula="any criterion of the list; start of monitoring + hours used in studies",
            sum=f"{joined(have) or 'none met'}"
            + (f"; {case.clock.day_and_time(since)} + {hours_text(hours)}" if since else ""),
            inputs=(case.input("cause", found.cause, f"{words(found.cause.get('kind'))}, {found.voltage}"),),
            rule=title,
        ),
        sources=(case.parameters.source_of(name), case.parameters.source_of("monitoring.hours")),
        rank=RANK_MONITOR if asks else None,
    )


def _state(case: Case, found: Injury, since: datetime | None, end: datetime | None) -> str:
    if since is not None and end is not None:
        begun = f"running since {case.clock.day_and_time(since)}"
        if end < case.now:
            hours = hours_text(case.parameters.number("monitoring.hours"))
            return f"{begun}; {hours} reached, ask whether it may end"
        return f"{begun}, to at least {case.clock.day_and_time(end)}"
    spans = _spans(case)
    if spans:
        ended = case.when(spans[-1].entry.get("until"))
        by = words(spans[-1].entry.get("decided_by")) or "not recorded by whom"
        return f"ended {case.clock.day_and_time(ended)} ({by})" if ended else "ended"
    if _seen_on_monitor(case, found):
        return f"monitoring start and alarms not charted; {_last_rhythm(case, found, 'charted at')}"
    return "not recorded"


def _done(case: Case, hours: float) -> bool:
    spans = [(row.at, case.when(row.entry.get("until"))) for row in _spans(case)]
    return any(end is not None and case.hours_between(start, end) >= hours for start, end in spans)


def actions(case: Case, found: Injury) -> tuple[Action, ...]:
    """Return the electrocardiogram and the monitoring that are missing, and the watch on the monitor."""
    if found.comfort:
        return ()
    made = []
    if not ecgs(case):
        made.append(
            Action(
                key="electrical.take_ecg",
                area="Electrical injury",
                text="12-lead electrocardiogram now; have it read and chart what the reader says",
                why="every electrical injury has one, and none is recorded",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("ecg.all"),),
            )
        )
    name, title, _ = _list(case)
    have = met(case, found)
    since = running(case)
    if have and since is None and not _done(case, case.parameters.number("monitoring.hours")):
        start = "Connect the rhythm monitor now, alarms on, and chart from when; tell the doctor"
        if _seen_on_monitor(case, found):
            start = "Check that the rhythm monitor is on, alarms set; chart from when"
        made.append(
            Action(
                key="electrical.start_monitoring",
                area="Electrical injury",
                text=f"{start}{_ecg_since(case, found)}",
                why=f"{joined(have)} ({title})",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of(name),),
            )
        )
    elif since is not None:
        hours = case.parameters.number("monitoring.hours")
        made.append(
            Action(
                key="electrical.keep_monitoring",
                area="Electrical injury",
                text=(
                    "Keep the rhythm monitor on, on transfer and in the scanner too; ask before it is ended"
                    + _ecg_since(case, found)
                ),
                why=joined(have) or "started after an electrical injury",
                system=System.ELECTRICAL,
                first_due=since + timedelta(hours=hours),
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("monitoring.hours"),),
            )
        )
    return tuple(made)
