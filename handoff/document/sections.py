"""The pieces that documents are made of: frozen data of finished strings, ready to be printed."""

from __future__ import annotations

from collections.abc import Iterable

from msgspec import Struct

from handoff.assess import Assessment
from handoff.plugin import Flag, Item

NOT_RECORDED = "not recorded"

CAUTION = (
    "Check against patient, prescription and local policy. Computed rates are starting points to check, "
    "not orders. Nothing here diagnoses or orders."
)

FLAG_WORDS = {Flag.ACTION: "ACTION", Flag.REVIEW: "REVIEW", Flag.NONE: "", Flag.NOT_RECORDED: NOT_RECORDED}
"""How a flag is printed: a word, so that it reads without colour."""

LEGEND = (
    "ACTION: needs something now. REVIEW: due, overdue or old. No mark does not say that the patient is well. "
    "[+]: in full in Detail by system."
)


class Mark(str):
    """A tag or a title of a content control: it goes into the file, not onto the page."""

    __slots__ = ()


class Row(Struct, frozen=True):
    """One value as it is printed: what, the value with its unit, its time, its flag."""

    what: str
    value: str
    time: str
    flag: str
    is_action: bool


class Block(Struct, frozen=True):
    """Rows under a heading of their own."""

    title: str
    rows: tuple[Row, ...]
    cautions: str


class Band(Struct, frozen=True):
    """A warning at the top of a document."""

    title: str
    lines: tuple[str, ...]


def sentence(text: str) -> str:
    """Return ``text`` with a capital first letter; a name such as pH keeps its own."""
    return text if text[1:2].isupper() else text[:1].upper() + text[1:]


def shown(item: Item) -> str:
    """Return how an item is printed; never empty."""
    return item.shown.strip() or NOT_RECORDED


def row(item: Item, assessment: Assessment) -> Row:
    """Return an item as a row; its time is short where it is of the same day as the document."""
    time = assessment.state.clock.time(item.as_of, assessment.now) if item.as_of else ""
    return Row(sentence(item.label), shown(item), time, FLAG_WORDS[item.flag], item.flag is Flag.ACTION)


def cautions_of(items: Iterable[Item]) -> str:
    """Return the cautions of the items as sentences, each once; an empty string for none."""
    said = dict.fromkeys(sentence(caution).rstrip(".") for item in items for caution in item.cautions)
    return " ".join(f"{caution}." for caution in said)


def bands(assessment: Assessment, lost: tuple[str, ...] = ()) -> tuple[Band, ...]:
    """Return what must be read first: what could not be computed, and unusual values not confirmed.

    ``lost`` names what was computed and cannot be printed.
    """
    found = []
    failed = (*(f"{failure.title}: {failure.what}" for failure in assessment.failures), *lost)
    if failed:
        found.append(Band("Could not be computed; work it out by hand", failed))
    if assessment.shown_warnings:
        lines = tuple(
            f"{fault.path}: {fault.what}; {fault.cure} (line {fault.line})"
            for fault in assessment.shown_warnings
        )
        found.append(Band("Unusual and not confirmed; check at the bedside", lines))
    return tuple(found)
