"""What the pain plugin returns: scores, sedation, treatment, totals held against named rules, the next procedure."""

from __future__ import annotations

from handoff.plugin import Case, Findings

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


def compute(case: Case) -> Findings:
    """Return pain and sedation as charted, what was given in the last 24 h, and what is due."""
    charted = read(case)
    return Findings(
        items=(
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
        ),
        actions=(
            *reassess.actions(case, charted),
            *watching.actions(case, charted),
            *procedures.actions(case, charted),
            *early.actions(case),
        ),
        values={"scores": charted.scores, "given": charted.given, "runs": charted.runs},
    )
