"""What became of a slip: a fault, a warning, the same figures, or another figure; and which kind of change."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any

from handoff.items_json import as_data
from handoff.registry import Setup
from handoff.state.faults import Fault, StateFaults
from handoff.state.load import Loaded
from handoff.state.nodes import Map, Node, Text, walk
from handoff.state.reader import read_nodes
from handoff.work import assess_loaded, open_text

from .making import Slip
from .rules import Leaves, rule_of

FAULT, WARNING, SAME_READING, SAME_FIGURES, MEANT, LEFT = (
    "fault",
    "warning",
    "nothing read otherwise",
    "no figure changed",
    "plausible",
    "left",
)


@dataclass(frozen=True, slots=True)
class Outcome:
    """What became of one slip; ``why`` names the rule of a plausible change, or what changed."""

    slip: Slip
    verdict: str
    why: str = ""
    line: int = 0
    was: str = ""
    now: str = ""


class Patient:
    """One invented patient, as it is read without any slip."""

    def __init__(self, name: str, text: str, at: str, setup: Setup) -> None:
        self.name, self.text, self.at, self.setup = name, text, at, setup
        self.loaded = open_text(text, name, setup, at)

    @cached_property
    def figures(self) -> dict[str, Any]:
        """What the plugins found, without the lines it came from."""
        return figures(self.loaded, self.setup)

    @cached_property
    def leaves(self) -> Leaves:
        """Every value by its path."""
        return leaves(self.loaded.state.root)

    def judge(self, slip: Slip) -> Outcome:
        """Return what became of ``slip``."""
        text = slip.done_to(self.text)
        line = self.text.count("\n", 0, slip.start)
        was, now = self.text.split("\n")[line], text.split("\n")[min(line, text.count("\n"))]

        def outcome(verdict: str, why: str = "") -> Outcome:
            return Outcome(slip, verdict, why, line + 1, was, now)

        try:
            root, faults = read_nodes(text, self.name)
            if not faults and leaves(root) == self.all_leaves:
                return outcome(SAME_READING)
            loaded = open_text(text, self.name, self.setup, self.at)
        except StateFaults as error:
            return outcome(FAULT, error.faults[0].what)
        if new := _news(self.loaded.unusual, loaded.unusual):
            return outcome(WARNING, new)
        found = figures(loaded, self.setup)
        if found == self.figures:
            return outcome(SAME_FIGURES)
        rule = rule_of(self.leaves, leaves(loaded.state.root), self.figures, found, self.setup.schema)
        return outcome(MEANT if rule.plausible else LEFT, rule.name)

    @cached_property
    def all_leaves(self) -> Leaves:
        """Every value by its path, blank ones too."""
        return leaves(read_nodes(self.text, self.name)[0])


def _news(before: tuple[Fault, ...], after: tuple[Fault, ...]) -> str:
    known = [(fault.path, fault.what) for fault in before]
    return next((fault.what for fault in after if (fault.path, fault.what) not in known), "")


def leaves(root: Node) -> Leaves:
    """Return every text of a tree by its path; an empty group stands as such."""
    return {
        path: str(node) if isinstance(node, Text) else ("{}" if isinstance(node, Map) else "[]")
        for path, node in walk(root)
        if isinstance(node, Text) or not node
    }


def figures(loaded: Loaded, setup: Setup) -> dict[str, Any]:
    """Return items and actions as the JSON file has them, without what tells where they were written."""
    data = as_data(assess_loaded(loaded, setup))
    return {"items": _unplaced(data["items"]), "actions": data["actions"], "failures": data["failures"]}


def _unplaced(tree: Any) -> Any:
    if isinstance(tree, dict):
        return {key: _unplaced(value) for key, value in tree.items() if key != "line"}
    if isinstance(tree, list):
        return [_unplaced(value) for value in tree]
    return tree
