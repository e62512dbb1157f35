"""From an assessment to Word documents: sections of finished strings, templates, files that are read back."""

from handoff.document.documents import draft, note_document, ward_document
from handoff.document.errors import DocumentError

__all__ = ["DocumentError", "draft", "note_document", "ward_document"]
