"""Chart into a text, answer its questions, and look at what came out."""

from __future__ import annotations

from functools import lru_cache
from typing import Any

from handoff.chart.asking import Ask
from handoff.chart.charting import Charted, Request, chart
from handoff.chart.lexicon import lexicon
from handoff.chart.meanings import Lexicon
from handoff.policy import Policy
from handoff.registry import Setup, find_plugins, prepare
from handoff.state.nodes import plain
from handoff.state.reader import read_nodes
from tests.packaging.project import ROOT

NOW = "2026-03-14 19:30"
HEAD = """\
handoff: 1
clock: Europe/Dublin
patient: {name: Tomas Ferrandel, born: 1985-02-11, identifiers: {record_number: HSH-204518}}
injury: {at: 2026-03-14 13:20}
"""
MOMENTS = {
    "house-fire": "2026-03-14 19:30",
    "high-voltage": "2026-08-21 21:00",
    "toddler-scald": "2026-05-09 14:00",
    "nearly-empty": "2026-10-02 03:40",
}


@lru_cache(maxsize=1)
def setup() -> Setup:
    policy = Policy()
    return prepare(policy, find_plugins(policy, bundled_only=True))


@lru_cache(maxsize=1)
def words() -> Lexicon:
    return lexicon(setup())


def example(name: str) -> str:
    return (ROOT / "examples" / f"{name}.yaml").read_text(encoding="utf-8")


def charted(
    text: str,
    *phrases: str,
    at: str = "",
    by: str = "EM",
    now: str = NOW,
    yes: tuple[str, ...] = (),
    **asked: str,
) -> Charted:
    """Return what charting makes of ``text``; a question whose key begins like one of ``yes`` gets a yes."""
    answers: set[str] = set()
    request = Request(phrases, at, by, **asked)
    while True:
        try:
            return chart(text, "f.yaml", setup(), words(), request, now, answers)
        except Ask as ask:
            given = {one.key for one in ask.questions if one.key.startswith(yes)} if yes else set()
            if not given - answers:
                raise
            answers |= given


def tree(text: str) -> Any:
    """Return a file's text as plain data; fails where the strict reader finds a fault."""
    root, faults = read_nodes(text, "f.yaml")
    assert not faults, faults
    return plain(root)


def rows(text: str, day: str = "2026-03-14") -> Any:
    return tree(text)["observations"][day]


def is_kept(old: str | bytes, new: str | bytes) -> bool:
    """Whether ``new`` is ``old`` with something put in: every character is there, in its order."""
    rest = iter(new)
    return all(one in rest for one in old)
