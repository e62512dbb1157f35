"""What the care plan asks for beyond a circumferential burn."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Case, System, Urgency

from .assessment import Assessment, Burn
from .regions import limb_of
from .sites import circumferential

AREA = "limb perfusion"
WHY_LIMB = "swelling can cut off the blood supply, and a lost pulse is a late sign"
WHY_TRUNK = "a tight burn can stop the chest from moving"
BEYOND = {
    "arm": "radial and ulnar pulse, palmar arch by Doppler",
    "leg": "dorsalis pedis and posterior tibial pulse, by Doppler where weak",
}


def actions(case: Case, assessment: Assessment | None) -> tuple[Action, ...]:
    """Return one check for each limb, and for chest, abdomen and neck, that is burned all round."""
    if assessment is None:
        return ()
    by_place: dict[str, list[Burn]] = {}
    for burn in circumferential(assessment):
        by_place.setdefault(limb_of(burn.region) or burn.region, []).append(burn)
    return tuple(_action(case, place, burns) for place, burns in by_place.items())


def _action(case: Case, place: str, burns: list[Burn]) -> Action:
    limb = limb_of(place)
    regions = ", ".join(dict.fromkeys(f"{burn.region} {burn.depth}" for burn in burns))
    return Action(
        key=f"area.watch.{place.replace(' ', '_')}",
        area=AREA if limb else "breathing",
        text=_text(place, limb),
        why=f"burned all round ({regions}): {WHY_LIMB if limb else WHY_TRUNK}",
        system=System.LIMBS if limb else System.BREATHING,
        first_due=case.now,
        every=timedelta(minutes=case.parameters.number("perfusion.every")),
        urgency=Urgency.NOW,
        sources=tuple(case.parameters.source_of(name) for name in ("perfusion.every", "perfusion.signs")),
    )


def _text(place: str, limb: str) -> str:
    if not limb:
        return (
            f"Watch the breathing: {place} movement, effort, rate, SpO2, airway pressures if ventilated; "
            "call if tight or worse"
        )
    beyond = BEYOND[limb.rsplit(maxsplit=1)[-1]]
    return (
        f"Check the {limb} beyond the burn: {beyond}; refill, colour, warmth, feeling, movement, "
        "pain on stretch, tightness, SpO2; compare with the other side; keep raised; "
        "call the burn surgeon at any change"
    )
