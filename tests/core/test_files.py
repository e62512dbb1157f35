"""Writing documents: the old set or the new set, never a mixture, and no temporary file stays."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

from handoff.files import PART, CannotWrite, write_all, write_file
from tests.core.test_command_line import run

NEW = {"a.docx": b"new a", "b.docx": b"new b", "c.json": b"new c"}


def names(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def test_a_folder_in_the_way_of_one_document_leaves_every_old_one(tmp_path: Path) -> None:
    (tmp_path / "a.docx").write_bytes(b"old a")
    (tmp_path / "b.docx").mkdir()
    with pytest.raises(CannotWrite, match=r"b\.docx"):
        write_all(tmp_path, NEW)
    assert (tmp_path / "a.docx").read_bytes() == b"old a"
    assert names(tmp_path) == ["a.docx", "b.docx"]


def test_a_full_disk_leaves_every_old_one(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "a.docx").write_bytes(b"old a")
    synced: list[int] = []

    def full(handle: int) -> None:
        synced.append(handle)
        if len(synced) == 2:
            raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    with pytest.raises(CannotWrite, match="No space left"):
        write_all(tmp_path, NEW)
    assert (tmp_path / "a.docx").read_bytes() == b"old a"
    assert names(tmp_path) == ["a.docx"]


def test_what_was_already_replaced_is_named(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    real = Path.replace

    def locked(self: Path, target: Path) -> Path:
        if target.name == "b.docx":
            raise PermissionError(13, "Permission denied")
        return real(self, target)

    monkeypatch.setattr(Path, "replace", locked)
    with pytest.raises(CannotWrite, match=r"b\.docx could not be written .* already new: a\.docx"):
        write_all(tmp_path, NEW)
    assert names(tmp_path) == ["a.docx"]


def test_a_link_to_itself_is_said_to_lead_nowhere(tmp_path: Path) -> None:
    (tmp_path / "a.docx").symlink_to("a.docx")
    with pytest.raises(CannotWrite, match="leads nowhere"):
        write_file(tmp_path / "a.docx", b"new")


def test_a_name_too_long_for_the_disk_is_a_message(tmp_path: Path) -> None:
    with pytest.raises(CannotWrite, match="could not be written"):
        write_file(tmp_path / ("x" * 300), b"new")


def test_the_reader_of_a_pipe_may_leave_early(tmp_path: Path) -> None:
    import subprocess

    from tests.core.helpers import AT, SMALL

    file = tmp_path / "small.yaml"
    file.write_text(SMALL, encoding="utf-8")
    command = [sys.executable, "-m", "handoff", "show", str(file), "--at", AT]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE) as process:
        assert process.stdout is not None
        process.stdout.close()
        assert process.wait(60) == 0


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no named pipes in folders")
def test_a_pipe_given_by_mistake_is_refused_and_not_waited_for(tmp_path: Path) -> None:
    os.mkfifo(tmp_path / "pipe.yaml")
    done = run("check", tmp_path / "pipe.yaml")
    assert done.returncode == 2
    assert "a device or a pipe" in done.stderr


def test_what_a_killed_process_left_half_written_is_removed_and_what_a_running_one_writes_is_not(
    tmp_path: Path,
) -> None:
    gone = subprocess.Popen([sys.executable, "-c", ""])
    gone.wait()
    for number in (gone.pid, os.getpid()):
        (tmp_path / f"{PART}{number}-abc.part").write_bytes(b"half")
    write_all(tmp_path, NEW)
    assert names(tmp_path) == [f"{PART}{os.getpid()}-abc.part", *NEW]
