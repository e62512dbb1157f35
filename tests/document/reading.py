"""Read a made document the way a reader's program would."""

from __future__ import annotations

from io import BytesIO
from typing import Any
from zipfile import ZipFile

from docx import Document
from lxml import etree

from handoff.document.names import WORD


def parts(content: bytes) -> dict[str, bytes]:
    """Return the parts of a .docx file by name."""
    with ZipFile(BytesIO(content)) as file:
        return {name: file.read(name) for name in file.namelist()}


def body(content: bytes) -> Any:
    """Return the root of the main part."""
    return etree.fromstring(parts(content)["word/document.xml"])


def text(node: Any) -> str:
    """Return the text below ``node``."""
    return "".join(part.text or "" for part in node.iter(f"{WORD}t"))


def headings(content: bytes, level: int) -> list[str]:
    """Return the headings of a level in order, those inside tables too."""
    found = []
    for paragraph in body(content).iter(f"{WORD}p"):
        style = paragraph.find(f"{WORD}pPr/{WORD}pStyle")
        if style is not None and style.get(f"{WORD}val") == f"Heading{level}":
            found.append(text(paragraph))
    return found


def tables(content: bytes) -> dict[str, list[Any]]:
    """Return the tables by the label of their first header cell."""
    found: dict[str, list[Any]] = {}
    for table in Document(BytesIO(content)).tables:
        found.setdefault(table.cell(0, 0).text, []).append(table)
    return found


def cells(table: Any) -> list[list[str]]:
    """Return the texts of a table, row by row."""
    return [[cell.text for cell in row.cells] for row in table.rows]


def tags(content: bytes) -> list[str]:
    """Return the tags of the content controls in order."""
    return [tag.get(f"{WORD}val") for tag in body(content).iter(f"{WORD}tag")]
