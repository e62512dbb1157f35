"""Everything that the items are made from, read once: patient, plan, what went in, urine and its target."""

from __future__ import annotations

import math
from collections.abc import Collection
from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import BurnTime, Case, Flag, Source, hours_text, joined, number_text, plural

from .bands import Facts, pick
from .orders import Ended, ended_order
from .person import Person, first_hours, read_person, standing_cautions
from .plan import Plan, ordered_plan, policy_plan
from .portions import COLLOID, RESUSCITATION, Given, Portion, read_given
from .rules import NoVolume, Volume, by_rule, lacking_of, published
from .targets import NoTarget, Target, is_pigmented, target
from .urine import Charted, Urine, read_urine
from .weights import Used, urine_weight

HOUR = timedelta(hours=1)
HOURS_A_DAY = 24
COMFORT = "not prompted: the goal of care is comfort"
PCT_PLACES = 1


class Course(Struct, frozen=True):
    """The resuscitation so far, as the items see it."""

    case: Case
    person: Person
    burn: BurnTime | None
    facts: Facts
    plan: Plan | None
    ended: Ended | None
    formula: Volume | NoVolume
    published: tuple[Volume, ...]
    no_plan: str
    start_said: str
    given: Given
    urine: Charted
    pigmented: bool | None
    target: Target | NoTarget
    urine_kg: Used | None
    cautions: tuple[str, ...]

    @property
    def now(self) -> datetime:
        """The moment of the document."""
        return self.case.now

    @property
    def hours(self) -> float | None:
        """The longest time since the burn, in h; None where its time is not recorded."""
        return (self.now - self.burn.earliest) / HOUR if self.burn else None

    @property
    def comfort(self) -> bool:
        """Whether comfort is the goal of care: what was charted is shown, nothing is asked for."""
        return self.person.comfort

    @property
    def counted(self) -> frozenset[str]:
        """The purposes that are set against the plan: resuscitation, and colloid where the plan holds it."""
        volume = self.plan.volume if self.plan else None
        if volume is not None and volume.colloid_ml > 0:
            return frozenset((RESUSCITATION, COLLOID))
        return frozenset((RESUSCITATION,))

    @property
    def period_h(self) -> float:
        """The period of the plan in h."""
        return self.case.parameters.number("plan.period")

    @property
    def no_order(self) -> str:
        """How it is said that no order holds: none was recorded, or the last one was ended."""
        return "no order in force" if self.ended else "no order recorded"

    def flagged(self, flag: Flag) -> Flag:
        """Return ``flag``, or none where comfort is the goal of care."""
        return Flag.NONE if self.comfort else flag

    def missing(self) -> tuple[str, ...]:
        """Return what a figure of the plan lacks: time of the burn, weight, burned area."""
        lacking = () if self.burn else ("time of the burn",)
        return (*lacking, *lacking_of(self.person))

    def unconfirmed_ml(self, purposes: Collection[str] | None = None) -> float:
        """Return what is not confirmed and short enough to be said as a volume, in mL."""
        open_ = (p for p in self._open(purposes) if not self.is_long(p.start))
        return math.fsum(p.ml for p in open_)

    def long_unconfirmed(self, purposes: Collection[str] | None = None) -> str:
        """Return ``not confirmed for 102 days: chart the stop``; empty where nothing is open for so long."""
        since = min((p.start for p in self._open(purposes) if self.is_long(p.start)), default=None)
        return self.unseen_said(since) if since else ""

    def unseen_said(self, seen: datetime) -> str:
        """Return for how long a line was not seen running, and what to do."""
        hours = (self.now - seen) / HOUR
        days = math.floor(hours / HOURS_A_DAY)
        return f"not confirmed for {plural(days, 'day') if days > 1 else hours_text(hours)}: chart the stop"

    def is_long(self, seen: datetime) -> bool:
        """Return whether a line was not seen running for so long that no volume is said."""
        return (self.now - seen) / HOUR > self.number("line.not_confirmed_longest")

    def given_ml(self) -> float:
        """Return what was given, confirmed, from the moment on from which the plan counts, in mL."""
        since = self.plan.since if self.plan else None
        if since is None:
            return self.given.total_ml(self.counted)
        return self.given.between_ml(since, self.now, self.counted, first=True)

    def _open(self, purposes: Collection[str] | None) -> list[Portion]:
        return [
            p
            for p in self.given.portions
            if not p.confirmed and p.ml and (purposes is None or p.purpose in purposes)
        ]

    def source(self, identifier: str) -> Source:
        """Return the source of a parameter."""
        return self.case.parameters.source_of(identifier)

    def number(self, identifier: str) -> float:
        """Return a parameter as a number."""
        return self.case.parameters.number(identifier)

    def time(self, moment: datetime) -> str:
        """Return a time near the moment of the document."""
        return self.case.clock.time(moment, self.now)

    def judged(self, reading: Urine | None) -> str:
        """Return ``below``, ``in`` or ``above`` for a reading; empty where it cannot be judged."""
        if reading is None or reading.ml_h is None or self.urine_kg is None:
            return ""
        if not isinstance(self.target, Target):
            return ""
        return self.target.judged(reading.ml_h / self.urine_kg.kg)

    @property
    def urine_in_target(self) -> bool | None:
        """Whether the last urine is in its target (or above it); None where that cannot be judged."""
        judged = self.judged(self.urine.last)
        return judged != "below" if judged else None


