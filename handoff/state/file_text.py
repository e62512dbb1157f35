"""The text of a state file, or why there is none: wrong place, too large, a document, not UTF-8."""

from __future__ import annotations

import codecs
from pathlib import Path

MAX_BYTES = 8_000_000


class NotAStateFile(Exception):
    """The path is not a readable text file; says what is wrong and what to do (wrong usage)."""


def read_text(path: Path) -> str:
    """Return the text of a state file, without its byte-order mark.

    Raises:
        NotAStateFile: A directory, a missing or unreadable file, one over the size limit,
            a document given by mistake, or text that is not UTF-8.
    """
    try:
        if path.is_dir():
            raise NotAStateFile(f"{path} is a folder; name the patient's .yaml file in it")
        if not path.is_file() and path.exists():
            raise NotAStateFile(f"{path} is a device or a pipe; name the patient's .yaml file")
        size = path.stat().st_size
        with path.open("rb") as file:
            # The size is not known of everything that can be opened, so no more is read than may be.
            data = file.read(MAX_BYTES + 1) if size <= MAX_BYTES else b""
    except FileNotFoundError:
        raise NotAStateFile(f"{path} is not there; check the name and the folder") from None
    except OSError as error:
        raise NotAStateFile(
            f"{path} cannot be read ({error.strerror}); close it elsewhere and try again"
        ) from None
    if max(size, len(data)) > MAX_BYTES:
        said = f"{-(-size // 1_000_000)} MB" if size > MAX_BYTES else "too large"
        raise NotAStateFile(f"{path} is {said}; a patient-state file is at most {MAX_BYTES // 1_000_000} MB")
    if data.startswith((b"PK\x03\x04", b"%PDF", b"\xd0\xcf\x11\xe0", b"{\\rtf")):
        raise NotAStateFile(
            f"{path} is a document, not a patient-state file; name the .yaml file it was made from"
        )
    return _decoded(data.removeprefix(codecs.BOM_UTF8), path)


def _decoded(data: bytes, path: Path) -> str:
    try:
        text, wrong = data.decode("utf-8"), data.find(b"\0")
    except UnicodeDecodeError as error:
        text, wrong = "", error.start
    if wrong < 0:
        return text
    before = data[:wrong]
    line = before.count(b"\n") + 1
    column = len(before[before.rfind(b"\n") + 1 :].decode("utf-8", "replace")) + 1
    raise NotAStateFile(
        f"{path}:{line}:{column}: not UTF-8 text; save it again as plain text with the encoding UTF-8"
    )
