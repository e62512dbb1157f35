"""What earns a place on the first two pages, and how it is said there in few words; all of it stands in full later."""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.sections import FLAG_WORDS, sentence, shown
from handoff.plugin import Flag, Item, Part, System

MORE = " [+]"
"""Ends a text that was shortened; the legend says where it stands in full."""

LETTERS = {Part.SITUATION: 280, Part.BACKGROUND: 66, Part.ASSESSMENT: 48, Part.RECOMMENDATION: 60}
"""How many letters a value may have before it is shortened; the nurse's own account is hardly ever."""

FLAGGED_LETTERS = 72
"""The same for a value that carries a flag."""

TREND_LETTERS = 96
"""The same for a value that says what it was before."""

LABEL_LETTERS = 36
"""A name longer than this goes without what stands in brackets at its end."""

BEFORE = "; before: "
"""How items say what a value was before."""

LEADING_FIGURES = (
    "area.counted",
    "area.full_thickness",
    "fluid.balance",
    "fluid.due_by_now",
    "fluid.given",
    "fluid.rate_now",
    "pain.opioid_equivalent_24h",
    "pain.paracetamol_24h",
)
"""Worked-out figures that a receiver asks for even where they carry no flag."""

CAUTIONED = ("fluid.rate_now",)
"""Figures that never stand without their cautions: a rate must say where its formula may be low."""

NEAR = 0.6
"""A cut is made at the end of a clause where one ends in the last part of what fits."""

_ENDS_CLAUSE = re.compile(r"(?:[;,:?]|[^A-Z]\.)$")
"""How a clause ends; the point of an initial (E. Marsh) ends none."""


_HANGING = re.compile(r"(?: (?!not?\b)[a-z]{1,3})+$")
"""Short words that lead nowhere where a line was cut (``write mL and the``); a ``no`` or ``not`` stays."""

_WITH_UNIT = re.compile(r"[-+\d.,/]+ (?P<unit>[^\s\d]\S*)")


class Said(Struct, frozen=True):
    """One value in a line of values: what, the value with its unit, its time, its flag."""

    what: str
    time: str
    value: str
    flag: str
    is_action: bool


class Brief(Struct, frozen=True):
    """One part of the handover in few lines, and the names of what is not recorded in it."""

    said: tuple[Said, ...]
    missing: str


class BriefSystem(Struct, frozen=True):
    """One system of the assessment in few lines."""

    title: str
    said: tuple[Said, ...]
    page_one: str
    cautions: str


def brief(part: Part, assessment: Assessment, placed: frozenset[str]) -> Brief:
    """Return a part in few lines; ``placed`` are the keys of items that stand in a table of their own."""
    items = [item for item in assessment.items if item.part is part]
    return Brief(_said(items, assessment, placed), missing_names(items))


def brief_systems(
    assessment: Assessment, placed: frozenset[str], on_page_one: frozenset[str]
) -> tuple[BriefSystem, ...]:
    """Return the assessment in few lines, system by system.

    Args:
        assessment: What is known.
        placed: Keys of items that stand in a table of their own.
        on_page_one: Keys of items whose value page one holds; they are only named here.
    """
    found = []
    for system in System:
        items = [item for item in assessment.items if _is_assessed(item, system)]
        said = _said(items, assessment, placed | on_page_one)
        known = "; ".join(dict.fromkeys(named(item) for item in items if item.key in on_page_one))
        if said or known:
            cautions = " ".join(
                sentence(caution) for item in items if item.key in CAUTIONED for caution in item.cautions
            )
            found.append(BriefSystem(sentence(system.value), said, known, cautions))
    return tuple(found)


def earns(item: Item) -> bool:
    """Return whether an item stands on the first two pages.

    What was charted, what carries a flag and the leading figures do; what was only worked out waits,
    and advice that carries no flag stands in the shift as the task that follows from it.
    """
    if item.flag is Flag.NOT_RECORDED or item.detail:
        return False
    flagged = item.flag in (Flag.ACTION, Flag.REVIEW)
    told = item.part in (Part.SITUATION, Part.BACKGROUND)
    return flagged or told or item.repeats or item.key in LEADING_FIGURES


def named(item: Item) -> str:
    """Return the name of an item; a long one without what stands in brackets at its end."""
    label = sentence(item.label)
    return label if len(label) <= LABEL_LETTERS else label.partition(" (")[0]


def shortened(text: str, letters: int) -> str:
    """Return ``text`` in one line, cut to about ``letters``: at the end of a clause where one is near.

    No bracket is cut open. A text that was cut ends with ``[+]``; one that is hardly longer is left whole.
    """
    line = " ".join(text.split())
    if len(line) <= letters + len(MORE):
        return line
    whole = [match.start() for match in re.finditer(r"\s", line) if _is_whole(line[: match.start()])]
    fitting = [end for end in whole if end <= letters] or [letters]
    clauses = [end for end in fitting if _ENDS_CLAUSE.search(line[:end]) and end >= NEAR * letters]
    return _HANGING.sub("", line[: (clauses or fitting)[-1]]).rstrip(" ;,:.") + MORE


def missing_names(items: Sequence[Item]) -> str:
    """Return the names of what is not recorded among ``items``; says so where nothing is missing."""
    if not items:
        return "no entry was worked out for this section; take it from the bedside"
    names = dict.fromkeys(
        shortened(named(item), LABEL_LETTERS) for item in items if item.flag is Flag.NOT_RECORDED
    )
    return "; ".join(names)


def _is_assessed(item: Item, system: System) -> bool:
    return item.part is Part.ASSESSMENT and item.system is system


def _said(items: Iterable[Item], assessment: Assessment, placed: frozenset[str]) -> tuple[Said, ...]:
    said: dict[str, Said] = {}
    for item in items:
        if earns(item) and item.key not in placed:
            said.setdefault(shown(item), _one(item, assessment))
    return tuple(said.values())


def _one(item: Item, assessment: Assessment) -> Said:
    time = assessment.state.clock.time(item.as_of, assessment.now) if item.as_of else ""
    value = _value(item)
    return Said(
        named(item), "" if time in value else time, value, FLAG_WORDS[item.flag], item.flag is Flag.ACTION
    )


def _value(item: Item) -> str:
    """A value in few words; what it was before goes without the unit, which the value itself names."""
    most = LETTERS[item.part]
    if item.flag in (Flag.ACTION, Flag.REVIEW):
        most = max(most, FLAGGED_LETTERS)
    now, said, before = shown(item).partition(BEFORE)
    if not said or len(now) > most:
        return shortened(shown(item), most)
    found = _WITH_UNIT.fullmatch(now)
    unit = found.group("unit") if found else item.unit
    return shortened(f"{now}{BEFORE}{before.replace(f' {unit}', '') if unit else before}", TREND_LETTERS)


def _is_whole(text: str) -> bool:
    return text.count("(") <= text.count(")")
