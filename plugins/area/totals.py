"""The totals of one assessment: counted, not counted, and each class of depth, with their working."""

from __future__ import annotations

from collections.abc import Callable

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Input,
    Item,
    Part,
    Source,
    System,
    Working,
    entries,
    joined,
    number_text,
    words,
)

from . import formula
from .assessment import PLACES, Assessment, Burn

SHOWN_PLACES = 1
NOT_RECORDED = "not recorded"


class Total(Struct, frozen=True):
    """One total of the burn: which burns belong to it and how it is called."""

    key: str
    label: str
    takes: Callable[[Burn], bool]
    only_if_present: bool = False


TOTALS = (
    Total("counted", "Burned area that counts", lambda burn: burn.counted is True),
    Total("full_thickness", "Full thickness", lambda burn: burn.full),
    Total("deep_partial", "Deep partial thickness", lambda burn: burn.depth == "deep partial"),
    Total(
        "superficial_partial",
        "Superficial partial thickness",
        lambda burn: burn.depth == "superficial partial",
    ),
    Total("mid_partial", "Mid partial thickness", lambda burn: burn.depth == "mid partial", True),
    Total(
        "partial_undivided",
        "Partial thickness, superficial or deep not stated",
        lambda burn: burn.depth == "partial thickness",
        True,
    ),
    Total("indeterminate", "Depth indeterminate", lambda burn: burn.depth == "indeterminate", True),
    Total(
        "deeper",
        "Of the full thickness, deeper than skin",
        lambda burn: burn.depth == "deeper than full thickness",
        True,
    ),
    Total("not_assessed", "Depth not assessed", lambda burn: burn.counted is None, True),
    Total("not_counted", "Epidermal, shown and not counted", lambda burn: burn.counted is False),
)
UNDIVIDED = {
    "partial thickness": ("superficial_partial", "deep_partial"),
    "indeterminate": ("superficial_partial", "deep_partial", "full_thickness"),
}
"""Classes of depth that leave open to which of the finer totals a burn belongs."""
OPEN = {
    "partial thickness": "partial thickness, superficial or deep not stated",
    "indeterminate": "of indeterminate depth",
}


def pct_text(value: float) -> str:
    """Return an area as printed: ``33.5 %TBSA``."""
    return f"{number_text(value, SHOWN_PLACES)} %TBSA"


def total_of(assessment: Assessment, total: Total) -> float | None:
    """Return the total in % of body surface; None where an extent is missing, or a depth that may belong to it."""
    burns = [burn for burn in assessment.burns if total.takes(burn)]
    if not total.only_if_present and any(burn.counted is None for burn in assessment.burns):
        return None
    known = [burn.tbsa_pct for burn in burns if burn.tbsa_pct is not None]
    if len(known) < len(burns):
        return None
    return formula.at_most_whole_body_pct(formula.total_pct(known))


def _beside(assessment: Assessment, total: Total) -> str:
    """The burns charted in a class that leaves open whether they belong to this total; empty for none."""
    found = []
    for depth, keys in UNDIVIDED.items():
        sizes = [burn.tbsa_pct or 0.0 for burn in assessment.burns if burn.depth == depth]
        if total.key in keys and sizes:
            found.append(f"; {pct_text(formula.total_pct(sizes))} more is {OPEN[depth]}")
    return "".join(found)


def items(case: Case, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return the item of every total of the assessment in use; not recorded where there is none."""
    found = []
    for total in TOTALS:
        if assessment is None:
            if not total.only_if_present:
                found.append(_blank(total, NOT_RECORDED))
            continue
        if total.only_if_present and not any(total.takes(burn) for burn in assessment.burns):
            continue
        found.append(_item(case, assessment, total))
    return tuple(found)


def _blank(total: Total, shown: str, assessment: Assessment | None = None) -> Item:
    return Item(
        key=f"area.{total.key}",
        label=total.label,
        part=Part.ASSESSMENT,
        system=System.BURN,
        unit="%",
        shown=shown,
        as_of=assessment.at if assessment else None,
        flag=Flag.NOT_RECORDED,
        repeats=True,
        line=assessment.line if assessment else 0,
    )


def _item(case: Case, assessment: Assessment, total: Total) -> Item:
    value = total_of(assessment, total)
    if value is None:
        return _blank(total, f"not computed: {_why(assessment, total)}", assessment)
    burns = [burn for burn in assessment.burns if total.takes(burn)]
    return Item(
        key=f"area.{total.key}",
        label=total.label,
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        unit="%",
        shown=f"{pct_text(value)}{_beside(assessment, total)}",
        as_of=assessment.at,
        working=_working(assessment, burns, value),
        sources=_sources(case, assessment, burns),
        cautions=_cautions(case, assessment, total, burns),
        line=assessment.line,
    )


def _why(assessment: Assessment, total: Total) -> str:
    if assessment.missing:
        return "; ".join(assessment.missing)
    unknown = [burn for burn in assessment.burns if burn.counted is None]
    without = formula.total_pct(burn.tbsa_pct or 0.0 for burn in assessment.burns if total.takes(burn))
    named = joined([f"{burn.where} ({pct_text(burn.tbsa_pct or 0.0)})" for burn in unknown])
    return f"depth of {named} not assessed; {pct_text(without)} without it"


def _working(assessment: Assessment, burns: list[Burn], value: float) -> Working:
    parts = [f"{burn.where} {burn.sum} = {number_text(burn.tbsa_pct or 0.0, PLACES)}" for burn in burns]
    sum_text = f"{'; '.join(parts) or 'no burn of this kind charted'}; total {number_text(value, PLACES)} %"
    inputs = [
        Input(burn.where, f"{burn.extent}, {burn.written_depth}", burn.line)
        for burn in assessment.burns
        if burn in burns
    ]
    if assessment.age is not None and assessment.table is not None:
        inputs += assessment.age.inputs
    return Working(
        formula="size of the region x burned share, added region by region",
        sum=sum_text,
        inputs=tuple(inputs),
        rule=assessment.table.name if assessment.table else assessment.method or "method not recorded",
    )


def _sources(case: Case, assessment: Assessment, burns: list[Burn]) -> tuple[Source, ...]:
    sources = [case.parameters.source_of("depth.counted")]
    table = assessment.table
    if table is not None and any("region" in burn.extent for burn in burns):
        sources += table.sources
        if table.halves_source is not None and any(burn.halved for burn in burns):
            sources.append(table.halves_source)
    if any("palms" in burn.extent for burn in burns):
        sources.append(case.parameters.source_of(f"palm.{case.chosen('palm_value').name}"))
    return tuple(sources)


def _cautions(case: Case, assessment: Assessment, total: Total, burns: list[Burn]) -> tuple[str, ...]:
    found = list(assessment.table.cautions) if assessment.table else []
    if not assessment.method:
        found.append("method of the assessment not recorded")
    if not assessment.by:
        found.append("assessor not recorded")
    if assessment.age is not None and assessment.age.caution:
        found.append(assessment.age.caution)
    if any("palms" in burn.extent for burn in burns):
        found.append(
            "a palm is the patient's own hand, fingers closed; measured palms run from about 0.5 to 1.1 %"
        )
    if total.key == "counted":
        found.append("early estimates often run high: reassess once redness has settled")
        kinds = [words(cause.get("kind")) for cause in entries(case.state.injury.get("causes"))]
        if "electrical" in kinds or "lightning" in kinds:
            found.append("electrical injury: the skin shows less than the muscle below it")
    return tuple(found)
