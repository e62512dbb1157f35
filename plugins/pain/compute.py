"""What the pain plugin returns: scores, sedation, treatment, totals held against named rules, the next procedure."""

from __future__ import annotations

from handoff.plugin import Case, Findings, not_asked

from . import (
    blocks,
    classes,
    comfort,
    course,
    early,
    fit,
    latest,
    non_opioids,
    opioids,
    procedures,
    pumps,
    reassess,
    sedation,
    treatment,
    watching,
)
from .charted import read

NO_GAP_IN_COMFORT = ("pain.movement", "pain.procedure", "pain.next_procedure", "pain.give_by")
"""What nobody asks of a patient who is to be left in comfort."""


def compute(case: Case) -> Findings:
    """Return pain and sedation as charted, what was given in the last 24 h, and what is due."""
    charted = read(case)
    items = (
        latest.item(case, charted),
        classes.item(case, charted),
        *course.items(case, charted),
        fit.item(case, charted),
        *comfort.items(case),
        *sedation.items(case, charted),
        opioids.item(case, charted),
        *non_opioids.items(case, charted),
        *treatment.items(case, charted),
        *pumps.items(case),
        *blocks.items(case),
        *early.items(case, charted),
        reassess.item(case, charted),
        *procedures.items(case, charted),
    )
    if case.comfort:
        items = tuple(not_asked(one) if one.key in NO_GAP_IN_COMFORT else one for one in items)
    return Findings(
        items=items,
        actions=(
            *reassess.actions(case, charted),
            *watching.actions(case, charted),
            *procedures.actions(case, charted),
            *early.actions(case),
        ),
        values={"scores": charted.scores, "given": charted.given, "runs": charted.runs},
    )
