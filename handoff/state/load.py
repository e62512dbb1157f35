"""From a file to the validated state of one patient at one moment."""

from __future__ import annotations

import os
from collections.abc import Callable, Mapping
from datetime import UTC, datetime
from pathlib import Path
from typing import Any, TypeAlias

from msgspec import Struct, field

from handoff.state.clock import Clock, ClockError
from handoff.state.comments import entries_behind_hash
from handoff.state.faults import Fault, Severity, StateFaults
from handoff.state.file_text import read_text
from handoff.state.nodes import Map, Text
from handoff.state.patient import PatientState
from handoff.state.reader import read_nodes
from handoff.state.swallowed import entries_in_texts
from handoff.state.validate import check, without_blanks

Checks: TypeAlias = Callable[[PatientState, datetime], list[Fault]]


class MomentError(ValueError):
    """The moment asked for on the command line is not one."""


class Loaded(Struct, frozen=True):
    """A validated state, the moment it is read for, and the unusual values that nobody confirmed."""

    state: PatientState
    now: datetime
    unusual: tuple[Fault, ...]
    unchecked: Mapping[str, str] = field(default_factory=dict)
    """Why each plugin that could not check the file failed, by its name."""


def load_file(path: Path, at: str, schema: Mapping[str, Any], checks: Checks) -> Loaded:
    """Return the state in the file ``path``; see :func:`load_text`.

    Raises:
        NotAStateFile: The path is not a readable text file.
    """
    return load_text(read_text(path), os.fspath(path), at, schema, checks)


def load_text(text: str, file: str, at: str, schema: Mapping[str, Any], checks: Checks) -> Loaded:
    """Return the state written in ``text`` as of ``at`` (a time as in the file; empty for now).

    Args:
        text: The content of a state file.
        file: Its name, for messages.
        at: ``2026-03-14 19:30``, or ``19:30`` for today, local to the file's clock; empty for now.
        schema: The merged schema.
        checks: Finds the faults that the schema cannot see.

    Raises:
        StateFaults: The file has faults; all of them.
        MomentError: ``at`` is not a moment.
    """
    root, found = read_nodes(text, file)
    now = _moment(at, root)
    found += check(root, schema, now, found)
    found += entries_behind_hash(text, root)
    found += entries_in_texts(text, root)
    faults = [fault for fault in found if fault.severity is Severity.FAULT]
    if faults:
        raise StateFaults(file, faults)
    kept = without_blanks(root)
    state = PatientState(kept if isinstance(kept, Map) else Map.at(), file)
    found += checks(state, now)
    faults = [fault for fault in found if fault.severity is Severity.FAULT]
    if faults:
        raise StateFaults(file, faults)
    return Loaded(state, now, tuple(sorted(found)))


def _moment(at: str, root: Map) -> datetime:
    if not at:
        return datetime.now(UTC).replace(second=0, microsecond=0)
    zone = root.get("clock")
    try:
        clock = Clock(str(zone) if isinstance(zone, Text) else "UTC")
    except ClockError:
        clock = Clock("UTC")
    try:
        if len(at) < len("2026-03-14"):
            today = clock.local(datetime.now(UTC)).strftime("%Y-%m-%d")
            return clock.read_time(today, at)
        return clock.read(at)
    except ClockError as error:
        raise MomentError(f"--at: {error.what}; {error.cure}") from None
