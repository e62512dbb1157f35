"""Medicines with their last dose, and what was held or refused."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.sections import NOT_RECORDED
from handoff.plugin import Map, child, entries, words
from handoff.transfer.block import at, moment

GIVEN = "given"


class Medicine(Struct, frozen=True):
    """One drug by one route: its last dose and when; or why it was not given."""

    drug: str
    dose: str
    time: str
    note: str


def last_doses(assessment: Assessment) -> tuple[Medicine, ...]:
    """Return the last dose of each drug and route, the latest on top; running infusions stand as they run."""
    latest: dict[tuple[str, str], tuple[datetime, Medicine]] = {}
    for when, medicine, route in _given(assessment):
        key = (medicine.drug.casefold(), route.casefold())
        if key not in latest or latest[key][0] <= when:
            latest[key] = (when, medicine)
    ordered = sorted(latest.values(), key=lambda pair: pair[0], reverse=True)
    return (*(medicine for _, medicine in ordered), *_running(assessment), *_undated(assessment))


def not_given(assessment: Assessment) -> tuple[Medicine, ...]:
    """Return what was held, refused or not available, and why."""
    return tuple(
        Medicine(
            words(entry.get("drug")),
            words(entry.get("status")),
            moment(assessment, entry.get("at")),
            words(entry.get("why")) or f"reason {NOT_RECORDED}",
        )
        for entry in entries(at(assessment, "medicines"))
        if _status(entry) != GIVEN
    )


def _status(entry: Map) -> str:
    return words(entry.get("status")) or GIVEN


def _given(assessment: Assessment) -> Iterator[tuple[datetime, Medicine, str]]:
    state = assessment.state
    for entry in entries(state.at_path("pain", "doses")):
        node = entry.get("at")
        when = state.when(child(node, "latest")) if isinstance(node, Map) else state.when(node)
        if when is None:
            continue
        parts = entries(entry.get("contains")) or (entry,)
        for part in parts:
            place = words(entry.get("place"))
            yield (
                when,
                _medicine(assessment, part, entry, when, f"given in: {place}" if place else ""),
                words(entry.get("route")),
            )
    for entry in entries(at(assessment, "medicines")):
        when = state.when(entry.get("at"))
        if when is not None and _status(entry) == GIVEN:
            note = words(entry.get("note"))
            yield when, _medicine(assessment, entry, entry, when, note), words(entry.get("route"))


def _medicine(assessment: Assessment, part: Map, entry: Map, when: datetime, note: str) -> Medicine:
    drug = part.get("drug")
    name = words(drug) or words(child(drug, "other")) or words(entry.get("product"))
    dose = " ".join(
        filter(None, (words(part.get("dose")) or f"dose {NOT_RECORDED}", words(entry.get("route"))))
    )
    return Medicine(name, dose, assessment.state.clock.time(when, assessment.now), note)


def _running(assessment: Assessment) -> Iterator[Medicine]:
    for item in assessment.items:
        if item.key.startswith(("pain.infusion.", "pain.patient_controlled.")):
            yield Medicine(item.label, item.shown, "running", "")
    for entry in entries(assessment.state.at_path("infection", "antibiotics")):
        stopped = entry.get("stopped")
        started = moment(assessment, entry.get("started"))
        ended = f"stopped {moment(assessment, stopped)}" if stopped is not None else "not charted as stopped"
        yield Medicine(words(entry.get("drug")), f"first dose {started}", f"last dose {NOT_RECORDED}", ended)


def _undated(assessment: Assessment) -> Iterator[Medicine]:
    for entry in entries(at(assessment, "medicines")):
        if _status(entry) == GIVEN and assessment.state.when(entry.get("at")) is None:
            dose = " ".join(filter(None, (words(entry.get("dose")), words(entry.get("route")))))
            yield Medicine(words(entry.get("drug")), dose or NOT_RECORDED, f"time {NOT_RECORDED}", "")
