"""Each file of ``invalid`` has one fault, and its message is the one written beside it."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from tests.states.files import AT, HERE, command, said_of

FILES = sorted((HERE / "invalid").glob("*.yaml"))
MESSAGE = re.compile(r"[\w.-]+\.yaml:[1-9]\d*:[1-9]\d*: \S.*; \S.*")
THROUGH_THE_COMMAND = (
    "bed-number-sign",
    "decimal-comma-flow",
    "empty-file",
    "parts-over-the-region",
    "tab-as-indentation",
    "unterminated-quote",
)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_the_one_fault_is_said_in_one_line_with_its_cure(path: Path) -> None:
    expected = path.with_suffix(".expected").read_text(encoding="utf-8").splitlines()
    assert said_of(path) == expected
    assert len(expected) == len(["the message", "the exit code"])
    assert MESSAGE.fullmatch(expected[0])
    assert expected[1] == "exit 1"


def test_no_expected_message_stands_without_its_file() -> None:
    assert [path.stem for path in sorted((HERE / "invalid").glob("*.expected"))] == [
        path.stem for path in FILES
    ]


@pytest.mark.parametrize("name", THROUGH_THE_COMMAND)
def test_the_command_says_the_same_and_leaves_with_the_exit_code(name: str) -> None:
    path = HERE / "invalid" / f"{name}.yaml"
    message, code = path.with_suffix(".expected").read_text(encoding="utf-8").splitlines()
    done = command("check", path, "--at", AT)
    assert done.returncode == int(code.removeprefix("exit "))
    assert done.stderr.splitlines() == [f"{path.parent}/{message}", "1 fault; nothing was written"]
    assert done.stdout == ""


def test_all_faults_of_a_file_are_said_in_one_run(tmp_path: Path) -> None:
    path = tmp_path / "many.yaml"
    path.write_text(
        "handoff: 1\n"
        "clock: Europe/Dublin\n"
        "patient: {name: no, location: 'bed #3', born: 1985-02-11, sex: Male}\n"
        "injury: {at: 2026-03-14 13:20}\n"
        "observations:\n"
        "  2026-03-14:\n"
        "    14:15: {puls: 118 /min, resp: 24}\n"
        "    14:30: {resp: 26 /min, resp: 28 /min}\n"
        "    20:15: {temp: 37,9 C}\n",
        encoding="utf-8",
    )
    places = [line.split(": ")[0].removeprefix(f"{path.name}:") for line in said_of(path)]
    assert places == ["3:17", "3:64", "7:13", "7:35", "8:28", "9:5", "9:19", "exit 1"]
