"""Fill a care plan as a nurse does on screen, and save it as other programs do."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from io import BytesIO
from typing import Any
from zipfile import ZIP_DEFLATED, ZipFile

from docx import Document
from lxml import etree

from handoff.document.names import WORD, WORD_2010

Change = Callable[[Any], object]


def filled(plan: bytes, boxes: Mapping[str, str], written: Mapping[str, str] | None = None) -> bytes:
    """Return ``plan`` with boxes ticked (by row and stamp, with what is written beside) and controls written into."""
    document = Document(BytesIO(plan))
    for control in document.element.body.iter(f"{WORD}sdt"):
        found = control.find(f"{WORD}sdtPr/{WORD}tag")
        tag = "" if found is None else found.get(f"{WORD}val")
        kind, _, place = tag.partition(":")
        if kind == "row" and place in boxes:
            control.find(f"{WORD}sdtPr/{WORD_2010}checkbox/{WORD_2010}checked").set(f"{WORD_2010}val", "1")
            next(control.iter(f"{WORD}t")).text = "\u2612"
        if kind == "by" and boxes.get(place):
            _write(control, boxes[place])
        if written and tag in written:
            _write(control, written[tag])
    saved = BytesIO()
    document.save(saved)
    return saved.getvalue()


def _write(control: Any, text: str) -> None:
    for placeholder in list(control.iter(f"{WORD}showingPlcHdr")):
        placeholder.getparent().remove(placeholder)
    next(control.iter(f"{WORD}t")).text = text


def changed(content: bytes, change: Change, name: str = "word/document.xml") -> bytes:
    """Return a document with ``change`` done to the root of one of its parts."""
    parts = _parts(content)
    root = etree.fromstring(parts[name])
    change(root)
    return zipped({**parts, name: etree.tostring(root)})


def without(content: bytes, *names: str) -> bytes:
    """Return a document without some of its parts."""
    return zipped({name: part for name, part in _parts(content).items() if name not in names})


def zipped(parts: Mapping[str, bytes]) -> bytes:
    """Return a zip file of ``parts``."""
    made = BytesIO()
    with ZipFile(made, "w", ZIP_DEFLATED) as file:
        for name, part in parts.items():
            file.writestr(name, part)
    return made.getvalue()


def saved_elsewhere(root: Any) -> None:
    """Do to a document what another word processor does: tags lost, states spelled otherwise, paragraphs wrapped."""
    for tag in list(root.iter(f"{WORD}tag")):
        tag.getparent().remove(tag)
    for state in root.iter(f"{WORD_2010}checked"):
        state.tag = f"{WORD}checked"
        state.set(f"{WORD}val", state.attrib.pop(f"{WORD_2010}val"))
    for cell in root.iter(f"{WORD}tc"):
        paragraph = cell.find(f"{WORD}p")
        wrapper = etree.Element(f"{WORD}sdt")
        settings = etree.SubElement(wrapper, f"{WORD}sdtPr")
        etree.SubElement(settings, f"{WORD}alias").set(f"{WORD}val", "of another control")
        cell.replace(paragraph, wrapper)
        etree.SubElement(wrapper, f"{WORD}sdtContent").append(paragraph)


def without_controls(root: Any) -> None:
    """Leave the text of every control and nothing of the control itself."""
    for control in list(root.iter(f"{WORD}sdt")):
        content = control.find(f"{WORD}sdtContent")
        for node in list(content):
            control.addprevious(node)
        control.getparent().remove(control)


def without_bookmarks(root: Any) -> None:
    """Take the bookmarks away."""
    for mark in [*root.iter(f"{WORD}bookmarkStart"), *root.iter(f"{WORD}bookmarkEnd")]:
        mark.getparent().remove(mark)


def _parts(content: bytes) -> dict[str, bytes]:
    with ZipFile(BytesIO(content)) as file:
        return {name: file.read(name) for name in file.namelist()}
