"""What the first_hours plugin returns: the steps of the survey, what is left of it, and cooling."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import cooling, survey


def compute(case: Case) -> Findings:
    """Return the survey of the first hours, and cooling that is missing while it can still help."""
    return Findings(
        (*survey.items(case), *cooling.items(case)), (*cooling.actions(case), *survey.actions(case))
    )
