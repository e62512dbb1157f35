"""Fit a document to the unit's paper: page size, and tables and tab stops as wide as the text."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from msgspec import Struct

from handoff.document.names import WORD

SIZES = {"A4": (11906, 16838), "Letter": (12240, 15840)}
"""Width and height of portrait paper in twentieths of a point (definition)."""


class Page(Struct, frozen=True):
    """The paper and how it is turned."""

    paper: str
    landscape: bool = False

    def size(self) -> tuple[int, int]:
        """Return width and height in twentieths of a point."""
        width, height = SIZES.get(self.paper, SIZES["A4"])
        return (height, width) if self.landscape else (width, height)


def fit(roots: Sequence[Any], page: Page) -> None:
    """Give every section of a document the paper ``page`` and scale what was as wide as its text.

    Args:
        roots: The body first, then headers and footers; changed in place.
        page: The paper wanted.
    """
    width, height = page.size()
    share = 1.0
    for section in roots[0].iter(f"{WORD}sectPr"):
        size, margins = section.find(f"{WORD}pgSz"), section.find(f"{WORD}pgMar")
        sides = sum(int(margins.get(f"{WORD}{side}")) for side in ("left", "right"))
        share = (width - sides) / (int(size.get(f"{WORD}w")) - sides)
        size.set(f"{WORD}w", str(width))
        size.set(f"{WORD}h", str(height))
        if page.landscape:
            size.set(f"{WORD}orient", "landscape")
        else:
            size.attrib.pop(f"{WORD}orient", None)
    if share != 1:
        for root in roots:
            _scale(root, share)


def _scale(root: Any, share: float) -> None:
    for node in root.iter(f"{WORD}gridCol", f"{WORD}tcW", f"{WORD}tblW"):
        if node.get(f"{WORD}type", "dxa") == "dxa":
            _multiply(node, f"{WORD}w", share)
    for node in root.iter(f"{WORD}tab"):
        _multiply(node, f"{WORD}pos", share)


def _multiply(node: Any, name: str, share: float) -> None:
    if node.get(name):
        node.set(name, str(round(float(node.get(name)) * share)))
