"""A policy that asks for what is not there, or for a number that no unit can mean, is refused by line."""

from __future__ import annotations

from pathlib import Path

import pytest
from msgspec.structs import replace

from handoff.policy import Policy, PolicyError, read_policy
from handoff.registry import Setup, find_plugins, prepare
from handoff.state.load import Loaded
from handoff.state.schema import load_schema
from handoff.work import assess_loaded, open_file

EXAMPLE = Path(__file__).parents[2] / "examples" / "house-fire.yaml"
BOUNDS = load_schema("policy.schema.json")["properties"]["values"]["x-bounds"]


@pytest.fixture(scope="module")
def setup() -> Setup:
    return prepare(Policy(), find_plugins(Policy()))


@pytest.fixture(scope="module")
def loaded(setup: Setup) -> Loaded:
    return open_file(EXAMPLE, setup, "2026-03-14 19:30")


def refused(text: str, setup: Setup) -> list[str]:
    with pytest.raises(PolicyError) as caught:
        prepare(read_policy(text, "unit.yaml"), setup.plugins)
    return caught.value.lines


def local(name: str, value: str, unit: str) -> str:
    return f"policy: 1\nvalues:\n  {name}: {{value: {value}, unit: '{unit}', source: meeting}}\n"


@pytest.mark.parametrize(
    ("value", "possible"),
    [("0.1", True), ("1000", True), ("0", False), ("-6", False), ("0.09", False), ("1000.1", False)],
)
def test_a_number_is_held_against_what_its_unit_can_mean(value: str, possible: bool, setup: Setup) -> None:
    text = local("overview.line.check_interval", value, "h")
    if possible:
        made = prepare(read_policy(text, "unit.yaml"), setup.plugins)
        assert made.parameters["overview"].number("line.check_interval") == float(value)
        return
    assert refused(text, setup) == [
        f"unit.yaml:3:3: values.overview.line.check_interval: {value} h is not possible for "
        "'line.check_interval' (0.1 to 1,000 h); check the figure and the unit"
    ]


def test_what_is_0_when_built_in_may_be_written_as_0(setup: Setup) -> None:
    prepare(read_policy(local("fluid.rounding.exact", "0", "mL/h"), "unit.yaml"), setup.plugins)


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (
            "policy: 1\nchoices:\n  fluid.urin_target: x\n",
            "unit.yaml:3:3: choices.fluid.urin_target: no choice 'urin_target'; did you mean 'urine_target'?",
        ),
        (
            "policy: 1\nchoices:\n  fluids.urine_target: x\n",
            "unit.yaml:3:3: choices.fluids.urine_target: 'fluids.urine_target' names no plugin; "
            "did you mean 'fluid.urine_target'?",
        ),
        (
            local("overview.line.chek_interval", "3", "h"),
            "unit.yaml:3:3: values.overview.line.chek_interval: no value 'line.chek_interval'; "
            "did you mean 'line.check_interval'?",
        ),
        (
            local("overview.line.check_interval", "3", "min"),
            "unit.yaml:3:3: values.overview.line.check_interval: 'line.check_interval' is in h, not in min; "
            "give the number in h",
        ),
    ],
)
def test_a_name_that_is_not_there_is_said_by_line_with_the_nearest_known_one(
    text: str, said: str, setup: Setup
) -> None:
    assert refused(text, setup) == [said]


def test_a_rule_set_that_is_not_there_names_the_nearest(setup: Setup) -> None:
    (said,) = refused("policy: 1\nchoices:\n  fluid.titration: one-thrid\n", setup)
    assert said.startswith(
        "unit.yaml:3:3: choices.fluid.titration: 'one-thrid' is not a rule set of 'titration'; "
    )
    assert said.endswith("did you mean 'one-third'?")


def test_every_fault_is_said_in_one_run_in_the_order_of_the_file(setup: Setup) -> None:
    text = "policy: 1\nvalues:\n  a.b: {value: 1, unit: h, source: x}\nchoices:\n  c.d: e\n  fluid.e: f\n"
    assert [line.split(":")[1] for line in refused(text, setup)] == ["3", "5", "6"]


def test_a_choice_or_a_value_left_blank_is_refused_and_not_passed_over() -> None:
    for block, due in (("choices", "a rule set"), ("values", "value:, unit: and source:")):
        with pytest.raises(PolicyError) as caught:
            read_policy(f"policy: 1\n{block}:\n  fluid.titration:\n", "unit.yaml")
        assert caught.value.lines == [
            f"unit.yaml:3:3: {block}.fluid.titration: it is left blank; "
            f"write {due}, or delete the line to keep the built-in default"
        ]


@pytest.mark.parametrize("text", ["", "# nothing yet\n"])
def test_an_empty_policy_is_told_how_a_policy_begins(text: str) -> None:
    with pytest.raises(PolicyError) as caught:
        read_policy(text, "unit.yaml")
    assert caught.value.lines == ["unit.yaml:1:1: the file is empty; begin with 'policy: 1'"]


def test_no_number_that_a_policy_may_give_makes_a_plugin_fail(setup: Setup, loaded: Loaded) -> None:
    tried = 0
    for plugin, table in setup.parameters.items():
        for name in table.ids():
            original = table[name]
            if isinstance(original.value, bool) or not isinstance(original.value, (int, float)):
                continue
            for value in BOUNDS.get(original.unit, ()):
                written = {"value": str(value), "unit": original.unit, "source": "meeting"}
                changed = {**setup.parameters, plugin: table.with_policy({}, {name: written})}
                made = assess_loaded(loaded, replace(setup, parameters=changed))
                assert not made.failures, (plugin, name, value, made.failures)
                tried += 1
    assert tried > len(BOUNDS)


def test_every_unit_of_a_number_has_its_bounds(setup: Setup) -> None:
    units = {
        table[name].unit
        for table in setup.parameters.values()
        for name in table.ids()
        if isinstance(table[name].value, (int, float)) and not isinstance(table[name].value, bool)
    }
    assert units - set(BOUNDS) <= {"1/(breaths/min)", "mmHg/year", "odds ratio"}
