"""Where the current went in and out, and the limbs on its path that look unburned."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Case, Flag, Item, System, Urgency, child, entries, fact, joined, words

from .injury import Injury, voltage_line

ARM = ("arm", "hand", "finger", "wrist", "elbow", "shoulder", "palm", "thumb")
LEG = ("leg", "foot", "toe", "ankle", "knee", "thigh", "heel", "sole", "calf")
ALL = ("left arm", "right arm", "left leg", "right leg")
HIDDEN = "Muscle under whole skin may be dead: the burned area does not show the injury."


def limb_of(where: str) -> str:
    """Return the limb that a place belongs to (``left arm``), or an empty string."""
    said = where.lower()
    side = next((side for side in ("left", "right") if side in said), "")
    part = "arm" if any(word in said for word in ARM) else "leg" if any(word in said for word in LEG) else ""
    return f"{side} {part}" if side and part else ""


def items(case: Case, found: Injury) -> tuple[Item, ...]:
    """Return the contact points, and the source of the current."""
    points = entries(child(case.block, "contact_points"))
    said = [f"{words(point.get('where'))} ({words(point.get('kind'))})" for point in points]
    told = [
        f"{name}: {words(child(case.block, key))}"
        for key, name in (
            ("held_on", "held to the source"),
            ("wet", "wet"),
            ("fell_or_thrown", "fall or throw"),
        )
        if words(child(case.block, key))
    ]
    flag = Flag.NONE if points else Flag.NOT_RECORDED
    return (
        fact(
            "electrical.contact",
            "Source and contact points",
            "; ".join([found.voltage, joined(said) or _not_recorded(case, found), *told]),
            system=System.ELECTRICAL,
            flag=flag,
            sources=(case.parameters.source_of(voltage_line(case)),),
            cautions=(HIDDEN,) if found.high is not False else (),
            line=found.cause.line,
        ),
    )


def _not_recorded(case: Case, found: Injury) -> str:
    """Say that the contact points are not recorded, with the words in which they may have been told."""
    told = (words(case.state.injury.get("what_happened")), words(found.cause.get("note")))
    free = "; ".join(part.rstrip(".") for part in told if part)
    return "contact points not recorded" + (f" (free text: {free})" if free else "")


def path(case: Case) -> list[str]:
    """Return the limbs on the path that no circumferential watch covers; all four where no contact is known."""
    points = entries(child(case.block, "contact_points"))
    limbs = [limb for point in points if (limb := limb_of(words(point.get("where"))))]
    covered = case.findings["area"].values.get("circumferential_limbs")
    watched = [str(limb) for limb in covered] if isinstance(covered, tuple) else []
    return [limb for limb in ALL if (limb in limbs or not limbs) and limb not in watched]


def actions(case: Case, found: Injury) -> tuple[Action, ...]:
    """Return the check of the limbs on the path, while swelling of the muscle can still come."""
    burn = case.state.burn_time
    over = burn is not None and case.hours_between(burn.earliest, case.now) > case.parameters.number(
        "limbs.for"
    )
    limbs = path(case)
    if found.comfort or found.high is False or over or not limbs:
        return ()
    every = timedelta(hours=case.parameters.number("limbs.every"))
    checked = [row.at for row in case.state.rows if _checks(row.entry.get("limbs"), limbs)]
    return (
        Action(
            key="electrical.limbs",
            area="Electrical injury",
            text=f"Feel {joined(limbs)}, also where the skin is whole: tight, pain on stretch, pulse, refill, feeling",
            why="current burns muscle under whole skin, and it swells",
            system=System.LIMBS,
            first_due=max(checked) + every if checked else case.now,
            every=every,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of("limbs.every"), case.parameters.source_of("limbs.for")),
        ),
    )


def _checks(node: object, limbs: list[str]) -> bool:
    if not isinstance(node, tuple):
        return False
    regions = [words(check.get("region")) for check in node if isinstance(check, dict)]
    return all(any(limb_of(region) == limb for region in regions) for limb in limbs)
