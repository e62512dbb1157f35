"""The body chart: front and back of our own figure, shaded by depth, with the share of each burned region."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import partial

from handoff.document.figures import burned
from handoff.document.figures.body import FACES, FRONT, body
from handoff.document.figures.burned import Burn
from handoff.document.figures.callouts import Column, leader, place, plus, written
from handoff.document.figures.curves import Path, Point, oval
from handoff.document.figures.depths import FIRST_SHADED, Depth
from handoff.document.figures.figure import Drawing, Figure
from handoff.document.figures.legend import Entry, legend
from handoff.document.figures.limbs import Region
from handoff.document.figures.proportions import Build
from handoff.document.figures.shapes import (
    GREY,
    ORIGIN,
    WHITE,
    Look,
    Words,
    box,
    described,
    group,
    label,
    shape,
    stroke,
)
from handoff.document.sections import Mark, sentence
from handoff.plugin import plural

WIDE = 527.0
"""Width of the figure in points: that of the text on either paper."""

TITLE_HIGH, FIGURE_HIGH, FOOT = 14.0, 284.0, 8.0
UNITS = 1000
"""Height of the body in the units of its paths."""

EDGE = 7.0
BLANK = Look(fill=WHITE, line=GREY, width_pt=0.5)
HALO, RING = Look(line=WHITE, width_pt=4.5), Look(width_pt=2.25)
SHADING = (
    "Percent of the body surface. Shading shows which regions hold a burn and how deep it is, not its outline; "
    "a larger region is shaded in all its parts. White: no burn recorded there."
)


def body_chart(rows: Sequence[Sequence[object]], build: Build, said: str = "") -> tuple[Figure, ...]:
    """Return the body chart; none where no row can be drawn.

    Args:
        rows: Region, face, depth, share in % of the body, counted, circumferential, line.
        build: The proportions of the figure.
        said: What is printed before the notes: when it was assessed, the proportions of the figure.
    """
    burns, lost = burned.read(rows)
    if not burns:
        return ()
    drawn, crowded = [], 0
    for face in FACES:
        shapes, without = _face(burns, build, face, FACES.index(face) * WIDE / 2)
        drawn.append(shapes)
        crowded += without
    key, high = legend(_entries(burns), TITLE_HIGH + FIGURE_HIGH + FOOT, WIDE)
    total = TITLE_HIGH + FIGURE_HIGH + FOOT + high
    between = stroke(
        "between front and back", (Point(WIDE / 2, 0), Point(WIDE / 2, TITLE_HIGH + FIGURE_HIGH)), BLANK
    )
    xml = group("Body chart", _described(burns, build), WIDE, total, [between, *drawn, key])
    notes = [" ".join(part for part in (said, SHADING) if part)]
    if crowded:
        notes.append(f"No room beside the figure for {plural(crowded, 'label')}: the table has every region.")
    if lost:
        notes.append(f"Not drawn, no such region on the figure: {'; '.join(lost)}.")
    return (Figure(Drawing("figure:body-chart", xml), Mark("Body chart"), tuple(notes)),)


def _face(burns: Sequence[Burn], build: Build, face: str, left: float) -> tuple[str, int]:
    middle, scale = left + WIDE / 4, (FIGURE_HIGH - 4) / UNITS

    def at(point: Point) -> Point:
        return Point(middle + point.x * scale, TITLE_HIGH + 2 + point.y * scale)

    regions = body(build, face)
    shaded = burned.shading(burns, face)
    reach = max(region.path.box()[2] for region in regions.values()) * scale
    columns = _columns(left, middle, reach)
    targets = {name: at(region.anchor) for name, region in regions.items()}
    placed, crowded = place(burned.labels(burns, face), targets, middle, columns)
    drawn = [_title(face, middle, columns)]
    origin = at(ORIGIN)
    for name, region in _burned_last(regions, shaded):
        look = shaded[name][0].look if name in shaded else BLANK
        drawn.append(shape(f"{name}, {face}", region.path, look, origin, scale))
    for name in burned.ringed(burns, face):
        drawn.append(_ring(f"{name}, {face}", regions[name].ring, origin, scale))
    drawn += [leader(one, len(shaded[one.label.points_at]) > 1) for one in placed]
    drawn += [written(one) for one in placed]
    return "".join(drawn), crowded


def _columns(left: float, middle: float, reach: float) -> tuple[Column, Column]:
    top, bottom = TITLE_HIGH + 2, TITLE_HIGH + FIGURE_HIGH
    return (
        Column(left + 4, middle - reach - EDGE, top, bottom, True),
        Column(middle + reach + EDGE, left + WIDE / 2 - 4, top, bottom, False),
    )


def _burned_last(
    regions: Mapping[str, Region], shaded: Mapping[str, Sequence[Depth]]
) -> list[tuple[str, Region]]:
    """The regions with the burned ones on top, so that no neighbour covers a part of their outline."""
    head = {
        "head": regions["head"],
        **({"genitalia": regions["genitalia"]} if "genitalia" in regions else {}),
    }
    others = {name: region for name, region in regions.items() if name not in head}
    order = sorted(others.items(), key=lambda entry: entry[0] in shaded)
    return [*order, *head.items()]


def _title(face: str, middle: float, columns: tuple[Column, Column]) -> str:
    sides = ("right", "left") if face == FRONT else ("left", "right")
    drawn = [
        label(
            f"title of the {face}",
            middle - 40,
            0,
            80,
            TITLE_HIGH,
            [Words(face.upper(), 9, True)],
            align="center",
        )
    ]
    for side, column in zip(sides, columns, strict=True):
        words = [Words(f"patient's {side}", 7.5, bold=True)]
        wide = column.right - column.left
        align = "right" if column.is_left else "left"
        drawn.append(
            label(f"{face}: patient's {side}", column.left, 1, wide, TITLE_HIGH - 2, words, align=align)
        )
    return "".join(drawn)


def _ring(name: str, ring: Path, origin: Point = ORIGIN, scale: float = 1.0) -> str:
    halo = shape(f"halo of the ring round {name}", ring, HALO, origin, scale)
    return halo + shape(f"ring round {name}", ring, RING, origin, scale)


def _entries(burns: Sequence[Burn]) -> list[Entry]:
    depths = sorted(
        {burn.depth for burn in burns}, key=lambda depth: (depth.place < FIRST_SHADED, depth.place)
    )
    found = [Entry(partial(_swatch, depth), depth.words) for depth in depths]
    if any(burn.around for burn in burns):
        found.append(Entry(_ring_symbol, "ring: circumferential, all the way round"))
    if any(len(each) > 1 for face in FACES for each in burned.shading(burns, face).values()):
        found.append(
            Entry(_plus_symbol, "several depths in this region: shaded as the deepest, each with its share")
        )
    return found


def _swatch(depth: Depth, name: str, left: float, top: float, wide: float, high: float) -> str:
    return box(name, left, top, wide, high, depth.look)


def _ring_symbol(name: str, left: float, top: float, wide: float, high: float) -> str:
    return _ring(name, oval(Point(left + wide / 2, top + high / 2), wide / 2 - 1, high / 2 - 1.5))


def _plus_symbol(name: str, left: float, top: float, wide: float, high: float) -> str:
    return plus(name, Point(left + wide / 2, top + high / 2))


def _described(burns: Sequence[Burn], build: Build) -> str:
    said = [f"Body chart drawn with {build.name} proportions, front and back, patterns by depth."]
    for burn in burns:
        where = sentence(burn.region) + (f", {burn.faces[0]}" if len(burn.faces) == 1 else "")
        share = (
            "size not recorded"
            if burn.share_pct is None
            else f"{burned.share_text(burn.share_pct)} of the body"
        )
        around = ", circumferential" if burn.around else ""
        said.append(f"{where}: {burn.depth.words}, {share}{around}.")
    return described(said)
