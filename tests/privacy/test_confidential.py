"""Confidential entries print on a sheet of their own, only when asked, and nowhere else."""

from __future__ import annotations

from io import BytesIO
from pathlib import Path
from zipfile import ZipFile

import pytest
from typer.testing import CliRunner

from handoff.cli import app
from handoff.document.read_back import text_of
from tests.packaging.project import ROOT

AT = "2026-03-14 19:30"
SECRET = "bruises of different age on both arms"  # noqa: S105 (no password)
CONFIDENTIAL = f"""
confidential:
  safeguarding:
    - {{at: 2026-03-14 15:30, by: EM, note: {SECRET}, told: Dr A. Quill at 15:40}}
    - at: 2026-03-14 16:30
      note: wrong patient {SECRET}
      struck: {{by: EM, at: 2026-03-14 16:31, why: wrong patient}}
"""


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "ferrandel.yaml"
    path.write_text(
        (ROOT / "examples" / "house-fire.yaml").read_text(encoding="utf-8") + CONFIDENTIAL, encoding="utf-8"
    )
    return path


def run(*arguments: str) -> str:
    done = CliRunner().invoke(app, list(arguments))
    assert done.exit_code == 0, done.output
    return done.output


def everything_in(folder: Path) -> dict[str, str]:
    found = {}
    for path in folder.iterdir():
        if path.suffix == ".docx":
            with ZipFile(path) as archive:
                found[path.name] = "".join(archive.read(name).decode() for name in archive.namelist())
        else:
            found[path.name] = path.read_text(encoding="utf-8")
    return found


def test_without_being_asked_it_is_in_no_document(file: Path, tmp_path: Path) -> None:
    out = tmp_path / "out"
    said = run("draft", str(file), "--at", AT, "--out", str(out))
    assert [name for name, text in everything_in(out).items() if SECRET in text] == []
    assert SECRET not in said


@pytest.mark.parametrize("command", [("show",), ("show", "--json"), ("note",), ("due",)], ids=" ".join)
def test_no_other_command_prints_it(file: Path, command: tuple[str, ...]) -> None:
    assert SECRET not in run(command[0], str(file), "--at", AT, *command[1:])


def test_the_ward_page_does_not_hold_it(file: Path) -> None:
    assert SECRET not in run("ward", str(file.parent), "--at", AT)


def test_asked_for_it_stands_on_its_own_sheet_alone(file: Path, tmp_path: Path) -> None:
    out = tmp_path / "out"
    run("draft", str(file), "--at", AT, "--out", str(out), "--confidential")
    holding = [name for name, text in everything_in(out).items() if SECRET in text]
    assert holding == ["ferrandel-confidential.docx"]
    page = text_of((out / "ferrandel-confidential.docx").read_bytes())
    assert "Tomas Ferrandel" in page
    assert "told: Dr A. Quill at 15:40; written by EM" in page
    assert "wrong patient" not in page


def test_a_file_without_such_entries_makes_no_sheet_and_says_so(tmp_path: Path) -> None:
    source = str(ROOT / "examples" / "house-fire.yaml")
    said = run("draft", source, "--at", AT, "--out", str(tmp_path), "--confidential")
    assert "no confidential sheet" in said
    assert not (tmp_path / "house-fire-confidential.docx").exists()


def test_the_sheet_is_a_clean_word_file(file: Path, tmp_path: Path) -> None:
    from openxml_audit import FileFormat, OpenXmlValidator

    out = tmp_path / "out"
    run("draft", str(file), "--at", AT, "--out", str(out), "--confidential")
    content = (out / "ferrandel-confidential.docx").read_bytes()
    assert BytesIO(content).getvalue()[:2] == b"PK"
    validator = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
    assert [str(error) for error in validator.validate(out / "ferrandel-confidential.docx").errors] == []
