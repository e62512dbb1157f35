"""The validated, read-only state of one patient, with the readings every plugin needs."""

from __future__ import annotations

import hashlib
import json
from datetime import UTC, date, datetime
from functools import cached_property

from msgspec import Struct

from handoff.state.access import amount, child, entries, instant, unit_of, without_struck, words
from handoff.state.clock import Clock, read_date
from handoff.state.nodes import List, Map, Node, plain
from handoff.words import plural

NOT_CLINICAL = ("collected",)
"""Keys that hold what the tool itself brought back; they do not change the digest."""

KNOWN = ("measured", "from records", "reported by patient", "reported by family", "estimated")
"""How a weight can be known, best first."""


class Age(Struct, frozen=True):
    """Age at a moment: completed years, months and days.

    An estimated age has months and days only as far as it was written in them.
    """

    years: int
    months: int | None
    days: int | None
    estimated: bool

    def shown(self) -> str:
        """Return the age as said at the bedside, in years, months or days."""
        prefix = "about " if self.estimated else ""
        if self.months is not None and self.years < 2:
            if self.months < 1 and self.days is not None:
                return prefix + plural(self.days, "day")
            return prefix + plural(self.months, "month")
        return prefix + plural(self.years, "year")


class Weight(Struct, frozen=True):
    """One recorded weight: value in kg, which weight it is, how it was known, and where it stands."""

    kg: float
    kind: str
    known: str
    at: datetime | None
    node: Map

    @property
    def rank(self) -> int:
        """How well it is known; 0 is best."""
        return KNOWN.index(self.known) if self.known in KNOWN else len(KNOWN)


class BurnTime(Struct, frozen=True):
    """When the burn happened; earliest and latest differ where the time is uncertain."""

    earliest: datetime
    latest: datetime
    node: Node

    @property
    def certain(self) -> bool:
        """Whether one moment is known."""
        return self.earliest == self.latest


class Row(Struct, frozen=True):
    """One charted row of observations or results: its moment and what was written."""

    at: datetime
    entry: Map

    @property
    def line(self) -> int:
        """The line of the file, from 1."""
        return self.entry.line


class Reading(Struct, frozen=True):
    """One charted value of a series: its moment, the node, and the row it came from."""

    at: datetime
    node: Node
    row: Map


