"""How each depth is shaded: preset patterns that differ in direction and in darkness, so that print without
colour, a photocopy and a coarse fax still tell them apart."""

from __future__ import annotations

from collections.abc import Mapping

from msgspec import Struct

from handoff.document.figures.shapes import Look

PALE, DARK = "D9D9D9", "8C8C8C"


class Depth(Struct, frozen=True):
    """A class of depth: its words in the legend, its place among the depths (the deepest last), its look."""

    words: str
    place: int
    look: Look


NOT_COUNTED = Depth(
    "not counted (epidermal): dotted outline, no shading", 0, Look("FFFFFF", dash="sysDot", width_pt=1.5)
)
UNKNOWN = Depth(
    "depth not assessed, or in words that are not shaded here", 1, Look("FFFFFF", "openDmnd", width_pt=1)
)

FIRST_SHADED = 2
_SHADED = (
    ("superficial partial", Look("FFFFFF", "ltUpDiag", width_pt=1)),
    ("mid partial", Look("FFFFFF", "horz", width_pt=1)),
    ("partial thickness", Look("FFFFFF", "vert", width_pt=1)),
    ("indeterminate", Look("FFFFFF", "lgGrid", width_pt=1)),
    ("deep partial", Look(PALE, "wdDnDiag", width_pt=1)),
    ("full thickness", Look(DARK, "smCheck", width_pt=1)),
    ("deeper than full thickness", Look("000000", width_pt=1)),
)
DEPTHS: Mapping[str, Depth] = {
    words: Depth(words, place, look) for place, (words, look) in enumerate(_SHADED, start=FIRST_SHADED)
}


def depth_of(words: str, counted: bool | None) -> Depth:
    """Return how a burn is shaded; one that does not count is never shaded, whatever its depth."""
    if counted is False:
        return NOT_COUNTED
    return DEPTHS.get(words, UNKNOWN)
