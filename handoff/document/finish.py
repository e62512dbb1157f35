"""Turn a filled template into a file: unique ids, paper, properties, and the same bytes for the same input."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import UTC, datetime
from io import BytesIO
from itertools import count
from typing import Any
from zipfile import ZIP_DEFLATED, ZipFile, ZipInfo

from msgspec import Struct, field

from handoff.document.edited import MARK, UNSET, sealed
from handoff.document.made_from import put_in
from handoff.document.names import DRAWING, SHAPE, WORD, WORD_2010, XML
from handoff.document.paper import Page, fit

TOOL = "handoff"
LANGUAGE = "en-GB"
UNWANTED = ("stylesWithEffects",)
"""Parts that older templates bring and that only repeat the styles."""

_EPOCH = (1980, 1, 1, 0, 0, 0)


class Properties(Struct, frozen=True):
    """The document properties: title, moment of making, digest of the clinical content.

    ``made_from`` holds what a care plan carries to be read back.
    """

    title: str
    made_at: datetime
    digest: str
    made_from: Mapping[str, str] = field(default_factory=dict)


def finish(
    document: Any, properties: Properties, page: Page, drawings: Mapping[str, str] | None = None
) -> bytes:
    """Return the filled python-docx ``document`` as the bytes of a .docx file.

    ``drawings`` holds runs by the tag of the content control into which each is put.
    """
    _drop_unwanted(document.part)
    roots = list(_roots(document.part))
    fit(roots, page)
    for root in roots:
        _keep_spaces(root)
    _bookmark_rows(document.part.element)
    _draw(document.part.element, drawings or {})
    _renumber(roots)
    _describe(document.core_properties, properties)
    if properties.made_from:
        put_in(document.part.package, properties.made_from)
    saved = BytesIO()
    document.save(saved)
    return repacked(saved)


def _drop_unwanted(part: Any) -> None:
    for key, relation in list(part.rels.items()):
        if relation.reltype.rpartition("/")[2] in UNWANTED:
            del part.rels[key]


def _roots(part: Any) -> Iterator[Any]:
    yield part.element
    for key in sorted(part.rels):
        if part.rels[key].reltype.rpartition("/")[2] in ("header", "footer"):
            yield part.rels[key].target_part.element


def _keep_spaces(root: Any) -> None:
    for text in root.iter(f"{WORD}t"):
        text.set(f"{XML}space", "preserve")


def _bookmark_rows(body: Any) -> None:
    """Put a bookmark around each printed row reference, named after its tag: a resave may drop the tag."""
    for control in list(body.iter(f"{WORD}sdt")):
        tag = control.find(f"{WORD}sdtPr/{WORD}tag")
        name = "" if tag is None else tag.get(f"{WORD}val", "")
        if name.startswith("row:") and name.count(":") == 1:
            identifier = {f"{WORD}id": name}
            start = control.makeelement(
                f"{WORD}bookmarkStart", {**identifier, f"{WORD}name": name.replace(":", "_")}
            )
            control.addprevious(start)
            control.addnext(control.makeelement(f"{WORD}bookmarkEnd", identifier))


def _draw(body: Any, drawings: Mapping[str, str]) -> None:
    """Put each drawing in the place of what its content control holds."""
    from lxml import etree  # noqa: PLC0415 (heavy: loaded when a document is made)

    for control in list(body.iter(f"{WORD}sdt")):
        tag = control.find(f"{WORD}sdtPr/{WORD}tag")
        run = drawings.get("" if tag is None else tag.get(f"{WORD}val", ""))
        content = control.find(f"{WORD}sdtContent")
        if run is None or content is None:
            continue
        place = next(content.iter(f"{WORD}p"), content)
        for old in place.findall(f"{WORD}r"):
            place.remove(old)
        place.append(etree.fromstring(run))


def _renumber(roots: list[Any]) -> None:
    """Give every content control, bookmark, drawing and paragraph a number of its own."""
    controls, drawings, paragraphs = count(1), count(1), count(1)
    for (
        root
    ) in roots:  # asked by tag, which lxml sifts itself: ten times quicker than a look at every element
        for node in root.iter(f"{WORD}sdtPr"):
            _set_control_id(node, next(controls))
        for node in root.iter(f"{DRAWING}docPr", f"{SHAPE}cNvPr"):
            node.set("id", str(next(drawings)))
        for node in root.iter(f"{WORD}p", f"{WORD}tr"):
            if f"{WORD_2010}paraId" in node.attrib:
                node.set(f"{WORD_2010}paraId", f"{next(paragraphs):08X}")
    _renumber_bookmarks(roots)


def _set_control_id(settings: Any, number: int) -> None:
    identifier = settings.find(f"{WORD}id")
    if identifier is None:
        identifier = settings.makeelement(f"{WORD}id", {})
        settings.insert(0 if settings.find(f"{WORD}rPr") is None else 1, identifier)
    identifier.set(f"{WORD}val", str(number))


def _renumber_bookmarks(roots: list[Any]) -> None:
    numbers, names = count(1), set()
    current: dict[str, int | None] = {}
    for root in roots:
        for node in list(root.iter(f"{WORD}bookmarkStart", f"{WORD}bookmarkEnd")):
            old = node.get(f"{WORD}id", "")
            if node.tag == f"{WORD}bookmarkStart":
                name = node.get(f"{WORD}name", "")
                current[old] = None if name in names else next(numbers)
                names.add(name)
            number = current.get(old)
            if number is None:
                node.getparent().remove(node)
            else:
                node.set(f"{WORD}id", str(number))


def _describe(core: Any, properties: Properties) -> None:
    made_at = properties.made_at.astimezone(UTC).replace(tzinfo=None)
    core.title, core.language, core.identifier = properties.title, LANGUAGE, properties.digest
    core.author = core.last_modified_by = TOOL
    core.subject = core.keywords = core.comments = core.category = ""
    core.created = core.modified = made_at
    core.revision = 1
    core.version = f"{MARK}{UNSET}"


def repacked(saved: BytesIO) -> bytes:
    """Return a saved .docx file with the same parts in the same order and no times of its own."""
    made = BytesIO()
    with ZipFile(saved) as old, ZipFile(made, "w", ZIP_DEFLATED) as new:
        for name, content in sealed({name: old.read(name) for name in old.namelist()}).items():
            part = ZipInfo(name, _EPOCH)
            part.compress_type = ZIP_DEFLATED
            new.writestr(part, content)
    return made.getvalue()
