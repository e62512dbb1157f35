"""What the body chart shows of the charted burns: shading of each drawn region, and one label a charted region."""

from __future__ import annotations

import math
from collections.abc import Sequence

from msgspec import Struct

from handoff.document.figures.body import BACK, FACES, FRONT, body
from handoff.document.figures.depths import NOT_COUNTED, Depth, depth_of
from handoff.document.figures.proportions import ADULT
from handoff.document.sections import sentence
from handoff.plugin import number_text

PLACES = 2
DRAWN = {face: tuple(body(ADULT, face)) for face in FACES}
"""The regions that the figure has on each face."""

_LIMBS = {"arm": ("upper arm", "forearm", "hand"), "leg": ("thigh", "lower leg", "foot")}
WHOLES = {
    "head and neck": ("head", "neck"),
    "trunk": ("chest", "abdomen", "upper back", "lower back"),
    **{
        f"{side} {limb}": tuple(f"{side} {part}" for part in parts)
        for limb, parts in _LIMBS.items()
        for side in ("left", "right")
    },
    "whole body": tuple(dict.fromkeys((*DRAWN[FRONT], *DRAWN[BACK]))),
}
"""Regions that are charted as one and drawn as several."""

POINTED_AT = {
    "trunk": ("abdomen", "lower back"),
    "arm": ("forearm",),
    "leg": ("lower leg",),
    "whole body": ("chest", "upper back"),
}
"""The part to which the label of a larger region points; otherwise its first."""


class Burn(Struct, frozen=True):
    """One row of the burn table as the chart takes it; the share in % of the body, None where not known."""

    region: str
    faces: tuple[str, ...]
    depth: Depth
    share_pct: float | None
    around: bool


class Extent(Struct, frozen=True):
    """One depth within a label: how it is shaded, its share of the body in words, and what is said below."""

    depth: Depth
    said: str
    below: tuple[str, ...]
    share_pct: float


class Label(Struct, frozen=True):
    """What stands beside the figure for one charted region on one face."""

    region: str
    face: str
    both_faces: bool
    points_at: str
    extents: tuple[Extent, ...]
    notes: tuple[str, ...]

    @property
    def name(self) -> str:
        """What its shapes are called: a region may have one label for this face and one for both."""
        return f"{self.region}, both, {self.face}" if self.both_faces else f"{self.region}, {self.face}"

    @property
    def title(self) -> str:
        """The region as printed."""
        return sentence(self.region)

    @property
    def share_pct(self) -> float:
        """The share of the body in %, as far as it is known."""
        return math.fsum(extent.share_pct for extent in self.extents)


def share_text(share_pct: float) -> str:
    """Return a share of the body as printed: ``9.1 %``."""
    return f"{number_text(share_pct, PLACES)} %"


def parts_of(region: str, face: str) -> tuple[str, ...]:
    """Return the drawn regions of ``region`` on that face; none where the figure has none there."""
    return tuple(part for part in WHOLES.get(region, (region,)) if part in DRAWN[face])


def read(rows: Sequence[Sequence[object]]) -> tuple[tuple[Burn, ...], tuple[str, ...]]:
    """Return the rows that can be drawn, and the names of those that cannot.

    Args:
        rows: Region, face, depth, share in % of the body, counted, circumferential, line.
    """
    drawn, lost = [], []
    for region, face, depth, share, counted, around, _ in rows:
        wanted = FACES if not face else (str(face),)
        faces = tuple(one for one in wanted if one in FACES and parts_of(str(region), one))
        if not faces:
            lost.append(", ".join(str(part) for part in (region, face) if part))
            continue
        known = isinstance(share, (int, float)) and math.isfinite(share)
        shading = depth_of(str(depth), counted if isinstance(counted, bool) else None)
        drawn.append(Burn(str(region), faces, shading, float(share) if known else None, around is True))  # type: ignore[arg-type]
    return tuple(drawn), tuple(dict.fromkeys(lost))


def shading(burns: Sequence[Burn], face: str) -> dict[str, tuple[Depth, ...]]:
    """Return the depths of each burned region drawn on that face, the deepest first."""
    found: dict[str, set[Depth]] = {}
    for burn in burns:
        if face in burn.faces:
            for part in parts_of(burn.region, face):
                found.setdefault(part, set()).add(burn.depth)
    return {part: tuple(sorted(depths, key=_deepest_first)) for part, depths in found.items()}


def _deepest_first(depth: Depth) -> int:
    return -depth.place


def ringed(burns: Sequence[Burn], face: str) -> tuple[str, ...]:
    """Return the drawn regions that a circumferential burn goes round."""
    parts = (
        part for burn in burns if burn.around and face in burn.faces for part in parts_of(burn.region, face)
    )
    return tuple(dict.fromkeys(parts))


def labels(burns: Sequence[Burn], face: str) -> tuple[Label, ...]:
    """Return one label for each charted region on that face.

    A burn charted for both faces has its share on the front only, so that no share stands twice.
    """
    groups: dict[tuple[str, tuple[str, ...]], list[Burn]] = {}
    for burn in burns:
        if face in burn.faces:
            groups.setdefault((burn.region, burn.faces), []).append(burn)
    return tuple(_label(region, faces, face, group) for (region, faces), group in groups.items())


def _label(region: str, faces: tuple[str, ...], face: str, group: Sequence[Burn]) -> Label:
    notes = []
    both = len(faces) > 1
    if both:
        notes.append("front and back" if face == FRONT else "see front")
    if any(burn.around for burn in group):
        notes.append("circumferential")
    extents = () if both and face == BACK else _extents(group)
    return Label(region, face, both, _target(region, face), extents, tuple(notes))


def _target(region: str, face: str) -> str:
    parts = parts_of(region, face)
    name = region.removeprefix("left ").removeprefix("right ")
    wanted = POINTED_AT.get(name, ())
    return next((part for part in parts if part.endswith(wanted or ("",))), parts[0])


def _extents(group: Sequence[Burn]) -> tuple[Extent, ...]:
    found = []
    for depth in sorted(dict.fromkeys(burn.depth for burn in group), key=_deepest_first):
        shares = [burn.share_pct for burn in group if burn.depth == depth]
        known = math.fsum(share for share in shares if share is not None)
        has_share = any(share is not None for share in shares)
        below: tuple[str, ...] = ("not recorded",) if None in shares else ()
        below += ("not counted",) if depth == NOT_COUNTED else ()
        found.append(Extent(depth, share_text(known) if has_share else "? %", below, known))
    return tuple(found)
