"""The contract of a plugin, and the only core module that a plugin imports.

A plugin is data plus one pure function ``compute(case) -> Findings``: no base class, no
files, no clock, no network. It reads the validated state, its own block of the state file,
its cited parameters and the local policy, and returns items (what the reader should know)
and actions (what the care plan asks for), each with its working.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import datetime, timedelta
from enum import StrEnum
from typing import TypeAlias

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

Value: TypeAlias = float | int | str | datetime | None


class Part(StrEnum):
    """The part of the handover in which an item is printed."""

    SITUATION = "situation"
    BACKGROUND = "background"
    ASSESSMENT = "assessment"
    RECOMMENDATION = "recommendation"


class System(StrEnum):
    """The system of the body, or the matter, under which an item is printed; printed in this order."""

    GENERAL = "general"
    AIRWAY = "airway"
    BREATHING = "breathing"
    CIRCULATION = "circulation"
    DISABILITY = "disability"
    EXPOSURE = "temperature"
    BURN = "burn area and depth"
    LIMBS = "limb perfusion"
    FLUID = "fluid and urine"
    PAIN = "pain and sedation"
    WOUND = "wounds and dressings"
    INFECTION = "infection"
    NUTRITION = "nutrition and glucose"
    LINES = "lines, tubes and drains"
    SKIN = "skin, position and movement"
    ELECTRICAL = "electrical and chemical injury"
    PEOPLE = "patient and family"


class Flag(StrEnum):
    """What an item asks of the reader; none of them says that a finding is well."""

    ACTION = "needs action"
    REVIEW = "due for review"
    NONE = "no flag"
    NOT_RECORDED = "not recorded"


class Urgency(StrEnum):
    """How soon an action of the care plan is due."""

    NOW = "now"
    TIMED = "timed"
    SHIFT = "this shift"
    ONGOING = "ongoing"


class FormulaInputError(ValueError):
    """An argument of a formula is not finite or lies outside its range."""


@dataclass(frozen=True, slots=True)
class Input:
    """One number or fact that went into a sum: its name, how it is printed, its line (0: not from the file)."""

    label: str
    shown: str
    line: int = 0


@dataclass(frozen=True, slots=True, kw_only=True)
class Working:
    """How a figure was worked out, for a reader to check."""

    formula: str
    sum: str
    inputs: tuple[Input, ...] = ()
    rule: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Item:
    """One thing that the reader should know.

    ``value`` is not rounded and is in ``unit``; ``shown`` is how it is printed, with its unit.
    ``repeats`` marks an item that only repeats what was charted and so needs no source.
    ``rank`` puts an item on page one: the lower, the sooner it can kill; None keeps it off.
    ``detail`` keeps an item out of the body of the handover and in its appendix.
    """

    key: str
    label: str
    part: Part
    system: System
    value: Value = None
    unit: str = ""
    shown: str = ""
    as_of: datetime | None = None
    flag: Flag = Flag.NONE
    working: Working | None = None
    sources: tuple[Source, ...] = ()
    cautions: tuple[str, ...] = ()
    repeats: bool = False
    rank: int | None = None
    detail: bool = False
    line: int = 0


@dataclass(frozen=True, slots=True, kw_only=True)
class Action:
    """One line of the care plan: what to do, why, when first and how often.

    ``every`` and ``first_due`` give the boxes of the shift; an action with neither is done once.
    """

    key: str
    area: str
    text: str
    why: str
    system: System
    first_due: datetime | None = None
    every: timedelta | None = None
    urgency: Urgency = Urgency.SHIFT
    sources: tuple[Source, ...] = ()
    cautions: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Findings:
    """What one plugin returns; ``values`` is for the plugins that require it, by any key they agree on."""

    items: tuple[Item, ...] = ()
    actions: tuple[Action, ...] = ()
    values: Mapping[str, object] = field(default_factory=dict)

    def item(self, key: str) -> Item | None:
        """Return the item of that key, or None."""
        return next((item for item in self.items if item.key == key), None)

    def number(self, key: str) -> float | None:
        """Return the value of the item of that key as a number, or None."""
        item = self.item(key)
        value = item.value if item else None
        return float(value) if isinstance(value, (int, float)) else None


@dataclass(frozen=True, slots=True)
class Case:
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


@dataclass(frozen=True, slots=True)
class Problem:
    """A fault of the state file that no schema can see: the node, its path, what is wrong, what to do.

    ``path`` is counted from the root of the state file. ``Severity.UNUSUAL`` is a warning that
    shows in the document until it is confirmed; ``Severity.FAULT`` stops the work.
    """

    node: Node
    path: tuple[str | int, ...]
    what: str
    cure: str
    severity: Severity = Severity.FAULT


@dataclass(frozen=True, slots=True)
class Plugin:
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
    "Weight",
    "Working",
    "amount",
    "child",
    "entries",
    "hours_text",
    "joined",
    "later",
    "line_of",
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
