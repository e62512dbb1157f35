"""How each burned part is to lie, from the published table, and the skin under splints."""

from __future__ import annotations

from datetime import timedelta

from msgspec import Struct

from handoff.plugin import Action, Case, Flag, Item, Map, System, Urgency, child, entries, fact, words

from .burned import Burned

SIDES = ("left", "right")
JOINTS = {
    "shoulder": ("axilla",),
    "elbow": ("elbow",),
    "wrist": ("wrist",),
    "finger joints": ("knuckles", "fingers"),
    "hip": ("hip",),
    "knee": ("knee",),
    "ankle": ("ankle",),
    "toe joints": ("toes",),
    "neck": ("neck",),
    "jaw": ("mouth",),
}
SITES = {"axilla": ("axilla",), "fingers": ("knuckles", "fingers"), "toes": ("toes",)}
HAND = ("wrist", "knuckles", "fingers", "thumb")
BETWEEN = (
    ("upper arm", "forearm", "elbow"),
    ("forearm", "hand", "wrist"),
    ("thigh", "lower leg", "knee"),
    ("lower leg", "foot", "ankle"),
)
"""Joints that a burn crosses where both neighbours are burned."""

ORDER = (
    "mouth",
    "neck",
    "axilla",
    "elbow",
    "wrist",
    "knuckles",
    "fingers",
    "thumb",
    "hip",
    "knee",
    "ankle",
    "toes",
)
WHOLE = {"arm": ("axilla", "elbow", *HAND), "leg": ("hip", "knee", "ankle", "toes")}
WHY = "the position that feels best is the one in which the burn shrinks"


class Place(Struct, frozen=True):
    """One burned joint or part: the site of the table, and its side."""

    site: str
    side: str

    @property
    def name(self) -> str:
        """The part as it is printed: ``right elbow``."""
        return f"{self.side} {self.site}".strip()


def places(skin: Burned) -> tuple[Place, ...]:
    """Return every burned part that has a position, head first, left before right."""
    found = {Place("neck", "")} if skin.neck else set()
    if skin.face:
        found.add(Place("mouth", ""))
    for burn in skin.shrinking:
        side, part = _split(burn.region)
        sites = [*JOINTS.get(burn.joint, ())]
        sites += [site for name in burn.sites for site in SITES.get(name, ())]
        sites += HAND if part == "hand" else ("ankle", "toes") if part == "foot" else WHOLE.get(part, ())
        found |= {Place(site, "" if site in ("neck", "mouth") else side) for site in sites}
    regions = [burn.region for burn in skin.shrinking]
    for side in SIDES:
        for above, below, joint in BETWEEN:
            if f"{side} {above}" in regions and f"{side} {below}" in regions:
                found.add(Place(joint, side))
    return tuple(sorted(found, key=lambda place: (ORDER.index(place.site), place.side)))


def _split(region: str) -> tuple[str, str]:
    side, _, part = region.partition(" ")
    return (side, part) if side in SIDES else ("", region)


def table_of(case: Case) -> tuple[str, dict[str, str]]:
    """Return the name of the chosen table's parameter and its positions by site."""
    name = f"position.{case.chosen('position_table').name}"
    return name, {str(key): str(value) for key, value in case.parameters.table(name).items()}


def _said(case: Case, skin: Burned) -> list[str]:
    _, table = table_of(case)
    grouped: dict[str, list[str]] = {}
    for place in places(skin):
        if place.site in table:
            grouped.setdefault(table[place.site], []).append(place.name)
    return [f"{' and '.join(names)} {how}" for how, names in grouped.items()]


def splints(case: Case) -> tuple[Map, ...]:
    """Return the splints in use."""
    return tuple(entry for entry in entries(child(case.block, "splints")) if "ended" not in entry)


def items(case: Case, skin: Burned) -> tuple[Item, ...]:
    """Return the positions of this patient's burned parts, and each splint."""
    said, (name, table) = _said(case, skin), table_of(case)
    made = []
    if said and not case.comfort:
        made.append(
            fact(
                "wounds.positions",
                f"Position by burned part ({table['title']})",
                "; ".join(said),
                system=System.SKIN,
                value="; ".join(said),
                as_of=case.now,
                sources=(case.parameters.source_of(name),),
                cautions=("The therapist's plan for this patient goes before the table.",),
            )
        )
    for index, entry in enumerate(splints(case), start=1):
        made.append(_splint(case, index, entry))
    return tuple(made)


def _splint(case: Case, index: int, entry: Map) -> Item:
    checked = case.when(entry.get("checked"))
    every = timedelta(hours=case.parameters.number("splint.every"))
    late = (checked is None or checked + every < case.now) and not case.comfort
    parts = [words(entry.get("regime")) or "regime not recorded", words(entry.get("skin"))]
    parts.append(
        f"skin looked at {case.clock.time(checked, case.now)}"
        if checked
        else "skin under it not looked at as charted"
    )
    return fact(
        f"wounds.splint.{index}",
        f"Splint: {words(entry.get('where'))}",
        "; ".join(part for part in parts if part),
        system=System.SKIN,
        as_of=checked,
        flag=Flag.REVIEW if late else Flag.NONE,
        line=entry.line,
    )


def actions(case: Case, skin: Burned) -> tuple[Action, ...]:
    """Return one line for the positions of this patient and one for the skin under splints."""
    if case.comfort:
        return ()
    made = []
    said, (name, _) = _said(case, skin), table_of(case)
    if said:
        made.append(
            Action(
                key="wounds.position",
                area="Position and movement",
                text=f"Position: {'; '.join(said)}",
                why=WHY,
                system=System.SKIN,
                every=timedelta(hours=case.parameters.number("position.every")),
                first_due=case.now,
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of(name), case.parameters.source_of("position.every")),
                cautions=("The therapist's plan for this patient goes before the table.",),
            )
        )
    worn = splints(case)
    if worn:
        every = timedelta(hours=case.parameters.number("splint.every"))
        checks = [case.when(entry.get("checked")) for entry in worn]
        oldest = min((at for at in checks if at is not None), default=None) if all(checks) else None
        made.append(
            Action(
                key="wounds.splints",
                area="Position and movement",
                text=f"Skin and feeling under the splint: {', '.join(words(entry.get('where')) for entry in worn)}",
                why="a splint presses on swollen skin",
                system=System.SKIN,
                every=every,
                first_due=oldest + every if oldest else case.now,
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("splint.every"),),
            )
        )
    return tuple(made)
