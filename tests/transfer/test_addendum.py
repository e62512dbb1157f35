"""An error found after the patient has left: the addendum names what changed against the packet that was sent."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.document.reading import cells, tables
from tests.shift.helpers import run
from tests.transfer.helpers import AT, text

LATER = "2026-03-14 21:00"


@pytest.fixture
def sent(tmp_path: Path) -> Path:
    """The folder of the packet that was sent; the state file is corrected since."""
    (tmp_path / "fire.yaml").write_text(text(), encoding="utf-8")
    assert run("transfer", tmp_path / "fire.yaml", "--at", AT).code == 0
    corrected = (
        text().replace("{value: 82 kg, kind", "{value: 78 kg, kind").replace("gauge: 13700", "gauge: 6850")
    )
    (tmp_path / "fire.yaml").write_text(corrected, encoding="utf-8")
    return tmp_path / "fire-transfer-2026-03-14-1930"


@pytest.mark.parametrize("form", ["folder", "zip", "items"])
def test_it_names_what_was_and_what_is_now(sent: Path, form: str) -> None:
    given = {
        "folder": sent,
        "zip": Path(f"{sent}.zip"),
        "items": sent / "fire.items.json",
    }[form]
    before = {path.name: path.read_bytes() for path in sent.iterdir()}
    done = run(
        "transfer", sent.parent / "fire.yaml", "--at", AT, "--addendum", given, "--out", sent.parent / "new"
    )
    assert (done.code, done.err) == (0, "")
    addendum = sent.parent / "new" / sent.name / "fire-0-addendum.docx"
    rows = [
        row for found in tables(addendum.read_bytes()).values() for table in found for row in cells(table)
    ]
    weight = next(row for row in rows if row[0] == "Weight, before burn")
    assert weight[1].startswith("82 kg")
    assert weight[2].startswith("78 kg")
    oxygen = next(row for row in rows if row[0] == "Oxygen lasts")
    assert (oxygen[1][:8], oxygen[2][:8]) == ("3 h 1 mi", "1 h 31 m")
    assert {path.name: path.read_bytes() for path in sent.iterdir()} == before


def test_the_packet_of_another_patient_is_refused(sent: Path, tmp_path: Path) -> None:
    other = text().replace("Tomas Ferrandel", "Ines Corran").replace("HSH-204518", "HSH-9")
    (tmp_path / "other.yaml").write_text(other, encoding="utf-8")
    done = run(
        "transfer", tmp_path / "other.yaml", "--at", LATER, "--addendum", sent, "--out", tmp_path / "x"
    )
    assert done.code == 2
    assert "not the same patient" in done.err
    assert not (tmp_path / "x").exists()


def test_a_packet_of_a_later_moment_is_refused(sent: Path) -> None:
    file, out = sent.parent / "fire.yaml", sent.parent / "later"
    assert run("transfer", file, "--at", LATER, "--out", out).code == 0
    late = out / "fire-transfer-2026-03-14-2100.zip"
    done = run("transfer", file, "--at", AT, "--addendum", late, "--out", sent.parent / "n")
    assert done.code == 2
    assert "--addendum: it is of Sat 14 Mar 2026 21:00, later than" in done.err


def test_a_file_that_changed_since_is_named(sent: Path) -> None:
    (sent / "fire.yaml").write_text("x", encoding="utf-8")
    done = run(
        "transfer", sent.parent / "fire.yaml", "--at", AT, "--addendum", sent, "--out", sent.parent / "n"
    )
    assert "fire.yaml is no longer as it was when the packet was made" in done.err


@pytest.mark.parametrize("wrong", ["nothing.zip", "empty", "text.zip"])
def test_what_is_no_packet_is_said(sent: Path, tmp_path: Path, wrong: str) -> None:
    (tmp_path / "empty").mkdir()
    (tmp_path / "text.zip").write_text("no zip", encoding="utf-8")
    done = run("transfer", tmp_path / "fire.yaml", "--at", LATER, "--addendum", tmp_path / wrong)
    assert done.code == 2
    assert done.err.startswith("--addendum: ")
    assert "give the folder or the zip" in done.err
