"""Everything charted about analgesia, read once, and what of it falls in the last 24 h."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Input, Node, child, entries, line_of, number_text, with_unit

from .formula import HOURS_A_DAY, MCG_IN_MG
from .given import DOSE, HOME, PUMP, Given, given
from .infusions import Run, runs
from .names import Drug
from .scores import Score, pain_scores

CHARTS_OF_DOSES = ("doses", "infusions", "patient_controlled", "blocks")


class Portion(Struct, frozen=True):
    """What one dose, reading or run gave in the last 24 h; ``mg`` is None where ``missing`` says why.

    ``certain`` marks a single dose whose time is known to the minute."""

    drug: Drug
    route: str
    mg: float | None
    missing: str
    said: str
    at: datetime
    node: Node
    certain: bool = False

    def input(self) -> Input:
        """Return it as an input of a sum."""
        return Input(f"{self.drug.name} {self.route}", self.said, line_of(self.node))


class Charted(Struct, frozen=True):
    """Doses, runs of infusions and scores of one patient; ``any_doses`` is False where the last day is not charted."""

    given: tuple[Given, ...]
    runs: tuple[Run, ...]
    scores: tuple[Score, ...]
    portions: tuple[Portion, ...]
    any_doses: bool
    hours: float

    def of(self, group: str) -> tuple[Portion, ...]:
        """Return what was given of one group of drugs in the last 24 h."""
        return tuple(portion for portion in self.portions if portion.drug.group == group)

    def unconfirmed(self, now: datetime) -> tuple[Run, ...]:
        """Return the infusions of which nothing says that they ran, or stopped, since they were last seen."""
        return tuple(run for run in self.runs if run.open and run.end < now)


def read(case: Case) -> Charted:
    """Return everything charted about analgesia."""
    doses, ran = given(case), runs(case)
    return Charted(
        given=doses,
        runs=ran,
        scores=pain_scores(case),
        portions=_portions(case, doses, ran),
        any_doses=_is_charted(case, doses, ran),
        hours=_hours(case, doses, ran),
    )


def _is_charted(case: Case, doses: tuple[Given, ...], ran: tuple[Run, ...]) -> bool:
    """Whether the chart speaks of the last day: nothing charted in it is not nothing given."""
    if not any(entries(child(case.block, name)) for name in CHARTS_OF_DOSES):
        return False
    in_day = any(case.hours_between(row.at, case.now) < HOURS_A_DAY for row in case.state.rows)
    dosed = any(one.in_day_to(case.now) for one in doses)
    begun = any(case.hours_between(run.start, case.now) < HOURS_A_DAY for run in ran)
    return in_day or dosed or begun or any(run.hours_in_day_to(case.now) > 0 for run in ran)


def mg_text(mg: float) -> str:
    """Return an amount as it is printed: under 1 mg in mcg; what is above 0 is never printed as 0."""
    if 0 < mg < 1:
        said = with_unit(mg * MCG_IN_MG, "mcg", 1)
        return "under 0.1 mcg" if said == "0 mcg" else said
    return with_unit(mg, "mg", 2)


def total_text(mg: float, places: int = 1) -> str:
    """Return a total as it is printed in mg; one above 0 that would be printed as 0 is said in mcg."""
    said = with_unit(mg, "mg", places)
    return mg_text(mg) if mg > 0 and said == "0 mg" else said


def _portions(case: Case, doses: tuple[Given, ...], ran: tuple[Run, ...]) -> tuple[Portion, ...]:
    found = []
    for one in doses:
        if one.in_day_to(case.now):
            certain = one.how == DOSE and one.earliest == one.latest
            found.append(_of_dose(case, one, certain))
    for run in ran:
        hours = run.hours_in_day_to(case.now)
        if hours > 0:
            said = f"{run.written} for {number_text(hours, 2)} h"
            if run.weight:
                said += f" at {run.weight}"
            mg = run.mg_in_day_to(case.now)
            found.append(Portion(run.drug, run.route, mg, run.missing, said, run.start, run.node))
    return tuple(sorted(found, key=lambda one: (one.at, one.drug.name, one.route, one.said)))


def _of_dose(case: Case, one: Given, certain: bool) -> Portion:
    said = _said(case, one)
    return Portion(one.drug, one.route, one.mg, one.missing, said, one.latest, one.node, certain)


def _said(case: Case, one: Given) -> str:
    product = f" in {one.product}" if one.product else ""
    amount = one.written if one.mg is not None else one.written.replace("not known", "dose") or "dose"
    said = f"{amount}{product} at {case.clock.time(one.latest, case.now)}"
    if one.how == PUMP:
        start = case.clock.time(one.earliest, case.now)
        said = f"{one.written} by pump from {start} to {case.clock.time(one.latest, case.now)}"
    elif one.earliest != one.latest:
        said = f"{amount}{product} between {case.clock.time(one.earliest, case.now)} and "
        said += case.clock.time(one.latest, case.now)
    return said if one.place == "ward" else f"{said}, {one.place}"


def _hours(case: Case, doses: tuple[Given, ...], ran: tuple[Run, ...]) -> float:
    moments = [one.earliest for one in doses if one.place != HOME] + [run.start for run in ran]
    # What was taken at home is told afterwards: it does not lengthen the time that the chart covers.
    moments += [row.at for row in case.state.rows]
    first = min(moments, default=case.now)
    return min(case.hours_between(first, case.now), HOURS_A_DAY) if first < case.now else 0.0
