"""The built-in templates as the build prepared them: cleaned for their tags, and the tags as Python code.

Both are kept under the digest of the very text that they were made from and of the versions of the
two libraries. A template of the unit, or a changed one, is not found and prepared when it is filled;
either way the same code runs in the same sandbox.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from io import BytesIO
from pathlib import Path
from types import CodeType
from typing import Any

import docxtpl
import jinja2
from docxtpl import DocxTemplate

from handoff.compiled import TEMPLATES, keep, kept

VERSIONS = f"docxtpl {docxtpl.__version__}, jinja2 {jinja2.__version__}"
FOLDER = Path(__file__).parent / "templates"

_LISTING = re.compile("[\t\n\a\f]")
"""What the library turns into tabs, breaks and paragraphs after the filling."""


class PreparedTemplate(DocxTemplate):  # type: ignore[misc] # the library has no types  # type: ignore[misc] # the library has no types
    """A template that takes from the build what does not depend on the patient."""

    def patch_xml(self, src_xml: str) -> str:
        """Return the source cleaned for its tags."""
        found = kept(["patched", VERSIONS, src_xml], TEMPLATES)
        return str(super().patch_xml(src_xml) if found is None else found)

    def resolve_listing(self, xml: str) -> str:
        """Return the filled source with listings spelled out; it is not searched where there is none."""
        return str(super().resolve_listing(xml)) if _LISTING.search(xml) else xml


def code_of(source: object) -> CodeType | None:
    """Return the code of a template's source that the build compiled, or None."""
    text = kept(["code", VERSIONS, source], TEMPLATES) if isinstance(source, str) else None
    return None if text is None else compile(text, "<built-in template>", "exec")


def compile_templates(file: Path) -> None:
    """Write what is worked out of the built-in templates to ``file``; for the build."""
    from handoff.document.render import environment  # noqa: PLC0415  (which imports this module)

    sandbox, made = environment([]), []
    for path in sorted(FOLDER.glob("*.docx")):
        template = DocxTemplate(BytesIO(path.read_bytes()))
        template.init_docx()
        for source in _sources(template):
            patched = template.patch_xml(source)
            made.append((("patched", VERSIONS, source), patched))
            tags = re.sub(r"<w:p([ >])", r"\n<w:p\1", patched)  # as the library hands it to Jinja
            made.append((("code", VERSIONS, tags), sandbox.compile(tags, raw=True)))
    keep(made, file)


def _sources(template: Any) -> Iterator[str]:
    yield template.get_xml()
    for uri in (template.HEADER_URI, template.FOOTER_URI):
        for _, part in template.get_headers_footers(uri):
            yield template.get_part_xml(part)
