"""The timetable of airway checks: its start, the next one due, what was missed, and how findings age."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Source,
    System,
    Urgency,
    Working,
    child,
    hours_text,
    plural,
)

from . import charted, judged, say, timetable
from .charted import Tube
from .exposure import LOOKED_FOR, Exposure

RANK = 11


class Schedule(Struct, frozen=True):
    """A named timetable: minutes between checks and where each stretch ends."""

    name: str
    said: str
    phases: tuple[tuple[float, float | None], ...]
    source: Source

    @property
    def longest_min(self) -> float:
        """The longest interval of the timetable, in min; findings age by it where no watch runs."""
        return max(every for every, _ in self.phases)


def schedule_of(case: Case) -> Schedule:
    """Return the timetable that the policy chose."""
    name = case.chosen("schedule").name
    parameter = case.parameters[f"schedule.{name}"]
    table = parameter.value
    phases = tuple(
        (float(every), None if until is None else float(until)) for every, until in table["phases"]
    )
    if not phases:
        local = case.parameters["watch.one_interval"]
        return Schedule(
            table["title"], f"every {local.value:g} min", ((float(local.value), None),), local.source
        )
    return Schedule(table["title"], table["said"], phases, parameter.source)


class Watch(Struct, frozen=True):
    """The watch of one patient: where its clock starts, what is due, and the checks that were made."""

    schedule: Schedule
    asked_for: bool
    start: datetime | None
    start_said: str
    checks: tuple[datetime, ...]
    next_due: datetime | None
    every: timedelta | None
    missed: tuple[datetime, ...]
    ended: datetime | None
    tube: Tube
    now: datetime
    early: timedelta

    @property
    def running(self) -> bool:
        """Whether checks are due."""
        return self.asked_for and self.ended is None

    @property
    def overdue(self) -> bool:
        """Whether the next check was due before now."""
        return self.next_due is not None and self.next_due < self.now

    def due_after(self, check: datetime) -> datetime | None:
        """Return when the finding of ``check`` is due again; None when the timetable is over."""
        if self.tube.since is not None and self.every is not None:
            return check + self.every
        if self.running and self.start is not None:
            minute = timetable.next_slot_min(
                charted.minutes(check - self.start), self.schedule.phases, charted.minutes(self.early)
            )
            return None if minute is None else self.start + timedelta(minutes=minute)
        return check + timedelta(minutes=self.schedule.longest_min)

    def is_old(self, check: datetime) -> bool:
        """Return whether a finding is past its check interval; one from before an extubation always is."""
        if self.tube.extubated is not None and check < self.tube.extubated:
            return True
        due = self.due_after(check)
        if due is None:
            due = check + timedelta(minutes=self.schedule.longest_min)
        return due < self.now


def watch(case: Case, seen: Exposure) -> Watch:
    """Return the watch as it stands now."""
    schedule, tube = schedule_of(case), charted.tube(case)
    early = timedelta(minutes=case.parameters.number("watch.early"))
    checks = charted.check_times(case)
    if tube.since is not None:
        return _tube_watch(case, seen, schedule, tube, early)
    start, said = _start(case, tube, checks)
    ended = case.when(child(case.block, "watch", "ended"))
    if ended is not None and start is not None and tube.extubated is not None and ended < tube.extubated:
        ended = None
    next_due: datetime | None = None
    every: timedelta | None = None
    missed: tuple[datetime, ...] = ()
    if seen.watched and ended is None and start is None:
        every = timedelta(minutes=schedule.phases[0][0])
    if seen.watched and ended is None and start is not None:
        counted = [charted.minutes(check - start) for check in checks if check >= start - early]
        now = charted.minutes(case.now - start)
        phases, early_min = schedule.phases, charted.minutes(early)
        next_due = _moment(start, timetable.next_slot_min(max(counted, default=None), phases, early_min))
        interval = timetable.interval_min(now, phases)
        every = None if interval is None else timedelta(minutes=interval)
        missed = tuple(
            start + timedelta(minutes=slot)
            for slot in timetable.missed_slots_min(counted, now, phases, early_min)
        )
    return Watch(
        schedule, seen.watched, start, said, checks, next_due, every, missed, ended, tube, case.now, early
    )


def _moment(start: datetime, minute: float | None) -> datetime | None:
    return None if minute is None else start + timedelta(minutes=minute)


def _start(case: Case, tube: Tube, checks: tuple[datetime, ...]) -> tuple[datetime | None, str]:
    stated = case.when(child(case.block, "watch", "start"))
    if tube.extubated is not None and (stated is None or stated < tube.extubated):
        return tube.extubated, "extubation"
    if stated is not None:
        what = str(child(case.block, "watch", "from") or "").strip()
        return stated, what or "the start that is written"
    rule = case.chosen("schedule_start").name
    burn = case.state.burn_time
    if rule == "burn" and burn is not None:
        return burn.earliest, "the burn (start of the watch not written)"
    if rule == "first check" and checks:
        return checks[0], "the first charted airway check (start of the watch not written)"
    return None, ""


def _tube_watch(case: Case, seen: Exposure, schedule: Schedule, tube: Tube, early: timedelta) -> Watch:
    every = timedelta(minutes=case.parameters.number("tube.check_interval"))
    begun = tube.since or case.now
    checks = tuple(row.at for row in charted.block_rows(case, "tube_checks") if row.at >= begun)
    next_due = (checks[-1] if checks else begun) + every if seen.watched else None
    return Watch(
        schedule, seen.watched, begun, "intubation", checks, next_due, every, (), None, tube, case.now, early
    )


def items(case: Case, seen: Exposure, run: Watch) -> tuple[Item, ...]:
    """Return why the airway is watched, when the next check is due and what was missed."""
    found = [judged.why(case, seen, run.start), _next(case, seen, run)]
    if run.missed:
        found.append(_missed(case, run))
    return tuple(found)


def _next(case: Case, seen: Exposure, run: Watch) -> Item:
    key, label = "airway_watch.next_check", "Next airway check"
    if run.ended is not None:
        shown = f"none: the watch ended {say.at(case, run.ended)}"
        return say.fact(key, label, shown, unit="time", as_of=run.ended, sources=(run.schedule.source,))
    if seen.cannot_be_judged:
        return say.fact(key, label, judged.unjudged(seen), unit="time", flag=Flag.NOT_RECORDED)
    if not seen.watched:
        signs = "; airway signs not recorded" if LOOKED_FOR in seen.missing else ""
        why = "comfort care is recorded" if seen.comfort else "nothing recorded asks for the watch"
        shown = f"no time set: {why}{signs}"
        return say.fact(key, label, shown, unit="time", flag=Flag.NOT_RECORDED if signs else Flag.NONE)
    if run.start is None:
        missing = "no airway check is recorded and no start of the watch is written"
        return say.gap(key, label, missing, unit="time", rank=RANK, sources=(run.schedule.source,))
    if run.next_due is None:
        shown = f"the timetable '{run.schedule.name}' is over; the next interval is not recorded"
        return say.fact(key, label, shown, unit="time", flag=Flag.REVIEW, sources=(run.schedule.source,))
    return _due(case, run, run.next_due)


def _due(case: Case, run: Watch, due: datetime) -> Item:
    last = f"last check {say.at(case, run.checks[-1])}" if run.checks else "no check recorded"
    if run.overdue:
        when = f"was due {say.at(case, due)}, overdue by {hours_text(say.ago(case, due))}"
    else:
        when = f"due {say.at(case, due)}"
    what = "tube check, " if run.tube.in_place else ""
    rule = _rule(case, run)
    return say.fact(
        "airway_watch.next_check",
        "Next airway check",
        f"{what}{when}; {last}",
        value=due,
        unit="time",
        as_of=run.checks[-1] if run.checks else None,
        flag=Flag.REVIEW if run.overdue else Flag.NONE,
        rank=RANK if run.overdue else None,
        sources=(_source(case, run),),
        working=Working(
            formula="first time of the timetable that the last check does not cover",
            sum=f"{rule}, counted from {run.start_said}; {last}",
            inputs=(case.input("Now", None, case.clock.day_and_time(case.now)),),
            rule=rule,
        ),
        cautions=("A new sign or any worsening needs a check now, whatever the timetable says.",),
    )


def _rule(case: Case, run: Watch) -> str:
    if run.tube.in_place:
        return "tube check with suction, about hourly"
    begun = f", from {case.clock.day_and_time(run.start)}" if run.start else ""
    return f"{run.schedule.name}: {run.schedule.said}{begun}"


def _source(case: Case, run: Watch) -> Source:
    return case.parameters.source_of("tube.check_interval") if run.tube.in_place else run.schedule.source


def _missed(case: Case, run: Watch) -> Item:
    last = say.at(case, run.missed[-1])
    shown = f"{plural(len(run.missed), 'check')} of the timetable without an entry, the last at {last}"
    return say.fact(
        "airway_watch.missed_checks",
        "Airway checks without an entry",
        shown,
        value=len(run.missed),
        unit="count",
        flag=Flag.REVIEW,
        sources=(run.schedule.source,),
        working=Working(
            formula="times of the timetable without a check before the next time",
            sum=", ".join(say.at(case, slot) for slot in run.missed),
            rule=_rule(case, run),
        ),
    )


def actions(case: Case, seen: Exposure, run: Watch) -> tuple[Action, ...]:
    """Return the airway check as one line of the care plan, or the first look where nothing can be judged."""
    if seen.cannot_be_judged:
        return (judged.first_look(seen),)
    if not run.running or not seen.watched:
        return ()
    if run.tube.in_place:
        text = "Check the tube: mark, ties, cuff pressure, suction and what comes; again after every turn"
        why = "a tube that slips in a swollen airway may not go back"
    else:
        text = "Check the airway: voice, stridor, swelling of mouth and neck, work of breathing, soot; chart each sign"
        why = f"the airway can close within hours ({run.schedule.name}: {run.schedule.said})"
    first = run.next_due or case.now
    return (
        Action(
            key="airway_watch.check",
            area="Airway",
            text=text,
            why=why,
            system=System.AIRWAY,
            first_due=first,
            every=run.every,
            urgency=Urgency.NOW if run.overdue or run.start is None else Urgency.TIMED,
            sources=(_source(case, run),),
            cautions=("Worse or new sign: call for senior airway help at once.",),
        ),
    )
