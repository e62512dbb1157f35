"""What the wellbeing plugin returns: the goals of comfort first, then mind, then teaching and going home."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import comfort, leaving, mind


def compute(case: Case) -> Findings:
    """Return mood, sleep, people, teaching and the goals of comfort."""
    return Findings(
        items=(*comfort.items(case), *mind.items(case), *leaving.items(case)),
        actions=(*comfort.actions(case), *mind.actions(case), *leaving.actions(case)),
    )
