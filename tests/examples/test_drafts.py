"""Every example is a patient file without a fault, drafted at the moment that its head names."""

from __future__ import annotations

from pathlib import Path

import pytest

from handoff.cli.edge import Exit
from tests.conftest import ROOT
from tests.examples.patients import FILES, POLICY, assessment_of, moment_of
from tests.shift.helpers import EXAMPLES, run

INDEX = (ROOT / "examples/README.md").read_text(encoding="utf-8")


@pytest.mark.parametrize("name", FILES)
def test_an_example_is_drafted_and_nothing_fails(name: str, tmp_path: Path) -> None:
    done = run("draft", FILES[name], "--at", moment_of(FILES[name]), "--out", tmp_path)
    assert done.code == Exit.DONE, done.err
    assert sorted(path.name for path in tmp_path.iterdir()) == [
        f"{name}-care-plan.docx",
        f"{name}-handover.docx",
        f"{name}.items.json",
    ]
    assert assessment_of(name).failures == ()


@pytest.mark.parametrize("name", FILES)
def test_the_index_names_an_example_with_its_moment(name: str) -> None:
    path = FILES[name].relative_to(ROOT / "examples")
    (row,) = [line for line in INDEX.splitlines() if f"]({path.as_posix()})" in line]
    assert moment_of(FILES[name]) in row


def test_the_index_names_the_policy() -> None:
    assert f"]({POLICY.relative_to(ROOT / 'examples').as_posix()})" in INDEX


def test_the_moments_that_other_tests_use_are_those_of_the_heads() -> None:
    assert {name: moment_of(FILES[name]) for name in EXAMPLES} == EXAMPLES
