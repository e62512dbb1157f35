"""Look at a drawing the way a program does: its shapes by name, where they lie, how they look, what they say."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from lxml import etree

from handoff.document.figures.shapes import EMU, NAMESPACES


@dataclass(frozen=True)
class Shape:
    """One shape; its measures are in points."""

    name: str
    left: float
    top: float
    wide: float
    high: float
    node: Any

    @property
    def right(self) -> float:
        return self.left + self.wide

    @property
    def bottom(self) -> float:
        return self.top + self.high

    @property
    def pattern(self) -> str:
        found = find(self.node, "wps:spPr/a:pattFill")
        return found[0].get("prst") if found else ""

    @property
    def fill(self) -> str:
        found = find(self.node, "wps:spPr/a:solidFill/a:srgbClr")
        return found[0].get("val") if found else ""

    @property
    def ground(self) -> str:
        found = find(self.node, "wps:spPr/a:pattFill/a:bgClr/a:srgbClr")
        return found[0].get("val") if found else self.fill

    @property
    def dash(self) -> str:
        found = find(self.node, "wps:spPr/a:ln/a:prstDash")
        return found[0].get("val") if found else ""

    @property
    def text(self) -> str:
        return " ".join(node.text for node in find(self.node, ".//w:t"))

    @property
    def is_closed(self) -> bool:
        return bool(find(self.node, ".//a:path/a:close"))

    def overlaps(self, other: Shape) -> bool:
        apart = self.right <= other.left or other.right <= self.left
        return not (apart or self.bottom <= other.top + 0.01 or other.bottom <= self.top + 0.01)


def find(node: Any, path: str) -> list[Any]:
    return node.findall(path, NAMESPACES)


def root(xml: str) -> Any:
    return etree.fromstring(xml)


def shapes(xml: str) -> dict[str, Shape]:
    """Return the shapes by name, in the order of painting; two of one name are a fault."""
    found: dict[str, Shape] = {}
    for node in root(xml).iter(f"{{{NAMESPACES['wps']}}}wsp"):
        name = find(node, "wps:cNvPr")[0].get("name")
        assert name not in found, name
        off, ext = find(node, "wps:spPr/a:xfrm/a:off")[0], find(node, "wps:spPr/a:xfrm/a:ext")[0]
        place = [int(off.get("x")), int(off.get("y")), int(ext.get("cx")), int(ext.get("cy"))]
        found[name] = Shape(name, *(measure / EMU for measure in place), node)
    return found


def said(xml: str) -> str:
    """Return the alternative text."""
    return str(find(root(xml), ".//wp:docPr")[0].get("descr"))


def sizes_pt(xml: str) -> set[float]:
    """Return the sizes of all text in points."""
    val = f"{{{NAMESPACES['w']}}}val"
    return {int(node.get(val)) / 2 for node in find(root(xml), ".//w:sz")}


def size(xml: str) -> tuple[float, float]:
    """Return width and height of a drawing in points."""
    extent = find(root(xml), ".//wp:extent")[0]
    return int(extent.get("cx")) / EMU, int(extent.get("cy")) / EMU
