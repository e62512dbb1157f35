"""What was given by mistake, and files too large, too deep or in another encoding: one line, never a traceback."""

from __future__ import annotations

import errno
import zipfile
from collections.abc import Callable
from pathlib import Path

import pytest

from handoff.state.faults import StateFaults
from handoff.state.file_text import MAX_BYTES, NotAStateFile, read_text
from handoff.state.reader import MAX_DEPTH, read_nodes
from tests.states.files import AT, command

SMALL = "handoff: 1\nclock: Europe/Dublin\npatient: {name: Tomas Ferrandel}\ninjury: {at: 2026-03-14 13:20}\n"


def folder(path: Path) -> None:
    path.mkdir()


def word_document(path: Path) -> None:
    with zipfile.ZipFile(path, "w") as document:
        document.writestr("[Content_Types].xml", "<Types/>")


def sparse(path: Path) -> None:
    with path.open("wb") as file:
        file.truncate(200_000_000)


def of_bytes(data: bytes) -> Callable[[Path], None]:
    def write(path: Path) -> None:
        path.write_bytes(data)

    return write


WRONG = {
    "a folder": (folder, "is a folder; name the patient's .yaml file in it"),
    "a Word document": (word_document, "is a document, not a patient-state file; name the .yaml file it was made from"),
    "an old Word document": (of_bytes(b"\xd0\xcf\x11\xe0\xa1\xb1"), "is a document, not a patient-state file"),
    "a printed document": (of_bytes(b"%PDF-1.7\n"), "is a document, not a patient-state file"),
    "a rich text document": (of_bytes(rb"{\rtf1\ansi handoff: 1}"), "is a document, not a patient-state file"),
    "200 MB": (sparse, "is 200 MB; a patient-state file is at most 8 MB"),
    "UTF-16 with its mark": (of_bytes(SMALL.encode("utf-16")), ":1:1: not UTF-8 text; save it again as plain text"),
    "UTF-16 without a mark": (of_bytes(SMALL.encode("utf-16-le")), ":1:2: not UTF-8 text; save it again"),
    "an old Windows encoding": (
        of_bytes(SMALL.encode() + "results: [{other: 37.9 °C}]\n".encode("cp1252")),
        ":5:24: not UTF-8 text; save it again as plain text with the encoding UTF-8",
    ),
    "a cut letter": (of_bytes(SMALL.encode() + b"# \xc3"), ":5:3: not UTF-8 text"),
    "a picture": (of_bytes(b"\x89PNG\r\n\x1a\n\0\0"), ":1:1: not UTF-8 text"),
    "a zero byte": (of_bytes(SMALL.encode() + b"# \0\n"), ":5:3: not UTF-8 text"),
}  # fmt: skip


@pytest.mark.parametrize(("make", "said"), WRONG.values(), ids=list(WRONG))
def test_what_is_no_state_file_is_named_with_its_cure(
    make: Callable[[Path], None], said: str, tmp_path: Path
) -> None:
    path = tmp_path / "ferrandel.yaml"
    make(path)
    with pytest.raises(NotAStateFile) as refused:
        read_text(path)
    assert str(refused.value).startswith(f"{path}{'' if said.startswith(':') else ' '}{said}")
    assert "\n" not in str(refused.value)


@pytest.mark.parametrize("kind", ["a folder", "a Word document", "200 MB", "UTF-16 with its mark"])
def test_the_command_leaves_with_exit_code_2(kind: str, tmp_path: Path) -> None:
    path = tmp_path / "ferrandel.yaml"
    WRONG[kind][0](path)
    done = command("check", path, "--at", AT)
    assert done.returncode == 2
    assert len(done.stderr.splitlines()) == 1
    assert done.stderr.startswith(str(path))
    assert done.stdout == ""


def test_a_file_that_is_not_there_is_named(tmp_path: Path) -> None:
    with pytest.raises(NotAStateFile, match="is not there; check the name and the folder"):
        read_text(tmp_path / "ferandel.yaml")


def test_a_file_that_may_not_be_read_is_named(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "ferrandel.yaml"
    path.write_text(SMALL)

    def locked(*_: object, **__: object) -> None:
        raise PermissionError(errno.EACCES, "Permission denied")

    monkeypatch.setattr(Path, "open", locked)
    with pytest.raises(NotAStateFile, match=r"cannot be read .Permission denied.; close it elsewhere"):
        read_text(path)


@pytest.mark.skipif(not Path("/dev/zero").exists(), reason="no endless file on this system")
def test_an_endless_file_is_not_read() -> None:
    with pytest.raises(NotAStateFile, match="is a device or a pipe"):
        read_text(Path("/dev/zero"))


def test_a_file_of_the_largest_size_is_read(tmp_path: Path) -> None:
    path = tmp_path / "long.yaml"
    path.write_text(SMALL + "#" * (MAX_BYTES - len(SMALL)))
    assert len(read_text(path)) == MAX_BYTES
    path.write_text(SMALL + "#" * (MAX_BYTES - len(SMALL) + 1))
    with pytest.raises(NotAStateFile, match="is 9 MB; a patient-state file is at most 8 MB"):
        read_text(path)


DEEP = {
    "10,000 brackets": ("a: " + "[" * 10_000 + "]" * 10_000 + "\n", "nest"),
    "10,000 brackets left open": ("a: " + "[" * 10_000 + "\n", "nest"),
    "10,000 braces": ("a: " + "{b: " * 10_000 + "}" * 10_000 + "\n", "nest"),
    "10,000 dashes": ("a:\n- " + "- " * 10_000 + "x\n", "nest"),
    "10,000 keys": ("".join(" " * depth + "a:\n" for depth in range(10_000)), "nest"),
}


@pytest.mark.parametrize(("text", "said"), DEEP.values(), ids=list(DEEP))
def test_deep_nesting_is_refused_where_it_is_too_deep(text: str, said: str) -> None:
    with pytest.raises(StateFaults) as refused:
        read_nodes(text, "deep.yaml")
    (fault,) = refused.value.faults
    assert said in fault.what
    assert "check the brackets" in fault.cure
    assert len(fault.said("deep.yaml")) < 1000


def test_the_command_refuses_deep_nesting_with_exit_code_1(tmp_path: Path) -> None:
    path = tmp_path / "deep.yaml"
    path.write_text(SMALL + DEEP["10,000 brackets"][0])
    done = command("check", path, "--at", AT)
    assert done.returncode == 1
    assert "Traceback" not in done.stderr
    assert len(done.stderr.splitlines()) == 2


def test_nesting_to_the_limit_is_read() -> None:
    root, faults = read_nodes("a: " + "[" * (MAX_DEPTH - 1) + "]" * (MAX_DEPTH - 1) + "\n", "deep.yaml")
    assert faults == []
    assert len(root) == 1
    with pytest.raises(StateFaults, match="1 faults"):
        read_nodes("a: " + "[" * MAX_DEPTH + "]" * MAX_DEPTH + "\n", "deep.yaml")


def test_a_million_tabs_are_refused_at_once_and_not_a_million_times(tmp_path: Path) -> None:
    path = tmp_path / "table.yaml"
    path.write_text("2026-03-14\t14:15\t118\n" * 300_000)
    with pytest.raises(StateFaults) as refused:
        read_nodes(read_text(path), "table.yaml")
    assert len(refused.value.faults) == 50
    assert [fault.line for fault in refused.value.faults] == list(range(1, 51))
