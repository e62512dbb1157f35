"""The assessment as JSON for programs: the same figures as the documents, unrounded, with their working."""

from __future__ import annotations

import json
from datetime import datetime
from typing import Any

from handoff import __version__
from handoff.assess import Assessment
from handoff.parameters import Source
from handoff.plugin import Action, Item, PatientState, Working, words
from handoff.state.clock import Clock


def as_data(assessment: Assessment) -> dict[str, Any]:
    """Return the assessment as plain data; times are ISO 8601 with their offset, durations minutes."""
    clock = assessment.state.clock
    return {
        "handoff": __version__,
        "digest": assessment.state.digest,
        "at": clock.iso(assessment.now),
        "patient": _patient(assessment.state),
        "policy": assessment.policy.name,
        "plugins": [plugin.name for plugin in assessment.plugins],
        "items": [item_data(item, clock) for item in assessment.items],
        "actions": [_action(action, clock) for action in assessment.actions],
        "not_recorded": [{"key": item.key, "label": item.label} for item in assessment.not_recorded],
        "unusual": [
            {"line": fault.line, "path": fault.path, "what": fault.what, "cure": fault.cure}
            for fault in assessment.shown_warnings
        ],
        "failures": [{"plugin": failure.plugin, "what": failure.what} for failure in assessment.failures],
    }


def as_json(assessment: Assessment) -> str:
    """Return :func:`as_data` as text; the same assessment gives the same bytes."""
    return json.dumps(as_data(assessment), ensure_ascii=False, indent=1) + "\n"


def _patient(state: PatientState) -> dict[str, Any]:
    """Return what tells this patient from another, so that no program joins two patients."""
    return {
        "name": state.name,
        "born": words(state.patient.get("born")) or None,
        "identifiers": dict(state.identifiers),
        "earlier_names": list(state.texts(state.patient.get("earlier_names"))),
    }


def item_data(item: Item, clock: Clock) -> dict[str, Any]:
    """Return one item as plain data."""
    value = clock.iso(item.value) if isinstance(item.value, datetime) else item.value
    return {
        "key": item.key,
        "label": item.label,
        "value": value,
        "unit": item.unit,
        "shown": item.shown,
        "as_of": clock.iso(item.as_of) if item.as_of else None,
        "part": item.part.value,
        "system": item.system.value,
        "flag": item.flag.value,
        "line": item.line or None,
        "working": _working(item.working) if item.working else None,
        "sources": [_source(source) for source in item.sources],
        "cautions": list(item.cautions),
    }


def _working(working: Working) -> dict[str, Any]:
    inputs = [
        {"label": part.label, "shown": part.shown, "line": part.line or None} for part in working.inputs
    ]
    return {"formula": working.formula, "sum": working.sum, "rule": working.rule, "inputs": inputs}


def _source(source: Source) -> dict[str, Any]:
    return {
        "citation": source.shown(),
        "locator": source.locator,
        "kind": source.kind,
        "doi": source.doi or None,
    }


def _action(action: Action, clock: Clock) -> dict[str, Any]:
    return {
        "key": action.key,
        "area": action.area,
        "text": action.text,
        "why": action.why,
        "system": action.system.value,
        "first_due": clock.iso(action.first_due) if action.first_due else None,
        "every_minutes": action.every.total_seconds() / 60 if action.every else None,
        "urgency": action.urgency.value,
        "sources": [_source(source) for source in action.sources],
        "cautions": list(action.cautions),
    }
