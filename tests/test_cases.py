"""Every worked example of every plugin comes out as its source prints it.

Each ``cases.yaml`` holds examples that name their published source, or say that they are
common practice, from memory, composed, a boundary of a table, or a known faulty print that
must not come out.
"""

from __future__ import annotations

import importlib
from collections.abc import Iterator
from datetime import datetime
from typing import Any

import pytest
import yaml

from handoff.assess import Assessment
from handoff.plugin import FormulaInputError, Plugin
from handoff.policy import Policy, read_policy
from handoff.registry import Setup, find_plugins, parameters_of, part_of, prepare
from handoff.work import assess_loaded, open_text

KINDS = ("published", "common practice", "from memory", "composed", "negative", "boundary")
PLUGINS = {plugin.name: plugin for plugin in find_plugins(Policy(), bundled_only=True)}
SETUPS: dict[str, Setup] = {}


def all_cases() -> Iterator[Any]:
    for plugin in PLUGINS.values():
        for index, case in enumerate(yaml.safe_load(part_of(plugin, "cases.yaml") or "[]")):
            yield pytest.param(plugin, case, id=f"{plugin.name}-{index + 1}-{case.get('name', '?')}")


def setup_for(policy: dict[str, Any] | None) -> Setup:
    text = yaml.safe_dump({"policy": "1", **(policy or {})}, sort_keys=True)
    if text not in SETUPS:
        SETUPS[text] = prepare(read_policy(text, "case policy"), PLUGINS.values())
    return SETUPS[text]


def assessment_of(case: dict[str, Any]) -> Assessment:
    setup = setup_for(case.get("policy"))
    text = yaml.safe_dump(case["state"], sort_keys=False, allow_unicode=True, width=10**6)
    return assess_loaded(open_text(text, "case", setup, str(case["at"])), setup)


@pytest.mark.parametrize(("plugin", "case"), list(all_cases()))
def test_a_worked_example_comes_out_as_its_source_prints_it(plugin: Plugin, case: dict[str, Any]) -> None:
    assert case["kind"] in KINDS
    if case["kind"] == "published":
        assert case["source"] != "none"
        assert case["locator"]
    if "formula" in case:
        check_formula(plugin, case)
    else:
        check_state(case)


def check_formula(plugin: Plugin, case: dict[str, Any]) -> None:
    module = importlib.import_module(f"{plugin.package}.formula")
    parameters = parameters_of(plugin)
    given = {
        name: parameters[value[1:]].value if isinstance(value, str) and value.startswith("=") else value
        for name, value in case["given"].items()
    }
    function = getattr(module, case["formula"])
    if "raises" in case["expect"]:
        with pytest.raises(FormulaInputError):
            function(**given)
        return
    check_value(function(**given), case["expect"])


def check_state(case: dict[str, Any]) -> None:
    assessment = assessment_of(case)
    assert not assessment.failures
    for key, expected in case["expect"].items():
        item = assessment.item(key)
        assert item is not None, f"no item {key}"
        if "flag" in expected:
            assert item.flag.value == expected["flag"], f"{key}: {item.shown}"
        if "unit" in expected:
            assert item.unit == expected["unit"]
        if "shown_contains" in expected:
            assert expected["shown_contains"] in item.shown
        if "value" in expected or "not" in expected:
            value = assessment.state.clock.iso(item.value) if isinstance(item.value, datetime) else item.value
            check_value(value, expected)


def check_value(value: Any, expected: dict[str, Any]) -> None:
    if "not" in expected:
        assert value != pytest.approx(expected["not"], abs=expected.get("tolerance", 0.5))
    if "value" not in expected:
        return
    due = expected["value"]
    if isinstance(due, (list, tuple)):
        assert list(value) == pytest.approx(list(due), abs=expected.get("tolerance", 0))
    elif isinstance(due, (int, float)) and not isinstance(due, bool):
        assert value is not None
        assert value == pytest.approx(due, abs=expected.get("tolerance", 1e-9))
    else:
        assert value == due
