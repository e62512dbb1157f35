"""What the area plugin returns: the burn measured, where it is, and what to watch."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import sites, totals, watch
from .assessment import Assessment, assessments
from .regions import limb_of


def compute(case: Case) -> Findings:
    """Return area by depth, regions, circumferential burns and special sites of the latest assessment."""
    charted = assessments(case)
    latest = charted[-1] if charted else None
    return Findings(
        items=(*totals.items(case, latest), *sites.items(case, latest)),
        actions=watch.actions(case, latest),
        values=_values(latest),
    )


def _values(assessment: Assessment | None) -> dict[str, object]:
    """What other plugins read; areas in % of body surface, None where not recorded or not computed."""
    pct: dict[str, object] = {
        f"{total.key}_pct": totals.total_of(assessment, total) if assessment else None
        for total in totals.TOTALS
    }
    if assessment is None:
        return {**pct, "burns": (), "circumferential_regions": (), "special_sites": (), "deep_sites": ()}
    round_it = sites.circumferential(assessment)
    return {
        **pct,
        "burns": assessment.burns,
        "circumferential_regions": tuple(dict.fromkeys(burn.region for burn in round_it)),
        "circumferential_limbs": tuple(
            dict.fromkeys(limb for burn in round_it if (limb := limb_of(burn.region)))
        ),
        "special_sites": sites.sites(assessment),
        "deep_sites": sites.sites(assessment, deep_only=True),
    }
