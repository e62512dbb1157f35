"""The phone report: read aloud from top to bottom, each line ticked as it is said."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.identity import Frame, Identity, frame, identity, person
from handoff.document.sections import Band, Mark, bands, sentence
from handoff.transfer.block import Line, airway
from handoff.transfer.missing import answers, missing
from handoff.transfer.profile import Profile

OPENING = "Say who you are and from where. Ask who is listening, name and role, and write both down."


class Said(Struct, frozen=True):
    """One line to be read aloud, with the tag of its tick box."""

    label: str
    text: str
    tag: Mark


class Phone(Struct, frozen=True):
    """Everything that the phone report prints."""

    frame: Frame
    bands: tuple[Band, ...]
    identity: Identity
    profile: str
    phones: tuple[Line, ...]
    missing: tuple[str, ...]
    opening: str
    caller: str
    airway: str
    lines: tuple[Said, ...]
    concerns: tuple[str, ...]
    requests: tuple[str, ...]


def phone(assessment: Assessment, profile: Profile) -> Phone:
    """Return the phone report for the receiver of ``profile``."""
    answered = answers(assessment, profile)
    state = assessment.state
    return Phone(
        frame=frame("Phone report for a transfer", assessment),
        bands=bands(assessment),
        identity=identity(assessment),
        profile=profile.name,
        phones=tuple(Line(who, number) for who, number in profile.phones),
        missing=missing(answered),
        opening=OPENING,
        caller=person(state.handover.get("from")),
        airway=airway(assessment)[0],
        lines=tuple(
            Said(sentence(one.label), one.text, Mark(f"said:{number}"))
            for number, one in enumerate(answered, start=1)
        ),
        concerns=state.texts(state.handover.get("concerns")),
        requests=state.texts(state.handover.get("requests")),
    )
