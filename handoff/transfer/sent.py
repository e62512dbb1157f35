"""A packet that has left, read back from its folder, its zip or its items.json."""

from __future__ import annotations

import hashlib
import zipfile
from collections.abc import Mapping
from pathlib import Path, PurePosixPath

from handoff.shift.snapshot import NotItems, snapshot_in
from handoff.transfer.packet import CONTENTS, Sent

ITEMS = ".items.json"
LARGEST = 50_000_000
"""No packet comes near to so many bytes, unpacked."""


class NotAPacket(ValueError):
    """A path is not a packet that was made; says what to do."""


def read_sent(path: Path) -> tuple[Sent, tuple[str, ...]]:
    """Return the packet at ``path``, and the names of files that are no longer as they were when it was made.

    Raises:
        NotAPacket: There is no packet at ``path``.
    """
    try:
        files = _files(path)
    except Exception as error:  # each way of packing fails in a way of its own
        raise NotAPacket(f"{path} cannot be read as a packet ({type(error).__name__}); {_CURE}") from None
    items = [name for name in files if name.endswith(ITEMS)]
    if len(items) != 1:
        raise NotAPacket(f"{path} holds {len(items)} files that end in {ITEMS}; {_CURE}")
    try:
        snapshot = snapshot_in(files[items[0]].decode("utf-8", "replace"), items[0])
    except NotItems as error:
        raise NotAPacket(str(error)) from None
    name = path.parent.name if path.name.endswith(ITEMS) else path.name.removesuffix(".zip")
    return Sent(name or path.name, snapshot), _changed(files)


_CURE = "give the folder or the zip that handoff transfer wrote, or its items.json; a protected one is opened first"


def _files(path: Path) -> Mapping[str, bytes]:
    if path.is_dir():
        return {one.name: one.read_bytes() for one in sorted(path.iterdir()) if one.is_file()}
    if path.suffix == ".zip":
        with zipfile.ZipFile(path) as archive:
            held = [info for info in archive.infolist() if not info.is_dir()]
            if sum(info.file_size for info in held) > LARGEST:
                raise zipfile.BadZipFile
            return {PurePosixPath(info.filename).name: archive.read(info) for info in held}
    return {path.name: path.read_bytes()}


def _changed(files: Mapping[str, bytes]) -> tuple[str, ...]:
    changed = []
    for line in files.get(CONTENTS, b"").decode("utf-8", "replace").splitlines():
        digest, _, name = line.partition("  ")
        if line.startswith("#") or not name:
            continue
        content = files.get(name)
        if content is None or hashlib.sha256(content).hexdigest() != digest:
            changed.append(name)
    return tuple(changed)
