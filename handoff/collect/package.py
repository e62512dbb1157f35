"""A care plan that came back: its parts read with limits, who and when it was made for."""

from __future__ import annotations

import zlib
from collections.abc import Mapping
from io import BytesIO
from typing import Any
from zipfile import BadZipFile, ZipFile, ZipInfo

from lxml import etree
from msgspec import Struct

from handoff.document.made_from import PREFIX
from handoff.shift.wording.word_text import (
    MEGABYTE_BYTES,
    MOST_FILE_BYTES,
    MOST_PARTS_BYTES,
    NotADocument,
    parsed,
    unpacked,
)

MOST_PARTS = 1000
"""A care plan has a dozen parts."""

_DOCUMENT, _CORE, _CUSTOM = "word/document.xml", "docProps/core.xml", "docProps/custom.xml"


class Returned(Struct, frozen=True):
    """What a returned care plan says of itself: its body, its printed text, its properties.

    ``properties`` are those that were put in when it was made; a program that saved it may have
    dropped them. ``printed`` is the text of body, headers and footers with single spaces.
    """

    body: Any
    printed: str
    title: str
    digest: str
    properties: Mapping[str, str]


def returned(content: bytes) -> Returned:
    """Return the care plan in ``content``.

    Raises:
        NotADocument: Not a .docx file, damaged, built to do harm, or larger than a care plan can be.
    """
    if len(content) > MOST_FILE_BYTES:
        raise NotADocument(f"it is larger than {MOST_FILE_BYTES // MEGABYTE_BYTES} MB; no care plan is")
    try:
        with ZipFile(BytesIO(content)) as file:
            parts = _parts(file)
        roots = {name: parsed(part) for name, part in parts.items()}
    except (
        BadZipFile,
        zlib.error,
        EOFError,
        OSError,
        NotImplementedError,
        RuntimeError,
        ValueError,
    ) as error:
        if isinstance(error, NotADocument):
            raise
        raise NotADocument(
            "it is not a Word document (.docx), or it is damaged or locked; save it anew"
        ) from None
    except etree.XMLSyntaxError:
        raise NotADocument("a part of it is damaged; open it in Word and save it anew") from None
    return _read(roots)


def _parts(file: ZipFile) -> dict[str, bytes]:
    infos = file.infolist()
    names = [info.filename for info in infos]
    if len(infos) > MOST_PARTS:
        raise NotADocument("it holds more parts than a care plan can; it was not read")
    if len(set(names)) < len(names) or any(map(_leads_out, names)):
        raise NotADocument("it holds parts with names that Word never gives; it was not read")
    if _DOCUMENT not in names:
        raise NotADocument("it is not a Word document (.docx); save it as one")
    left = MOST_PARTS_BYTES
    parts = {}
    for info in infos:
        if _is_read(info):
            parts[info.filename] = unpacked(file, info, left)
            left -= len(parts[info.filename])
    return parts


def _leads_out(name: str) -> bool:
    return name.startswith(("/", "\\")) or "\\" in name or ":" in name or ".." in name.split("/")


def _is_read(info: ZipInfo) -> bool:
    name = info.filename
    margin = (
        name.startswith(("word/header", "word/footer")) and name.endswith(".xml") and name.count("/") == 1
    )
    return margin or name in (_DOCUMENT, _CORE, _CUSTOM)


def _read(roots: Mapping[str, Any]) -> Returned:
    texts = (text for name, root in roots.items() if name.startswith("word/") for text in _texts(root))
    core = {_bare(node.tag): node.text or "" for node in _children(roots.get(_CORE))}
    properties = {
        node.get("name", "").removeprefix(PREFIX): "".join(node.itertext()).strip()
        for node in _children(roots.get(_CUSTOM))
        if node.get("name", "").startswith(PREFIX)
    }
    return Returned(
        body=roots[_DOCUMENT],
        printed=" ".join(" ".join(texts).split()),
        title=core.get("title", ""),
        digest=core.get("identifier", "").strip(),
        properties=properties,
    )


def _texts(root: Any) -> list[str]:
    """The text of each paragraph; runs are joined as they are printed."""
    paragraphs = (node for node in root.iter() if _bare(node.tag) == "p")
    return ["".join(n.text or "" for n in one.iter() if _bare(n.tag) == "t") for one in paragraphs]


def _children(root: Any) -> list[Any]:
    return [] if root is None else [node for node in root if isinstance(node.tag, str)]


def _bare(tag: object) -> str:
    return str(tag).rpartition("}")[2]
