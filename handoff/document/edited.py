"""Tell whether a document is still as it was drafted: a digest of its parts stands in its properties."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Mapping
from io import BytesIO
from zipfile import ZipFile

UNSET = "0" * 2 * hashlib.sha256().digest_size
"""Stands in the properties until the parts are known; has the length of a digest."""

MARK = "as drafted: "
"""What stands before the digest in the property 'version'."""

LARGEST_BYTES = 100_000_000
"""Unpacked size from which a file is taken for no document of ours; a bomb is not unpacked."""

_PROPERTIES = "docProps/"
_CORE = "docProps/core.xml"
_WRITTEN = re.compile(rf"{MARK}([0-9a-f]{{64}})".encode())


def parts_digest(parts: Mapping[str, bytes]) -> str:
    """Return the SHA-256 of all parts but the properties, by their names."""
    found = hashlib.sha256()
    for name in sorted(parts):
        if not name.startswith(_PROPERTIES):
            found.update(f"{name} {len(parts[name])} ".encode())
            found.update(parts[name])
    return found.hexdigest()


def sealed(parts: dict[str, bytes]) -> dict[str, bytes]:
    """Return ``parts`` with the digest of the others put into the properties, where room was left for it."""
    core = parts.get(_CORE, b"")
    unset = f"{MARK}{UNSET}".encode()
    if unset not in core:
        return parts
    return {**parts, _CORE: core.replace(unset, f"{MARK}{parts_digest(parts)}".encode())}


def read_parts(content: bytes) -> dict[str, bytes]:
    """Return the parts of a .docx file by name.

    Raises:
        ValueError: It is no such file, or too large to be one of ours.
    """
    try:
        with ZipFile(BytesIO(content)) as file:
            if sum(part.file_size for part in file.infolist()) > LARGEST_BYTES:
                raise ValueError("it is too large")
            return {name: file.read(name) for name in file.namelist()}
    except ValueError:
        raise
    except Exception as error:  # each way of packing fails in a way of its own
        raise ValueError("it is no Word document") from error


def is_as_drafted(content: bytes) -> bool:
    """Return whether nothing of a document but its properties changed since it was drafted.

    A file that is none of ours, or that cannot be read (protected by a password), counts as changed.
    """
    try:
        parts = read_parts(content)
    except ValueError:
        return False
    written = _WRITTEN.search(parts.get(_CORE, b""))
    return written is not None and written[1].decode() == parts_digest(parts)
