"""Who a patient is, and whether two files speak of the same one."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from msgspec import Struct

from handoff.plugin import PatientState, joined, words
from handoff.state.clock import read_date

UNKNOWN = "unknown"
"""The name that a file holds until the patient is identified."""


class Person(Struct, frozen=True):
    """What tells one patient from another; a bed is not among it."""

    name: str
    born: str
    identifiers: tuple[tuple[str, str], ...]
    earlier_names: tuple[str, ...] = ()

    def identifier(self, kind: str) -> str:
        """Return the identifier of that kind, or an empty string."""
        return dict(self.identifiers).get(kind, "")


class DifferentPatients(Exception):
    """Two files do not speak of one patient; each line says what differs and what to do."""

    def __init__(self, lines: tuple[str, ...]) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines


def person_of(state: PatientState) -> Person:
    """Return who the patient of a state file is."""
    patient = state.patient
    return Person(
        state.name, words(patient.get("born")), state.identifiers, state.texts(patient.get("earlier_names"))
    )


def person_in(data: Mapping[str, Any]) -> Person | None:
    """Return who the patient of a loaded ``items.json`` is; None where it does not say so."""
    patient = data.get("patient")
    if not isinstance(patient, Mapping) or not isinstance(patient.get("identifiers"), Mapping):
        return None
    numbers = tuple((str(kind), str(number)) for kind, number in patient["identifiers"].items())
    earlier = tuple(str(name) for name in patient.get("earlier_names") or ())
    return Person(str(patient.get("name") or ""), str(patient.get("born") or ""), numbers, earlier)


def same_patient(earlier: Person, later: Person) -> tuple[str, ...]:
    """Return what is to be said about two files of one patient; nothing where all agrees.

    An identifier that was replaced stands under ``earlier`` of the later file, a name that was
    replaced under ``earlier_names``: then the change is said and not refused.

    Raises:
        DifferentPatients: A name, a birth date or an identifier differs, or too little agrees.
    """
    carried = _carried(earlier, later)
    said = [f"{carried} of the earlier file is kept as the earlier identifier"] if carried else []
    differing = [*_name_differs(earlier, later, carried, said), *_facts_differ(earlier, later, carried)]
    if differing:
        raise DifferentPatients(("these are not the same patient; nothing was joined", *differing))
    if not carried and not _enough_agrees(earlier, later):
        raise DifferentPatients(
            (
                "only the name agrees, and two identifiers are needed; nothing was joined",
                "write the birth date and the record number into both files",
            )
        )
    return tuple(said)


def plain_name(name: str) -> str:
    """Return a name without case and spacing."""
    return " ".join(name.casefold().split())


def _carried(earlier: Person, later: Person) -> str:
    kept = later.identifier("earlier")
    for kind, number in earlier.identifiers:
        if kept and number == kept:
            return f"{kind.replace('_', ' ')} {number}"
    return ""


def _name_differs(earlier: Person, later: Person, carried: str, said: list[str]) -> list[str]:
    if plain_name(earlier.name) == plain_name(later.name):
        return []
    known = [plain_name(name) for name in later.earlier_names]
    if plain_name(earlier.name) in known or (carried and plain_name(earlier.name) == UNKNOWN):
        said.append(f"the name was {earlier.name or 'not recorded'} and is now {later.name}")
        return []
    return [
        f"name: {earlier.name or 'not recorded'} and {later.name or 'not recorded'}; if it is one patient, "
        "write the earlier name under patient.earlier_names and the earlier number under identifiers.earlier"
    ]


def _facts_differ(earlier: Person, later: Person, carried: str) -> list[str]:
    differing = []
    if earlier.born and later.born and earlier.born != later.born:
        dates = (read_date(born).shown() for born in (earlier.born, later.born))
        differing.append(
            f"birth date: {joined(list(dates))}; look at the wrist band and correct the wrong one"
        )
    for kind, number in earlier.identifiers:
        other = later.identifier(kind)
        if other and other != number and kind != "earlier" and number not in carried.split():
            differing.append(
                f"{kind.replace('_', ' ')}: {number} and {other}; if it was replaced, "
                "write the earlier one under identifiers.earlier"
            )
    return differing


def _enough_agrees(earlier: Person, later: Person) -> bool:
    shared = any(number and later.identifier(kind) == number for kind, number in earlier.identifiers)
    born = bool(earlier.born) and earlier.born == later.born
    named = plain_name(earlier.name) not in ("", UNKNOWN)
    return shared if not named else shared or born
