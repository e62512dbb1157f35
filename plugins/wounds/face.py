"""Eyes, ears and mouth where they are burned, and a burned perineum."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import Action, Case, Flag, Item, Map, System, Urgency, child, fact, gap, words

from .burned import Burned

EYES = ("lids", "cornea", "sight", "lenses")
HURT = {"cornea": ("stains", "cloudy"), "lids": ("do not close",), "lenses": ("still in",)}


def _last(case: Case, name: str) -> Map | None:
    rows = case.state.dated(child(case.block, name))
    return rows[-1].entry if rows else None


def _hours(case: Case, name: str) -> timedelta:
    return timedelta(hours=case.parameters.number(name))


def _late(case: Case, at: datetime | None, name: str) -> bool:
    return at is not None and at + _hours(case, name) < case.now


def items(case: Case, skin: Burned) -> tuple[Item, ...]:
    """Return what is charted of eyes, ears and mouth, where they are burned or were looked at."""
    made = []
    for name, needed in (("eyes", skin.face), ("ears", skin.ears), ("mouth", skin.face)):
        entry = _last(case, name)
        if entry is not None or (needed and name == "eyes"):
            made.append(_eyes(case, entry) if name == "eyes" else _other(case, name, entry))
    return tuple(made)


def _eyes(case: Case, entry: Map | None) -> Item:
    if entry is None:
        return gap("wounds.eyes", "Eyes", system=System.WOUND)
    at = case.when(entry.get("at"))
    said = [f"{name} {words(entry.get(name)) or 'not recorded'}" for name in EYES]
    said.append(f"drops or ointment given: {words(entry.get('lubricated')) or 'not recorded'}")
    hurt = any(words(entry.get(name)) in bad for name, bad in HURT.items())
    late = _late(case, at, "eyes.look_every")
    if late and at is not None:
        said.append(f"not looked at again since {case.clock.time(at, case.now)}")
    flag = Flag.ACTION if hurt else Flag.REVIEW if late else Flag.NONE
    return fact(
        "wounds.eyes",
        "Eyes",
        "; ".join(said),
        system=System.WOUND,
        as_of=at,
        flag=Flag.NONE if case.comfort else flag,
        line=entry.line,
    )


def _other(case: Case, name: str, entry: Map | None) -> Item:
    entry = entry or Map.at()
    parts = [words(entry.get("pressure")), words(entry.get("look"))]
    opening = words(entry.get("opening"))
    parts += [f"opens {opening}"] if opening else []
    pressed = words(entry.get("pressure")) == "pressed"
    return fact(
        f"wounds.{name}",
        name.capitalize(),
        "; ".join(part for part in parts if part) or "looked at, no finding recorded",
        system=System.WOUND,
        as_of=case.when(entry.get("at")),
        flag=Flag.ACTION if pressed and not case.comfort else Flag.NONE,
        line=entry.line,
    )


def actions(case: Case, skin: Burned) -> tuple[Action, ...]:
    """Return the care of burned eyes, ears, mouth and perineum."""
    made = []
    if skin.face:
        made += [*_eye_care(case), _mouth_care(case)]
    if skin.ears:
        made.append(_ear_care(case))
    if skin.perineum:
        made.append(
            Action(
                key="wounds.perineum",
                area="Wounds",
                text="Wash the perineum, legs apart, catheter care; again after each stool",
                why="the perineum is burned and soils easily",
                system=System.WOUND,
                every=_hours(case, "perineum.every"),
                first_due=case.now,
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("perineum.every"),),
            )
        )
    return tuple(made)


def _eye_care(case: Case) -> list[Action]:
    entry = _last(case, "eyes")
    at = case.when(entry.get("at")) if entry is not None else None
    made = []
    unseen = entry is None or words(entry.get("cornea")) in ("", "not assessed")
    if (
        unseen and not case.comfort
    ):  # where the goal is comfort the eyes are kept moist and nobody opens the lids
        made.append(
            Action(
                key="wounds.eye_examination",
                area="Eyes, ears and mouth",
                text="Have both eyes examined before the lids swell shut; contact lenses out; write down sight",
                why="the face is burned and no examination of the cornea is recorded",
                system=System.WOUND,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("eyes.look_every"),),
            )
        )
    every = _hours(case, "eyes.every")
    made.append(
        Action(
            key="wounds.eye_care",
            area="Eyes, ears and mouth",
            text="Eyes: wash crusts off, eye ointment or drops as prescribed, cover an eye that does not close",
            why="the face is burned; a dry cornea breaks down",
            system=System.WOUND,
            every=every,
            first_due=at + every if at else case.now,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of("eyes.every"), case.parameters.source_of("eyes.look_every")),
        )
    )
    return made


def _mouth_care(case: Case) -> Action:
    entry = _last(case, "mouth")
    at = case.when(entry.get("at")) if entry is not None else None
    every = _hours(case, "mouth.every")
    return Action(
        key="wounds.mouth_care",
        area="Eyes, ears and mouth",
        text="Mouth and lips: clean and moisten; open wide, as far as it goes",
        why="the face is burned; lips crack and the mouth narrows",
        system=System.WOUND,
        every=every,
        first_due=at + every if at else case.now,
        urgency=Urgency.TIMED,
        sources=(case.parameters.source_of("mouth.every"),),
    )


def _ear_care(case: Case) -> Action:
    return Action(
        key="wounds.ear_care",
        area="Eyes, ears and mouth",
        text="No pillow: head on a ring that leaves the ears free; ties and tubing off the ears, no pressure dressing; "
        "clean them twice a day",
        why="an ear is burned; pressure kills the cartilage and lets infection in",
        system=System.WOUND,
        every=_hours(case, "ears.look_every"),
        first_due=case.now,
        urgency=Urgency.TIMED,
        sources=(case.parameters.source_of("ears.clean_every"), case.parameters.source_of("ears.look_every")),
    )
