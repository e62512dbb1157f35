"""What one file says twice or in two ways that no schema can see; asked about, and never settled here."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from handoff.state.access import amount, words
from handoff.state.faults import Fault, Severity
from handoff.state.nodes import List, Map, Node, path_text, plain, walk
from handoff.state.patient import PatientState

TIMED = ("at", "from", "running", "stopped")
WHO_CHARTED = ("by", "written", "note", "confirmed", "corrects")
MONTHS_A_YEAR = 12


def contradictions(state: PatientState, now: datetime) -> list[Fault]:
    """Return a warning for each entry that stands twice, and for an age that the birth date does not give."""
    return [*_twice(state), *_age(state, now)]


def _twice(state: PatientState) -> Iterator[Fault]:
    """Two entries of one list that say the same of the same minute: both count, unless one is a slip."""
    for path, node in walk(state.root):
        if not isinstance(node, List) or path[:1] == ("collected",):
            continue
        in_rows = path[:1] == ("observations",) and len(path) == len(("observations", "date", "time"))
        seen: list[tuple[object, Map]] = []
        for index, entry in enumerate(node):
            if not isinstance(entry, Map) or "struck" in entry or not (in_rows or _is_timed(entry)):
                continue
            said = _content(entry)
            before = next((other for known, other in seen if known == said), None)
            seen.append((said, entry))
            if before is None or "yes" in (words(entry.get("confirmed")), words(before.get("confirmed"))):
                continue
            yield Fault(
                entry.line,
                entry.column,
                path_text((*path, index)),
                f"the same entry stands on line {before.line}: same time, same figures; both count",
                "strike one out, or add confirmed: yes if both happened",
                Severity.UNUSUAL,
            )


def _is_timed(entry: Map) -> bool:
    return any(name in entry for name in TIMED)


def _content(entry: Map) -> object:
    """What an entry says, whoever charted it and whenever it was written; a note where it says nothing else."""
    said = {str(key): plain(value) for key, value in entry.items() if key not in WHO_CHARTED}
    return {**said, "note": words(entry.get("note"))} if set(said) <= set(TIMED) else said


def _age(state: PatientState, now: datetime) -> Iterator[Fault]:
    """A birth date and an estimated age together: the birth date is used, and the other must agree."""
    born, estimated = state.patient.get("born"), state.patient.get("estimated_age")
    months = amount(estimated, "months", "age") if estimated is not None else None
    moment = state.burn_time.earliest if state.burn_time else now
    age = state.age_at(moment) if born is not None else None
    if age is None or age.months is None or months is None or estimated is None:
        return
    if abs(age.months - months) >= MONTHS_A_YEAR:
        node: Node = estimated
        yield Fault(
            node.line,
            node.column,
            "patient.estimated_age",
            f"estimated as {words(estimated)}, and the birth date gives {age.shown()}; the birth date is used",
            "correct the birth date, or delete estimated_age",
            Severity.UNUSUAL,
        )
