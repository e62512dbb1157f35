"""The text of a Word file that may come from anywhere: read with limits, nothing in it is run or fetched."""

from __future__ import annotations

import zlib
from collections.abc import Iterator
from io import BytesIO
from typing import Any
from zipfile import BadZipFile, ZipFile, ZipInfo

from lxml import etree

from handoff.document.names import WORD

MEGABYTE_BYTES = 1_000_000

MOST_FILE_BYTES = 50 * MEGABYTE_BYTES
"""Of the file: pictures may make it large."""

MOST_PART_BYTES = 12 * MEGABYTE_BYTES
"""Of each part that holds text, when it is unpacked."""

MOST_PARTS_BYTES = 30 * MEGABYTE_BYTES
"""Of all parts that are read, unpacked."""

READ = ("word/document", "word/header", "word/footer", "word/footnotes", "word/endnotes", "word/comments")
"""Beginnings of the names of parts that hold text."""


class NotADocument(ValueError):
    """The file is no Word file that can be read; says why."""


def lines_of(content: bytes) -> list[tuple[str, str]]:
    """Return each paragraph and each table row with the name of its place; cells are joined by a bar.

    Raises:
        NotADocument: Not a .docx file, damaged, or larger than a document of words can be.
    """
    if len(content) > MOST_FILE_BYTES:
        raise NotADocument(
            f"it is larger than {MOST_FILE_BYTES // MEGABYTE_BYTES} MB; no document of words is"
        )
    try:
        with ZipFile(BytesIO(content)) as file:
            names = [info for info in file.infolist() if _holds_text(info.filename)]
            if not any(info.filename == "word/document.xml" for info in names):
                raise NotADocument("it is not a Word document (.docx); save it as one")
            left = MOST_PARTS_BYTES
            found: list[tuple[str, str]] = []
            for info in sorted(names, key=lambda info: (_rank(info.filename), info.filename)):
                part = unpacked(file, info, left)
                left -= len(part)
                found += _lines(part, info.filename.removeprefix("word/").removesuffix(".xml"))
            return found
    except (BadZipFile, zlib.error, EOFError, OSError, NotImplementedError, RuntimeError):
        raise NotADocument(
            "it is not a Word document (.docx), or it is damaged or locked; save it anew"
        ) from None
    except etree.XMLSyntaxError:
        raise NotADocument("a part of it is damaged; open it in Word and save it anew") from None


def _holds_text(name: str) -> bool:
    return name.startswith(READ) and name.endswith(".xml") and "/" not in name.removeprefix("word/")


def _rank(name: str) -> int:
    return next(index for index, start in enumerate(READ) if name.startswith(start))


def unpacked(file: ZipFile, info: ZipInfo, left: int) -> bytes:
    """Return a part; stops as soon as it grows beyond the limit, whatever the file says of its size.

    Raises:
        NotADocument: It is larger.
    """
    limit = min(MOST_PART_BYTES, left)
    chunks, size = [], 0
    with file.open(info) as part:
        while chunk := part.read(MEGABYTE_BYTES):
            size += len(chunk)
            if size > limit:
                raise NotADocument("it unpacks to more than a document of words can hold; it was not read")
            chunks.append(chunk)
    return b"".join(chunks)


def parsed(part: bytes) -> Any:
    """Return the root of a part; nothing that it names is fetched or expanded.

    Raises:
        NotADocument: It holds a document type.
        XMLSyntaxError: It is damaged.
    """
    parser = etree.XMLParser(resolve_entities=False, no_network=True, load_dtd=False, huge_tree=False)
    root = etree.fromstring(part, parser)
    if root.getroottree().docinfo.doctype:
        raise NotADocument("it holds a document type, which Word never writes; it was not read")
    return root


def _lines(part: bytes, name: str) -> Iterator[tuple[str, str]]:
    root = parsed(part)
    where = "" if name == "document" else f"{name}, "
    rows = 0
    for number, node in enumerate(_blocks(root), start=1):
        if node.tag == f"{WORD}tr":
            rows += 1
            cells = ["\n".join(map(_text, cell.iter(f"{WORD}p"))).strip() for cell in node.iter(f"{WORD}tc")]
            text = " | ".join(cell for cell in cells if cell)
            place = f"{where}table row {rows}"
        else:
            text, place = _text(node), f"{where}paragraph {number}"
        if text.strip():
            yield place, text


def _blocks(root: Any) -> Iterator[Any]:
    """Yield table rows and the paragraphs outside tables, in order; a table in a table belongs to its row."""
    for node in root.iter(f"{WORD}tr", f"{WORD}p"):
        inside = any(above.tag == f"{WORD}tr" for above in node.iterancestors(f"{WORD}tr"))
        if not inside:
            yield node


def _text(paragraph: Any) -> str:
    said = []
    for node in paragraph.iter(f"{WORD}t", f"{WORD}br", f"{WORD}tab", f"{WORD}noBreakHyphen"):
        if node.tag == f"{WORD}t":
            said.append(node.text or "")
        elif node.getparent().tag == f"{WORD}r":
            said.append({f"{WORD}br": "\n", f"{WORD}tab": "\t"}.get(node.tag, "-"))
    return "".join(said)
