"""What the electrical plugin returns: nothing without an electrical injury; else rhythm, path and limbs."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import limbs, rhythm
from .injury import injury


def compute(case: Case) -> Findings:
    """Return the watch of an electrical injury; nothing where there was none."""
    found = injury(case)
    if found is None:
        return Findings()
    return Findings(
        items=(*rhythm.items(case, found), *limbs.items(case, found)),
        actions=(*rhythm.actions(case, found), *limbs.actions(case, found)),
    )
