"""The keywords that hold one value against another, or against how it is mostly mistyped."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any, TypeAlias

from jsonschema import ValidationError

from handoff.state.faults import Severity
from handoff.state.findings import Finding
from handoff.state.nodes import Map, Node, Text
from handoff.state.quantity import QuantityError, read_quantity
from handoff.words import joined, number

Schema: TypeAlias = Mapping[str, Any]
Found: TypeAlias = Iterator[ValidationError]

CONFIRM = "check it; if it is right, add confirmed: yes beside it"


def unlikely(_validator: Any, rules: list[dict[str, list[str]]], instance: Any, _schema: Schema) -> Found:
    """Values of one entry that seldom stand together: each rule lists, by key, the words that would."""
    if not isinstance(instance, Map) or instance.get("confirmed") == "yes" or "struck" in instance:
        return
    for rule in rules:
        found = {key: _at(instance, key) for key in rule}
        if all(isinstance(node, Text) and str(node) in rule[key] for key, node in found.items()):
            said = joined([f"{key.replace('.', ' ')} '{node}'" for key, node in found.items()])
            problem = Finding(
                f"{said} seldom stand together",
                "check both; if they are right, add confirmed: yes to the entry",
                Severity.UNUSUAL,
            )
            problem.relative_path.extend(next(iter(rule)).split("."))
            yield problem
            return


def not_a_share(_validator: Any, _rule: bool, instance: Any, _schema: Schema) -> Found:
    """A percentage above 0 and below 1 is as likely a share of 1 that was given the sign of a percentage."""
    if not isinstance(instance, Text):
        return
    try:
        value = read_quantity("percent", str(instance)).number
    except QuantityError:
        return
    if 0 < value < 1:
        yield Finding(
            f"{instance} is below 1 %; it would fit {number(value * 100, 1)} % written as a share",
            CONFIRM,
            Severity.UNUSUAL,
        )


def _at(entry: Map, key: str) -> Node | None:
    node: Node | None = entry
    for name in key.split("."):
        node = node.get(name) if isinstance(node, Map) else None
    return node.get("value") if isinstance(node, Map) else node


PAIR_KEYWORDS: dict[str, Any] = {"x-unlikely": unlikely, "x-not-a-share": not_a_share}
