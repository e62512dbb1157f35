"""A document says whether the file has moved on, in which values, and refuses the file of another patient."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from docx import Document
from typer.testing import CliRunner, Result

from handoff.cli import app
from handoff.privacy.protect import protected_document
from tests.packaging.project import ROOT

EXAMPLES = ROOT / "examples"
AT = "2026-03-14 19:30"


def run(*arguments: object) -> Result:
    return CliRunner().invoke(app, [str(one) for one in arguments])


@pytest.fixture(scope="module")
def drafted(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("verify")
    shutil.copy(EXAMPLES / "house-fire.yaml", folder / "ferrandel.yaml")
    assert run("draft", folder / "ferrandel.yaml", "--at", AT).exit_code == 0
    return folder


@pytest.fixture
def folder(drafted: Path, tmp_path: Path) -> Path:
    shutil.copytree(drafted, tmp_path / "now")
    return tmp_path / "now"


@pytest.mark.parametrize("kind", ["handover", "care-plan"])
def test_a_document_matches_the_file_it_was_made_from(folder: Path, kind: str) -> None:
    done = run("verify", folder / f"ferrandel-{kind}.docx", folder / "ferrandel.yaml")
    assert done.exit_code == 0, done.output
    assert "Tomas Ferrandel, born 11 Feb 1985" in done.output
    assert "the clinical content has not moved" in done.output


def test_comments_and_layout_do_not_move_it(folder: Path) -> None:
    file = folder / "ferrandel.yaml"
    file.write_text("# read on the ward round\n\n" + file.read_text(encoding="utf-8"), encoding="utf-8")
    assert run("verify", folder / "ferrandel-handover.docx", file).exit_code == 0


def test_a_corrected_value_is_named_with_its_system_and_both_values(folder: Path) -> None:
    file = folder / "ferrandel.yaml"
    text = file.read_text(encoding="utf-8")
    file.write_text(text.replace("potassium: 5.0 mmol/L", "potassium: 6.0 mmol/L"), encoding="utf-8")
    done = run("verify", folder / "ferrandel-handover.docx", file)
    assert done.exit_code == 3, done.output
    assert "no longer matches" in done.output
    assert "Potassium: the document says 5.0 mmol/L" in done.output
    assert "the file now says 6.0 mmol/L" in done.output
    assert "Sodium" not in done.output
    assert "Draft it again" in done.output


def test_an_entry_later_than_the_document_moves_its_series(folder: Path) -> None:
    file = folder / "ferrandel.yaml"
    charted = run("chart", file, "pulse 131 /min", "--at", "2026-03-14 20:00", "--by", "EM")
    assert charted.exit_code == 0, charted.output
    done = run("verify", folder / "ferrandel-handover.docx", file)
    assert done.exit_code == 3, done.output
    assert "Pulse: the document says 118 /min" in done.output
    assert "131 /min" in done.output


def test_another_patient_is_refused(folder: Path) -> None:
    done = run("verify", folder / "ferrandel-handover.docx", EXAMPLES / "toddler-scald.yaml")
    assert done.exit_code == 2
    assert "is not of the patient of" in done.output


def test_a_patient_of_the_same_name_with_another_birth_date_and_number_is_refused(folder: Path) -> None:
    file = folder / "ferrandel.yaml"
    text = file.read_text(encoding="utf-8").replace("1985-02-11", "1958-11-02").replace("HSH-204518", "HSH-1")
    file.write_text(text, encoding="utf-8")
    assert run("verify", folder / "ferrandel-handover.docx", file).exit_code == 2


def test_a_change_by_hand_is_said(folder: Path) -> None:
    path = folder / "ferrandel-handover.docx"
    document = Document(str(path))
    document.add_paragraph("rung the family")
    document.save(str(path))
    done = run("verify", path, folder / "ferrandel.yaml")
    assert done.exit_code == 0, done.output
    assert "was changed since it was drafted" in done.output


def test_what_cannot_be_compared_says_why(folder: Path) -> None:
    file = folder / "ferrandel.yaml"
    sealed = folder / "sealed.docx"
    sealed.write_bytes(
        protected_document((folder / "ferrandel-handover.docx").read_bytes(), "four long words here")
    )
    other = folder / "other.docx"
    Document().save(str(other))
    (folder / "text.docx").write_text("hello", encoding="utf-8")
    for name, said in (
        ("sealed.docx", "protected by a password"),
        ("other.docx", "does not say from which version"),
        ("text.docx", "no Word document"),
        ("nothing.docx", "cannot be read"),
    ):
        done = run("verify", folder / name, file)
        assert done.exit_code == 2, name
        assert said in done.output
    assert run("draft", file, "--at", AT, "--deidentified").exit_code == 0
    assert "leads back to no file" in run("verify", folder / "case-handover.docx", file).output
