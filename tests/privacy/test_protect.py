"""What is protected opens with the right password alone: in other libraries and in an office program."""

from __future__ import annotations

import hashlib
import hmac
import os
import pty
import subprocess
import sys
import zlib
from functools import lru_cache
from io import BytesIO
from pathlib import Path
from zipfile import ZipFile

import pytest
from cryptography.hazmat.primitives.ciphers import Cipher, algorithms, modes
from docx import Document

from handoff.document.read_back import text_of
from handoff.privacy.protect import (
    INSIDE,
    CannotProtect,
    ask_password,
    plain_bundle,
    protected,
    protected_bundle,
    protected_document,
)
from tests.conftest import needs_tool
from tests.document.printing import example_documents
from tests.packaging.project import ROOT

PASSWORD = "kettle harbour nine ropes"  # noqa: S105 (of a test)
WRONG = "kettle harbour nine rope"


@lru_cache(maxsize=1)
def document() -> bytes:
    return example_documents()["nearly-empty-handover.docx"]


def answers(*given: str) -> object:
    """Return something that asks and is given these answers in turn."""
    left = list(given)
    return lambda _prompt: left.pop(0)


def test_a_protected_document_says_nothing_without_the_password() -> None:
    made = protected_document(document(), PASSWORD)
    assert made[:8] == bytes.fromhex("d0cf11e0a1b11ae1")
    assert b"word/document.xml" not in made
    assert PASSWORD.encode() not in made


def quietly(office: str, profile: str, what: str) -> None:
    command = [office, profile, "--headless", "--norestore", what]
    subprocess.run(command, capture_output=True, timeout=120, check=False)


def opened_in_the_office(content: bytes, password: str, folder: Path) -> str:
    """Return what an office program reads with a password, empty where it does not open."""
    office = needs_tool("soffice")
    folder.mkdir(parents=True, exist_ok=True)
    source, target = folder / "in.docx", folder / "out.txt"
    source.write_bytes(content)
    profile = f"-env:UserInstallation={(folder / 'profile').as_uri()}"
    # The first start lays out the profile with an empty macro module, which then takes ours.
    quietly(office, profile, "--terminate_after_init")
    basic = f"""Sub Main
  On Error Goto Leave
  Dim given(1) As New com.sun.star.beans.PropertyValue
  given(0).Name = "Password"
  given(0).Value = "{password}"
  given(1).Name = "Hidden"
  given(1).Value = True
  Dim text(0) As New com.sun.star.beans.PropertyValue
  text(0).Name = "FilterName"
  text(0).Value = "Text (encoded)"
  document = StarDesktop.loadComponentFromURL("{source.as_uri()}", "_blank", 0, given())
  document.storeToURL("{target.as_uri()}", text())
  document.close(True)
Leave:
  StarDesktop.terminate()
End Sub"""
    escaped = basic.replace("&", "&amp;").replace("<", "&lt;").replace('"', "&quot;")
    (folder / "profile" / "user" / "basic" / "Standard" / "Module1.xba").write_text(
        '<?xml version="1.0" encoding="UTF-8"?>\n<script:module '
        'xmlns:script="http://openoffice.org/2000/script" script:name="Module1" '
        f'script:language="StarBasic">{escaped}</script:module>'
    )
    quietly(office, profile, "macro:///Standard.Module1.Main")
    return target.read_text(encoding="utf-8-sig") if target.exists() else ""


def test_an_office_program_opens_it_with_the_right_password_alone(tmp_path: Path) -> None:
    made = protected_document(document(), PASSWORD)
    assert "Situation" in opened_in_the_office(made, PASSWORD, tmp_path / "right")
    assert opened_in_the_office(made, WRONG, tmp_path / "wrong") == ""


def read_aes(content: bytes, password: str) -> bytes:
    """Return the one file of an AES zip, read by the published layout with another library."""
    with ZipFile(BytesIO(content)) as archive:
        (part,) = archive.infolist()
        extra = part.extra
    at = part.header_offset
    lengths = (
        int.from_bytes(content[at + 26 : at + 28], "little"),
        int.from_bytes(content[at + 28 : at + 30], "little"),
    )
    data = content[at + 30 + sum(lengths) :][: part.compress_size]
    assert extra[:2] == b"\x01\x99"
    assert extra[8] == 3, "AES of 256 bits"
    salt, check, body, mark = data[:16], data[16:18], data[18:-10], data[-10:]
    keys = hashlib.pbkdf2_hmac("sha1", password.encode(), salt, 1000, 66)
    if keys[64:] != check or hmac.new(keys[32:64], body, "sha1").digest()[:10] != mark:
        raise ValueError("wrong password")
    made = b""
    for number, start in enumerate(range(0, len(body), 16), start=1):
        block = Cipher(algorithms.AES(keys[:32]), modes.ECB()).encryptor()  # noqa: S305 (the layout's counter)
        stream = block.update(number.to_bytes(16, "little"))
        made += bytes(a ^ b for a, b in zip(body[start : start + 16], stream, strict=False))
    method = int.from_bytes(extra[9:11], "little")
    return zlib.decompress(made, -15) if method == 8 else made


