"""The goal of care, where it changes what is asked for."""

from __future__ import annotations

from handoff.plugin import Case, child, words


def is_comfort(case: Case) -> bool:
    """Return whether comfort is the recorded goal of care, so that prompts to rescue stop."""
    return words(child(case.state.patient, "resuscitation", "decision")) == "comfort care"
