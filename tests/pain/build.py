"""Patients built as plain data and read as the tool reads them."""

from __future__ import annotations

import importlib
import json
from collections.abc import Mapping
from datetime import UTC, datetime
from functools import lru_cache
from typing import Any

import yaml

from handoff.assess import Assessment, case_of
from handoff.plugin import Case, Findings, Item, Plugin
from handoff.policy import read_policy
from handoff.registry import Setup, prepare
from handoff.state.faults import StateFaults
from handoff.state.nodes import List, Map, Node, Text
from handoff.state.patient import PatientState
from handoff.work import assess_loaded, open_text

NOW = datetime(2026, 3, 14, 20, 0, tzinfo=UTC)
"""In Dublin on that day the clock shows UTC."""


def bundled(name: str) -> Plugin:
    plugin = importlib.import_module(f"handoff.bundled.{name}").plugin
    assert isinstance(plugin, Plugin)
    return plugin


@lru_cache(maxsize=64)
def setup_of(choices: tuple[tuple[str, str], ...] = ()) -> Setup:
    policy = {"policy": "1", "choices": {f"pain.{name}": picked for name, picked in choices}}
    return prepare(read_policy(yaml.safe_dump(policy), "test policy"), [bundled("area"), bundled("pain")])


def patient_state(
    pain: Mapping[str, Any] | None = None, observations: Mapping[str, Any] | None = None, **patient: Any
) -> dict[str, Any]:
    state: dict[str, Any] = {
        "handoff": "1",
        "clock": "Europe/Dublin",
        "patient": {"name": "Tomas Ferrandel", "born": "1985-02-11", **patient},
        "injury": {"at": "2026-03-13 02:00"},
    }
    if pain is not None:
        state["pain"] = dict(pain)
    if observations is not None:
        state["observations"] = dict(observations)
    return state


def node(data: Any) -> Node:
    if isinstance(data, Mapping):
        return Map.at([(Text.at(str(key)), node(value)) for key, value in data.items()])
    if isinstance(data, (list, tuple)):
        return List.at([node(value) for value in data])
    return Text.at(str(data))


def case(state: Mapping[str, Any], now: datetime = NOW, /, **choices: str) -> Case:
    """The case without the reader and the schema, for many patients at once."""
    root = node(state)
    assert isinstance(root, Map)
    setup = setup_of(tuple(sorted(choices.items())))
    return case_of(bundled("pain"), PatientState(root, "test"), setup, now, {})


def computed(state: Mapping[str, Any], now: datetime = NOW, /, **choices: str) -> Findings:
    return bundled("pain").compute(case(state, now, **choices))


def item(findings: Findings, key: str) -> Item:
    found = findings.item(key)
    assert found is not None, f"no item {key}"
    return found


def assessed(state: Mapping[str, Any], at: str = "2026-03-14 20:00", **choices: str) -> Assessment:
    """The whole road: YAML text, reader, schema, faults, assessment."""
    setup = setup_of(tuple(sorted(choices.items())))
    apart = json.loads(json.dumps(state))  # what stands twice must not become an alias
    text = yaml.safe_dump(apart, sort_keys=False, allow_unicode=True, width=10**6)
    return assess_loaded(open_text(text, "state.yaml", setup, at), setup)


def faults(state: Mapping[str, Any], at: str = "2026-03-14 20:00") -> list[str]:
    """Every fault of a state as ``path: what; cure``."""
    try:
        assessed(state, at)
    except StateFaults as found:
        return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in found.faults]
    return []
