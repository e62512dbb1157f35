"""When each dose is due to be looked at again, by its route and one named set of intervals."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Part,
    System,
    Urgency,
    Working,
    line_of,
    number_text,
    with_unit,
)

from .charted import Charted
from .given import DOSE, HOME, Given

KEY = "pain.reassess_due"
LABEL = "Pain to be reassessed"
ANALGESICS = ("opioid", "paracetamol", "anti-inflammatory", "other analgesic")
FALLBACKS = ("reassess.intranasal", "reassess.other_routes")
MODIFIED = "modified release"
ROUTINE = "routine_interval"


class Interval(Struct, frozen=True):
    """Minutes from a dose to its reassessment, the latest minutes, and the parameter they stand in."""

    minutes: float
    latest: float
    identifier: str


class Due(Struct, frozen=True):
    """A dose that has not been reassessed, and when it is or was due."""

    dose: Given
    interval: Interval

    @property
    def at(self) -> datetime:
        """When the reassessment falls due."""
        return self.dose.latest + timedelta(minutes=self.interval.minutes)

    @property
    def overdue_from(self) -> datetime:
        """When the window of the named set closes."""
        return self.dose.latest + timedelta(minutes=self.interval.latest)


def interval(case: Case, route: str, release: str = "") -> Interval | None:
    """Return the interval after a dose by ``route``; None where no set has one."""
    wanted = MODIFIED if release == "modified" else route
    for identifier in (f"reassess.{case.chosen('reassess').name}", *FALLBACKS):
        pair = case.parameters.table(identifier).get(wanted)
        if pair is not None:
            return Interval(float(pair[0]), float(pair[1]), identifier)
    return None


def outstanding(case: Case, charted: Charted) -> tuple[Due, ...]:
    """Return every dose without a later pain score that counts for it, the one due first at the front."""
    times = [score.at for score in charted.scores]
    found = []
    for dose in charted.given:
        after = interval(case, dose.route, dose.release)
        # What was taken at home was taken for something else, or before anyone could look again.
        if dose.how != DOSE or dose.place == HOME or dose.drug.group not in ANALGESICS or after is None:
            continue
        counts = dose.latest + timedelta(minutes=_counts_from(case, dose.route, after))
        if not any(time >= counts for time in times):
            found.append(Due(dose, after))
    return tuple(sorted(found, key=lambda due: (due.at, due.dose.latest, due.dose.drug.name)))


def _counts_from(case: Case, route: str, after: Interval) -> float:
    for identifier in ("reassess.counts_from", "reassess.counts_from_oral"):
        if route in (table := case.parameters.table(identifier)):
            return min(float(table[route]), after.minutes)
    return after.minutes


def item(case: Case, charted: Charted) -> Item:
    """Return when pain is next due to be reassessed: after the earliest dose not yet reassessed, else by routine."""
    due = outstanding(case, charted)
    if due:
        return _after_dose(case, due)
    if charted.scores:
        return _routine(case, charted)
    return Item(
        key=KEY, label=LABEL, part=Part.RECOMMENDATION, system=System.PAIN, unit="time",
        shown="not recorded", flag=Flag.NOT_RECORDED, repeats=True,
    )  # fmt: skip


def _after_dose(case: Case, due: tuple[Due, ...]) -> Item:
    first = due[0]
    clock, now = case.clock, case.now
    at = clock.time(first.at, now)
    dose = f"{first.dose.drug.name} {first.dose.route} at {clock.time(first.dose.latest, now)}"
    minutes = number_text(first.interval.minutes)
    judged = decides(case, first.interval)
    state = "overdue since" if judged and now > first.overdue_from else "due"
    shown = f"{state} {at}, {minutes} min after {dose}"
    if not judged:
        shown += "; this interval is from memory: use your unit's"
    more = len({other.dose.latest for other in due[1:]} - {first.dose.latest})
    if more:
        shown += f"; {more} later {'dose' if more == 1 else 'doses'} not reassessed"
    return Item(
        key=KEY,
        label=LABEL,
        part=Part.RECOMMENDATION,
        system=System.PAIN,
        value=first.at,
        unit="time",
        shown=shown,
        as_of=first.dose.latest,
        flag=Flag.REVIEW if judged and now >= first.at else Flag.NONE,
        working=Working(
            formula="time of the dose plus the interval of its route",
            sum=f"{clock.time(first.dose.latest, now)} + {minutes} min = {at}",
            inputs=(case.input(f"{first.dose.drug.name} {first.dose.route}", first.dose.node, dose),),
            rule=_rule(case),
        ),
        sources=(case.parameters.source_of(first.interval.identifier),),
        line=line_of(first.dose.node),
    )


def decides(case: Case, after: Interval) -> bool:
    """Return whether an interval may flag: a published one, or one from memory that local policy took as its own."""
    taken = case.chosen("other_routes")
    by_policy = taken.by_policy and taken.name == "judged"
    return by_policy or case.parameters[after.identifier].kind != "from memory"


def unwatched_for_long(case: Case, due: Due) -> bool:
    """Return whether a dose is past its interval; one from memory counts from the longest published interval.

    A route whose interval from memory is longer than every published one (a patch) never counts by itself.
    """
    if decides(case, due.interval):
        return case.now >= due.at
    table = case.parameters.table(f"reassess.{case.chosen('reassess').name}")
    longest = max(float(pair[1]) for pair in table.values())
    passed = case.now >= due.dose.latest + timedelta(minutes=longest)
    return passed and due.interval.minutes <= longest


def _routine(case: Case, charted: Charted) -> Item:
    last = charted.scores[-1].at
    minutes = case.parameters.number(ROUTINE)
    at = last + timedelta(minutes=minutes)
    clock, now = case.clock, case.now
    shown = f"next routine score {clock.time(at, now)}; last score {clock.time(last, now)}"
    if now > at:
        shown = f"not reassessed since {clock.time(last, now)}; routine score was due {clock.time(at, now)}"
    return Item(
        key=KEY,
        label=LABEL,
        part=Part.RECOMMENDATION,
        system=System.PAIN,
        value=at,
        unit="time",
        shown=shown,
        as_of=last,
        working=Working(
            formula="last score plus the routine interval",
            sum=f"{clock.time(last, now)} + {with_unit(minutes, 'min')} = {clock.time(at, now)}",
            inputs=(case.input("last score", charted.scores[-1].node, charted.scores[-1].shown()),),
            rule=_rule(case),
        ),
        sources=(case.parameters.source_of(ROUTINE),),
    )


def _rule(case: Case) -> str:
    chosen = case.chosen("reassess")
    return f"reassess: {chosen.name} ({'chosen by the local policy' if chosen.by_policy else 'default'})"


def actions(case: Case, charted: Charted) -> tuple[Action, ...]:
    """Return the reassessment that is due after a dose."""
    due = outstanding(case, charted)
    if not due:
        return ()
    first = due[0]
    return (
        Action(
            key="pain.reassess",
            area="pain",
            text="Score pain at rest and on movement, with sedation and breathing; name the scale",
            why=f"{first.dose.drug.name} {first.dose.route} given {case.clock.time(first.dose.latest, case.now)}",
            system=System.PAIN,
            first_due=first.at,
            urgency=Urgency.NOW if first.at <= case.now and decides(case, first.interval) else Urgency.TIMED,
            sources=(case.parameters.source_of(first.interval.identifier),),
        ),
    )
