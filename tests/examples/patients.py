"""Every invented patient of ``examples/``, with the moment that its second line names."""

from __future__ import annotations

import re
from functools import cache, lru_cache
from pathlib import Path

from handoff.assess import Assessment
from handoff.document import draft
from handoff.document.read_back import text_of
from handoff.registry import Setup
from handoff.work import assess_loaded, make_setup, open_text
from tests.conftest import ROOT
from tests.shift.helpers import assessed

PATHS = sorted([*ROOT.glob("examples/*.yaml"), *ROOT.glob("examples/patients/*.yaml")])
FILES = {path.stem: path for path in PATHS}
POLICY = ROOT / "examples/policies/scores-and-titration.yaml"


def moment_of(path: Path) -> str:
    """Return the moment that the head of an example names."""
    head = rf'^# Draft it with: handoff draft {path.name} --at "([^"]+)"$'
    found = re.search(head, path.read_text(encoding="utf-8"), re.MULTILINE)
    assert found, f"{path.name} does not name its moment in its head"
    return found[1]


@lru_cache(maxsize=1)
def _local() -> Setup:
    return make_setup(POLICY, bundled_only=True)


@cache
def assessment_of(name: str, policy: bool = False) -> Assessment:
    """Return the assessment of an example at its moment, by the built-in policy or the one of the examples."""
    path = FILES[name]
    text, at = path.read_text(encoding="utf-8"), moment_of(path)
    if not policy:
        return assessed(text, at, path.name)
    return assess_loaded(open_text(text, path.name, _local(), at), _local())


@cache
def pages_of(name: str, policy: bool = False) -> str:
    """Return the text of the handover and the care plan of an example, each run of white space made one."""
    made = draft(assessment_of(name, policy), name)
    return in_one_line("\n".join(text_of(content) for content in made.values()))


def in_one_line(text: str) -> str:
    """Return ``text`` with each run of white space made one space."""
    return " ".join(text.split())
