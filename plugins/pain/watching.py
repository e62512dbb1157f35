"""The standing checks of pain and of sedation that the care plan asks for."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import Action, Case, System, Urgency

from .charted import Charted
from .names import OPIOID
from .pumps import pumps
from .sedation import Level, breathing, latest_level


def actions(case: Case, charted: Charted) -> tuple[Action, ...]:
    """Return the routine score, the watch while an opioid runs, and the call where sedation is too deep."""
    level = latest_level(case)
    found = [_routine(case, charted)]
    if opioid_runs(case, charted):
        found.append(_watch(case, level))
    if level is not None and level.urgent and not case.comfort:
        found.append(_call(case, level))
    return tuple(found)


def opioid_runs(case: Case, charted: Charted) -> bool:
    """Return whether an opioid infusion, patch or patient-controlled pump is not charted as stopped."""
    if any(run.open and run.drug.group == OPIOID for run in charted.runs):
        return True
    return any(pump.stopped is None and pump.drug.group == OPIOID for pump in pumps(case))


def _routine(case: Case, charted: Charted) -> Action:
    minutes = case.parameters.number("routine_interval")
    last = charted.scores[-1].at if charted.scores else None
    return Action(
        key="pain.score",
        area="pain",
        text="Score pain at rest and on movement, itch and anxiety; name the scale; compare with the patient's goal",
        why="burn pain at rest, on movement and in procedures differ, and change",
        system=System.PAIN,
        first_due=_next(case, last, minutes),
        every=timedelta(minutes=minutes),
        urgency=Urgency.ONGOING,
        sources=(
            case.parameters.source_of("self_report_first"),
            case.parameters.source_of("routine_interval"),
        ),
    )


def _next(case: Case, last: datetime | None, minutes: float) -> datetime:
    due = last + timedelta(minutes=minutes) if last else case.now
    return max(due, case.now)


def _watch(case: Case, level: Level | None) -> Action:
    minutes = case.parameters.number("opioid_watch")
    breaths = breathing(case)
    both = [level.at if level else None, breaths[0].at if breaths else None]
    known = [moment for moment in both if moment is not None]
    last = min(known) if len(known) == len(both) else None
    return Action(
        key="pain.opioid_watch",
        area="sedation",
        text="Sedation level first, then breaths counted over a minute, SpO2; read the pump and chart it as running",
        why="an opioid runs; rising sedation comes before slow breathing",
        system=System.PAIN,
        first_due=_next(case, last, minutes),
        every=timedelta(minutes=minutes),
        urgency=Urgency.ONGOING,
        sources=(case.parameters.source_of("opioid_watch"),),
    )


def _call(case: Case, level: Level) -> Action:
    return Action(
        key="pain.oversedation",
        area="sedation",
        text=f"{level.called} {level.written}: {level.prompt}",
        why=f"charted {case.clock.time(level.at, case.now)}",
        system=System.PAIN,
        first_due=case.now,
        urgency=Urgency.NOW,
        sources=level.sources,
    )
