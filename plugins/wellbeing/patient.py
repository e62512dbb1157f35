"""What decides which matters concern this patient."""

from __future__ import annotations

from handoff.plugin import Case


def is_asked(case: Case) -> bool:
    """Return whether mood and sleep are asked about: from the second day on."""
    burn = case.state.burn_time
    return burn is not None and case.hours_between(burn.earliest, case.now) > case.parameters.number(
        "ask_after"
    )
