"""The next painful procedure and what is prescribed before it, with the lead time of each drug and route."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Map, child, entries, number_text, words, yes

from .charted import Charted
from .given import DAY
from .names import OPIOID, Drug, drug_of, factor_heading, route_of


class Lead(Struct, frozen=True):
    """Minutes before a procedure at which a drug by a route is given, from the earliest to the latest."""

    earliest: float
    latest: float
    identifier: str


class Timed(Struct, frozen=True):
    """When a premedication is to be given: from, by, and the lead time that says so."""

    give_from: datetime
    give_by: datetime
    lead: Lead


class Premedication(Struct, frozen=True):
    """One drug prescribed before a procedure; ``timed`` is None where no table has its lead time."""

    drug: Drug
    route: str
    dose: str
    timed: Timed | None
    given_at: datetime | None
    node: Map

    def prescribed(self) -> str:
        """Return drug, dose and route as prescribed."""
        return " ".join(part for part in (self.drug.name, self.dose, self.route) if part)

    def when(self, case: Case) -> str:
        """Return what is prescribed and when it is to be given."""
        if self.timed is None:
            return f"{self.prescribed()}: no lead time in the tables"
        by = case.clock.time(self.timed.give_by, case.now)
        if self.timed.give_from != self.timed.give_by:
            first = case.clock.time(self.timed.give_from, case.now)
            return f"{self.prescribed()} between {first} and {by}"
        return f"{self.prescribed()} by {by} ({number_text(self.timed.lead.latest)} min before)"


def next_procedure(case: Case) -> tuple[datetime, Map] | None:
    """Return the first procedure that is not done and not before now; None where none is charted."""
    found = [(at, entry) for at, entry in _procedures(case) if at >= case.now and not yes(entry.get("done"))]
    return min(found, key=lambda pair: (pair[0], words(pair[1].get("what"))), default=None)


def unclosed_procedures(case: Case) -> tuple[tuple[datetime, Map], ...]:
    """Return the procedures whose time has passed and that are not charted as done or not done."""
    found = [(at, entry) for at, entry in _procedures(case) if at < case.now and entry.get("done") is None]
    return tuple(sorted(found, key=lambda pair: (pair[0], words(pair[1].get("what")))))


def _procedures(case: Case) -> tuple[tuple[datetime, Map], ...]:
    return tuple(
        (at, entry)
        for entry in entries(child(case.block, "procedures"))
        if (at := case.when(entry.get("at"))) is not None
    )


def lead_time(case: Case, drug: Drug, route: str) -> Lead | None:
    """Return how long before a procedure ``drug`` by ``route`` is given; None where no table has it."""
    identifiers = [f"lead.{route} {drug.name}"]
    if factor_heading(case, route) == "oral":
        identifiers.append(f"lead.oral {drug.name}")
        if drug.group == OPIOID:
            identifiers.append(f"lead.oral.{case.chosen('oral_lead').name}")
    for identifier in identifiers:
        if identifier in case.parameters:
            earliest, latest = case.parameters[identifier].value
            return Lead(float(earliest), float(latest), identifier)
    return None


def premedications(case: Case, charted: Charted, at: datetime, procedure: Map) -> tuple[Premedication, ...]:
    """Return what is prescribed before a procedure, the one to be given first at the front."""
    found = []
    for entry in entries(procedure.get("premedication")):
        drug, route = drug_of(case, entry.get("drug")), route_of(case, entry.get("route"))
        if drug is None:
            continue
        lead = lead_time(case, drug, route)
        timed = None
        if lead is not None:
            give_from = at - timedelta(minutes=lead.earliest)
            timed = Timed(give_from, at - timedelta(minutes=lead.latest), lead)
        given_at = _given(case, charted, drug, route, at)
        found.append(Premedication(drug, route, words(entry.get("dose")), timed, given_at, entry))
    return tuple(
        sorted(found, key=lambda one: (one.timed.give_by if one.timed else at, one.drug.name, one.route))
    )


def _given(case: Case, charted: Charted, drug: Drug, route: str, at: datetime) -> datetime | None:
    """When the last dose charted as given for a procedure went in, after the one before and on the way to this one."""
    before = [earlier for earlier, _ in _procedures(case) if earlier < at]
    since = max([at - DAY, *before])
    times = [
        one.latest
        for one in charted.given
        if one.drug == drug and one.route == route and one.purpose == "procedure" and since < one.latest <= at
    ]
    return max(times, default=None)
