"""Whether a returned care plan is of the patient of a file, and from which version of it."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime

from msgspec import Struct

from handoff.collect.package import Returned
from handoff.collect.times import printed_moment
from handoff.document.identity import DIGEST_LENGTH
from handoff.document.made_from import NUMBER
from handoff.shift.people import DifferentPatients, Person, person_of, same_patient
from handoff.state.clock import Clock, ClockError, read_date
from handoff.state.patient import PatientState

_MANY_SHOWN = "Burn care plan"


class NotThisPlan(Exception):
    """The document cannot be read into this file; carries the lines that say why."""

    def __init__(self, *lines: str) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines


class Plan(Struct, frozen=True):
    """Which care plan it is: when it was made, from which version, and what is to be said of that."""

    made_at: datetime
    version: str
    said: tuple[str, ...]


def plan_of(document: Returned, state: PatientState, now: datetime) -> Plan:
    """Return which plan of the patient of ``state`` the document is.

    Raises:
        NotThisPlan: No care plan, another patient's, or its print and its properties differ.
    """
    if _MANY_SHOWN not in document.printed and _MANY_SHOWN not in document.title:
        raise NotThisPlan("the document is no care plan made by handoff draft; nothing was read")
    said = [*_same_patient(document, state)]
    made_at = _made_at(document, state.clock)
    if made_at > now:
        raise NotThisPlan(
            f"the plan was made at {state.clock.day_and_time(made_at)}, which has not come yet; check --now"
        )
    version = document.properties.get("version") or document.digest
    if not version:
        said.append("the version of the file that the plan was made from is no longer in the document")
    elif version == state.digest:
        said.append(f"the file is as it was when the plan was made (version {version[:DIGEST_LENGTH]})")
    else:
        said.append(
            f"the file has moved on since the plan was made (then version {version[:DIGEST_LENGTH]}, "
            f"now {state.digest[:DIGEST_LENGTH]}); ticks change no figure"
        )
    return Plan(made_at, version[:DIGEST_LENGTH], tuple(said))


def _same_patient(document: Returned, state: PatientState) -> Sequence[str]:
    known = document.properties
    if "name" not in known and "made at" not in known:
        _is_printed(person_of(state), document, "the patient of this file")
        return ()
    numbers = tuple(
        (key.removeprefix(NUMBER), number) for key, number in known.items() if key.startswith(NUMBER)
    )
    person = Person(known.get("name", ""), known.get("born", ""), numbers)
    _is_printed(person, document, "the patient that the document was made for")
    try:
        return same_patient(person, person_of(state))
    except DifferentPatients as error:
        raise NotThisPlan(*error.lines) from None


def _is_printed(person: Person, document: Returned, whose: str) -> None:
    """Refuse a document whose print does not name that patient by name, birth date and numbers."""
    wanted = [person.name, *(number for _, number in person.identifiers)]
    try:
        wanted += [f"born {read_date(person.born).shown()}"] if person.born else []
    except ClockError:
        wanted.append(person.born)
    missing = [one for one in wanted if one and " ".join(one.split()) not in document.printed]
    if missing:
        raise NotThisPlan(
            f"the document does not print {', '.join(missing)}, as {whose} is called; nothing was read",
            "take the care plan of this patient",
        )
    if not any(number for _, number in person.identifiers) and not person.born:
        raise NotThisPlan(
            "there is neither birth date nor record number to know the patient by; nothing was read"
        )


def _made_at(document: Returned, clock: Clock) -> datetime:
    printed = printed_moment(document.printed, clock) or printed_moment(document.title, clock)
    kept: datetime | None = None
    if "made at" in document.properties:
        try:
            kept = datetime.fromisoformat(document.properties["made at"])
        except ValueError:
            kept = None
    if kept is not None and kept.tzinfo is None:
        kept = None
    if printed and kept and printed != kept:
        raise NotThisPlan("the document says two times at which it was made; nothing was read")
    made_at = printed or kept
    if made_at is None:
        raise NotThisPlan("the document no longer says when it was made; nothing was read")
    return made_at
