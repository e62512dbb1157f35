"""``handoff begin``: a new file by questions, each answer checked as it is typed, and the skeleton."""

from __future__ import annotations

import os
import stat
import subprocess
import sys
from pathlib import Path

import pytest
import yaml

from tests.chart.run import in_terminal, run

NOW = "2026-03-14 14:10"
ANSWERS = {
    "Time zone of the unit": "Europe/Dublin",
    "Name as on the wrist band": "Tomas Ferrandel",
    "Date of birth": "1985-02-11",
    "Hospital record number": "00451203",
    "Sex": "1",
    "Ward and bed": "Ward 6, bed 3",
    "Weight (": "82 kg",
    "Which weight": "before burn",
    "How is it known": "2",
    "Height": "178 cm",
    "Allergies": "penicillin: rash; latex",
    "Resuscitation": "full treatment",
    "Who decided": "Dr A. Quill",
    "Time of the burn": "13:20",
    "Cause": "flame",
    "Where it happened": "enclosed space",
    "Cooled": "20 min",
    "Tetanus": "3 or more",
}


def begun(file: Path, *lines: str, now: str = NOW) -> subprocess.CompletedProcess[str]:
    """Return what ``handoff begin`` did with the lines typed, the time zone before them."""
    environment = {key: value for key, value in os.environ.items() if key != "TZ"}
    return subprocess.run(
        [sys.executable, "-m", "handoff", "begin", str(file), "--now", now],
        input="\n".join(("Europe/Dublin", *lines)) + "\n",
        capture_output=True,
        text=True,
        encoding="utf-8",
        env=environment,
        check=False,
    )


def read(file: Path) -> dict[str, object]:
    """Read the file with a library that knows nothing of handoff, every scalar as text."""
    loaded = yaml.load(file.read_text(encoding="utf-8"), Loader=yaml.BaseLoader)  # noqa: S506
    assert isinstance(loaded, dict)
    return loaded


