"""What the nutrition plugin returns: food and feed, bowels, glucose beside insulin."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import bowels, feeding, glucose


def compute(case: Case) -> Findings:
    """Return feeding, bowels and glucose of one patient."""
    return Findings(
        items=(*feeding.items(case), *bowels.items(case), *glucose.items(case)),
        actions=(*feeding.actions(case), *bowels.actions(case), *glucose.actions(case)),
    )
