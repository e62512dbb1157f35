"""A file that is written is the old one or the new one, whole, and the owner's alone."""

from __future__ import annotations

import os
import stat
from pathlib import Path

import pytest

from handoff.files import CannotWrite, write_all, write_file


def names(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def test_new_files_are_written_into_a_folder_that_is_made(tmp_path: Path) -> None:
    paths = write_all(tmp_path / "new" / "deep", {"a.docx": b"1", "b.json": b"2"})
    assert [path.read_bytes() for path in paths] == [b"1", b"2"]
    assert all(stat.S_IMODE(path.stat().st_mode) == 0o600 for path in paths)
    assert names(tmp_path / "new" / "deep") == ["a.docx", "b.json"]


def test_an_existing_file_keeps_its_permissions(tmp_path: Path) -> None:
    path = tmp_path / "a.yaml"
    path.write_bytes(b"old")
    path.chmod(0o640)
    write_file(path, b"new")
    assert path.read_bytes() == b"new"
    assert stat.S_IMODE(path.stat().st_mode) == 0o640


@pytest.mark.parametrize("step", ["fsync", "mkstemp", "replace"])
def test_a_write_that_fails_leaves_the_old_file_and_nothing_else(
    step: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "a.yaml"
    path.write_bytes(b"old")

    def full(*_: object, **__: object) -> None:
        raise OSError(28, "No space left on device")

    target = {"fsync": (os, "fsync"), "mkstemp": ("tempfile", "mkstemp"), "replace": (Path, "replace")}[step]
    if isinstance(target[0], str):
        monkeypatch.setattr(f"{target[0]}.{target[1]}", full)
    else:
        monkeypatch.setattr(*target, full)
    with pytest.raises(
        CannotWrite, match=r"No space left on device.; close it in other programs, check the disk"
    ):
        write_file(path, b"new")
    assert path.read_bytes() == b"old"
    assert names(tmp_path) == ["a.yaml"]


def test_a_folder_that_cannot_be_synced_is_no_failed_write(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    path = tmp_path / "a.yaml"
    sync = os.fsync

    def only_files(handle: int) -> None:
        if stat.S_ISDIR(os.fstat(handle).st_mode):
            raise OSError(22, "Invalid argument")
        sync(handle)

    monkeypatch.setattr(os, "fsync", only_files)
    write_file(path, b"new")
    assert path.read_bytes() == b"new"


def test_a_link_out_of_its_folder_is_refused_and_one_inside_is_followed(tmp_path: Path) -> None:
    inside, outside = tmp_path / "inside", tmp_path / "outside"
    inside.mkdir()
    outside.mkdir()
    (outside / "a.yaml").write_bytes(b"old")
    (inside / "real.yaml").write_bytes(b"old")
    (inside / "out.yaml").symlink_to(outside / "a.yaml")
    (inside / "in.yaml").symlink_to("real.yaml")
    with pytest.raises(CannotWrite, match="is a link out of its folder"):
        write_file(inside / "out.yaml", b"new")
    assert (outside / "a.yaml").read_bytes() == b"old"
    write_file(inside / "in.yaml", b"new")
    assert (inside / "in.yaml").is_symlink()
    assert (inside / "real.yaml").read_bytes() == b"new"


def test_a_folder_or_a_missing_folder_in_the_place_of_a_file_is_said(tmp_path: Path) -> None:
    (tmp_path / "a.yaml").mkdir()
    (tmp_path / "file").write_bytes(b"")
    with pytest.raises(CannotWrite, match="could not be written"):
        write_file(tmp_path / "a.yaml", b"new")
    with pytest.raises(CannotWrite, match="could not be written"):
        write_file(tmp_path / "missing" / "a.yaml", b"new")
    with pytest.raises(CannotWrite, match="cannot be made"):
        write_all(tmp_path / "file" / "below", {"a": b""})
    assert names(tmp_path) == ["a.yaml", "file"]
