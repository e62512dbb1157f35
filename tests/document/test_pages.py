"""What holds for every document: identity on each page, ids, paper, properties, validity, the same bytes."""

from __future__ import annotations

import shutil
import subprocess
from datetime import timedelta
from pathlib import Path
from typing import Any

import pytest
from docx import Document
from lxml import etree
from openxml_audit import FileFormat, OpenXmlValidator

from handoff.document import draft
from handoff.document.make_templates import make_all
from handoff.document.names import WORD, WORD_2010
from handoff.document.render import template_bytes
from handoff.policy import Policy
from tests.document.fake import STEM, assessment, bare
from tests.document.reading import body, parts, text

CAUTIONS = (
    "Check against patient, prescription and local policy",
    "not orders",
    "Nothing here diagnoses or orders",
)


def part(content: bytes, name: str) -> Any:
    found = [root for path, root in parts(content).items() if path.startswith(f"word/{name}")]
    assert len(found) == 1
    return etree.fromstring(found[0])


def test_both_documents_are_made_under_their_names(documents: dict[str, bytes]) -> None:
    assert list(documents) == [f"{STEM}-handover.docx", f"{STEM}-care-plan.docx"]


def test_every_page_says_who_the_patient_is(documents: dict[str, bytes]) -> None:
    for content in documents.values():
        header = text(part(content, "header"))
        for words in ("Tomas Ferrandel", "born 11 Feb 1985", "record number HSH-204518", "national NT-7781"):
            assert words in header


def test_every_page_says_when_it_was_made_from_which_file_and_which_page_it_is(
    documents: dict[str, bytes],
) -> None:
    digest = assessment().state.digest[:12]
    for content in documents.values():
        footer = part(content, "footer")
        assert f"Made at Sat 14 Mar 2026 19:30 from state file version {digest}" in text(footer)
        fields = [field.get(f"{WORD}instr").strip() for field in footer.iter(f"{WORD}fldSimple")]
        assert fields == ["PAGE", "NUMPAGES"]
        for words in CAUTIONS:
            assert words in text(footer)


def test_no_section_has_a_first_page_without_header(documents: dict[str, bytes]) -> None:
    for content in documents.values():
        sections = list(body(content).iter(f"{WORD}sectPr"))
        assert len(sections) == 1
        assert sections[0].find(f"{WORD}titlePg") is None


def test_every_listing_repeats_its_header_row_and_keeps_its_rows_whole(documents: dict[str, bytes]) -> None:
    for content in documents.values():
        for table in body(content).iter(f"{WORD}tbl"):
            rows = table.findall(f"{WORD}tr")
            style = table.find(f"{WORD}tblPr/{WORD}tblStyle").get(f"{WORD}val")
            if style == "HandoffRows":
                assert rows[0].find(f"{WORD}trPr/{WORD}tblHeader") is not None
            assert all(row.find(f"{WORD}trPr/{WORD}cantSplit") is not None for row in rows)


def test_no_number_of_a_content_control_bookmark_or_paragraph_stands_twice(
    documents: dict[str, bytes],
) -> None:
    for content in documents.values():
        root = body(content)
        for path in (f"{WORD}sdtPr/{WORD}id", f"{WORD}bookmarkStart"):
            name = f"{WORD}val" if path.endswith("sdtPr/" + f"{WORD}id") else f"{WORD}id"
            numbers = [node.get(name) for node in root.iterfind(f".//{path}")]
            assert len(set(numbers)) == len(numbers)
        numbers = [node.get(f"{WORD_2010}paraId") for node in root.iter() if node.get(f"{WORD_2010}paraId")]
        assert len(set(numbers)) == len(numbers)


def test_the_same_assessment_gives_the_same_bytes(documents: dict[str, bytes]) -> None:
    assert draft(assessment(), STEM) == documents


def test_properties_name_the_tool_the_moment_and_the_digest_and_no_patient(handover: bytes) -> None:
    from io import BytesIO

    core = Document(BytesIO(handover)).core_properties
    assert core.title == "Burn handover, made at Sat 14 Mar 2026 19:30"
    assert (core.author, core.last_modified_by, core.language) == ("handoff", "handoff", "en-GB")
    assert core.identifier == assessment().state.digest
    assert core.created == core.modified
    properties = parts(handover)["docProps/core.xml"] + parts(handover)["docProps/app.xml"]
    assert b"Ferrandel" not in properties
    assert b"2026-03-14T19:30:00Z" in properties


def test_parts_that_only_repeat_others_are_left_out(documents: dict[str, bytes]) -> None:
    for content in documents.values():
        assert not any("stylesWithEffects" in name or "thumbnail" in name for name in parts(content))


@pytest.mark.parametrize(("paper", "width"), [("A4", 11906), ("Letter", 12240)])
def test_tables_are_as_wide_as_the_text_on_each_paper(paper: str, width: int) -> None:
    made = draft(assessment(Policy(paper=paper, care_plan_orientation="portrait")), STEM)
    for content in made.values():
        size = next(body(content).iter(f"{WORD}pgSz"))
        assert int(size.get(f"{WORD}w")) == width
        assert size.get(f"{WORD}orient") is None
        for table in body(content).iter(f"{WORD}tbl"):
            columns = [int(column.get(f"{WORD}w")) for column in table.iter(f"{WORD}gridCol")]
            assert abs(sum(columns) - (width - 1360)) <= len(columns)


def test_the_care_plan_lies_on_its_side_unless_the_policy_says_otherwise(plan: bytes) -> None:
    size = next(body(plan).iter(f"{WORD}pgSz"))
    assert size.get(f"{WORD}orient") == "landscape"
    assert int(size.get(f"{WORD}w")) > int(size.get(f"{WORD}h"))


def test_the_shift_is_as_long_as_the_policy_says() -> None:
    made = draft(assessment(Policy(shift_length=timedelta(hours=8))), STEM)[f"{STEM}-care-plan.docx"]
    assert "to Sun 15 Mar 2026 03:30" in text(body(made))


def test_the_templates_are_what_the_script_makes() -> None:
    for name, content in make_all().items():
        assert parts(template_bytes(name)) == parts(content), (
            f"{name}: run python -m handoff.document.make_templates"
        )


def test_an_office_validator_finds_nothing(documents: dict[str, bytes], tmp_path: Path) -> None:
    validator = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
    for name, content in {**documents, **draft(bare(), "bare")}.items():
        path = tmp_path / name
        path.write_bytes(content)
        result = validator.validate(str(path))
        assert result.is_valid, [str(error) for error in result.errors][:5]


@pytest.mark.skipif(shutil.which("soffice") is None, reason="LibreOffice is not installed")
def test_libreoffice_prints_both_documents(documents: dict[str, bytes], tmp_path: Path) -> None:
    for name, content in documents.items():
        (tmp_path / name).write_bytes(content)
    command = ["soffice", f"-env:UserInstallation={(tmp_path / 'profile').as_uri()}", "--headless"]
    command += [
        "--convert-to",
        "pdf",
        "--outdir",
        str(tmp_path),
        *(str(tmp_path / name) for name in documents),
    ]
    subprocess.run(command, check=True, capture_output=True, timeout=120)
    for name in documents:
        assert (tmp_path / name).with_suffix(".pdf").read_bytes().startswith(b"%PDF")
