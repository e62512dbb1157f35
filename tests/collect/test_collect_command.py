"""``handoff collect`` as a nurse and a script meet it."""

from __future__ import annotations

import sys
from pathlib import Path

import pytest

from tests.chart.charts import example
from tests.chart.run import in_terminal, run, write
from tests.collect.filling import filled

MADE_AT, NEXT_MORNING = "2026-03-14 19:30", "2026-03-15 07:30"


@pytest.fixture
def patient(tmp_path: Path) -> Path:
    file = write(tmp_path / "ferrandel.yaml", example("house-fire"))
    assert run("draft", file, "--at", MADE_AT, "--out", tmp_path).returncode == 0
    document = tmp_path / "ferrandel-care-plan.docx"
    document.write_bytes(filled(document.read_bytes(), {"A2:2015": "20:20 JO"}))
    return file


def test_what_was_read_is_shown_and_written_only_when_told_so(patient: Path) -> None:
    document = patient.with_name("ferrandel-care-plan.docx")
    done = run("collect", document, patient, "--now", NEXT_MORNING)
    assert done.returncode == 2
    assert done.stdout.splitlines()[0] == "Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518"
    assert "  A2 20:15: done Sat 14 Mar 2026 20:20 by JO" in done.stdout
    assert done.stderr.splitlines() == ["add --yes to write what was read; nothing was written"]
    assert patient.read_text(encoding="utf-8") == example("house-fire")
    done = run("collect", document, patient, "--now", NEXT_MORNING, "--yes")
    assert done.returncode == 0
    assert done.stdout.splitlines()[-1] == f"written: 1 tick into {patient}"
    assert patient.read_text(encoding="utf-8").startswith(example("house-fire"))
    again = run("collect", document, patient, "--now", NEXT_MORNING)
    assert again.returncode == 0
    assert again.stdout.splitlines()[-1] == "no new tick to write; the file was not changed"


@pytest.mark.skipif(sys.platform == "win32", reason="a pseudo-terminal is needed")
@pytest.mark.parametrize(("answer", "code"), [("y", 0), ("n", 2)])
def test_the_terminal_asks_first(patient: Path, answer: str, code: int) -> None:
    document = patient.with_name("ferrandel-care-plan.docx")
    left, screen = in_terminal(
        {"Write 1 tick into": answer}, "collect", document, patient, "--now", NEXT_MORNING
    )
    assert left == code, screen
    assert ("collected:" in patient.read_text(encoding="utf-8")) is (code == 0)


@pytest.mark.parametrize(
    ("document", "said"),
    [
        ("nothing.docx", "could not be read"),
        ("ferrandel.yaml", "not a Word document"),
        (".", "could not be read"),
    ],
)
def test_what_is_no_document_is_said_plainly(patient: Path, document: str, said: str) -> None:
    done = run("collect", patient.parent / document, patient, "--now", NEXT_MORNING)
    assert done.returncode == 2
    assert said in done.stderr
    assert "Traceback" not in done.stderr


def test_the_plan_of_another_patient_is_refused(patient: Path) -> None:
    other = write(patient.with_name("other.yaml"), example("toddler-scald"))
    done = run("collect", patient.with_name("ferrandel-care-plan.docx"), other, "--yes")
    assert done.returncode == 2
    assert "these are not the same patient; nothing was joined" in done.stderr
    assert other.read_text(encoding="utf-8") == example("toddler-scald")
