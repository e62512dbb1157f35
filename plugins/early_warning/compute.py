"""What the early_warning plugin returns: score, when it is due again, children's ranges, consciousness."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import children, consciousness, score, timing


def compute(case: Case) -> Findings:
    """Return the early warning score with its parts, or a child's signs against one table, and consciousness."""
    found = score.scored(case)
    return Findings(
        items=(
            *score.items(case, found),
            *timing.items(case, found),
            *children.items(case),
            *consciousness.items(case),
        ),
        actions=score.actions(case, found),
    )