class PatientState:
    """What one state file says, validated; reading it never fails and nothing changes it."""

    def __init__(self, root: Map, file: str) -> None:
        self.written = root
        """Everything as it stands in the file, struck-out values too."""
        kept = without_struck(root)
        self.root = kept if isinstance(kept, Map) else root
        self.file = file
        self.clock = Clock(words(root.get("clock")))

    @cached_property
    def digest(self) -> str:
        """SHA-256 of the clinical content; comments, layout and collected ticks do not count."""
        content = {key: plain(value) for key, value in self.written.items() if key not in NOT_CLINICAL}
        text = json.dumps(content, sort_keys=True, ensure_ascii=False, separators=(",", ":"))
        return hashlib.sha256(text.encode()).hexdigest()

    def when(self, node: Node | None) -> datetime | None:
        """Return the instant written at ``node``, or None."""
        return instant(node, self.clock)

    @property
    def patient(self) -> Map:
        """The ``patient`` block; empty where there is none."""
        block = self.root.get("patient")
        return block if isinstance(block, Map) else Map.at()

    @property
    def injury(self) -> Map:
        """The ``injury`` block; empty where there is none."""
        block = self.root.get("injury")
        return block if isinstance(block, Map) else Map.at()

    @cached_property
    def burn_time(self) -> BurnTime | None:
        """The time of the burn, or None when it is not recorded."""
        node = self.injury.get("at")
        if isinstance(node, Map):
            earliest, latest = self.when(node.get("earliest")), self.when(node.get("latest"))
            return BurnTime(earliest, latest, node) if earliest and latest else None
        moment = self.when(node)
        return BurnTime(moment, moment, node) if moment and node is not None else None

    @cached_property
    def weights(self) -> tuple[Weight, ...]:
        """Every weight on the file in kg, oldest first; an undated weight counts as oldest."""
        found = []
        for entry in entries(self.patient.get("weights")):
            kg = amount(entry.get("value"), "kg")
            if kg is not None:
                at = self.when(entry.get("at"))
                found.append(Weight(kg, words(entry.get("kind")), words(entry.get("known")), at, entry))
        oldest = datetime.min.replace(tzinfo=UTC)
        return tuple(sorted(found, key=lambda weight: weight.at or oldest))

    def weight(self, *kinds: str) -> Weight | None:
        """Return the weight in use of the first of ``kinds`` that is on the file, or None.

        Of one kind the best known is used (measured, from records, reported, estimated), and
        of those the latest: a later guess does not replace what was measured.
        """
        for kind in kinds:
            matching = [weight for weight in self.weights if weight.kind == kind]
            if matching:
                best = min(weight.rank for weight in matching)
                return [weight for weight in matching if weight.rank == best][-1]
        return None

    def age_at(self, moment: datetime) -> Age | None:
        """Return the age at ``moment``, from the birth date or the estimated age; None if neither."""
        born = words(self.patient.get("born"))
        if born:
            return _age(read_date(born).earliest(), self.clock.local(moment).date())
        node = self.patient.get("estimated_age")
        months = amount(node, "months", "age") if node is not None else None
        if months is None:
            return None
        unit = unit_of(node)
        days = amount(node, "d", "age") if unit == "d" or unit.startswith("week") else None
        exact = None if unit.startswith("year") else int(months)
        return Age(int(months // 12), exact, None if days is None else round(days), estimated=True)

    @cached_property
    def rows(self) -> tuple[Row, ...]:
        """Every observation row, in time order, struck-out rows left out."""
        found: list[Row] = []
        observations = self.root.get("observations")
        if isinstance(observations, Map):
            for day, times in observations.items():
                if not isinstance(times, Map):
                    continue
                for time, written in times.items():
                    at = self.clock.read_time(day, time)
                    found += [Row(at, entry) for entry in entries(written)]
        return tuple(sorted(found, key=lambda row: row.at))

    @cached_property
    def results(self) -> tuple[Row, ...]:
        """Every row of laboratory results, in time order, struck-out rows left out."""
        return self.dated(self.root.get("results"))

    def dated(self, node: Node | None, key: str = "at") -> tuple[Row, ...]:
        """Return the entries of a list that carry a time at ``key``, in time order."""
        rows = []
        for entry in entries(node):
            at = self.when(entry.get(key))
            if at is not None:
                rows.append(Row(at, entry))
        return tuple(sorted(rows, key=lambda row: row.at))

    def series(self, name: str) -> tuple[Reading, ...]:
        """Return every charted value of the observation ``name``, in time order."""
        return tuple(
            Reading(row.at, value, row.entry)
            for row in self.rows
            if (value := row.entry.get(name)) is not None
        )

    def result_series(self, name: str) -> tuple[Reading, ...]:
        """Return every value of the laboratory result ``name``, in time order."""
        return tuple(
            Reading(row.at, value, row.entry)
            for row in self.results
            if (value := row.entry.get(name)) is not None
        )

    def events(self, what: str) -> tuple[Row, ...]:
        """Return the events whose ``what`` is ``what``, in time order."""
        return tuple(
            row for row in self.dated(self.root.get("events")) if words(row.entry.get("what")) == what
        )

    @cached_property
    def handover(self) -> Map:
        """The latest entry of ``handovers``; empty where there is none."""
        rows = self.dated(self.root.get("handovers"))
        return rows[-1].entry if rows else Map.at()

    @property
    def name(self) -> str:
        """The patient's name as written; ``unknown`` for an unidentified patient."""
        return words(self.patient.get("name"))

    @property
    def identifiers(self) -> tuple[tuple[str, str], ...]:
        """The identifiers as (kind, number), in written order."""
        node = self.patient.get("identifiers")
        return (
            tuple((str(kind), words(value)) for kind, value in node.items()) if isinstance(node, Map) else ()
        )

    def at_path(self, *names: str) -> Node | None:
        """Return what stands at ``names`` below the root, or None."""
        return child(self.root, *names)

    def texts(self, node: Node | None) -> tuple[str, ...]:
        """Return the texts of a list of plain texts, in written order."""
        if isinstance(node, List):
            return tuple(words(entry) for entry in node if words(entry))
        return (words(node),) if words(node) else ()


def _age(born: date, on: date) -> Age:
    months = (on.year - born.year) * 12 + on.month - born.month - (on.day < born.day)
    return Age(months // 12, months, (on - born).days, estimated=False)
