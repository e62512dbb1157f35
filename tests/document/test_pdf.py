"""PDF where an office program is installed; a clear word where it is not, and nothing left behind."""

from __future__ import annotations

import tempfile
from pathlib import Path

import pytest
from typer.testing import CliRunner

from handoff.cli import app
from handoff.document import pdf
from tests.conftest import needs_tool
from tests.document.printing import pages
from tests.packaging.project import ROOT

EXAMPLE = str(ROOT / "examples" / "nearly-empty.yaml")
DRAFT = ["draft", EXAMPLE, "--at", "2026-10-02 03:40", "--pdf", "--out"]


@pytest.fixture
def temporary(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    folder = tmp_path / "temporary"
    folder.mkdir()
    monkeypatch.setattr(tempfile, "tempdir", str(folder))
    return folder


def test_each_document_is_written_as_pdf_and_nothing_temporary_stays(tmp_path: Path, temporary: Path) -> None:
    needs_tool("soffice")
    done = CliRunner().invoke(app, [*DRAFT, str(tmp_path / "out")])
    assert done.exit_code == 0, done.output
    assert "Situation" in "".join(pages(tmp_path / "out" / "nearly-empty-handover.pdf"))
    assert (tmp_path / "out" / "nearly-empty-care-plan.pdf").read_bytes().startswith(b"%PDF")
    assert (tmp_path / "out" / "nearly-empty-care-plan.pdf").stat().st_mode & 0o077 == 0
    assert list(temporary.iterdir()) == []


def test_without_the_program_it_says_so_and_writes_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(pdf, "PROGRAMS", ("no-such-program",))
    done = CliRunner().invoke(app, [*DRAFT, str(tmp_path / "out")])
    assert done.exit_code == 2
    assert "LibreOffice is not installed" in done.output
    assert not (tmp_path / "out").exists()


def test_a_program_that_fails_leaves_nothing_behind(
    tmp_path: Path, temporary: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(pdf, "PROGRAMS", ("false",))
    done = CliRunner().invoke(app, [*DRAFT, str(tmp_path / "out")])
    assert done.exit_code == 2
    assert "could not make the PDF" in done.output
    assert list(temporary.iterdir()) == []
