"""At the door: order by requirement, and every clash names both parties."""

from __future__ import annotations

import itertools

import pytest

from handoff.parameters import ParameterError, Source, read_parameters
from handoff.plugin import API_VERSION
from handoff.policy import Policy, PolicyError, read_policy
from handoff.registry import PluginError, find_plugins, in_order, prepare
from handoff.state.schema import SchemaError, merged_schema
from tests.core.helpers import plugin_of


def test_plugins_run_after_what_they_require_whatever_the_order_of_installation() -> None:
    plugins = [plugin_of("a", requires=("c",)), plugin_of("b"), plugin_of("c", requires=("b",))]
    for order in itertools.permutations(plugins):
        assert [plugin.name for plugin in in_order(order)] == ["b", "c", "a"]


def test_a_circle_names_everyone_in_it() -> None:
    with pytest.raises(PluginError, match=r"circle.*'a'.*'b'|circle.*'b'.*'a'"):
        in_order([plugin_of("a", requires=("b",)), plugin_of("b", requires=("a",))])


def test_a_missing_requirement_names_both() -> None:
    with pytest.raises(PluginError, match=r"'a' requires 'b'"):
        in_order([plugin_of("a", requires=("b",))])


def test_another_contract_version_is_refused() -> None:
    with pytest.raises(PluginError, match=f"'a' speaks contract version {API_VERSION + 1}"):
        in_order([plugin_of("a", api_version=API_VERSION + 1)])


def test_two_plugins_of_one_name_are_refused() -> None:
    with pytest.raises(PluginError, match="two plugins are called 'a'"):
        in_order([plugin_of("a"), plugin_of("a")])


def test_two_plugins_that_report_on_one_key_are_refused() -> None:
    with pytest.raises(PluginError, match=r"both 'a' and 'b' report on 'injury'"):
        in_order([plugin_of("a", owns=("injury",)), plugin_of("b", owns=("injury",))])


def test_two_schema_parts_with_one_key_are_refused() -> None:
    part = {"observations": {"itch": {"type": "string"}}}
    with pytest.raises(SchemaError, match=r"'a'.*'b'.*'itch'"):
        merged_schema([("a", part), ("b", part)])


def test_a_schema_part_may_not_take_a_core_key() -> None:
    with pytest.raises(SchemaError, match=r"the core.*'patient'"):
        merged_schema([("patient", {"block": {"type": "object"}})])


def test_the_bundled_plugins_come_in_by_the_entry_points() -> None:
    names = [plugin.name for plugin in find_plugins(Policy())]
    assert set(names) >= {"overview", "area", "fluid", "airway_watch", "pain"}
    assert names.index("area") < names.index("fluid")


def test_a_policy_that_names_a_plugin_that_is_not_installed_is_refused() -> None:
    with pytest.raises(PluginError, match="'frostbites', which is not installed"):
        find_plugins(read_policy("policy: 1\nplugins: [frostbites]\n", "p"))


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("policy: 1\nchoices: {overview.colour: red}\n", "no choice 'colour'"),
        ("policy: 1\nchoices: {nobody.colour: red}\n", "'nobody.colour' names no plugin"),
        ("policy: 1\nvalues: {overview.nothing: {value: 3, unit: h, source: x}}\n", "no value 'nothing'"),
        (
            "policy: 1\nvalues: {overview.line.check_interval: {value: 3, unit: min, source: x}}\n",
            "is in h, not in min",
        ),
    ],
)
def test_a_policy_that_names_what_is_not_there_is_refused(text: str, said: str) -> None:
    policy = read_policy(text, "p")
    plugins = [plugin for plugin in find_plugins(Policy()) if plugin.name == "overview"]
    with pytest.raises(PolicyError) as error:
        prepare(policy, plugins)
    assert said in str(error.value)


def test_a_local_value_of_the_policy_is_used_and_says_so() -> None:
    policy = read_policy(
        "policy: 1\nvalues: {overview.line.check_interval: {value: 6, unit: h, source: unit policy 12}}\n",
        "p",
    )
    plugins = [plugin for plugin in find_plugins(Policy()) if plugin.name == "overview"]
    parameter = prepare(policy, plugins).parameters["overview"]["line.check_interval"]
    assert (parameter.value, parameter.kind, parameter.source.citation) == (6.0, "local", "unit policy 12")


@pytest.mark.parametrize("missing", ["value", "unit", "kind", "source", "locator"])
def test_an_uncited_value_is_refused(missing: str) -> None:
    entry = {"value": 4, "unit": "mL/kg/%", "kind": "guideline", "source": "x", "locator": "p. 1"}
    del entry[missing]
    data = {"sources": {"x": {"citation": "X."}}, "parameters": {"a.b": entry}}
    with pytest.raises(ParameterError, match=f"'a.b' lacks {missing}"):
        read_parameters(data, "parameters.yaml")


def test_a_guideline_without_a_source_is_refused() -> None:
    entry = {"value": 4, "unit": "h", "kind": "guideline", "source": "none", "locator": ""}
    with pytest.raises(ParameterError, match="needs a source"):
        read_parameters({"parameters": {"a": entry}}, "parameters.yaml")


@pytest.mark.parametrize(
    ("citation", "end"), [("", "Common practice, no source."), ("A text.", "Common practice.")]
)
def test_common_practice_says_no_source_only_where_there_is_none(citation: str, end: str) -> None:
    assert Source("x", citation, "p. 1", "common practice").shown().endswith(end)