@pytest.mark.skipif(sys.platform == "win32", reason="a pseudo-terminal is needed")
def test_every_question_is_asked_in_a_terminal_and_its_answer_stands_in_the_file(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    code, screen = in_terminal({**ANSWERS, "Write this to": "y"}, "begin", file, "--now", NOW)
    assert code == 0, screen
    assert "Tomas Ferrandel, born 11 Feb 1985, record number 00451203" in screen
    assert "Sat 14 Mar 2026 13:20" in screen
    assert read(file)["patient"] == {
        "name": "Tomas Ferrandel",
        "born": "1985-02-11",
        "sex": "male",
        "identifiers": {"record_number": "00451203"},
        "location": "Ward 6, bed 3",
        "weights": [{"value": "82 kg", "kind": "before burn", "known": "estimated", "at": NOW}],
        "height": "178 cm",
        "allergies": [{"to": "penicillin", "reaction": "rash"}, {"to": "latex"}],
        "resuscitation": {"decision": "full treatment", "by": "Dr A. Quill"},
    }
    assert read(file)["injury"] == {
        "at": "2026-03-14 13:20",
        "causes": [{"kind": "flame", "setting": "enclosed space"}],
        "first_aid": {"cooled_for": "20 min"},
        "tetanus": {"doses": "3 or more"},
    }
    checked = run("check", file, "--at", NOW)
    assert (checked.returncode, checked.stderr) == (0, "")


@pytest.mark.skipif(os.name == "nt", reason="Windows keeps rights otherwise")
def test_the_file_is_for_its_owner_alone(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    assert begun(file, "A Name", *[""] * 12, "y").returncode == 0
    assert stat.S_IMODE(file.stat().st_mode) == 0o600


def test_what_is_skipped_is_blank_and_told(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    done = begun(file, "A Name", *[""] * 12, "y")
    assert done.returncode == 0, done.stderr
    assert "not recorded yet: Date of birth, year first; Hospital record number; Sex" in done.stdout
    assert read(file)["patient"]["allergies"] == ""  # type: ignore[index]
    assert run("check", file).returncode == 0


@pytest.mark.parametrize(
    ("wrong", "told"),
    [
        (["A Name", "11/02/1985"], "year"),
        (["A Name", "1985-02-30"], "'1985-02-30' is not a date of the calendar"),
        (["A Name", "2027-01-01"], "2027-01-01 is later than today"),
        (["A Name", "", "", "mail"], "male"),
        (["A Name", "", "", "", "", "82"], "'82' has no unit; write 82 kg or 82 lb"),
        (["A Name", "", "", "", "", "82 mL"], "kg"),
        (["A Name", *[""] * 8, "23:50"], "23:50"),
    ],
)
def test_an_answer_that_the_reader_refuses_is_asked_again_and_told_why(
    tmp_path: Path, wrong: list[str], told: str
) -> None:
    done = begun(tmp_path / "new.yaml", *wrong)
    assert done.returncode == 2
    assert told in done.stdout
    assert "Traceback" not in done.stderr
    assert list(tmp_path.iterdir()) == []


def test_an_unusual_weight_is_asked_about_and_kept_as_confirmed(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    done = begun(
        file, "A Name", "", "", "", "", "310 kg", "n", "310 kg", "y", "today", "measured", *[""] * 7, "y"
    )
    assert done.returncode == 0, done.stdout
    assert read(file)["patient"]["weights"][0]["confirmed"] == "yes"  # type: ignore[index]
    assert ": no faults" in run("check", file).stdout


def test_back_returns_to_the_question_before_and_keeps_what_was_answered(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    done = begun(file, "Tomas Ferandel", "1985-02-11", "back", "back", "Tomas Ferrandel", *[""] * 12, "y")
    assert done.returncode == 0, done.stdout + done.stderr
    assert read(file)["patient"]["name"] == "Tomas Ferrandel"  # type: ignore[index]
    assert read(file)["patient"]["born"] == "1985-02-11"  # type: ignore[index]


def test_an_unknown_patient_needs_a_temporary_identifier(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    done = begun(file, "Unknown", "", "UNK-0417", "45 years", *[""] * 10, "y")
    assert done.returncode == 0, done.stdout + done.stderr
    assert "this is needed; for example UNK-0417" in done.stdout
    patient = read(file)["patient"]
    assert isinstance(patient, dict)
    assert (patient["name"], patient["identifiers"], patient["estimated_age"]) == (
        "unknown",
        {"temporary": "UNK-0417"},
        "45 years",
    )
    assert "born" not in patient


def test_an_uncertain_time_of_burn_is_a_span(tmp_path: Path) -> None:
    file = tmp_path / "new.yaml"
    done = begun(file, "A Name", *[""] * 8, "12:00 to 13:30", "", "", "", "y")
    assert done.returncode == 0, done.stdout + done.stderr
    assert read(file)["injury"]["at"] == {"earliest": "2026-03-14 12:00", "latest": "2026-03-14 13:30"}  # type: ignore[index]


@pytest.mark.parametrize("end", [["stop"], ["A Name", "stop"], ["A Name", *[""] * 12, "n"], ["A Name"]])
def test_whoever_stops_leaves_no_file(tmp_path: Path, end: list[str]) -> None:
    done = begun(tmp_path / "new.yaml", *end)
    assert (done.returncode, done.stderr.splitlines()) == (2, ["stopped; nothing was written"])
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("blank", [[], ["--blank"]])
def test_a_file_that_is_there_is_never_touched(tmp_path: Path, blank: list[str]) -> None:
    file = tmp_path / "there.yaml"
    file.write_text("mine\n", encoding="utf-8")
    done = run("begin", file, *blank)
    assert done.returncode == 2
    assert "is there already and was not touched" in done.stderr
    assert file.read_text(encoding="utf-8") == "mine\n"


@pytest.mark.skipif(os.name == "nt", reason="links need rights there")
def test_a_link_that_leads_nowhere_is_something_too(tmp_path: Path) -> None:
    (tmp_path / "link.yaml").symlink_to(tmp_path / "elsewhere.yaml")
    assert run("begin", tmp_path / "link.yaml", "--blank").returncode == 2
    assert not (tmp_path / "elsewhere.yaml").exists()


def test_the_skeleton_names_what_must_be_filled_and_passes_once_it_is(tmp_path: Path) -> None:
    file = tmp_path / "blank.yaml"
    done = run("begin", file, "--blank")
    assert done.returncode == 0
    told = [line.strip() for line in done.stdout.splitlines() if line.startswith("  ")]
    checked = run("check", file)
    assert checked.returncode == 1
    assert checked.stderr.splitlines()[:-1] == told
    assert any("'name' is missing" in line for line in told)
    text = file.read_text(encoding="utf-8")
    filled = text.replace("  name: ", "  name: A Name  ", 1)
    lines = ["clock: Europe/Dublin" if line.startswith("clock:") else line for line in filled.splitlines()]
    file.write_text("\n".join(lines), encoding="utf-8")
    checked = run("check", file)
    assert (checked.returncode, checked.stderr) == (0, "")


def test_a_neighbour_with_a_similar_name_is_named(tmp_path: Path) -> None:
    assert begun(tmp_path / "one.yaml", "Anna Berg", "1990-01-02", *[""] * 11, "y").returncode == 0
    done = begun(tmp_path / "two.yaml", "Anne Berg", "1971-05-06", *[""] * 11, "y")
    assert done.returncode == 0
    assert "two patients with similar names: Anne Berg, born 6 May 1971 (two.yaml)" in done.stderr
    assert "Anna Berg, born 2 Jan 1990 (one.yaml)" in done.stderr
