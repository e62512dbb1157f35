"""A finished figure: its drawing, which goes into the file in place of a mark, and the lines printed with it."""

from __future__ import annotations

from collections.abc import Iterator

from msgspec import Struct

from handoff.document.context import Data
from handoff.document.sections import Mark


class Drawing(Mark):
    """The tag of the place in the template where a drawing goes, with the drawing itself."""

    __slots__ = ("xml",)

    xml: str

    def __new__(cls, tag: str, xml: str) -> Drawing:
        """Return the tag ``tag`` with the run ``xml`` that is put in its place."""
        made = super().__new__(cls, tag)
        made.xml = xml
        return made


class Figure(Struct, frozen=True):
    """A drawing, what its place in the template is called, and the lines printed below it."""

    drawing: Drawing
    title: Mark
    notes: tuple[str, ...]


def drawings(data: Data) -> dict[str, str]:
    """Return every drawing of a document's data by the tag of its place."""
    return {str(drawing): drawing.xml for drawing in _drawings(data)}


def _drawings(data: Data) -> Iterator[Drawing]:
    if isinstance(data, Drawing):
        yield data
    elif isinstance(data, dict):
        for value in data.values():
            yield from _drawings(value)
    elif isinstance(data, list):
        for value in data:
            yield from _drawings(value)
