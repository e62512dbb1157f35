"""A document that someone changed by hand is kept; one that is as drafted is written over in silence."""

from __future__ import annotations

from io import BytesIO
from pathlib import Path

import pytest
from docx import Document
from typer.testing import CliRunner, Result

from handoff.cli import app
from handoff.document.edited import is_as_drafted
from tests.document.reading import parts
from tests.packaging.project import ROOT

EXAMPLE = str(ROOT / "examples" / "nearly-empty.yaml")
AT = "2026-10-02 03:40"


def draft(out: Path, *more: str) -> Result:
    return CliRunner().invoke(app, ["draft", EXAMPLE, "--at", AT, "--out", str(out), *more])


def edit(path: Path) -> bytes:
    document = Document(str(path))
    document.add_paragraph("written by hand: mother will ring at 09:00")
    document.save(str(path))
    return path.read_bytes()


def test_what_was_drafted_is_as_drafted_and_a_change_shows(handover: bytes) -> None:
    assert is_as_drafted(handover)
    opened = BytesIO()
    document = Document(BytesIO(handover))
    document.paragraphs[0].runs[0].text = "Another title"
    document.save(opened)
    assert not is_as_drafted(opened.getvalue())
    assert not is_as_drafted(b"no document")


def test_the_digest_stands_in_the_properties(handover: bytes) -> None:
    assert b"as drafted: " in parts(handover)["docProps/core.xml"]
    assert b"0" * 64 not in parts(handover)["docProps/core.xml"]


def test_a_document_as_drafted_is_written_over(tmp_path: Path) -> None:
    assert draft(tmp_path).exit_code == 0
    assert (
        CliRunner()
        .invoke(app, ["draft", EXAMPLE, "--at", "2026-10-02 04:40", "--out", str(tmp_path)])
        .exit_code
        == 0
    )
    assert not list(tmp_path.glob("*kept*"))


def test_one_changed_by_hand_is_not_written_over_and_nothing_else_is_written(tmp_path: Path) -> None:
    draft(tmp_path)
    changed = edit(tmp_path / "nearly-empty-handover.docx")
    before = {path.name: path.read_bytes() for path in tmp_path.iterdir()}
    done = CliRunner().invoke(app, ["draft", EXAMPLE, "--at", "2026-10-02 04:40", "--out", str(tmp_path)])
    assert done.exit_code == 2
    assert "nearly-empty-handover.docx was changed since it was drafted" in done.output
    assert "--replace" in done.output
    assert {path.name: path.read_bytes() for path in tmp_path.iterdir()} == before
    assert before["nearly-empty-handover.docx"] == changed


def test_with_replace_a_copy_is_kept_each_time(tmp_path: Path) -> None:
    draft(tmp_path)
    first = edit(tmp_path / "nearly-empty-handover.docx")
    assert draft(tmp_path, "--replace").exit_code == 0
    second = edit(tmp_path / "nearly-empty-handover.docx")
    assert draft(tmp_path, "--replace").exit_code == 0
    assert (tmp_path / "nearly-empty-handover-kept-1.docx").read_bytes() == first
    assert (tmp_path / "nearly-empty-handover-kept-2.docx").read_bytes() == second
    assert is_as_drafted((tmp_path / "nearly-empty-handover.docx").read_bytes())


@pytest.mark.parametrize("name", ["nearly-empty-note.docx", "ward.docx"])
def test_note_and_ward_keep_what_was_changed_as_well(tmp_path: Path, name: str) -> None:
    ward, out = tmp_path / "patients", tmp_path / "out"
    ward.mkdir()
    (ward / "nearly-empty.yaml").write_bytes(Path(EXAMPLE).read_bytes())
    command = ["ward", str(ward)] if name == "ward.docx" else ["note", EXAMPLE]
    arguments = [*command, "--at", AT, "--out", str(out)]
    assert CliRunner().invoke(app, arguments).exit_code == 0
    changed = edit(out / name)
    assert CliRunner().invoke(app, arguments).exit_code == 2
    assert (out / name).read_bytes() == changed
    assert CliRunner().invoke(app, [*arguments, "--replace"]).exit_code == 0
    assert (out / f"{Path(name).stem}-kept-1.docx").read_bytes() == changed
