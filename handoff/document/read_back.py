"""Read a finished document and prove that every text that went in stands in it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from io import BytesIO
from typing import Any
from zipfile import ZipFile

from lxml import etree

from handoff.document.context import Data, texts
from handoff.document.errors import DocumentError
from handoff.document.names import WORD
from handoff.document.sections import Mark

_SHORT = 60


def check_document(content: bytes, printed: list[str], data: Mapping[str, Data]) -> None:
    """Raise unless every text of ``data`` was printed and is in the document, and every tag marks a control.

    Args:
        content: The finished .docx file.
        printed: The texts in the order in which the template printed them.
        data: What the template was filled with.

    Raises:
        DocumentError: A text or a tag is missing; names the field.
    """
    roots = list(_roots(content))
    _check_printed(roots, printed, data)
    _check_marks(roots, dict(data))


def _check_printed(roots: Iterable[Any], printed: list[str], data: Mapping[str, Data]) -> None:
    fields = list(texts(dict(data)))
    times = Counter(printed)
    for path, text in fields:
        times[text] -= 1
        if times[text] < 0:
            raise DocumentError(
                f"the template does not print the field {path}; put it back into the template"
            )
    page = _text_in(roots)
    place = 0
    for text in printed:
        if not text:
            continue
        found = page.find(text, place)
        if found < 0:
            path = next((path for path, value in fields if value == text), text[:_SHORT])
            raise DocumentError(f"the text of the field {path} is not in the document; it was not written")
        place = found + len(text)


def _check_marks(roots: Iterable[Any], data: Data) -> None:
    tags = {tag.get(f"{WORD}val") for root in roots for tag in root.iter(f"{WORD}tag", f"{WORD}alias")}
    for mark in _marks(data):
        if str(mark) not in tags:
            raise DocumentError(
                f"the template has no content control for {mark}; put it back into the template"
            )


def text_of(content: bytes) -> str:
    """Return the text of a .docx file: body, then headers, then footers, one paragraph a line."""
    return _text_in(_roots(content))


def _text_in(roots: Iterable[Any]) -> str:
    return "\n".join(_text(paragraph) for root in roots for paragraph in root.iter(f"{WORD}p"))


def _roots(content: bytes) -> Iterable[Any]:
    with ZipFile(BytesIO(content)) as file:
        names = file.namelist()
        for start in ("word/document", "word/header", "word/footer"):
            for name in sorted(name for name in names if name.startswith(start) and name.endswith(".xml")):
                yield etree.fromstring(file.read(name))


def _text(paragraph: Any) -> str:
    said = []
    for node in paragraph.iter(f"{WORD}t", f"{WORD}br", f"{WORD}tab"):
        if node.tag == f"{WORD}t":
            said.append(node.text or "")
        elif node.getparent().tag == f"{WORD}r":
            said.append("\n" if node.tag == f"{WORD}br" else "\t")
    return "".join(said)


def _marks(data: Data) -> Iterable[Mark]:
    if isinstance(data, Mark):
        yield data
    elif isinstance(data, dict):
        for value in data.values():
            yield from _marks(value)
    elif isinstance(data, list):
        for value in data:
            yield from _marks(value)
