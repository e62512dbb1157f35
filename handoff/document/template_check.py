"""Read a template without filling it: a misspelt field by its place and the nearest known name."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from io import BytesIO
from types import MappingProxyType
from typing import Any, get_args, get_origin, get_type_hints

from docxtpl import DocxTemplate
from jinja2 import TemplateSyntaxError, nodes
from msgspec import Struct

from handoff.document.care_plan import CarePlan
from handoff.document.handover import Handover
from handoff.document.names import WORD
from handoff.document.note import Note
from handoff.document.render import environment
from handoff.document.ward import Ward
from handoff.state.keywords import nearest

KINDS: Mapping[str, type] = MappingProxyType(
    {"handover.docx": Handover, "care-plan.docx": CarePlan, "note.docx": Note, "ward.docx": Ward}
)
"""What each template is filled with."""

SHOWN = 80
"""Letters of a paragraph that are shown to find it by."""


class _Shape(Struct, frozen=True):
    """What stands behind a name: a section, a list of something, a text; None is not known."""

    section: type[Struct] | None = None
    element: _Shape | None = None

    def parts(self) -> dict[str, _Shape]:
        """Return the fields of a section by name."""
        if self.section is None:
            return {}
        hints = get_type_hints(self.section)
        return {name: _shape(hints[name]) for name in self.section.__struct_fields__}


def _shape(kind: Any) -> _Shape:
    if get_origin(kind) is tuple:
        return _Shape(element=_shape(get_args(kind)[0]))
    return _Shape(section=kind) if isinstance(kind, type) and issubclass(kind, Struct) else _Shape()


def template_faults(content: bytes, name: str) -> list[str]:
    """Return one line for each tag of a template that cannot be filled: place, what is wrong, what to do.

    ``name`` is one of ``KINDS``.
    """
    template = DocxTemplate(BytesIO(content))
    template.init_docx()
    known = _shape(KINDS[name]).parts()
    found = []
    for part, root in _parts(template):
        xml = template.patch_xml(re.sub(r"<w:p([ >])", r"\n<w:p\1", template.xml_to_string(root)))
        try:
            tree = environment([]).parse(xml)
            environment([]).compile(xml)
        except TemplateSyntaxError as error:
            found.append(f"{part}, {_line(xml, error.lineno)}: {error.message}; correct or close that tag")
            continue
        found += [f"{_place(part, root, word)}: {said}" for word, said in _unknown(tree, known)]
    return list(dict.fromkeys(found))


def _parts(template: Any) -> Iterator[tuple[str, Any]]:
    from docx.oxml import parse_xml  # noqa: PLC0415

    document = template.docx
    yield "body", document.element.body
    for kind, uri in (("header", template.HEADER_URI), ("footer", template.FOOTER_URI)):
        for _, part in template.get_headers_footers(uri):
            yield kind, parse_xml(part.blob)


def _unknown(tree: nodes.Node, known: Mapping[str, _Shape]) -> Iterator[tuple[str, str]]:
    """Yield the misspelt word and what is to be said of it."""
    if isinstance(tree, nodes.For):
        loop: list[tuple[str, str]] = []
        of = _of(tree.iter, known, loop)
        yield from loop
        name = tree.target.name if isinstance(tree.target, nodes.Name) else ""
        inside = {**known, name: (of.element if of else None) or _Shape(), "loop": _Shape()}
        for child in [*tree.body, *tree.else_]:
            yield from _unknown(child, inside)
    elif isinstance(tree, nodes.Expr):
        said: list[tuple[str, str]] = []
        _of(tree, known, said)
        yield from said
    else:
        for child in tree.iter_child_nodes():
            yield from _unknown(child, known)


def _of(node: nodes.Node, known: Mapping[str, _Shape], said: list[tuple[str, str]]) -> _Shape | None:
    """Return what an expression stands for, None where that is not known; gathers what is misspelt."""
    if isinstance(node, nodes.Name):
        if node.name not in known:
            said.append((node.name, f"unknown field '{node.name}'; {nearest(node.name, known)}"))
        return known.get(node.name)
    if isinstance(node, nodes.Getattr):
        base = _of(node.node, known, said)
        if base is None or base.section is None:
            return None
        parts = base.parts()
        if node.attr not in parts:
            said.append((node.attr, f"unknown field '{_said(node)}'; {nearest(node.attr, parts)}"))
        return parts.get(node.attr)
    inside = [_of(child, known, said) for child in node.iter_child_nodes()]
    is_picked = isinstance(node, nodes.Getitem) and bool(inside) and inside[0] is not None
    return inside[0].element if is_picked and inside[0] else None


def _said(node: nodes.Node) -> str:
    if isinstance(node, nodes.Getattr):
        return f"{_said(node.node)}.{node.attr}"
    return node.name if isinstance(node, nodes.Name) else "..."


def _place(part: str, root: Any, word: str) -> str:
    tag = re.compile(r"\{[{%][^}]*\b" + re.escape(word) + r"\b")
    heading = ""
    for number, paragraph in enumerate(root.iter(f"{WORD}p"), start=1):
        text = "".join(one.text or "" for one in paragraph.iter(f"{WORD}t"))
        if tag.search(text):
            near = f", below '{heading}'" if heading else ""
            return f"{part}, paragraph {number}{near}: '{text[:SHOWN]}'"
        style = paragraph.find(f"{WORD}pPr/{WORD}pStyle")
        if style is not None and style.get(f"{WORD}val", "").startswith("Heading") and "{" not in text:
            heading = text
    return f"{part}, in a content control"


def _line(xml: str, number: int) -> str:
    lines = xml.split("\n")
    text = " ".join(re.sub(r"<[^>]*>", " ", lines[min(number, len(lines)) - 1]).split())
    return f"near '{text[:SHOWN]}'"
