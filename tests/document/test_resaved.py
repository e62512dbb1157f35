"""A document that another office program opened and saved again: text, ticks and references are still there."""

from __future__ import annotations

from io import BytesIO
from pathlib import Path
from typing import Any
from zipfile import ZIP_DEFLATED, ZipFile

import pytest
from lxml import etree

from handoff.document.making.markup import BOX, TICKED
from handoff.document.names import WORD, WORD_2010
from tests.document.printing import converted, example_documents
from tests.document.reading import body, parts, text

DRAWN = ("{http://schemas.openxmlformats.org/markup-compatibility/2006}AlternateContent", f"{WORD}drawing")
"""What holds the shapes of a figure, and what an old program shows in their place."""

EVERY = 3
"""Every third box is ticked before the document is saved again."""


def ticked(content: bytes) -> bytes:
    """Return a document in which someone ticked every third box."""
    root = body(content)
    for number, box in enumerate(_boxes(root)):
        if number % EVERY == 0:
            box.find(f".//{WORD_2010}checked").set(f"{WORD_2010}val", "1")
            next(box.iter(f"{WORD}t")).text = TICKED
    made = BytesIO()
    with ZipFile(made, "w", ZIP_DEFLATED) as file:
        for name, part in parts(content).items():
            file.writestr(name, etree.tostring(root) if name == "word/document.xml" else part)
    return made.getvalue()


def ticks(content: bytes) -> list[bool]:
    """Return the state of each box in order; both spellings of the state are read."""
    states = []
    for box in _boxes(body(content)):
        (state,) = _settings(box, "checked")
        value = state.get(f"{WORD_2010}val") or state.get(f"{WORD}val") or "1"
        states.append(value in ("1", "true"))
        assert (TICKED in text(box)) is states[-1]
    return states


def references(content: bytes) -> dict[str, str]:
    """Return the text of each bookmarked reference by the name of its bookmark."""
    found = {}
    for start in body(content).iter(f"{WORD}bookmarkStart"):
        name = start.get(f"{WORD}name")
        if name.startswith("row_"):
            found[name] = text(next(node for node in start.iterancestors(f"{WORD}tc")))
    return found


def words(content: bytes) -> str:
    """Return the text of the body without the marks of boxes and without spaces, which a resave may move."""
    said = "".join(
        part.text or ""
        for part in body(content).iter(f"{WORD}t")
        if next(part.iterancestors(*DRAWN), None) is None
    )
    return "".join(said.replace(TICKED, "").replace(BOX, "").split())


def words_of_figures(content: bytes) -> set[str]:
    """Return the texts of the figures; a program that saves them again adds a copy of each for older ones."""
    boxes = body(content).iter(f"{WORD}txbxContent")
    return {"".join(text(box).split()) for box in boxes}


def _boxes(root: Any) -> list[Any]:
    return [control for control in root.iter(f"{WORD}sdt") if _settings(control, "checkbox")]


def _settings(control: Any, name: str) -> list[Any]:
    """The settings of that name of a control itself; a program may write them in a namespace of its own."""
    return [node for node in control.find(f"{WORD}sdtPr").iter() if etree.QName(node).localname == name]


@pytest.fixture(scope="module")
def saved_again(tmp_path_factory: pytest.TempPathFactory) -> dict[str, tuple[bytes, bytes]]:
    """Every document of every example, ticked, and the same saved again by another program."""
    before = {name: ticked(content) for name, content in example_documents().items()}
    after = converted(before, "docx", tmp_path_factory.mktemp("resaved"))
    return {name: (content, after[Path(name).stem].read_bytes()) for name, content in before.items()}


def test_no_word_is_lost(saved_again: dict[str, tuple[bytes, bytes]]) -> None:
    for name, (before, after) in saved_again.items():
        assert words(before) == words(after), name
        assert words_of_figures(before) <= words_of_figures(after), name


def test_every_tick_is_kept_and_none_is_added(saved_again: dict[str, tuple[bytes, bytes]]) -> None:
    for name, (before, after) in saved_again.items():
        assert ticks(before) == ticks(after), name
        assert any(ticks(before))


def test_every_row_is_found_again_by_the_bookmark_of_its_reference(
    saved_again: dict[str, tuple[bytes, bytes]],
) -> None:
    for name, (before, after) in saved_again.items():
        assert references(before) == references(after), name
        assert all(key == f"row_{ref}" for key, ref in references(after).items())
        assert name.endswith("handover.docx") or references(after)
