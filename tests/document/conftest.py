"""One invented assessment and its documents, made once for all tests of this folder."""

from __future__ import annotations

import pytest

from handoff.document import draft
from tests.document.fake import STEM, assessment


@pytest.fixture(scope="session")
def documents() -> dict[str, bytes]:
    """Both documents of the invented assessment by file name."""
    return draft(assessment(), STEM)


@pytest.fixture(scope="session")
def handover(documents: dict[str, bytes]) -> bytes:
    """The handover as bytes."""
    return documents[f"{STEM}-handover.docx"]


@pytest.fixture(scope="session")
def plan(documents: dict[str, bytes]) -> bytes:
    """The care plan as bytes."""
    return documents[f"{STEM}-care-plan.docx"]
