"""The README and the developers' page speak of what is there."""

from __future__ import annotations

import re

import pytest

from handoff.cli import app
from handoff.start import JOBS
from tests.packaging.project import ROOT

README = (ROOT / "README.md").read_text(encoding="utf-8")
DEVELOPERS = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
COMMANDS = {
    command.callback.__name__.replace("_", "-") for command in app.registered_commands if command.callback
} | {
    str(group.name or group.typer_instance.info.name)
    for group in app.registered_groups
    if group.typer_instance
}


@pytest.mark.parametrize("job", ["demo", "test"])
def test_each_main_command_is_one_line_below_its_mark(job: str) -> None:
    fence = re.search(rf"^<!-- {job} command -->\n```sh\n(.*?)```", README, flags=re.MULTILINE | re.DOTALL)
    assert fence
    words = fence[1].split()
    assert fence[1].count("\n") == 1
    assert words[:3] == ["python3", "-m", "handoff.start"]
    assert words[3] in JOBS


def test_every_command_that_the_readme_shows_is_there() -> None:
    shown = set(re.findall(r"^\| `handoff ([a-z-]+)", README, flags=re.MULTILINE))
    assert shown
    assert sorted(shown - COMMANDS) == []


def test_every_job_is_told_to_developers() -> None:
    assert [job for job in JOBS if f"handoff.start {job}`" not in DEVELOPERS] == []


def test_every_room_is_told_to_developers() -> None:
    rooms = [path.parent.name for path in ROOT.glob("handoff/*/__init__.py") if path.parent.name != "bundled"]
    assert [room for room in rooms if f"`handoff/{room}/`" not in DEVELOPERS] == []
