"""What the chemical plugin returns: nothing without a chemical injury; else rinsing and the chemical."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import rinsing


def compute(case: Case) -> Findings:
    """Return the rinsing of a chemical injury; nothing where there was none."""
    cause = rinsing.cause_of(case)
    if cause is None:
        return Findings()
    return Findings(rinsing.items(case, cause), rinsing.actions(case, cause))
