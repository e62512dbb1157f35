"""Faults of the pain block that a schema cannot see."""

from __future__ import annotations

from handoff.plugin import Case, Problem

from . import dose_faults, score_faults


def check(case: Case) -> tuple[Problem, ...]:
    """Return the faults of scores, doses, infusions and pump readings, in the order of the file."""
    found = [*score_faults.faults(case), *dose_faults.faults(case)]
    return tuple(sorted(found, key=lambda problem: (problem.node.line, problem.node.column)))
