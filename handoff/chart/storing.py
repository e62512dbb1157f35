"""Write the new text of a patient file: only what was read is replaced, byte for byte."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

from handoff.chart.charting import Charted
from handoff.chart.locking import locked
from handoff.files import CannotWrite, write_file
from handoff.state.file_text import read_text

_BOM = b"\xef\xbb\xbf"
_TRIES = 5


def store(path: Path, make: Callable[[str], Charted], on_wait: Callable[[], object] | None = None) -> Charted:
    """Write what ``make`` returns for the text of ``path``, under the lock of the file; return it.

    ``make`` is called with the text as it stands; whatever it raises leaves the file unchanged.
    Where another program changed the file in between, it is read and made again. ``on_wait`` is
    called once where another program holds the lock for a while.

    Raises:
        NotAStateFile: The path is not a readable text file.
        CannotWrite: It cannot be written, or another program keeps changing it.
    """
    target = path.resolve() if path.is_symlink() else path
    if not target.is_file():
        read_text(path)  # it says what is there instead
    with locked(target, on_wait=on_wait):
        for _ in range(_TRIES):
            text = read_text(path)
            old = target.read_bytes()
            charted = make(text)
            mark = _BOM if old.startswith(_BOM) else b""
            if mark + text.encode() != old or target.read_bytes() != old:
                continue
            write_file(path, mark + charted.text.encode())
            return charted
    raise CannotWrite(f"{path} is being changed by another program; save and close it there, and chart again")
