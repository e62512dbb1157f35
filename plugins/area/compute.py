"""What the area plugin returns: the burn measured, where it is, whom it concerns, and what to watch."""

from __future__ import annotations

from handoff.plugin import Case, Findings

from . import compare, reassess, referral, release, scores, severity, sites, totals, watch, wounds
from .assessment import Assessment, assessments
from .facts import facts_of
from .regions import limb_of


def compute(case: Case) -> Findings:
    """Return area by depth, regions, circumferential watch, referral criteria and what earlier sheets said."""
    charted = assessments(case)
    latest = charted[-1] if charted else None
    later = wounds.wounds_of(case)
    facts = facts_of(case, latest, later[-1] if later else None)
    return Findings(
        items=(
            *totals.items(case, latest),
            *sites.items(case, latest),
            *watch.items(case, latest),
            *release.items(case),
            *wounds.items(case, later),
            *compare.items(case, charted),
            *severity.items(case, facts, latest),
            *scores.items(case, facts, latest),
            *referral.items(case, facts, latest),
            *reassess.items(case, latest),
        ),
        actions=(
            *watch.actions(case, latest),
            *release.actions(case),
            *referral.actions(case, facts, latest),
            *reassess.actions(case, latest),
        ),
        values=_values(latest),
    )


def _values(assessment: Assessment | None) -> dict[str, object]:
    """What other plugins read; areas in % of body surface, None where not recorded or not computed."""
    pct: dict[str, object] = {
        f"{total.key}_pct": totals.total_of(assessment, total) if assessment else None
        for total in totals.TOTALS
    }
    if assessment is None:
        empty = ("burns", "circumferential_regions", "circumferential_limbs", "special_sites", "deep_sites")
        return {**pct, **dict.fromkeys(empty, ())}
    round_it = sites.circumferential(assessment)
    limbs = [limb for burn in round_it if (limb := limb_of(burn.region))]
    return {
        **pct,
        "burns": tuple(burn.row() for burn in assessment.burns),
        "circumferential_regions": tuple(dict.fromkeys(burn.region for burn in round_it)),
        "circumferential_limbs": tuple(dict.fromkeys(limbs)),
        "special_sites": sites.sites(assessment),
        "deep_sites": sites.sites(assessment, deep_only=True),
    }
