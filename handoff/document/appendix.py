"""The appendix: how each figure was worked out, where its numbers come from, what is not recorded."""

from __future__ import annotations

from collections.abc import Iterable

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.sections import NOT_RECORDED, Row, cautions_of, row, sentence, shown
from handoff.parameters import Source
from handoff.plugin import Flag, Item, Working


class Citations:
    """Numbers sources in the order in which they are first cited."""

    def __init__(self) -> None:
        self._numbers: dict[str, int] = {}

    def cite(self, sources: Iterable[Source]) -> str:
        """Return the marks of ``sources``: ``[1] [3]``; an empty string for none."""
        marks = {self._numbers.setdefault(source.shown(), len(self._numbers) + 1) for source in sources}
        return " ".join(f"[{mark}]" for mark in sorted(marks))

    def cited(self) -> tuple[Cited, ...]:
        """Return every source cited so far with its mark."""
        return tuple(Cited(f"[{mark}]", text) for text, mark in self._numbers.items())


class Cited(Struct, frozen=True):
    """One source with its mark."""

    mark: str
    text: str


class Figure(Struct, frozen=True):
    """One figure with its working, for a reader to check."""

    what: str
    value: str
    formula: str
    sum: str
    inputs: str
    rule: str
    sources: str
    cautions: str


class Note(Struct, frozen=True):
    """A value that is no sum: the sources and cautions that stand behind it."""

    what: str
    cautions: str
    sources: str


class Gap(Struct, frozen=True):
    """One thing that is not recorded, and how it is printed."""

    what: str
    value: str
    where: str


class Appendix(Struct, frozen=True):
    """Working, sources, and what is not recorded."""

    made_by: str
    figures: tuple[Figure, ...]
    notes: tuple[Note, ...]
    details: tuple[Row, ...]
    sources: tuple[Cited, ...]
    gaps: tuple[Gap, ...]


def appendix(assessment: Assessment) -> Appendix:
    """Return the appendix of the handover."""
    citations = Citations()
    present = [item for item in assessment.items if item.flag is not Flag.NOT_RECORDED]
    unworked = [item for item in present if not item.working]
    return Appendix(
        made_by=_made_by(assessment),
        figures=tuple(_figure(item, item.working, citations) for item in present if item.working),
        notes=tuple(_note(item, citations) for item in unworked if item.sources or item.cautions),
        details=tuple(row(item, assessment) for item in unworked if item.detail),
        sources=citations.cited(),
        gaps=tuple(
            Gap(sentence(item.label), shown(item), f"{item.part.value}, {item.system.value}")
            for item in assessment.not_recorded
        ),
    )


def _made_by(assessment: Assessment) -> str:
    titles = ", ".join(plugin.title for plugin in assessment.plugins) or "none"
    return (
        f"Worked out by: {titles}. Local policy: {assessment.policy.name}. "
        f"Lines are those of the state file of version {assessment.state.digest}."
    )


def _note(item: Item, citations: Citations) -> Note:
    return Note(sentence(item.label), cautions_of([item]), citations.cite(item.sources))


def _figure(item: Item, working: Working, citations: Citations) -> Figure:
    said = []
    for part in working.inputs:
        line = f" (line {part.line})" if part.line else ""
        said.append(f"{part.label} {part.shown or NOT_RECORDED}{line}")
    return Figure(
        what=sentence(item.label),
        value=shown(item),
        formula=working.formula,
        sum=working.sum,
        inputs="; ".join(said),
        rule=working.rule,
        sources=citations.cite(item.sources),
        cautions=cautions_of([item]),
    )
