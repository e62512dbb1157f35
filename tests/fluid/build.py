"""Burned patients built as plain data and read as the tool reads them."""

from __future__ import annotations

import importlib
import json
from collections.abc import Mapping
from datetime import datetime
from functools import lru_cache
from typing import Any

import yaml

from handoff.assess import Assessment, assess, case_of
from handoff.plugin import Case, Findings, Item, Plugin
from handoff.policy import read_policy
from handoff.registry import Setup, prepare
from handoff.state.clock import Clock
from handoff.state.faults import StateFaults
from handoff.state.nodes import List, Map, Node, Text
from handoff.state.patient import PatientState
from handoff.work import assess_loaded, open_text

BURN = "2026-03-14 08:00"
NOW = "2026-03-14 12:00"
ZONE = "Europe/Dublin"
DAY = "2026-03-14"


def bundled(name: str) -> Plugin:
    plugin = importlib.import_module(f"handoff.bundled.{name}").plugin
    assert isinstance(plugin, Plugin)
    return plugin


@lru_cache(maxsize=128)
def setup_of(choices: tuple[tuple[str, str], ...] = ()) -> Setup:
    policy = {"policy": "1", "choices": {f"fluid.{name}": picked for name, picked in choices}}
    return prepare(read_policy(yaml.safe_dump(policy), "test policy"), [bundled("area"), bundled("fluid")])


def burned(
    kg: str | None = "80 kg",
    pct: str | None = "40 %",
    *,
    born: str = "1985-02-11",
    burn: Any = BURN,
    cause: Mapping[str, Any] | None = None,
    orders: list[dict[str, Any]] | None = None,
    given: list[dict[str, Any]] | None = None,
    rows: Mapping[str, Any] | None = None,
    **more: Any,
) -> dict[str, Any]:
    """One burned patient; ``rows`` are observations of the day of the burn, by time."""
    patient: dict[str, Any] = {"name": "Tomas Ferrandel", "sex": "male", "born": born}
    if kg is not None:
        patient["weights"] = [{"value": kg, "kind": "before burn", "known": "measured"}]
    patient.update(more.pop("patient", {}))
    state: dict[str, Any] = {
        "handoff": "1",
        "clock": more.pop("clock", ZONE),
        "patient": patient,
        "injury": {"causes": [cause or {"kind": "scald"}]},
    }
    if burn is not None:
        state["injury"]["at"] = burn
    if pct is not None:
        whole = {"region": "whole body", "tbsa": pct, "depth": "deep partial"}
        seen = burn if isinstance(burn, str) else NOW
        state["area"] = [{"at": seen, "by": "E. Marsh", "method": "direct", "burns": [whole]}]
    block = {**({"orders": orders} if orders else {}), **({"given": given} if given else {})}
    block.update(more.pop("fluid", {}))
    if block:
        state["fluid"] = block
    if rows:
        state["observations"] = {DAY: dict(rows)}
    return {**state, **more}


def order(coefficient: str = "2 mL/kg/%", at: str = BURN, **more: Any) -> dict[str, Any]:
    return {"at": at, "formula": "local", "coefficient": coefficient, **more}


def run(rate: str, start: str, **more: Any) -> dict[str, Any]:
    return {"line": "R1", "purpose": "resuscitation", "from": start, "rate": rate, **more}


def node(data: Any) -> Node:
    if isinstance(data, Mapping):
        return Map.at([(Text.at(str(key)), node(value)) for key, value in data.items()])
    if isinstance(data, (list, tuple)):
        return List.at([node(value) for value in data])
    return Text.at(str(data))


def moment(state: Mapping[str, Any], at: str) -> datetime:
    return Clock(str(state["clock"])).read(at)


def case(state: Mapping[str, Any], at: str = NOW, /, **choices: str) -> Case:
    """The case without the reader and the schema, for many patients at once."""
    root = node(state)
    assert isinstance(root, Map)
    setup = setup_of(tuple(sorted(choices.items())))
    read, now = PatientState(root, "test"), moment(state, at)
    area = bundled("area").compute(case_of(bundled("area"), read, setup, now, {}))
    return case_of(bundled("fluid"), read, setup, now, {"area": area})


def computed(state: Mapping[str, Any], at: str = NOW, /, **choices: str) -> Findings:
    return bundled("fluid").compute(case(state, at, **choices))


def item(findings: Findings | Assessment, key: str) -> Item:
    found = findings.item(f"fluid.{key}")
    assert found is not None, f"no item fluid.{key}"
    return found


def value(findings: Findings | Assessment, key: str) -> Any:
    return item(findings, key).value


def assessed(state: Mapping[str, Any], at: str = NOW, /, **choices: str) -> Assessment:
    """The whole road: YAML text, reader, schema, faults, assessment."""
    setup = setup_of(tuple(sorted(choices.items())))
    apart = json.loads(json.dumps(state))  # what stands twice must not become an alias
    text = yaml.safe_dump(apart, sort_keys=False, allow_unicode=True, width=10**6)
    made = assess_loaded(open_text(text, "state.yaml", setup, at), setup)
    assert not made.failures, made.failures
    return made


def faults(state: Mapping[str, Any], at: str = NOW) -> list[str]:
    """Every fault and every unusual value of a state as ``path: what; cure``."""
    setup = setup_of()
    apart = json.loads(json.dumps(state))
    text = yaml.safe_dump(apart, sort_keys=False, allow_unicode=True, width=10**6)
    try:
        loaded = open_text(text, "state.yaml", setup, at)
    except StateFaults as found:
        return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in found.faults]
    return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in loaded.unusual]


def whole(state: Mapping[str, Any], at: str = NOW, /, **choices: str) -> Assessment:
    """The assessment without the reader: what the core itself would refuse shows as a failure."""
    root = node(state)
    assert isinstance(root, Map)
    setup = setup_of(tuple(sorted(choices.items())))
    return assess(PatientState(root, "test"), setup, moment(state, at))
