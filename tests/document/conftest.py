"""One invented assessment and its documents, made once for all tests of this folder."""

from __future__ import annotations

from pathlib import Path

import pytest

from handoff.document import draft
from tests.document.fake import STEM, assessment
from tests.document.printing import converted, example_documents


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


@pytest.fixture(scope="session")
def example_pdfs(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    """Every document of every example as a PDF file, by the stem of its name."""
    return converted(example_documents(), "pdf", tmp_path_factory.mktemp("examples"))