def test_a_bundle_opens_with_the_right_password_alone_and_hides_its_names() -> None:
    files = {"ferrandel.items.json": b'{"a": 1}' * 40, "ferrandel.yaml": b"handoff: 1\n"}
    made = protected_bundle(files, PASSWORD)
    assert ZipFile(BytesIO(made)).namelist() == [INSIDE]
    assert b"ferrandel" not in made
    inside = read_aes(made, PASSWORD)
    with ZipFile(BytesIO(inside)) as archive:
        assert {name: archive.read(name) for name in archive.namelist()} == files
    with pytest.raises(ValueError, match="wrong password"):
        read_aes(made, WRONG)


def test_word_files_are_encrypted_and_all_else_goes_into_the_bundle() -> None:
    made = protected({"a-handover.docx": document(), "a.items.json": b"{}"}, "a", PASSWORD)
    assert sorted(made) == ["a-handover.docx", "a-protected.zip"]
    with pytest.raises(Exception, match=r"."):
        Document(BytesIO(made["a-handover.docx"]))


def test_what_is_no_word_file_is_never_written_unprotected() -> None:
    with pytest.raises(CannotProtect, match="nothing was written"):
        protected({"a-handover.docx": b"no word file"}, "a", PASSWORD)


def test_the_same_files_give_the_same_plain_bundle() -> None:
    assert plain_bundle({"a": b"1"}) == plain_bundle({"a": b"1"})


def test_the_password_is_asked_for_twice_and_must_be_the_same() -> None:
    assert ask_password(answers(PASSWORD, PASSWORD)) == PASSWORD  # type: ignore[arg-type]
    with pytest.raises(CannotProtect, match="not the same"):
        ask_password(answers(PASSWORD, WRONG))  # type: ignore[arg-type]
    with pytest.raises(CannotProtect, match="too short"):
        ask_password(answers("short"))  # type: ignore[arg-type]


def at_a_terminal(arguments: list[str], typed: list[str]) -> tuple[int, str]:
    """Return exit code and everything shown where the command runs at a terminal and these lines are typed."""
    child, terminal = pty.fork()
    if child == 0:
        os.execv(sys.executable, [sys.executable, "-m", "handoff", *arguments])  # noqa: S606
    shown = ""
    waiting = list(typed)
    while True:
        try:
            said = os.read(terminal, 4096).decode(errors="replace")
        except OSError:
            break
        if not said:
            break
        shown += said
        if waiting and shown.rstrip(" ").endswith(":") and "assword" in shown.splitlines()[-1]:
            os.write(terminal, f"{waiting.pop(0)}\n".encode())
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1]), shown


@pytest.mark.skipif(sys.platform == "win32", reason="pseudo-terminals are of Unix")
def test_draft_protects_at_the_terminal_and_never_shows_the_password(tmp_path: Path) -> None:
    example = str(ROOT / "examples" / "nearly-empty.yaml")
    draft = ["draft", example, "--at", "2026-10-02 03:40", "--out", str(tmp_path), "--protect"]
    code, shown = at_a_terminal(draft, [PASSWORD, PASSWORD])
    assert code == 0, shown
    assert PASSWORD not in shown
    assert sorted(path.name for path in tmp_path.iterdir()) == [
        "nearly-empty-care-plan.docx",
        "nearly-empty-handover.docx",
        "nearly-empty-protected.zip",
    ]
    assert all((path.stat().st_mode & 0o077) == 0 for path in tmp_path.iterdir())


@pytest.mark.skipif(sys.platform == "win32", reason="pseudo-terminals are of Unix")
def test_two_different_passwords_write_nothing(tmp_path: Path) -> None:
    example = str(ROOT / "examples" / "nearly-empty.yaml")
    code, shown = at_a_terminal(["draft", example, "--out", str(tmp_path), "--protect"], [PASSWORD, WRONG])
    assert code == 2
    assert "not the same" in shown
    assert list(tmp_path.iterdir()) == []


def test_without_a_terminal_nothing_is_written(tmp_path: Path) -> None:
    example = str(ROOT / "examples" / "nearly-empty.yaml")
    command = [sys.executable, "-m", "handoff", "draft", example, "--out", str(tmp_path), "--protect"]
    done = subprocess.run(
        command,
        input=f"{PASSWORD}\n{PASSWORD}\n",
        capture_output=True,
        text=True,
        start_new_session=True,
        check=False,
    )
    assert done.returncode == 2, done.stderr
    assert "asks for the password at the terminal" in done.stderr
    assert list(tmp_path.iterdir()) == []


def test_no_option_takes_a_password() -> None:
    done = subprocess.run(
        [sys.executable, "-m", "handoff", "draft", "--help"], capture_output=True, text=True, check=True
    )
    assert "--protect" in done.stdout
    assert "--password" not in done.stdout


def test_the_document_itself_is_unchanged_inside(tmp_path: Path) -> None:
    import msoffcrypto

    opened = BytesIO()
    file = msoffcrypto.OfficeFile(BytesIO(protected_document(document(), PASSWORD)))
    file.load_key(password=PASSWORD)
    file.decrypt(opened)
    assert text_of(opened.getvalue()) == text_of(document())
