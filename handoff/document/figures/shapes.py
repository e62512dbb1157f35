"""Shapes of DrawingML as text: paths, lines and labels, gathered in one group that Word can edit.

All measures are in points. Every shape has a name, so that a reader's program finds it again.
"""

from __future__ import annotations

from collections.abc import Sequence
from xml.sax.saxutils import escape

from msgspec import Struct

from handoff.document.figures.curves import Path, Point, oval
from handoff.document.printable import visible

EMU = 12700
"""English metric units in a point (definition)."""

FINE = 100
"""Parts of a unit in which the points of a path are written."""

ORIGIN = Point(0.0, 0.0)
BLACK, WHITE, GREY = "000000", "FFFFFF", "595959"

SMALLEST_PT = 7.0
"""No label is set smaller than this."""

MOST_LETTERS = 1500
"""Alternative text goes no further."""

NAMESPACES = {
    "w": "http://schemas.openxmlformats.org/wordprocessingml/2006/main",
    "wp": "http://schemas.openxmlformats.org/drawingml/2006/wordprocessingDrawing",
    "a": "http://schemas.openxmlformats.org/drawingml/2006/main",
    "wpg": "http://schemas.microsoft.com/office/word/2010/wordprocessingGroup",
    "wps": "http://schemas.microsoft.com/office/word/2010/wordprocessingShape",
    "mc": "http://schemas.openxmlformats.org/markup-compatibility/2006",
}


class Look(Struct, frozen=True):
    """How a shape is filled and lined: a colour, a preset pattern in black upon that colour, or neither."""

    fill: str = ""
    pattern: str = ""
    line: str = BLACK
    width_pt: float = 0.75
    dash: str = ""


class Words(Struct, frozen=True):
    """One line of a label."""

    text: str
    size_pt: float = SMALLEST_PT
    bold: bool = False


def shape(name: str, path: Path, look: Look, origin: Point = ORIGIN, scale: float = 1.0) -> str:
    """Return a closed path as a shape; its own 0 lies at ``origin`` and its unit is ``scale`` points long."""
    left, top, right, bottom = path.box()
    wide, high = right - left, bottom - top
    size = f'w="{max(_fine(wide), 1)}" h="{max(_fine(high), 1)}"'
    geometry = _custom(f"<a:path {size}>{_steps(path, left, top)}</a:path>")
    place = (origin.x + left * scale, origin.y + top * scale, wide * scale, high * scale)
    return _shape(name, place, geometry, look)


def box(name: str, left: float, top: float, wide: float, high: float, look: Look) -> str:
    """Return a rectangle."""
    return _shape(name, (left, top, wide, high), _preset("rect"), look)


def disc(name: str, centre: Point, radius: float, look: Look) -> str:
    """Return a circle."""
    place = (centre.x - radius, centre.y - radius, 2 * radius, 2 * radius)
    return _shape(name, place, _preset("ellipse"), look)


def dots(name: str, centres: Sequence[Point], radius: float, look: Look) -> str:
    """Return circles of one size as one shape."""
    paths = [oval(centre, radius, radius) for centre in centres]
    boxes = [path.box() for path in paths]
    left, top = min(box[0] for box in boxes), min(box[1] for box in boxes)
    wide, high = max(box[2] for box in boxes) - left, max(box[3] for box in boxes) - top
    drawn = "".join(_steps(path, left, top) for path in paths)
    geometry = _custom(f'<a:path w="{_fine(wide)}" h="{_fine(high)}">{drawn}</a:path>')
    return _shape(name, (left, top, wide, high), geometry, look)


def stroke(name: str, points: Sequence[Point], look: Look) -> str:
    """Return an open line through ``points``."""
    left, top = min(point.x for point in points), min(point.y for point in points)
    wide = max(point.x for point in points) - left
    high = max(point.y for point in points) - top
    first, *others = (f'<a:pt x="{_emu(x - left)}" y="{_emu(y - top)}"/>' for x, y in points)
    drawn = f"<a:moveTo>{first}</a:moveTo>" + "".join(f"<a:lnTo>{other}</a:lnTo>" for other in others)
    size = f'w="{max(_emu(wide), 1)}" h="{max(_emu(high), 1)}"'
    return _shape(
        name, (left, top, wide, high), _custom(f'<a:path {size} fill="none">{drawn}</a:path>'), look
    )


def label(
    name: str,
    left: float,
    top: float,
    wide: float,
    high: float,
    lines: Sequence[Words],
    *,
    align: str = "left",
    anchor: str = "t",
    fill: str = "",
) -> str:
    """Return lines of text in a box; ``align`` is left, center or right, ``anchor`` t, ctr or b."""
    paragraphs = "".join(_paragraph(words, align) for words in lines)
    body = (
        f'<wps:bodyPr wrap="square" lIns="0" tIns="0" rIns="0" bIns="0" '
        f'anchor="{anchor}" anchorCtr="0"><a:noAutofit/></wps:bodyPr>'
    )
    text = f"<wps:txbx><w:txbxContent>{paragraphs}</w:txbxContent></wps:txbx>{body}"
    place = (left, top, wide, high)
    return _shape(name, place, _preset("rect"), Look(fill=fill, line=""), text, ' txBox="1"')


def _paragraph(words: Words, align: str) -> str:
    half_points = round(2 * words.size_pt)
    look = f'{"<w:b/><w:bCs/>" if words.bold else ""}<w:color w:val="{BLACK}"/>'
    look += f'<w:sz w:val="{half_points}"/><w:szCs w:val="{half_points}"/>'
    spacing = '<w:spacing w:before="0" w:after="0" w:line="240" w:lineRule="auto"/>'
    return (
        f'<w:p><w:pPr>{spacing}<w:ind w:left="0" w:right="0" w:firstLine="0"/><w:jc w:val="{align}"/></w:pPr>'
        f'<w:r><w:rPr>{look}</w:rPr><w:t xml:space="preserve">{_text(words.text)}</w:t></w:r></w:p>'
    )


