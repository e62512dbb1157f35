"""What the theatre plugin returns: nothing without an operation or blood charted."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import planned


def compute(case: Case) -> Findings:
    """Return what has to be ready before theatre."""
    return Findings(planned.items(case), planned.actions(case))
