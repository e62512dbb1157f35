"""What a reader who listens, enlarges or prints without colour needs, in every document of every example."""

from __future__ import annotations

from collections.abc import Iterator
from io import BytesIO
from itertools import pairwise
from typing import Any

import pytest
from docx import Document
from lxml import etree

from handoff.document.names import DRAWING, WORD
from tests.document.printing import all_documents
from tests.document.reading import body, parts, text
from tests.shift.helpers import EXAMPLES

NAMES = [f"{stem}-{kind}.docx" for stem in EXAMPLES for kind in ("handover", "care-plan", "note")] + [
    "ward.docx",
    "packet-fire-1-phone-report.docx",
    "packet-fire-2-transfer-summary.docx",
    "packet-fire-3-journey-sheet.docx",
    "packet-fire-4-working-and-sources.docx",
]
LEAST_CONTRAST = 4.5
"""Web Content Accessibility Guidelines 2.2, success criterion 1.4.3 (AA), for text of any size."""

WHITE, BLACK = "FFFFFF", "000000"


@pytest.fixture(params=NAMES)
def document(request: pytest.FixtureRequest) -> bytes:
    """Each document in turn."""
    return all_documents()[request.param]


def levels(content: bytes) -> list[int]:
    """The levels of the headings in the order of reading, those inside tables too."""
    found = []
    for style in body(content).iter(f"{WORD}pStyle"):
        name = style.get(f"{WORD}val")
        if name.startswith("Heading"):
            found.append(int(name.removeprefix("Heading")))
    return found


def contrast(one: str, other: str) -> float:
    """The contrast of two colours, 1 to 21 (WCAG 2.2, relative luminance)."""
    light, dark = sorted((_luminance(one), _luminance(other)), reverse=True)
    return (light + 0.05) / (dark + 0.05)


def _luminance(colour: str) -> float:
    shares = [int(colour[place : place + 2], 16) / 255 for place in (0, 2, 4)]
    linear = [share / 12.92 if share <= 0.04045 else ((share + 0.055) / 1.055) ** 2.4 for share in shares]
    return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]


def test_the_contrast_of_known_colours_is_right() -> None:
    assert round(contrast(WHITE, BLACK), 2) == 21
    assert round(contrast("777777", WHITE), 2) == 4.48


def test_headings_begin_at_the_first_level_and_skip_none(document: bytes) -> None:
    found = levels(document)
    assert found[0] == 1
    assert all(later <= earlier + 1 for earlier, later in pairwise(found))


def test_every_heading_says_something(document: bytes) -> None:
    for paragraph in body(document).iter(f"{WORD}p"):
        style = paragraph.find(f"{WORD}pPr/{WORD}pStyle")
        if style is not None and style.get(f"{WORD}val").startswith("Heading"):
            assert text(paragraph).strip()


def test_every_table_has_a_name_and_every_list_a_header_row_with_words(document: bytes) -> None:
    for table in body(document).iter(f"{WORD}tbl"):
        assert table.find(f"{WORD}tblPr/{WORD}tblCaption").get(f"{WORD}val").strip()
        look = table.find(f"{WORD}tblPr/{WORD}tblLook")
        first = table.find(f"{WORD}tr")
        if table.find(f"{WORD}tblPr/{WORD}tblStyle").get(f"{WORD}val") != "HandoffRows":
            continue
        assert look.get(f"{WORD}firstRow") == "1"
        assert first.find(f"{WORD}trPr/{WORD}tblHeader") is not None
        assert all(text(cell).strip() for cell in first.findall(f"{WORD}tc"))


def test_every_drawing_says_in_words_what_it_shows(document: bytes) -> None:
    for drawing in body(document).iter(f"{DRAWING}docPr"):
        assert len(drawing.get("descr", "")) > 20
        assert drawing.get("name")


def test_the_language_is_said_where_programs_look_for_it(document: bytes) -> None:
    found = parts(document)
    assert Document(BytesIO(document)).core_properties.language == "en-GB"
    for name in ("word/styles.xml", "word/settings.xml"):
        assert b'w:val="en-GB"' in found[name]


def test_a_flag_is_a_word_and_never_a_colour_alone(document: bytes) -> None:
    words = {"ACTION", "NOW", "REVIEW"}
    for run in body(document).iter(f"{WORD}r"):
        style = run.find(f"{WORD}rPr/{WORD}rStyle")
        if style is not None and style.get(f"{WORD}val").startswith("Flag"):
            assert text(run) in words
        colour = run.find(f"{WORD}rPr/{WORD}color")
        assert colour is None or contrast(colour.get(f"{WORD}val"), WHITE) >= LEAST_CONTRAST


def test_every_colour_of_text_stands_out_from_its_ground(document: bytes) -> None:
    styles = etree.fromstring(parts(document)["word/styles.xml"])
    fills = {WHITE, *_fills(body(document))}
    for properties in styles.iter(f"{WORD}rPr"):
        colour = properties.find(f"{WORD}color")
        if colour is None:
            continue
        own = properties.find(f"{WORD}shd")
        grounds = {own.get(f"{WORD}fill")} if own is not None else fills
        for ground in grounds:
            assert contrast(colour.get(f"{WORD}val"), ground) >= LEAST_CONTRAST


def test_a_control_that_is_filled_in_says_what_it_is_for(document: bytes) -> None:
    for control in body(document).iter(f"{WORD}sdtPr"):
        assert control.find(f"{WORD}alias").get(f"{WORD}val").strip()


def _fills(root: Any) -> Iterator[str]:
    for shade in root.iter(f"{WORD}shd"):
        if shade.get(f"{WORD}fill") not in (None, "auto"):
            yield shade.get(f"{WORD}fill")
