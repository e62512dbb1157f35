"""What the infection plugin returns: temperature, triggers, toxic-shock prompts, lines, antibiotics."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import antibiotics, lines, sepsis, temperature, toxic_shock


def compute(case: Case) -> Findings:
    """Return temperature and infection of one patient."""
    found = sepsis.triggers(case)
    return Findings(
        items=(
            *temperature.items(case),
            *toxic_shock.items(case),
            *sepsis.items(case, found),
            *lines.items(case),
            *antibiotics.items(case),
        ),
        actions=(
            *temperature.actions(case),
            *toxic_shock.actions(case),
            *sepsis.actions(case, found),
            *lines.actions(case),
            *antibiotics.actions(case),
        ),
    )
