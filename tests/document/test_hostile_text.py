"""Text that could break a document: it must stand on the page, whole, or be said to be unprintable."""

from __future__ import annotations

from io import BytesIO
from pathlib import Path

import pytest
from docx import Document
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from msgspec.structs import replace
from openxml_audit import FileFormat, OpenXmlValidator

from handoff.document import DocumentError, draft
from handoff.document.context import context
from handoff.document.finish import Properties, finish
from handoff.document.paper import Page
from handoff.document.printable import visible
from handoff.document.read_back import check_document, text_of
from handoff.document.render import fill
from handoff.plugin import Flag, Part, System
from tests.document.fake import STEM, assessment, at, item, state

HOSTILE = {
    "markup": "pain < 3 & worse > before \"quoted\" 'single'",
    "closing tags": "</w:t></w:r></w:p>]]><!-- -->",
    "template syntax": "{{ 7*7 }} {% for x in y %} {# gone #} {_{ }_} {_% %_} {%p if %} {{r x }} }} {{",
    "right to left": "שלום 500 mg عربي",
    "emoji": "\U0001f525 \U0001f469\u200d\u2695\ufe0f \U0001f3f4\U000e0067\U000e007f",
    "two thousand letters": "very long note " * 133,
    "one long word": "x" * 2000,
    "spaces": "  two before,  two between, two after  ",
    "lines and tabs": "first\nsecond\r\nthird\tafter a tab\u2028fourth",
    "control characters": "bell \x07 null \x00 form \x0c escape \x1b delete \x7f",
    "direction controls": "dose \u202e05\u202c mg \u2066x\u2069 \u200f",
    "not characters": "\ufffe \uffff \ud800 \ue000 \ufdd0 \U0001ffff",
    "hidden": "zero\u200bwidth\ufeff soft\u00adhyphen",
}


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_in_every_field_stands_on_the_page(name: str, tmp_path: Path) -> None:
    text = HOSTILE[name]
    given = assessment()
    items = tuple(replace(entry, label=text, shown=text, cautions=(text,)) for entry in given.items)
    actions = tuple(replace(entry, text=text, why=text, cautions=(text,)) for entry in given.actions)
    made = draft(replace(given, items=items, actions=actions), STEM)
    validator = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
    for file, content in made.items():
        assert visible(text).strip() in text_of(content)
        (tmp_path / file).write_bytes(content)
        assert validator.validate(str(tmp_path / file)).is_valid


def test_hostile_names_stand_in_the_header() -> None:
    name = "O'Neill <b> & {{ name }} {# x #}"
    patient = state(
        f'handoff: 1\nclock: Europe/Dublin\npatient: {{name: "{name}", born: 1985-02-11}}\ninjury: {{}}\n'
    )
    for content in draft(replace(assessment(), state=patient), STEM).values():
        header = Document(BytesIO(content)).sections[0].header
        assert name in "".join(paragraph.text for paragraph in header.paragraphs)


@settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.text(min_size=1, max_size=300))
def test_any_text_survives_or_is_named(text: str) -> None:
    patient = state()
    entry = item(
        "a.b", "Note", text, Part.ASSESSMENT, System.GENERAL, as_of=at(patient, "14:15"), flag=Flag.REVIEW
    )
    content = draft(replace(assessment(), items=(entry,), actions=()), STEM)[f"{STEM}-handover.docx"]
    assert visible(text.strip()).strip("\n") in text_of(content)


@pytest.mark.parametrize(
    ("typed", "printed"),
    [
        ("bell\x07", "bell[control character]"),
        ("\u202e05", "[direction control]05"),
        ("a\u200bb", "a[invisible character]b"),
        ("\ud800", "[unreadable character]"),
        ("\ue000", "[unprintable character]"),
        ("line\r\nline", "line\nline"),
        ("\u05d0\u05d1", "\u05d0\u05d1\u200e"),
        ("\U0001f469\u200d\u2695\ufe0f", "\U0001f469\u200d\u2695\ufe0f"),
        ("caf\u00e9, 4 \u00b5g", "caf\u00e9, 4 \u00b5g"),
    ],
)
def test_what_a_page_cannot_show_is_named_in_its_place(typed: str, printed: str) -> None:
    assert visible(typed) == printed


def template(*paragraphs: str) -> bytes:
    document = Document()
    for text in paragraphs:
        document.add_paragraph(text)
    saved = BytesIO()
    document.save(saved)
    return saved.getvalue()


def filled(content: bytes, data: dict[str, object]) -> bytes:
    made = fill(content, "own.docx", data)  # type: ignore[arg-type]
    patient = state()
    finished = finish(made.template.docx, Properties("t", at(patient, "19:30"), "d"), Page("A4"))
    check_document(finished, made.printed, data)  # type: ignore[arg-type]
    return finished


def test_a_misspelt_field_is_named() -> None:
    with pytest.raises(DocumentError, match=r"own\.docx.*namme"):
        filled(template("{{ namme }}"), {"name": "x"})


def test_a_misspelt_field_of_a_part_is_named() -> None:
    with pytest.raises(DocumentError, match="wieght"):
        filled(template("{{ identity.wieght }}"), {"identity": {"weight": "82 kg"}})


def test_a_tag_that_is_not_closed_is_a_fault_of_the_template() -> None:
    with pytest.raises(DocumentError, match=r"own\.docx"):
        filled(template("{% if name %}"), {"name": "x"})


def test_a_field_that_the_template_leaves_out_is_named() -> None:
    with pytest.raises(DocumentError, match=r"does not print the field rows\[2\]"):
        filled(template("{{ rows[0] }}"), {"rows": ["first", "second"]})


def test_a_text_that_the_filling_lost_is_named() -> None:
    made = fill(template("{{ name }}"), "own.docx", {"name": "seen"})
    with pytest.raises(DocumentError, match="the field name is not in the document"):
        check_document(template("something else"), made.printed, {"name": "seen"})


def test_a_key_is_found_before_a_method_of_the_same_name() -> None:
    data: dict[str, object] = {"a": {"items": "one", "keys": "two", "values": "three"}}
    assert "one two three" in text_of(filled(template("{{ a.items }} {{ a.keys }} {{ a.values }}"), data))


@pytest.mark.parametrize("tag", ["{{ name|safe }}", "{{ name|tojson }}", "{{ name.__class__ }}"])
def test_a_template_cannot_bring_markup_in_or_reach_the_program(tag: str) -> None:
    with pytest.raises(DocumentError):
        filled(template(tag), {"name": "x"})


def test_a_tag_that_word_has_split_over_runs_is_filled() -> None:
    document = Document()
    paragraph = document.add_paragraph()
    for piece in ("Name: {", "{ na", "me }", "}"):
        paragraph.add_run(piece)
    saved = BytesIO()
    document.save(saved)
    assert "Name: Ada Brisk" in text_of(filled(saved.getvalue(), {"name": "Ada Brisk"}))


def test_a_constant_in_a_template_does_not_upset_the_reading_back() -> None:
    assert "first then last" in text_of(filled(template("{{ name }} then {{ 'last' }}"), {"name": "first"}))


def test_a_section_that_is_not_finished_text_is_refused() -> None:
    from msgspec import Struct

    class Unfinished(Struct, frozen=True):
        volume: float

    with pytest.raises(TypeError):
        context(Unfinished(1.0))
