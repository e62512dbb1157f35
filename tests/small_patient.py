"""A small patient for tests of one plugin: blocks in, assessment out."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import lru_cache
from importlib import import_module
from typing import Any

import yaml

from handoff.assess import Assessment
from handoff.plugin import Action, Item
from handoff.policy import read_policy
from handoff.registry import Setup, in_order, prepare
from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text

BURN = "2026-03-14 08:00"
NOW = "2026-03-14 19:30"
DAY = "2026-03-14"


class _NoAliases(yaml.SafeDumper):
    """The reader refuses anchors, so none are written for a value that stands twice."""

    def ignore_aliases(self, data: Any) -> bool:
        return True


@lru_cache(maxsize=64)
def with_required(names: tuple[str, ...]) -> tuple[str, ...]:
    """Return the names and, after them, those of the plugins that they require."""
    found = dict.fromkeys(names)
    for name in names:
        found.update(dict.fromkeys(with_required(import_module(f"handoff.bundled.{name}").plugin.requires)))
    return tuple(found)


@lru_cache(maxsize=64)
def setup_of(names: tuple[str, ...], choices: tuple[tuple[str, str], ...] = ()) -> Setup:
    """Return the setup of some bundled plugins, and of those they require, with choices of a policy."""
    text = yaml.safe_dump({"policy": "1", "choices": dict(choices)})
    plugins = [import_module(f"handoff.bundled.{name}").plugin for name in with_required(names)]
    return prepare(read_policy(text, "test policy"), in_order(plugins))


def state_text(
    rows: Mapping[str, Mapping[str, Any]] | None = None,
    *,
    patient: Mapping[str, Any] | None = None,
    injury: Mapping[str, Any] | None = None,
    **blocks: Any,
) -> str:
    """Return a state file; ``rows`` are observations of one day by time, or under ``observations`` by date."""
    state: dict[str, Any] = {
        "handoff": "1",
        "clock": "Europe/Dublin",
        "patient": {"name": "Tomas Ferrandel", "sex": "male", "born": "1985-02-11", **(patient or {})},
        "injury": {"at": BURN, "causes": [{"kind": "scald"}], **(injury or {})},
        **blocks,
    }
    state["patient"] = {key: value for key, value in state["patient"].items() if value is not None}
    state["injury"] = {key: value for key, value in state["injury"].items() if value is not None}
    if rows:
        state["observations"] = {DAY: dict(rows)}
    return yaml.dump(state, Dumper=_NoAliases, sort_keys=False, allow_unicode=True, width=10**6)


def assessed(
    names: Sequence[str], text: str, at: str = NOW, choices: Mapping[str, str] | None = None
) -> Assessment:
    """Return the assessment of ``text`` by some bundled plugins; fails where a plugin failed."""
    setup = setup_of(tuple(names), tuple(sorted((choices or {}).items())))
    made = assess_loaded(open_text(text, "small.yaml", setup, at), setup)
    assert not made.failures, made.failures
    return made


def faults_of(names: Sequence[str], text: str, at: str = NOW) -> list[str]:
    """Return the faults of ``text`` as path, what and cure."""
    try:
        loaded = open_text(text, "small.yaml", setup_of(tuple(names)), at)
    except StateFaults as refused:
        return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in refused.faults]
    return [f"{fault.path}: {fault.what}; {fault.cure}" for fault in loaded.unusual]


def item(made: Assessment, key: str) -> Item:
    """Return the item of that key; fails where it is missing."""
    found = made.item(key)
    assert found is not None, f"no item {key}; there are {[one.key for one in made.items]}"
    return found


def action(made: Assessment, key: str) -> Action:
    """Return the action of that key; fails where it is missing."""
    found = [one for one in made.actions if one.key == key]
    assert found, f"no action {key}; there are {[one.key for one in made.actions]}"
    return found[0]


def action_keys(made: Assessment) -> list[str]:
    """Return the keys of all actions."""
    return [one.key for one in made.actions]
