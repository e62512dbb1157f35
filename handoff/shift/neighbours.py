"""Who else lies in the folder of a file, and could be taken for its patient."""

from __future__ import annotations

import time
from contextlib import suppress
from pathlib import Path

from handoff.plugin import plural
from handoff.shift.alike import mixed_up
from handoff.shift.many import SUFFIXES
from handoff.shift.people import Person, person_of
from handoff.state.clock import ClockError, read_date
from handoff.state.faults import StateFaults
from handoff.state.file_text import NotAStateFile, read_text
from handoff.state.nodes import Map
from handoff.state.patient import PatientState
from handoff.state.reader import read_nodes

LONGEST_S = 1.0
"""A writing command does not wait longer than this for its neighbours."""


def neighbours(file: Path) -> tuple[str, ...]:
    """Return a line for each patient of the same folder who could be taken for the one in ``file``.

    Only names, birth dates and numbers are read; a neighbour with faults is looked at as far as it can be read.
    """
    own = _read(file)
    if own is None:
        return ()
    lines: list[str] = []
    begun = time.monotonic()
    others = _others(file)
    for index, other in enumerate(others):
        if time.monotonic() - begun > LONGEST_S:
            lines.append(
                f"{plural(len(others) - index, 'file')} of this folder could not be compared in time: handoff ward"
            )
            break
        person = _read(other)
        if person is not None:
            lines += mixed_up([(_said(own, file), own), (_said(person, other), person)])
    return tuple(lines)


def _others(file: Path) -> list[Path]:
    with suppress(OSError):
        own = file.resolve()
        return sorted(
            path
            for path in own.parent.iterdir()
            if path.suffix.lower() in SUFFIXES
            and not path.name.startswith(".")
            and path.resolve() != own
            and path.is_file()
        )
    return []


def _read(file: Path) -> Person | None:
    with suppress(NotAStateFile, StateFaults, ClockError, OSError):
        root, _ = read_nodes(read_text(file), str(file))
        patient = root.get("patient")
        if isinstance(patient, Map) and "name" in patient:
            return person_of(PatientState(root, str(file)))
    return None


def _said(person: Person, file: Path) -> str:
    born = ""
    with suppress(ClockError):
        born = f"born {read_date(person.born).shown()}" if person.born else "birth date not recorded"
    number = next((f"{kind.replace('_', ' ')} {number}" for kind, number in person.identifiers if number), "")
    return f"{', '.join(part for part in (person.name, born, number) if part)} ({file.name})"
