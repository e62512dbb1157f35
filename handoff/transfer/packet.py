"""The packet as one set of files: documents, items.json, the state file, contents with checksums, and a zip."""

from __future__ import annotations

import hashlib
import zipfile
from collections.abc import Mapping
from io import BytesIO

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document import confidential_document, patient_document
from handoff.document.paper import Page
from handoff.items_json import as_json
from handoff.parameters import Parameters
from handoff.shift.snapshot import Snapshot
from handoff.transfer.addendum import addendum
from handoff.transfer.journey import crew_sheet
from handoff.transfer.law import law
from handoff.transfer.phone import phone
from handoff.transfer.profile import Profile
from handoff.transfer.summary import summary, working_sheet

CONTENTS = "contents.txt"
NAMES = {
    "addendum": "0-addendum.docx",
    "phone": "1-phone-report.docx",
    "summary": "2-transfer-summary.docx",
    "journey": "3-journey-sheet.docx",
    "working": "4-working-and-sources.docx",
}
"""How the documents are called: in the order in which they are used."""


class Sent(Struct, frozen=True):
    """A packet that has left: what it is called and what it held."""

    name: str
    snapshot: Snapshot


class Made(Struct, frozen=True):
    """A packet: what it is called, its files by name, and the contents list."""

    name: str
    files: Mapping[str, bytes]

    def zipped(self) -> bytes:
        """Return all files as one zip; the same files give the same bytes."""
        held = BytesIO()
        with zipfile.ZipFile(held, "w", zipfile.ZIP_DEFLATED) as archive:
            for name, content in self.files.items():
                place = zipfile.ZipInfo(f"{self.name}/{name}", (1980, 1, 1, 0, 0, 0))
                place.compress_type, place.external_attr = zipfile.ZIP_DEFLATED, 0o600 << 16
                archive.writestr(place, content)
        return held.getvalue()


def packet(
    assessment: Assessment,
    profile: Profile,
    parameters: Mapping[str, Parameters],
    stem: str,
    state_text: bytes | None,
    *,
    with_confidential: bool = False,
    sent: Sent | None = None,
    name: str = "",
) -> Made:
    """Return the packet of ``assessment`` for the receiver of ``profile``.

    Args:
        assessment: What is known of the patient at the moment of the packet.
        profile: What the receiver wants.
        parameters: The cited tables, for what the law asks.
        stem: What the names begin with.
        state_text: The state file as it may leave; None leaves it out.
        with_confidential: Add the confidential sheet.
        sent: The packet that has left, for an addendum.
        name: What the folder is called, where it may not tell the time.

    Raises:
        DocumentError: A template is at fault, or a text would have been lost.
        DifferentPatients: The packet that was sent is of another patient.
        WrongOrder: The packet that was sent is of a later moment.
    """
    upright, turned = Page(assessment.policy.paper), Page(assessment.policy.paper, landscape=True)
    made: dict[str, bytes] = {}

    def add(kind: str, section: Struct, page: Page) -> None:
        made[f"{stem}-{NAMES[kind]}"] = patient_document(f"transfer-{kind}.docx", section, assessment, page)

    if sent is not None:
        add("addendum", addendum(assessment, sent.snapshot, sent.name), upright)
    kinds = [*(["addendum"] if sent else []), "phone", "summary", "journey", "working"]
    names = [f"{stem}-{NAMES[kind]}" for kind in kinds] + [f"{stem}.items.json"]
    names += [f"{stem}.yaml"] if state_text is not None else []
    add("phone", phone(assessment, profile), upright)
    add("summary", summary(assessment, profile, law(assessment, parameters), (*names, CONTENTS)), upright)
    add("journey", crew_sheet(assessment, profile), turned)
    add("working", working_sheet(assessment), upright)
    if with_confidential:
        made |= confidential_document(assessment, stem)
    made[f"{stem}.items.json"] = as_json(assessment).encode()
    if state_text is not None:
        made[f"{stem}.yaml"] = state_text
    made[CONTENTS] = contents(assessment, profile, made).encode()
    local = assessment.state.clock.local(assessment.now)
    return Made(name or f"{stem}-transfer-{local:%Y-%m-%d-%H%M}", made)


def contents(assessment: Assessment, profile: Profile, files: Mapping[str, bytes]) -> str:
    """Return the contents list; ``sha256sum -c`` reads it and takes the lines with # as remarks."""
    clock = assessment.state.clock
    head = (
        f"# Transfer packet, made at {clock.day_and_time(assessment.now)}",
        f"# from state file version {assessment.state.digest}",
        f"# for: {profile.name}",
        "# SHA-256 of each file; check with: sha256sum -c contents.txt",
    )
    rows = (f"{hashlib.sha256(content).hexdigest()}  {name}" for name, content in files.items())
    return "\n".join((*head, *rows)) + "\n"
