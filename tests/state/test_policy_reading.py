"""The policy is read by the same strict reader: any text is a policy or says by line why not."""

from __future__ import annotations

from datetime import timedelta
from pathlib import Path

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from handoff.policy import Policy, PolicyError, load_policy, read_policy

WRITTEN = """\
policy: 1
name: Harrow burns unit
dated: 2026-01
unit_name: Burns Unit, Harrow Ward
paper: Letter
shift_length: 8 h
late_entry_after: 90 min
choices: {fluid.starting_rate: parkland}
"""
slips = st.sampled_from(
    [": ", "#", " #", "\n", "{", "}", ",", "'", '"', "\t", "- ", "8", "x", "\u00a0", "? ", "&a "]
)


@given(st.text(max_size=40))
@example("")
@example("policy: 1\nshift_length: 12\n")
@example("policy: 1\nchoices: {a: 0,51}\n")
@example("- policy\n")
def test_any_text_is_a_policy_or_a_policy_error(text: str) -> None:
    try:
        assert isinstance(read_policy(text, "policy.yaml"), Policy)
    except PolicyError as refused:
        assert refused.lines
        assert all(line.startswith("policy.yaml:") for line in refused.lines)


@given(st.integers(0, len(WRITTEN)), st.integers(0, 3), slips)
@settings(max_examples=200)
def test_a_policy_with_a_slip_is_read_or_refused_by_line(place: int, length: int, slip: str) -> None:
    text = WRITTEN[:place] + slip + WRITTEN[place + length :]
    try:
        assert isinstance(read_policy(text, "policy.yaml"), Policy)
    except PolicyError as refused:
        assert all(line.startswith("policy.yaml:") and "; " in line for line in refused.lines)


def test_a_policy_says_what_it_says() -> None:
    policy = read_policy(WRITTEN, "policy.yaml")
    assert policy.name == "Harrow burns unit, 2026-01"
    assert policy.unit_name == "Burns Unit, Harrow Ward"
    assert policy.paper == "Letter"
    assert policy.shift_length == timedelta(hours=8)
    assert policy.late_entry_after == timedelta(minutes=90)
    assert policy.choices_of("fluid") == {"starting_rate": "parkland"}


def test_what_is_left_empty_is_the_built_in_default() -> None:
    policy = read_policy("policy: 1\nname:\npaper:\nshift_length:\nchoices:\n", "policy.yaml")
    assert policy == Policy(name="policy.yaml", file="policy.yaml")


@pytest.mark.parametrize(
    ("line", "said"),
    [
        ("shift_length: 8", "policy.yaml:2:15: shift_length: '8' has no unit; write 8 min or 8 h"),
        ("shift_length: 8 hrs", "policy.yaml:2:15: shift_length: unknown unit 'hrs'; use "),
        ("paper: A3", "policy.yaml:2:8: paper: 'A3' is not a word for this; "),
        ("name: no", "policy.yaml:2:7: name: 'no' stands where a name, a place or a number is due; "),
        (
            "shift_lenght: 8 h",
            "policy.yaml:2:1: shift_lenght: unknown key 'shift_lenght'; did you mean 'shift_length'?",
        ),
    ],
)
def test_a_fault_is_said_by_line_with_its_cure(line: str, said: str) -> None:
    with pytest.raises(PolicyError) as refused:
        read_policy(f"policy: 1\n{line}\n", "policy.yaml")
    (got,) = refused.value.lines
    assert got.startswith(said)


def test_a_policy_that_is_not_there_is_named(tmp_path: Path) -> None:
    with pytest.raises(PolicyError, match="is not there; check the name and the folder"):
        load_policy(tmp_path / "policy.yaml")
    with pytest.raises(PolicyError, match="is a folder"):
        load_policy(tmp_path)
    assert load_policy(None) == Policy()
