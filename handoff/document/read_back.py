"""Read a finished document and prove that every text that went in stands in it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from io import BytesIO
from zipfile import ZipFile

from lxml import etree

from handoff.document.context import Data, texts
from handoff.document.errors import DocumentError
from handoff.document.names import WORD
from handoff.document.sections import Mark

_SHORT = 60
_PARAGRAPH, _RUN, _TEXT, _VALUE = (f"{WORD}{name}" for name in ("p", "r", "t", "val"))
_TAGS = (f"{WORD}tag", f"{WORD}alias")
_WHITE = {f"{WORD}br": "\n", f"{WORD}tab": "\t"}
_PASSING = (_PARAGRAPH, _TEXT, *_TAGS, *_WHITE)


def check_document(content: bytes, printed: list[str], data: Mapping[str, Data]) -> None:
    """Raise unless every text of ``data`` was printed and is in the document, and every tag marks a control.

    Args:
        content: The finished .docx file.
        printed: The texts in the order in which the template printed them.
        data: What the template was filled with.

    Raises:
        DocumentError: A text or a tag is missing; names the field.
    """
    parts = _read(content)
    _check_printed(_text_in(parts), printed, data)
    _check_marks({tag for part in parts for tag in part.tags}, dict(data))


def _check_printed(page: str, printed: list[str], data: Mapping[str, Data]) -> None:
    fields = list(texts(dict(data)))
    times = Counter(printed)
    for path, text in fields:
        times[text] -= 1
        if times[text] < 0:
            raise DocumentError(
                f"the template does not print the field {path}; put it back into the template"
            )
    place = 0
    for text in printed:
        if not text:
            continue
        found = page.find(text, place)
        if found < 0:
            path = next((path for path, value in fields if value == text), text[:_SHORT])
            raise DocumentError(f"the text of the field {path} is not in the document; it was not written")
        place = found + len(text)


def _check_marks(tags: set[str], data: Data) -> None:
    for mark in _marks(data):
        if str(mark) not in tags:
            raise DocumentError(
                f"the template has no content control for {mark}; put it back into the template"
            )


def text_of(content: bytes) -> str:
    """Return the text of a .docx file: body, then headers, then footers, one paragraph a line."""
    return _text_in(_read(content))


def _text_in(parts: Iterable[_Part]) -> str:
    return "".join(part.text for part in parts).removeprefix("\n")


class _Part:
    """The text of one part of a document, a paragraph beginning on a line of its own, and its tags."""

    def __init__(self, content: bytes) -> None:
        self.tags: set[str] = set()
        said: list[str] = []
        # Elements are taken as they pass and let go at once, so that no second tree of the document is held.
        for event, node in etree.iterparse(BytesIO(content), events=("start", "end"), tag=_PASSING):
            if event == "end":
                if node.tag == _TEXT:
                    said.append(node.text or "")
                elif node.tag == _PARAGRAPH:
                    node.clear(keep_tail=True)
            elif node.tag == _PARAGRAPH:
                said.append("\n")
            elif node.tag in _TAGS:
                self.tags.add(node.get(_VALUE, ""))
            elif node.tag in _WHITE and node.getparent().tag == _RUN:
                said.append(_WHITE[node.tag])
        self.text = "".join(said)


def _read(content: bytes) -> list[_Part]:
    found = []
    with ZipFile(BytesIO(content)) as file:
        names = file.namelist()
        for start in ("word/document", "word/header", "word/footer"):
            for name in sorted(name for name in names if name.startswith(start) and name.endswith(".xml")):
                found.append(_Part(file.read(name)))
    return found


def _marks(data: Data) -> Iterable[Mark]:
    if isinstance(data, Mark):
        yield data
    elif isinstance(data, dict):
        for value in data.values():
            yield from _marks(value)
    elif isinstance(data, list):
        for value in data:
            yield from _marks(value)
