"""What the first_hours plugin returns: the steps of the survey and what is left of it."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import survey


def compute(case: Case) -> Findings:
    """Return the survey of the first hours."""
    return Findings(survey.items(case), survey.actions(case))
