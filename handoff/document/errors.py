"""What stops a document from being made."""

from __future__ import annotations


class DocumentError(Exception):
    """A document cannot be made, or would not hold all that went in; says which field and what to do."""
