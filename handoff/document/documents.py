"""An assessment becomes Word files: sections, filled templates, finished and read back."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime

from handoff.assess import Assessment
from handoff.document.care_plan import care_plan
from handoff.document.changes import Changes
from handoff.document.confidential import confidential_sheet
from handoff.document.context import Data, context
from handoff.document.figures import drawings
from handoff.document.finish import Properties, finish
from handoff.document.handover import handover
from handoff.document.made_from import made_from
from handoff.document.note import Note
from handoff.document.paper import Page
from handoff.document.ward import Ward

HANDOVER = "handover.docx"
CARE_PLAN = "care-plan.docx"
CONFIDENTIAL = "confidential.docx"
NOTE = "note.docx"
WARD = "ward.docx"


def draft(assessment: Assessment, stem: str, changes: Changes | None = None) -> dict[str, bytes]:
    """Return the handover and the care plan of ``assessment`` by file name.

    The same assessment gives the same bytes. Nothing is written to the disk.

    Args:
        assessment: What is known of the patient at the moment of the documents.
        stem: What the file names begin with.
        changes: What changed since an earlier document, for the handover.

    Raises:
        DocumentError: A template is at fault, or a text would have been lost.
    """
    policy = assessment.policy
    turned = policy.care_plan_orientation == "landscape"
    return {
        f"{stem}-{HANDOVER}": _of_patient(
            HANDOVER, context(handover(assessment, changes)), assessment, Page(policy.paper)
        ),
        f"{stem}-{CARE_PLAN}": _of_patient(
            CARE_PLAN, context(care_plan(assessment)), assessment, Page(policy.paper, turned)
        ),
    }


def note_document(note: Note, assessment: Assessment) -> bytes:
    """Return the nursing note as a Word file; raises as :func:`draft`."""
    return _of_patient(NOTE, context(note), assessment, Page(assessment.policy.paper))


def confidential_document(assessment: Assessment, stem: str) -> dict[str, bytes]:
    """Return the confidential sheet by file name, empty where nothing is confidential; raises as :func:`draft`."""
    sheet = confidential_sheet(assessment)
    return {} if sheet is None else {f"{stem}-{CONFIDENTIAL}": note_document(sheet, assessment)}


def patient_document(template: str, section: object, assessment: Assessment, page: Page) -> bytes:
    """Return the section of a patient in the built-in ``template`` on ``page``; raises as :func:`draft`."""
    return _of_patient(template, context(section), assessment, page)


def ward_document(ward: Ward, made_at: datetime, digest: str, paper: str) -> bytes:
    """Return the page of a ward as a Word file on ``paper``; raises as :func:`draft`."""
    return _made(WARD, context(ward), made_at, digest, Page(paper, landscape=True))


def _of_patient(template: str, data: dict[str, Data], assessment: Assessment, page: Page) -> bytes:
    carried = made_from(assessment) if template == CARE_PLAN else {}
    return _made(template, data, assessment.now, assessment.state.digest, page, carried)


def _made(
    template: str,
    data: dict[str, Data],
    made_at: datetime,
    digest: str,
    page: Page,
    carried: Mapping[str, str] | None = None,
) -> bytes:
    # The Word libraries are heavy; whoever only needs the sections or the references does not load them.
    from handoff.document.read_back import check_document  # noqa: PLC0415
    from handoff.document.render import fill, template_bytes  # noqa: PLC0415

    filled = fill(template_bytes(template), template, data)
    frame = data["frame"]
    title = f"{frame['title']}, made at {frame['made_at']}" if isinstance(frame, dict) else template
    properties = Properties(title, made_at, digest, carried or {})
    content, printed = finish(filled.template.docx, properties, page, drawings(data)), filled.printed
    del filled  # the filled tree is let go before the finished one is read
    check_document(content, printed, data)
    return content
