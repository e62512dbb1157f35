"""Make the built-in Word templates: ``python -m handoff.document.make_templates``.

The .docx files are kept beside the code and are what a unit takes as the start of its own;
a test proves that they are what this script makes.
"""

from __future__ import annotations

from datetime import datetime
from io import BytesIO
from pathlib import Path
from typing import Any

from docx import Document
from docx.enum.section import WD_ORIENT
from docx.oxml import parse_xml
from docx.oxml.ns import qn
from docx.shared import Twips

from handoff.document.finish import TOOL, repacked
from handoff.document.making import (
    care_plan_template,
    handover_template,
    note_template,
    transfer_journey,
    transfer_summary,
    transfer_templates,
    ward_template,
)
from handoff.document.making.handover_parts import WIDTH
from handoff.document.making.shared import page_footer, page_header
from handoff.document.making.styles import styles_xml
from handoff.document.paper import SIZES

TEMPLATES = Path(__file__).parent / "templates"
MADE_AT = datetime(2026, 1, 1)

NAMESPACES = (
    'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main" '
    'xmlns:w14="http://schemas.microsoft.com/office/word/2010/wordml"'
)
KEPT = ("styles", "settings", "fontTable", "theme", "webSettings")
"""Parts of the empty document that are kept; the rest (thumbnail, numbering, a second copy of the styles) goes."""


def make_all() -> dict[str, bytes]:
    """Return the built-in templates by file name."""
    return {
        "handover.docx": make(handover_template.body(), WIDTH, landscape=False),
        "note.docx": make(note_template.body(), note_template.WIDTH, landscape=False),
        "ward.docx": make(
            ward_template.body(),
            ward_template.WIDTH,
            landscape=True,
            header=ward_template.header(),
            footer=ward_template.footer(),
        ),
        "transfer-phone.docx": make(transfer_templates.phone_body(), WIDTH, landscape=False),
        "transfer-summary.docx": make(transfer_summary.body(), WIDTH, landscape=False),
        "transfer-working.docx": make(transfer_summary.working_body(), WIDTH, landscape=False),
        "transfer-journey.docx": make(transfer_journey.body(), transfer_journey.WIDTH, landscape=True),
        "transfer-addendum.docx": make(transfer_templates.addendum_body(), WIDTH, landscape=False),
        "care-plan.docx": make(care_plan_template.body(), care_plan_template.WIDTH, landscape=True),
    }


def make(body: str, width: int, *, landscape: bool, header: str = "", footer: str = "") -> bytes:
    """Return a template with that body, ``width`` twentieths of a point wide, as the bytes of a .docx file.

    Without a ``header`` and a ``footer`` of its own, every page names the patient.
    """
    document = Document()
    part = document.part
    _keep_only(part, KEPT)
    _keep_only(document.part.package, ("officeDocument", "core-properties", "extended-properties"))
    _replace_children(document.styles.element, parse_xml(styles_xml()))
    _set_page(document.sections[0], landscape)
    _set_settings(document.settings.element)
    section = document.sections[0]
    for place, text in (
        (section.header, header or page_header(width)),
        (section.footer, footer or page_footer(width)),
    ):
        place.is_linked_to_previous = False
        _replace_children(place._element, parse_xml(f"<w:hdr {NAMESPACES}>{text}</w:hdr>"))
    last = document.element.body[-1]
    for child in parse_xml(f"<w:body {NAMESPACES}>{body}</w:body>"):
        last.addprevious(child)
    core = document.core_properties
    core.author = core.last_modified_by = TOOL
    core.title, core.language, core.comments, core.keywords = "", "en-GB", "", ""
    core.created = core.modified = MADE_AT
    saved = BytesIO()
    document.save(saved)
    return repacked(saved)


def _keep_only(part: Any, kinds: tuple[str, ...]) -> None:
    for key, relation in list(part.rels.items()):
        if relation.reltype.rpartition("/")[2] not in kinds:
            del part.rels[key]


def _replace_children(element: Any, source: Any) -> None:
    for child in list(element):
        element.remove(child)
    for child in list(source):
        element.append(child)


def _set_page(section: Any, landscape: bool) -> None:
    width, height = SIZES["A4"]
    section.orientation = WD_ORIENT.LANDSCAPE if landscape else WD_ORIENT.PORTRAIT
    section.page_width, section.page_height = (
        (Twips(height), Twips(width)) if landscape else (Twips(width), Twips(height))
    )
    section.left_margin = section.right_margin = Twips(680)
    section.top_margin, section.bottom_margin = Twips(780), Twips(820)
    section.header_distance, section.footer_distance = Twips(380), Twips(360)


def _set_settings(settings: Any) -> None:
    for name in (
        "w:zoom",
        "w:proofState",
        "w:savePreviewPicture",
        "w:rsids",
        "w:doNotAutoCompressPictures",
        "w:shapeDefaults",
    ):
        for child in settings.findall(qn(name)):
            settings.remove(child)
    for compatibility in settings.iter(qn("w:compatSetting")):
        if compatibility.get(qn("w:name")) == "compatibilityMode":
            compatibility.set(qn("w:val"), "15")
    language = settings.find(qn("w:themeFontLang"))
    language.set(qn("w:val"), "en-GB")
    language.attrib.pop(qn("w:eastAsia"), None)


def main() -> None:
    """Write the built-in templates beside the code."""
    TEMPLATES.mkdir(exist_ok=True)
    for name, content in make_all().items():
        (TEMPLATES / name).write_bytes(content)


if __name__ == "__main__":
    main()
