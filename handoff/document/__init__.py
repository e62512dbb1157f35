"""From an assessment to Word documents: sections of finished strings, templates, files that are read back."""

from handoff.document.documents import (
    confidential_document,
    draft,
    note_document,
    patient_document,
    ward_document,
)
from handoff.document.errors import DocumentError

__all__ = [
    "DocumentError",
    "confidential_document",
    "draft",
    "note_document",
    "patient_document",
    "ward_document",
]