def shorten(text: str, letters: int) -> str:
    """Return ``text``, cut with an ellipsis where it is longer than ``letters``."""
    return text if len(text) <= letters else f"{text[: letters - 1]}\u2026"


def described(sentences: Sequence[str]) -> str:
    """Return alternative text from sentences, as many as a reader's program takes; says where the rest is."""
    text = " ".join(sentences)
    end = " The rest stands in the table."
    return (
        text if len(text) <= MOST_LETTERS else f"{text[: MOST_LETTERS - len(end)].rpartition('. ')[0]}.{end}"
    )


def group(name: str, description: str, wide: float, high: float, shapes: Sequence[str]) -> str:
    """Return a run that holds the shapes as one inline group with its alternative text.

    A white ground as large as the group lies below them: some programs stretch a group that its
    shapes do not fill.
    """
    shapes = [box("ground", 0, 0, wide, high, Look(fill=WHITE, line="")), *shapes]
    size = f'cx="{_emu(wide)}" cy="{_emu(high)}"'
    frame = f'<a:xfrm><a:off x="0" y="0"/><a:ext {size}/><a:chOff x="0" y="0"/><a:chExt {size}/></a:xfrm>'
    declared = " ".join(f'xmlns:{prefix}="{uri}"' for prefix, uri in NAMESPACES.items())
    drawing = (
        f'<w:drawing><wp:inline distT="0" distB="0" distL="0" distR="0"><wp:extent {size}/>'
        f'<wp:effectExtent l="0" t="0" r="0" b="0"/>'
        f'<wp:docPr id="1" name="{_attribute(name)}" descr="{_attribute(description)}"/>'
        f'<wp:cNvGraphicFramePr/><a:graphic><a:graphicData uri="{NAMESPACES["wpg"]}"><wpg:wgp>'
        f"<wpg:cNvGrpSpPr/><wpg:grpSpPr>{frame}</wpg:grpSpPr>{''.join(shapes)}"
        f"</wpg:wgp></a:graphicData></a:graphic></wp:inline></w:drawing>"
    )
    instead = _text(f"{name}: this program does not show drawings; the same facts stand in the text.")
    return (
        f'<w:r {declared}><mc:AlternateContent><mc:Choice Requires="wpg">{drawing}</mc:Choice>'
        f"<mc:Fallback><w:t>{instead}</w:t></mc:Fallback></mc:AlternateContent></w:r>"
    )


def _shape(
    name: str,
    place: tuple[float, float, float, float],
    geometry: str,
    look: Look,
    inside: str = "<wps:bodyPr/>",
    kind: str = "",
) -> str:
    left, top, wide, high = (_emu(measure) for measure in place)
    return (
        f'<wps:wsp><wps:cNvPr id="1" name="{_attribute(name)}"/><wps:cNvSpPr{kind}/><wps:spPr>'
        f'<a:xfrm><a:off x="{left}" y="{top}"/><a:ext cx="{wide}" cy="{high}"/></a:xfrm>{geometry}'
        f"{_fill(look)}{_line(look)}</wps:spPr>{inside}</wps:wsp>"
    )


def _fill(look: Look) -> str:
    if look.pattern:
        ink = (
            f'<a:fgClr><a:srgbClr val="{BLACK}"/></a:fgClr><a:bgClr><a:srgbClr val="{look.fill}"/></a:bgClr>'
        )
        return f'<a:pattFill prst="{look.pattern}">{ink}</a:pattFill>'
    return f'<a:solidFill><a:srgbClr val="{look.fill}"/></a:solidFill>' if look.fill else "<a:noFill/>"


def _line(look: Look) -> str:
    if not look.line:
        return "<a:ln><a:noFill/></a:ln>"
    dash = f'<a:prstDash val="{look.dash}"/>' if look.dash else ""
    colour = f'<a:solidFill><a:srgbClr val="{look.line}"/></a:solidFill>'
    return f'<a:ln w="{_emu(look.width_pt)}">{colour}{dash}<a:round/></a:ln>'


def _preset(name: str) -> str:
    return f'<a:prstGeom prst="{name}"><a:avLst/></a:prstGeom>'


def _custom(path: str) -> str:
    return (
        '<a:custGeom><a:avLst/><a:gdLst/><a:ahLst/><a:cxnLst/><a:rect l="0" t="0" r="r" b="b"/>'
        f"<a:pathLst>{path}</a:pathLst></a:custGeom>"
    )


def _steps(path: Path, left: float, top: float) -> str:
    def at(point: Point) -> str:
        return f'<a:pt x="{round((point[0] - left) * FINE)}" y="{round((point[1] - top) * FINE)}"/>'

    drawn = [f"<a:moveTo>{at(path.start)}</a:moveTo>"]
    for end, first, second in path.steps:
        if first is None or second is None:
            drawn.append(f"<a:lnTo>{at(end)}</a:lnTo>")
        else:
            drawn.append(f"<a:cubicBezTo>{at(first)}{at(second)}{at(end)}</a:cubicBezTo>")
    return "".join(drawn) + "<a:close/>"


def _fine(measure: float) -> int:
    return round(measure * FINE)


def _emu(points: float) -> int:
    return round(points * EMU)


def _text(text: str) -> str:
    return escape(visible(text).replace("\n", " ").replace("\t", " "))


def _attribute(text: str) -> str:
    return escape(visible(text).replace("\n", " ").replace("\t", " "), {'"': "&quot;"})
