"""A full disk, a folder that may not be written, a file held by another program: a message, and nothing lost."""

from __future__ import annotations

import ctypes
import os
import re
import shutil
import stat
import sys
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from tests.collect.filling import filled
from tests.faults.test_killed import contents, first_box
from tests.shift.helpers import text_of_example
from tests.trust.watched import run

pytestmark = pytest.mark.skipif(
    sys.platform != "linux", reason="a process is forked and its rights are taken"
)

AT = ("--at", "2026-03-14 19:30")
FULL_AT_BYTES = 6000
FULL_AT_BYTES_FOR_A_NEW_FILE = 500
COMMANDS = {
    "chart": ("chart", "patient.yaml", "pulse 131 /min", *AT, "--by", "EM", "--confirm"),
    "collect": ("collect", "filled.docx", "patient.yaml", "--yes", "--now", "2026-03-15 07:00"),
    "draft": ("draft", "patient.yaml", "--at", "2026-03-14 20:00", "--replace"),
    "draft elsewhere": ("draft", "patient.yaml", *AT, "--out", "new"),
    "note": ("note", "patient.yaml", *AT, "--out", "."),
    "transfer": ("transfer", "patient.yaml", *AT),
    "ward": ("ward", ".", *AT, "--out", "."),
    "begin": ("begin", "new.yaml", "--blank"),
    "demo": ("demo", "new"),
    "templates": ("templates", "write", "look"),
}


def disk_full() -> None:
    import resource

    left = FULL_AT_BYTES_FOR_A_NEW_FILE if "begin" in sys.argv else FULL_AT_BYTES
    resource.setrlimit(resource.RLIMIT_FSIZE, (left, left))


def read_only() -> None:
    """Take the right to write away, from the one user too who may do anything."""
    if os.geteuid() == 0:
        head, data = (ctypes.c_uint32 * 2)(0x20080522, 0), (ctypes.c_uint32 * 6)()
        assert ctypes.CDLL(None, use_errno=True).capset(head, data) == 0
    Path().chmod(0o555)


def held_by_another_program() -> None:
    def refuse(self: Path, target: Path) -> Path:
        raise PermissionError(13, "The process cannot access the file because it is being used", str(target))

    Path.replace = refuse  # type: ignore[method-assign,assignment]
    os.link = lambda *_, **__: refuse(Path(), Path())


WAYS: dict[str, Callable[[], None]] = {
    "disk full": disk_full,
    "read only": read_only,
    "held": held_by_another_program,
}


@pytest.fixture(scope="module")
def drafted(tmp_path_factory: pytest.TempPathFactory) -> Path:
    place = tmp_path_factory.mktemp("drafted")
    (place / "patient.yaml").write_text(text_of_example("house-fire"), encoding="utf-8")
    assert run(place, ("draft", "patient.yaml", *AT)).code == 0
    plan = (place / "patient-care-plan.docx").read_bytes()
    (place / "filled.docx").write_bytes(filled(plan, {first_box(plan): "20:20 JO"}))
    return place


@pytest.fixture
def ward(drafted: Path, tmp_path: Path) -> Iterator[Path]:
    place = tmp_path / "ward"
    shutil.copytree(drafted, place)
    yield place
    place.chmod(stat.S_IRWXU)


# Nobody holds a file that is not there yet: 'begin' is not tried with a held file.
TRIED = [(command, way) for command in COMMANDS for way in WAYS if (command, way) != ("begin", "held")]


@pytest.mark.parametrize(("command", "way"), TRIED)
def test_what_cannot_be_written_is_said_and_every_file_is_as_it_was(
    command: str, way: str, ward: Path
) -> None:
    before = contents(ward)
    done = run(ward, COMMANDS[command], WAYS[way])
    ward.chmod(stat.S_IRWXU)
    after = contents(ward)
    assert done.code == 2, done.said
    assert re.search(r"could not be written|cannot be written|cannot be made", done.said), done.said
    assert "Traceback" not in done.said
    assert after == before
    assert [path.name for path in ward.rglob(".*") if path.is_file()] == []
