"""What the wounds plugin returns: dressings, grafts, tetanus, position, face, pressure areas."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import dressings, face, grafts, position, skin, tetanus
from .burned import burned


def compute(case: Case) -> Findings:
    """Return the wounds of one patient and the care that they ask for."""
    found = burned(case)
    return Findings(
        items=(
            *dressings.items(case, found),
            *grafts.items(case),
            *tetanus.items(case),
            *face.items(case, found),
            *position.items(case, found),
            *skin.items(case),
        ),
        actions=(
            *dressings.actions(case, found),
            *grafts.actions(case),
            *tetanus.actions(case),
            *face.actions(case, found),
            *position.actions(case, found),
            *skin.actions(case, found),
        ),
    )
