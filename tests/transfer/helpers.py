"""The house fire on the day it is moved to a burn centre, and its packet."""

from __future__ import annotations

from functools import lru_cache

from handoff.document.read_back import text_of
from handoff.transfer.packet import Made, packet
from handoff.transfer.profile import load_profile
from handoff.work import assess_loaded
from tests.shift.helpers import loaded, setup, text_of_example

AT = "2026-03-14 19:30"
SECRET = "bruise on the wrist told to nobody"  # noqa: S105 (a text that must not leave)
CONFIDENTIAL = (
    f"confidential:\n  safeguarding:\n    - {{at: 2026-03-14 15:00, note: {SECRET}, told: charge nurse}}\n"
)


def text(more: str = "") -> str:
    """Return the state file of the house fire with its transfer block, and ``more``."""
    example = text_of_example("house-fire")
    return f"{example}{more}"


@lru_cache(maxsize=4)
def made(more: str = "") -> Made:
    """Return the packet of the house fire for the bundled profile."""
    assessment = assess_loaded(loaded(text(more), AT), setup())
    return packet(assessment, load_profile("burn-centre"), setup().parameters, "fire", text(more).encode())


def document(name: str, more: str = "") -> bytes:
    """Return the document of the packet whose name ends so."""
    return next(content for file, content in made(more).files.items() if file.endswith(f"{name}.docx"))


def said(name: str, more: str = "") -> str:
    """Return every text of that document."""
    return str(text_of(document(name, more)))
