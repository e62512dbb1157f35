"""Every document of every example: valid, its ids unique, its properties right, every text in it."""

from __future__ import annotations

from datetime import UTC
from io import BytesIO
from pathlib import Path

import pytest
from docx import Document
from openxml_audit import FileFormat, OpenXmlValidator

from handoff.document.care_plan import care_plan
from handoff.document.context import context, texts
from handoff.document.handover import handover
from handoff.document.names import DRAWING, SHAPE, WORD, WORD_2010
from handoff.document.read_back import text_of
from tests.document.printing import all_documents, example_documents, further_patients
from tests.document.reading import body, tags
from tests.shift.helpers import EXAMPLES, assessed, text_of_example

KINDS = {"handover": handover, "care-plan": care_plan}


def test_an_office_validator_finds_nothing_in_any_document(tmp_path: Path) -> None:
    for name, content in {**all_documents(), **further_patients()}.items():
        path = tmp_path / name
        path.write_bytes(content)
        result = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365).validate(str(path))
        assert result.is_valid, (name, [str(error) for error in result.errors][:5])


@pytest.mark.parametrize("name", [f"{stem}-{kind}.docx" for stem in EXAMPLES for kind in KINDS])
class TestDocument:
    """One document of one example."""

    def test_no_id_stands_twice(self, name: str) -> None:
        root = body(example_documents()[name])
        kinds = {
            "content control": [node.get(f"{WORD}val") for node in root.iterfind(f".//{WORD}sdtPr/{WORD}id")],
            "bookmark": [node.get(f"{WORD}id") for node in root.iter(f"{WORD}bookmarkStart")],
            "name of a bookmark": [node.get(f"{WORD}name") for node in root.iter(f"{WORD}bookmarkStart")],
            "paragraph": [node.get(f"{WORD_2010}paraId") for node in root.iter(f"{WORD}p")],
            "drawing": [node.get("id") for node in root.iter(f"{DRAWING}docPr", f"{SHAPE}cNvPr")],
            "tag of a box": [tag for tag in tags(example_documents()[name]) if tag.count(":") == 2],
        }
        for kind, found in kinds.items():
            kept = [one for one in found if one is not None]
            assert len(set(kept)) == len(kept), kind

    def test_properties_say_what_it_is_when_it_was_made_and_from_what(self, name: str) -> None:
        stem, kind = next(
            (stem, kind) for stem in EXAMPLES for kind in KINDS if name == f"{stem}-{kind}.docx"
        )
        given = assessed(text_of_example(stem), EXAMPLES[stem])
        core = Document(BytesIO(example_documents()[name])).core_properties
        made_at = given.state.clock.day_and_time(given.now)
        assert core.title == f"Burn {kind.replace('-', ' ')}, made at {made_at}"
        assert core.language == "en-GB"
        assert core.identifier == given.state.digest
        assert core.created.replace(tzinfo=UTC) == core.modified.replace(tzinfo=UTC) == given.now
        assert given.state.name not in (core.title, core.author, core.subject, core.keywords, core.comments)

    def test_every_string_that_went_in_is_read_out_again(self, name: str) -> None:
        stem, kind = next(
            (stem, kind) for stem in EXAMPLES for kind in KINDS if name == f"{stem}-{kind}.docx"
        )
        given = assessed(text_of_example(stem), EXAMPLES[stem])
        page = text_of(example_documents()[name])
        for path, said in texts(context(KINDS[kind](given))):
            assert said in page, path
