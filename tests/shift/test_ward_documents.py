"""``handoff ward --documents``: each patient's documents, laid out as the files are."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.shift.helpers import run, text_of_example

MOMENT = "2026-10-02 03:40"
PLACES = {"nearly-empty": "", "house-fire": "bay 2"}


@pytest.fixture
def ward(tmp_path: Path) -> Path:
    folder = tmp_path / "patients"
    for name, place in PLACES.items():
        (folder / place).mkdir(parents=True, exist_ok=True)
        (folder / place / f"{name}.yaml").write_text(text_of_example(name), encoding="utf-8")
    return folder


@pytest.mark.parametrize("jobs", [1, 2])
def test_each_patient_gets_the_documents_that_draft_gives(ward: Path, tmp_path: Path, jobs: int) -> None:
    done = run("ward", ward, "--at", MOMENT, "--documents", tmp_path / "drafts", "--jobs", jobs)
    assert done.code == 0, done.err
    for name, place in PLACES.items():
        alone = tmp_path / "alone" / name
        run("draft", ward / place / f"{name}.yaml", "--at", MOMENT, "--out", alone)
        drafted = {path.name: path.read_bytes() for path in (tmp_path / "drafts" / place).glob(f"{name}*")}
        assert len(drafted) == 3
        assert drafted == {path.name: path.read_bytes() for path in alone.iterdir()}


def test_a_document_that_was_changed_by_hand_is_kept_and_named(ward: Path, tmp_path: Path) -> None:
    run("ward", ward, "--at", MOMENT, "--documents", tmp_path)
    own = tmp_path / "nearly-empty-handover.docx"
    own.write_bytes(b"written over by hand")
    done = run("ward", ward, "--at", MOMENT, "--documents", tmp_path)
    assert done.code == 3
    assert "was changed by hand; add --replace" in " ".join(done.out.split())
    assert own.read_bytes() == b"written over by hand"
    assert run("ward", ward, "--at", MOMENT, "--documents", tmp_path, "--replace").code == 0
    assert (tmp_path / "nearly-empty-handover-kept-1.docx").read_bytes() == b"written over by hand"


def test_a_bad_file_costs_no_other_patient_the_documents(ward: Path, tmp_path: Path) -> None:
    (ward / "bad.yaml").write_text("handoff: 1\n", encoding="utf-8")
    done = run("ward", ward, "--at", MOMENT, "--documents", tmp_path / "drafts")
    assert done.code == 1
    assert (tmp_path / "drafts" / "nearly-empty-care-plan.docx").is_file()
