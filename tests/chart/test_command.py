"""``handoff chart`` as a nurse and a script meet it."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from tests.chart.charts import HEAD, NOW, example, rows
from tests.chart.run import in_terminal, run, write

TERMINAL = pytest.mark.skipif(sys.platform == "win32", reason="a pseudo-terminal is needed")


@pytest.fixture
def patient(tmp_path: Path) -> Path:
    return write(tmp_path / "ferrandel.yaml", example("house-fire"))


def chart(patient: Path, *arguments: object, now: str = NOW) -> tuple[int, list[str], list[str]]:
    done = run("chart", patient, *arguments, "--now", now)
    assert "Traceback" not in done.stderr
    return done.returncode, done.stdout.splitlines(), done.stderr.splitlines()


def test_an_entry_is_echoed_with_the_patient_first(patient: Path) -> None:
    code, said, complained = chart(patient, "urine 20 mL", "pulse 118 /min", "--by", "EM")
    assert (code, complained) == (0, [])
    assert said[:4] == [
        "Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518",
        "charted for Sat 14 Mar 2026 19:30 by EM:",
        "  urine 20 mL",
        "  pulse 118 /min",
    ]
    assert said[4] == "changed by it:"
    assert any("mL/kg/h" in line and "was: " in line for line in said[5:])
    assert rows(patient.read_text(encoding="utf-8"))["19:30"] == {
        "by": "EM",
        "urine": "20 mL",
        "pulse": "118 /min",
    }


def test_the_name_may_come_from_the_surroundings(patient: Path) -> None:
    assert run("chart", patient, "urine 20 mL", "--now", NOW, by="JO").returncode == 0
    assert rows(patient.read_text(encoding="utf-8"))["19:30"]["by"] == "JO"


def test_without_a_name_nothing_is_charted(patient: Path) -> None:
    code, said, complained = chart(patient, "urine 20 mL")
    assert (code, said) == (2, [])
    assert complained == ["who charts it? add --by EM, or set HANDOFF_BY; nothing was written"]
    assert patient.read_text(encoding="utf-8") == example("house-fire")


@pytest.mark.parametrize(
    ("arguments", "code", "what"),
    [
        (["pulse 118"], 2, "'118' has no unit; write 118 /min"),
        (["pulse 230 /min"], 2, "230 /min is unusual"),
        (["pulse 118 /min", "--at", "19:00"], 2, "is charted already for Sat 14 Mar 2026 19:00 by EM"),
        (["pulse 118 /min", "--at", "23:50"], 2, "write '2026-03-13 23:50' for yesterday"),
        (["pulse 118 /min", "--at", "23:50", "--confirm"], 2, "write '2026-03-13 23:50' for yesterday"),
        ([], 2, "say what to chart"),
        (["urine 20 mL", "--strike", "19:00 pulse"], 2, "say what to chart"),
        (["--strike", "19:00 pulse"], 2, 'say why: --why "misread"'),
        (["--strike", "19:00 pulse", "--why", "x", "--at", "19:00"], 2, "leave --at out"),
    ],
)
def test_where_nobody_can_answer_nothing_is_written(
    patient: Path, arguments: list[str], code: int, what: str
) -> None:
    got, said, complained = chart(patient, *arguments, "--by", "EM")
    assert (got, said) == (code, [])
    assert what in "\n".join(complained)
    assert patient.read_text(encoding="utf-8") == example("house-fire")
    assert list(patient.parent.iterdir()) == [patient]


def test_confirm_answers_what_is_unusual_and_what_is_there_already(patient: Path) -> None:
    code, _, _ = chart(patient, "pulse 230 /min", "resp 25 /min", "--by", "EM", "--at", "19:00", "--confirm")
    assert code == 0
    second = rows(patient.read_text(encoding="utf-8"))["19:00"][1]
    assert second == {"by": "EM", "pulse": {"value": "230 /min", "confirmed": "yes"}, "resp": "25 /min"}


def test_faults_of_the_file_are_its_own(patient: Path) -> None:
    write(patient, f"{HEAD}pateint: x\n")
    code, said, complained = chart(patient, "urine 20 mL", "--by", "EM")
    assert (code, said) == (1, [])
    assert complained[0].startswith(f"{patient}:5:1: pateint: unknown key 'pateint'")
    assert complained[-1] == "the file has faults of its own; correct them first; nothing was written"


@pytest.mark.parametrize(
    ("now", "what"),
    [("soon", "--now: 'soon'"), ("2026-03-14 10:00", "is later than")],
    ids=["no time", "too early"],
)
def test_a_wrong_moment_of_charting_is_said(patient: Path, now: str, what: str) -> None:
    code, _, complained = chart(patient, "urine 20 mL", "--by", "EM", now=now)
    assert code in (1, 2)
    assert what in complained[0]


@pytest.mark.parametrize("name", ["nothing.yaml", "."])
def test_a_file_that_is_none_is_said(tmp_path: Path, name: str) -> None:
    code, _, complained = chart(tmp_path / name, "urine 20 mL", "--by", "EM")
    assert code == 2
    assert len(complained) == 1


def test_a_correction_and_a_strike_echo_old_and_new(patient: Path) -> None:
    code, said, _ = chart(patient, "--correct", "14:15 pulse 142 /min", "--why", "misread", "--by", "JO")
    assert (code, said[2:4]) == (0, ["  was: pulse 124 /min, charted by EM", "  is now: pulse 142 /min"])
    code, said, _ = chart(patient, "--strike", "19:10 morphine", "--why", "wrong patient", "--by", "JO")
    assert (code, said[1]) == (0, "struck out for Sat 14 Mar 2026 19:10 by JO: wrong patient")
    assert any(line.startswith("  Morphine IV") and "(was: 14 mg)" in line for line in said)


def test_the_words_are_listed_without_a_file() -> None:
    done = run("chart", "--words")
    assert done.returncode == 0
    assert '"give morphine 4 mg IV": A dose was given' in done.stdout


def test_what_was_written_is_never_said_to_be_unwritten(patient: Path) -> None:
    script = (
        "import sys; import handoff.chart.effect as effect\n"
        "def broken(*_): raise RuntimeError('Ferrandel')\n"
        "effect.changes = broken\n"
        "import handoff.cli; handoff.cli.main()\n"
    )
    done = subprocess.run(
        [sys.executable, "-c", script, "chart", str(patient), "urine 20 mL", "--by", "EM", "--now", NOW],
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 3
    assert done.stderr.splitlines() == [
        "the entry was written; what it changed could not be shown (RuntimeError)"
    ]
    assert "urine: 20 mL" in patient.read_text(encoding="utf-8")


def test_a_policy_sets_when_an_entry_is_late(patient: Path, tmp_path: Path) -> None:
    policy = write(tmp_path / "policy.yaml", "policy: 1\nlate_entry_after: 15 min\n")
    chart(patient, "urine 20 mL", "--by", "EM", "--at", "19:10", "--policy", policy)
    assert rows(patient.read_text(encoding="utf-8"))["19:10"]["written"] == NOW


@TERMINAL
def test_in_a_terminal_the_name_the_date_and_the_unusual_are_asked(patient: Path) -> None:
    answers = {
        "Who charts it (initials)?": "JO",
        "Is it Sat 14 Mar 2026 23:50, yesterday?": "y",
        "Is it right?": "y",
    }
    code, screen = in_terminal(
        answers, "chart", patient, "pulse 230 /min", "--at", "23:50", "--now", "2026-03-15 00:20"
    )
    assert code == 0, screen
    assert "charted for Sat 14 Mar 2026 23:50 by JO:" in screen
    assert screen.index("Tomas Ferrandel, born 11 Feb 1985") < screen.index("yesterday?")
    assert rows(patient.read_text(encoding="utf-8"))["23:50"]["pulse"]["confirmed"] == "yes"


@TERMINAL
@pytest.mark.parametrize(
    ("question", "arguments"),
    [
        ("Is it Sat 14 Mar 2026 23:50, yesterday?", ["pulse 118 /min", "--at", "23:50"]),
        ("Is it right?", ["pulse 230 /min"]),
        ("Chart it a second time?", ["pulse 118 /min", "--at", "2026-03-14 19:00"]),
    ],
)
def test_a_no_writes_nothing(patient: Path, question: str, arguments: list[str]) -> None:
    code, screen = in_terminal(
        {question: "n"}, "chart", patient, *arguments, "--by", "EM", "--now", "2026-03-15 00:20"
    )
    assert code == 2
    assert screen.endswith("nothing was written")
    assert patient.read_text(encoding="utf-8") == example("house-fire")


@TERMINAL
def test_in_a_terminal_the_reason_is_asked(patient: Path) -> None:
    code, screen = in_terminal(
        {"Why?": "wrong patient"}, "chart", patient, "--strike", "19:10 morphine", "--by", "EM", "--now", NOW
    )
    assert code == 0, screen
    assert "why: wrong patient" in patient.read_text(encoding="utf-8")
