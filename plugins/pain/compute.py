"""What the pain plugin returns: scores, reassessment, and totals held against named rules."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import latest, non_opioids, opioids, reassess
from .charted import read


def compute(case: Case) -> Findings:
    """Return the latest score, the reassessment due, and the totals of the last 24 h with their limits."""
    charted = read(case)
    return Findings(
        items=(
            latest.item(case, charted),
            reassess.item(case, charted),
            opioids.item(case, charted),
            *non_opioids.items(case, charted),
        ),
        actions=reassess.actions(case, charted),
        values={"scores": charted.scores, "given": charted.given, "runs": charted.runs},
    )
