"""What a plugin returns: items (what the reader should know) and actions (what the care plan asks for)."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from datetime import datetime, timedelta
from enum import StrEnum
from typing import TypeAlias

from msgspec import Struct, field
from msgspec.structs import replace

from handoff.parameters import Source

NOT_RECORDED = "not recorded"

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


class Input(Struct, frozen=True):
    """One number or fact that went into a sum: its name, how it is printed, its line (0: not from the file)."""

    label: str
    shown: str
    line: int = 0


class Working(Struct, frozen=True, kw_only=True):
    """How a figure was worked out, for a reader to check."""

    formula: str
    sum: str
    inputs: tuple[Input, ...] = ()
    rule: str = ""


class Item(Struct, frozen=True, kw_only=True):
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


class Action(Struct, frozen=True, kw_only=True):
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


class Findings(Struct, frozen=True):
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


def fact(
    key: str,
    label: str,
    shown: str,
    *,
    system: System,
    value: Value = None,
    unit: str = "",
    part: Part = Part.ASSESSMENT,
    as_of: datetime | None = None,
    flag: Flag = Flag.NONE,
    working: Working | None = None,
    sources: Iterable[Source] = (),
    cautions: Sequence[str] = (),
    rank: int | None = None,
    detail: bool = False,
    line: int = 0,
) -> Item:
    """Return an item of the assessment; each source once, and without any it only repeats what was charted."""
    cited = tuple(dict.fromkeys(sources))
    return Item(
        key=key,
        label=label,
        part=part,
        system=system,
        value=value,
        unit=unit,
        shown=shown,
        as_of=as_of,
        flag=flag,
        working=working,
        sources=cited,
        cautions=tuple(cautions),
        repeats=not cited,
        rank=rank,
        detail=detail,
        line=line,
    )


def gap(
    key: str,
    label: str,
    missing: str = "",
    *,
    system: System,
    unit: str = "",
    part: Part = Part.ASSESSMENT,
    sources: Iterable[Source] = (),
    cautions: Sequence[str] = (),
    rank: int | None = None,
) -> Item:
    """Return an item that is not there: not recorded, or not computed for want of ``missing``."""
    return fact(
        key,
        label,
        f"not computed: {missing}" if missing else NOT_RECORDED,
        system=system,
        unit=unit,
        part=part,
        flag=Flag.NOT_RECORDED,
        sources=sources,
        cautions=cautions,
        rank=rank,
    )


COMFORT_ASKS = "not asked for: the goal of care is comfort"


def not_asked(item: Item) -> Item:
    """Return an item that is not there as no gap: where the goal is comfort it is not asked for."""
    if item.flag is not Flag.NOT_RECORDED:
        return item
    shown = (
        f"{NOT_RECORDED}; {COMFORT_ASKS}" if item.shown == NOT_RECORDED else f"{item.shown}; {COMFORT_ASKS}"
    )
    return replace(item, flag=Flag.NONE, shown=shown, rank=None, detail=True)
