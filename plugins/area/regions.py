"""The regions of the body by name: sides, parts, faces, and what lies beyond what."""

from __future__ import annotations

import re

SIDES = ("left", "right")
FACES = ("front", "back")
PAIRED = ("arm", "upper arm", "forearm", "hand", "leg", "thigh", "lower leg", "foot", "buttock")
SINGLE = (
    "head and neck",
    "head",
    "neck",
    "trunk",
    "chest",
    "abdomen",
    "upper back",
    "lower back",
    "genitalia",
    "whole body",
)
REGIONS = (*(f"{side} {name}" for name in PAIRED for side in SIDES), *SINGLE)
"""Every region that a burn can be charted on."""

_HALVES_OF_LIMBS = {
    f"{side} {limb}": tuple(f"{side} {part}" for part in parts)
    for side in SIDES
    for limb, parts in (("arm", ("upper arm", "forearm", "hand")), ("leg", ("thigh", "lower leg", "foot")))
}
PARTS = {
    "head and neck": ("head", "neck"),
    "trunk": ("chest", "abdomen", "upper back", "lower back"),
    **_HALVES_OF_LIMBS,
}
"""Regions that are made of smaller ones; the buttocks lie in the lower back only where a method says so."""

BUTTOCKS = ("left buttock", "right buttock")
LIMBS = tuple(f"{side} {part}" for side in SIDES for part in PAIRED if part != "buttock")
TORSO = ("trunk", "chest", "abdomen", "upper back", "lower back", "neck", "head and neck")

_SITES = {
    "hand": "hands",
    "foot": "feet",
    "genitalia": "genitalia and perineum",
}


def full_name(region: str, side: str = "") -> str:
    """Return the one name of a region: ``hand`` with ``left`` is ``left hand``."""
    return f"{side} {region}" if side and region in PAIRED else region


def needs_side(region: str) -> bool:
    """Return whether ``region`` is one of a pair and its side is not named."""
    return region in PAIRED


def parts_of(region: str, trunk_holds_buttocks: bool) -> tuple[str, ...]:
    """Return the regions that ``region`` is made of; none for a smallest one."""
    if trunk_holds_buttocks and region == "lower back":
        return BUTTOCKS
    return PARTS.get(region, ())


def lies_within(region: str, whole: str, trunk_holds_buttocks: bool) -> bool:
    """Return whether ``region`` is ``whole`` or a part of it."""
    if whole in (region, "whole body"):
        return True
    return any(
        lies_within(region, part, trunk_holds_buttocks) for part in parts_of(whole, trunk_holds_buttocks)
    )


def touches(region: str, other: str) -> bool:
    """Return whether one of the two regions lies within the other."""
    return lies_within(region, other, True) or lies_within(other, region, True)


def named_in(text: str) -> tuple[str, ...]:
    """Return the regions that free text names: ``left forearm and hand`` names the left forearm and hand."""
    said = text.lower()
    sides = [side for side in SIDES if side in said]
    found = [name for name in (*PAIRED, *SINGLE) if re.search(rf"\b{name}s?\b", said)]
    named = [full_name(name, side) for name in found for side in (sides or SIDES)]
    return tuple(dict.fromkeys(name for name in named if name in REGIONS))


def limb_of(region: str) -> str:
    """Return ``left arm`` for ``left forearm``; an empty string where it is no limb."""
    return next((limb for limb in _HALVES_OF_LIMBS if lies_within(region, limb, False)), "")


def special_site(region: str, face: str) -> str:
    """Return the special site that a region is by itself (face, hands, feet, genitalia), or an empty string.

    The front of the head is the face; a burn of the head with no face named may hold it and
    is not counted as one here.
    """
    if region == "head" and face == "front":
        return "face"
    return _SITES.get(region.removeprefix("left ").removeprefix("right "), "")


def may_hold_site(region: str, face: str) -> tuple[str, ...]:
    """Return the special sites that lie in a larger region which does not name them."""
    if (region == "head" and not face) or (region == "head and neck" and face != "back"):
        return ("face",)
    part = region.removeprefix("left ").removeprefix("right ")
    return {
        "arm": ("hands",),
        "leg": ("feet",),
        "whole body": ("face", "hands", "feet", "genitalia and perineum"),
    }.get(part, ())