def read_course(case: Case) -> Course:
    """Return the resuscitation so far."""
    person = read_person(case)
    charted = read_urine(case)
    pigmented = is_pigmented(case, charted)
    facts = person.facts(pigmented)
    given = read_given(case)
    plan = ordered_plan(case, person, facts) or policy_plan(case, person, facts)
    starts, start_said = _start(case, facts, person)
    used = urine_weight(case)
    first = first_hours(case, given.first((RESUSCITATION, COLLOID)))
    if any(portion.before_arrival and portion.ml for portion in given.portions):
        first = None  # fluid was running before arrival; when it began is not known
    return Course(
        case=case,
        person=person,
        burn=case.state.burn_time,
        facts=facts,
        plan=plan if plan and (plan.by_order or starts is not False) else None,
        ended=ended_order(case),
        formula=by_rule(case, person, case.chosen("starting_rate").name, facts),
        published=published(case, person, facts),
        no_plan=f"no plan: {start_said}" if starts is False else "",
        start_said=start_said,
        given=given,
        urine=charted,
        pigmented=pigmented,
        target=target(case, used.kg if used else None, facts, pigmented),
        urine_kg=used,
        cautions=standing_cautions(person, first, case.parameters.number("late_start.after")),
    )


def _start(case: Case, facts: Facts, person: Person) -> tuple[bool | None, str]:
    """Whether the named start rule asks for a plan (None: it cannot be told), and how that is said."""
    name = case.chosen("start").name
    bands = case.parameters[f"start.{name}"].value
    picked = pick(bands, facts)
    if picked.band is not None:
        return True, f"start rule {name}: {picked.band['who']}"
    without = [{key: value for key, value in band.items() if not key.endswith("_pct")} for band in bands]
    covered = pick(without, facts)
    if picked.missing:
        return None, f"start rule {name}: missing {joined(list(picked.missing))}"
    if covered.band is None:
        return None, f"start rule {name} has no line for this patient"
    size = f"{number_text(person.pct or 0.0, PCT_PLACES)} %TBSA"
    return False, f"{size} is below the start line of {name} ({_line(covered.band['who'], bands)})"


def _line(who: str, bands: list[dict[str, object]]) -> str:
    band = next(band for band in bands if band["who"] == who)
    if "from_pct" in band:
        return f"{who}, from {band['from_pct']} %"
    return f"{who}, above {band['above_pct']} %"


def burn_moments(course: Course) -> tuple[datetime, ...]:
    """Return the moments that the burn may have happened at: none, one, or the earliest and the latest."""
    if course.burn is None:
        return ()
    both = (course.burn.earliest, course.burn.latest)
    return both[:1] if course.burn.certain else both
