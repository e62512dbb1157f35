"""What the policy guide shows works as it is written."""

from __future__ import annotations

import re

import pytest

from docs.generate import bundled
from handoff.policy import PolicyError, read_policy
from handoff.registry import PluginError, Setup, find_plugins, prepare
from handoff.state.schema import load_schema
from tests.packaging.project import ROOT

GUIDE = (ROOT / "docs" / "policy-guide.md").read_text(encoding="utf-8")
POLICIES = re.findall(r"```yaml\n(policy: .*?)```", GUIDE, flags=re.DOTALL)
WRONG = {
    "unknown key 'papre'; did you mean 'paper'?": "policy: 1\npapre: A4\n",
    "'measured-adult' is not a rule set of 'palm_value'; there are:": (
        "policy: 1\nchoices: {area.palm_value: measured-adult}\n"
    ),
    "'vital.check_interval' is in min, not in h": (
        "policy: 1\nvalues: {overview.vital.check_interval: {value: 1, unit: h, source: meeting}}\n"
    ),
    "'nines.adult' is a table; choose another rule set instead": (
        "policy: 1\nvalues: {area.nines.adult: {value: 9, unit: '%', source: meeting}}\n"
    ),
    "0 h is not possible for 'line.check_interval' (0.1 to 1,000 h)": (
        "policy: 1\nvalues: {overview.line.check_interval: {value: 0, unit: h, source: meeting}}\n"
    ),
    "it is left blank": "policy: 1\nchoices: {area.palm_value: }\n",
    "'8' has no unit; write 8 min or 8 h": "policy: 1\nshift_length: 8\n",
    "the policy names the plugin 'frostbite', which is not installed": "policy: 1\nplugins: [frostbite]\n",
}


@pytest.fixture(scope="module")
def setup() -> Setup:
    return bundled()


@pytest.mark.parametrize("text", POLICIES, ids=range(len(POLICIES)))
def test_every_policy_shown_is_one(text: str, setup: Setup) -> None:
    policy = read_policy(text, "shown.yaml")
    prepare(policy, setup.plugins)


def test_every_key_of_a_policy_is_explained() -> None:
    rows = set(re.findall(r"`(\w+)`", "".join(re.findall(r"^\| `.*?\|", GUIDE, flags=re.MULTILINE))))
    assert set(load_schema("policy.schema.json")["properties"]) <= rows


@pytest.mark.parametrize("message", WRONG)
def test_every_message_shown_is_the_one_that_comes(message: str, setup: Setup) -> None:
    assert message in GUIDE
    with pytest.raises((PolicyError, PluginError)) as caught:
        policy = read_policy(WRONG[message], "shown.yaml")
        find_plugins(policy)
        prepare(policy, setup.plugins)
    assert message in str(caught.value)
