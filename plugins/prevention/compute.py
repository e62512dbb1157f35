"""What the prevention plugin returns: two decisions, made or not."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import decisions


def compute(case: Case) -> Findings:
    """Return whether clot and ulcer prevention were decided."""
    return Findings(decisions.items(case), decisions.actions(case))
