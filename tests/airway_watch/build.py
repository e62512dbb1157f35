"""An airway block becomes an assessment, or a case of hand-built nodes, in a line or two."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import UTC, datetime, timedelta
from functools import lru_cache
from typing import Any

import yaml
from handoff.bundled.airway_watch import plugin as airway
from handoff.bundled.area import plugin as area

from handoff.assess import Assessment
from handoff.plugin import Case, Findings, Item, List, Map, Node, PatientState, Text
from handoff.policy import read_policy
from handoff.registry import Setup, prepare
from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text

BURN = "2026-03-14 10:00"
NOW = "2026-03-14 19:30"
FIRE = {"kind": "flame", "setting": "enclosed space", "smoke": "yes"}


@lru_cache(maxsize=64)
def setup_of(policy: str = 'policy: "1"') -> Setup:
    return prepare(read_policy(policy, "test policy"), [area, airway])


def setup_with(**choices: str) -> Setup:
    named = {f"airway_watch.{name}": value for name, value in choices.items()}
    return setup_of(yaml.safe_dump({"policy": "1", "choices": named}, sort_keys=True))


def state_data(block: Mapping[str, Any] | None = None, **more: Any) -> dict[str, Any]:
    patient = {"name": "Tomas Ferrandel", "born": "1985-02-11", "sex": "male", "height": "178 cm"}
    injury = {"at": BURN, "causes": [FIRE], **more.pop("injury", {})}
    state = {
        "handoff": "1",
        "clock": "Europe/Dublin",
        "patient": {**patient, **more.pop("patient", {})},
        "injury": {key: value for key, value in injury.items() if value is not None},
    }
    if block is not None:
        state["airway_watch"] = dict(block)
    return {**state, **more}


def state_text(block: Mapping[str, Any] | None = None, **more: Any) -> str:
    return yaml.safe_dump(state_data(block, **more), sort_keys=False, allow_unicode=True, width=10**6)


def assessed(text: str, at: str = NOW, setup: Setup | None = None) -> Assessment:
    setup = setup or setup_of()
    made = assess_loaded(open_text(text, "case.yaml", setup, at), setup)
    assert not made.failures, made.failures
    return made


def found(text: str, at: str = NOW, setup: Setup | None = None) -> Findings:
    return assessed(text, at, setup).findings["airway_watch"]


def item(findings: Findings, key: str) -> Item:
    one = findings.item(f"airway_watch.{key}")
    assert one is not None, f"no item {key}"
    return one


def said(findings: Findings) -> str:
    """Everything that a reader could see, on lines."""
    lines = []
    for one in findings.items:
        lines += [one.label, one.shown, *one.cautions]
        if one.working:
            lines += [one.working.formula, one.working.sum, one.working.rule]
            lines += [f"{part.label}: {part.shown}" for part in one.working.inputs]
    for action in findings.actions:
        lines += [action.area, action.text, action.why, *action.cautions]
    return "\n".join(lines)


def faults(text: str, at: str = NOW) -> list[str]:
    try:
        loaded = open_text(text, "case.yaml", setup_of(), at)
    except StateFaults as refused:
        return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in refused.faults]
    return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in loaded.unusual]


def node(value: Any) -> Node:
    if isinstance(value, Mapping):
        return Map.at((Text.at(str(key)), node(part)) for key, part in value.items())
    if isinstance(value, list):
        return List.at(node(part) for part in value)
    return Text.at(str(value))


def case_of(state: Mapping[str, Any], now: datetime, setup: Setup | None = None) -> Case:
    root = node(state)
    assert isinstance(root, Map)
    held = PatientState(root, "case.yaml")
    parameters = (setup or setup_of()).parameters["airway_watch"]
    return Case(held, root.get("airway_watch"), parameters, now, {"area": Findings()})


def written(moment: datetime) -> str:
    """A moment as the file writes it; the clock of these tests stands at UTC in March."""
    return f"{moment:%Y-%m-%d %H:%M}"


def minute(count: float, start: datetime | None = None) -> datetime:
    return (start or datetime(2026, 3, 14, 10, 0, tzinfo=UTC)) + timedelta(minutes=count)
