"""An assessment becomes Word files: sections, filled templates, finished and read back."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document.care_plan import care_plan
from handoff.document.changes import Changes
from handoff.document.confidential import confidential_sheet
from handoff.document.context import Data, context
from handoff.document.errors import DocumentError
from handoff.document.figures import drawings
from handoff.document.finish import Properties, finish
from handoff.document.handover import handover
from handoff.document.made_from import made_from
from handoff.document.note import Note
from handoff.document.paper import Page
from handoff.document.printable import visible
from handoff.document.style import in_style, in_units
from handoff.document.ward import Ward
from handoff.policy import Policy

HANDOVER = "handover.docx"
CARE_PLAN = "care-plan.docx"
CONFIDENTIAL = "confidential.docx"
NOTE = "note.docx"
WARD = "ward.docx"


OWN_BAND = "The unit's own template could not be used; this page has the built-in look"
"""Heads the band of a document that had to be made with the built-in template."""


def draft(
    assessment: Assessment, stem: str, changes: Changes | None = None, trouble: list[str] | None = None
) -> dict[str, bytes]:
    """Return the handover and the care plan of ``assessment`` by file name.

    The same assessment gives the same bytes. Nothing is written to the disk.

    Args:
        assessment: What is known of the patient at the moment of the documents.
        stem: What the file names begin with.
        changes: What changed since an earlier document, for the handover.
        trouble: Takes what is wrong with a unit's own template; the document is then made with the
            built-in one and says so. Without it such a fault is raised.

    Raises:
        DocumentError: A template is at fault, or a text would have been lost.
    """
    assessment, policy = in_units(assessment), assessment.policy
    turned = policy.care_plan_orientation == "landscape"
    return {
        f"{stem}-{HANDOVER}": _of_patient(
            HANDOVER, context(handover(assessment, changes)), assessment, Page(policy.paper), trouble
        ),
        f"{stem}-{CARE_PLAN}": _of_patient(
            CARE_PLAN, context(care_plan(assessment)), assessment, Page(policy.paper, turned), trouble
        ),
    }


def note_document(note: Note, assessment: Assessment, trouble: list[str] | None = None) -> bytes:
    """Return the nursing note as a Word file; ``trouble`` and what is raised as in :func:`draft`."""
    return _of_patient(NOTE, context(note), assessment, Page(assessment.policy.paper), trouble)


def confidential_document(
    assessment: Assessment, stem: str, trouble: list[str] | None = None
) -> dict[str, bytes]:
    """Return the confidential sheet by file name, empty where nothing is confidential; raises as :func:`draft`."""
    sheet = confidential_sheet(assessment)
    return {} if sheet is None else {f"{stem}-{CONFIDENTIAL}": note_document(sheet, assessment, trouble)}


def patient_document(
    template: str, section: Struct, assessment: Assessment, page: Page, trouble: list[str] | None = None
) -> bytes:
    """Return the section of a patient in ``template`` on ``page``; ``trouble`` and raises as in :func:`draft`."""
    return _of_patient(template, context(section), assessment, page, trouble)


def ward_document(
    ward: Ward, made_at: datetime, digest: str, policy: Policy, trouble: list[str] | None = None
) -> bytes:
    """Return the page of a ward as a Word file; ``trouble`` and what is raised as in :func:`draft`."""
    page = Page(policy.paper, landscape=True)
    data = _styled(context(ward), policy)
    return _made(WARD, data, Properties("", made_at, digest), page, policy.templates, trouble)


def _of_patient(
    template: str,
    data: dict[str, Data],
    assessment: Assessment,
    page: Page,
    trouble: list[str] | None = None,
) -> bytes:
    carried = made_from(assessment) if template == CARE_PLAN else {}
    made = Properties("", assessment.now, assessment.state.digest, carried)
    return _made(template, _styled(data, assessment.policy), made, page, assessment.policy.templates, trouble)


def _made(
    template: str,
    data: dict[str, Data],
    made: Properties,
    page: Page,
    folder: str,
    trouble: list[str] | None,
) -> bytes:
    """Return a document; by the unit's own template where ``folder`` holds one of that name."""
    # The Word libraries are heavy; whoever only needs the sections or the references does not load them.
    from handoff.document.outside import fill_outside, outside_template  # noqa: PLC0415
    from handoff.document.read_back import check_document  # noqa: PLC0415
    from handoff.document.render import fill, template_bytes  # noqa: PLC0415

    frame = data["frame"]
    title = f"{frame['title']}, made at {frame['made_at']}" if isinstance(frame, dict) else template
    properties = replace(made, title=title)
    try:
        own = outside_template(folder, template)
        if own is not None:
            content, printed = fill_outside(own, template, data, properties, page, drawings(data))
            check_document(content, printed, data)
            return content
    except DocumentError as error:
        if trouble is None:
            raise
        trouble.append(str(error))
        data = _with_band(data, str(error))
    filled = fill(template_bytes(template), template, data)
    content, printed = finish(filled.template.docx, properties, page, drawings(data)), filled.printed
    del filled  # the filled tree is let go before the finished one is read
    check_document(content, printed, data)
    return content


def _styled(data: dict[str, Data], policy: Policy) -> dict[str, Data]:
    return {name: in_style(value, policy, name) for name, value in data.items()}


def _with_band(data: dict[str, Data], why: str) -> dict[str, Data]:
    bands = data.get("bands")
    if not isinstance(bands, list):
        return data
    own: Data = {"title": OWN_BAND, "lines": [visible(why)]}
    return {**data, "bands": [own, *bands]}
