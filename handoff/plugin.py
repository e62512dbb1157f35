"""The contract of a plugin, and the only core module that a plugin imports.

A plugin is data plus one pure function ``compute(case) -> Findings``: no base class, no
files, no clock, no network. It reads the validated state, its own block of the state file,
its cited parameters and the local policy, and returns items (what the reader should know)
and actions (what the care plan asks for), each with its working.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from datetime import datetime, timedelta

from msgspec import Struct

from handoff.findings import (
    NOT_RECORDED,
    Action,
    Findings,
    Flag,
    FormulaInputError,
    Input,
    Item,
    Part,
    System,
    Urgency,
    Value,
    Working,
    fact,
    gap,
    not_asked,
)
from handoff.later import later
from handoff.parameters import Chosen, Parameter, Parameters, Source
from handoff.state.access import (
    amount,
    child,
    entries,
    number,
    pressure_pair,
    unit_of,
    value_of,
    words,
    yes,
)
from handoff.state.clock import Clock, PartialDate, read_date
from handoff.state.faults import Severity
from handoff.state.nodes import List, Map, Node, Text, line_of
from handoff.state.patient import Age, BurnTime, PatientState, Reading, Row, Weight
from handoff.words import hours as hours_text
from handoff.words import joined, plural, with_unit
from handoff.words import number as number_text

API_VERSION = 1
COMFORT_CARE = "comfort care"


class Case(Struct, frozen=True):
    """What a plugin is given: everything it may know, and nothing it could change."""

    state: PatientState
    block: Node | None
    parameters: Parameters
    now: datetime
    findings: Mapping[str, Findings]

    @property
    def clock(self) -> Clock:
        """The clock of the state file."""
        return self.state.clock

    @property
    def comfort(self) -> bool:
        """Whether comfort is the recorded goal of care, so that prompts to rescue fall silent."""
        return words(child(self.state.patient, "resuscitation", "decision")) == COMFORT_CARE

    def when(self, node: Node | None) -> datetime | None:
        """Return the instant written at ``node``, or None."""
        return self.state.when(node)

    def chosen(self, choice: str) -> Chosen:
        """Return which named rule set the policy chose for ``choice`` (its default otherwise)."""
        return self.parameters.chosen(choice)

    def input(self, label: str, node: Node | None, shown: str = "") -> Input:
        """Return an input that names the line of ``node``; ``shown`` defaults to the text as written."""
        return Input(label, shown or words(node), line_of(node))

    def hours_between(self, earlier: datetime, later: datetime) -> float:
        """Return the hours elapsed, right across a clock change."""
        return (later - earlier) / timedelta(hours=1)


class Problem(Struct, frozen=True):
    """A fault of the state file that no schema can see: the node, its path, what is wrong, what to do.

    ``path`` is counted from the root of the state file. ``Severity.UNUSUAL`` is a warning that
    shows in the document until it is confirmed; ``Severity.FAULT`` stops the work.
    """

    node: Node
    path: tuple[str | int, ...]
    what: str
    cure: str
    severity: Severity = Severity.FAULT


class Plugin(Struct, frozen=True):
    """A plugin: its name (folder, entry point and block of the state file), and what it computes.

    ``package`` is the import name of the folder that holds ``schema.json``, ``parameters.yaml``
    and ``cases.yaml``. ``requires`` names the plugins whose findings it reads. ``owns`` names
    further first words of keys that it reports on (its own name always counts). ``check``
    finds the faults that a schema cannot see; it runs before anything is computed, without findings.
    Both may be given by :func:`later`, so that a command which needs neither does not load them.
    """

    name: str
    title: str
    package: str
    compute: Callable[[Case], Findings]
    requires: tuple[str, ...] = ()
    owns: tuple[str, ...] = ()
    check: Callable[[Case], tuple[Problem, ...]] | None = None
    api_version: int = API_VERSION


__all__ = [
    "API_VERSION",
    "NOT_RECORDED",
    "Action",
    "Age",
    "BurnTime",
    "Case",
    "Chosen",
    "Clock",
    "Findings",
    "Flag",
    "FormulaInputError",
    "Input",
    "Item",
    "List",
    "Map",
    "Node",
    "Parameter",
    "Parameters",
    "Part",
    "PartialDate",
    "PatientState",
    "Plugin",
    "Problem",
    "Reading",
    "Row",
    "Severity",
    "Source",
    "System",
    "Text",
    "Urgency",
    "Value",
    "Weight",
    "Working",
    "amount",
    "child",
    "entries",
    "fact",
    "gap",
    "hours_text",
    "joined",
    "later",
    "line_of",
    "not_asked",
    "number",
    "number_text",
    "plural",
    "pressure_pair",
    "read_date",
    "unit_of",
    "value_of",
    "with_unit",
    "words",
    "yes",
]
