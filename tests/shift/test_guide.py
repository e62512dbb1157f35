"""The guide to the working shift: every command in it runs, and prints what the guide shows."""

from __future__ import annotations

import re
import shlex
import shutil
from pathlib import Path

import pytest

from tests.conftest import ROOT
from tests.shift.helpers import EXAMPLES, run

GUIDE = (ROOT / "docs/working-shift.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"```(sh|text)\n(.*?)```", GUIDE, re.DOTALL)


def test_every_command_of_the_guide_runs_and_prints_what_it_shows(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "patients").mkdir()
    for name in EXAMPLES:
        shutil.copy(ROOT / f"examples/{name}.yaml", tmp_path)
        shutil.copy(ROOT / f"examples/{name}.yaml", tmp_path / "patients")
    monkeypatch.chdir(tmp_path)
    out = ""
    for kind, body in BLOCKS:
        if kind == "text":
            missing = [line for line in body.splitlines() if line.split(" ...")[0] not in out]
            assert missing == []
            continue
        for line in body.splitlines():
            words = shlex.split(line)
            assert words[0] == "handoff"
            done = run(*words[1:])
            assert done.code == 0, (line, done.err)
            out = done.out


def test_the_guide_names_every_command_of_a_shift() -> None:
    for command in ("begin", "chart", "collect", "due", "show", "since", "note", "ward", "wording"):
        assert f"\nhandoff {command} " in GUIDE


@pytest.mark.parametrize(
    "command",
    ["begin", "chart", "collect", "due", "show", "since", "note", "ward", "wording", "draft", "transfer"],
)
def test_the_help_of_each_command_shows_a_real_example(command: str) -> None:
    done = run(command, "--help")
    assert done.code == 0
    assert f"Example: handoff {command} " in " ".join(done.out.split())


def test_every_picture_of_the_guide_is_there() -> None:
    for page, folder in ((GUIDE, ROOT / "docs"), ((ROOT / "README.md").read_text(encoding="utf-8"), ROOT)):
        pictures = re.findall(r"!\[[^]]*\]\(([^)]+)\)", page)
        assert pictures and all((folder / picture).is_file() for picture in pictures)
