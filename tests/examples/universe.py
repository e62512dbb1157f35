"""Every key that the plugins can return: read out of their source, and seen in the states of their examples.

A key with a part that depends on the patient (``wounds.dressing.2``, ``pain.given.morphine_iv``)
counts once, by the pattern that its source writes.
"""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator
from functools import lru_cache
from pathlib import Path

import yaml

from handoff.policy import Policy
from handoff.registry import find_plugins, part_of
from tests.conftest import ROOT

HOLE = "{}"


@lru_cache(maxsize=1)
def patterns() -> tuple[str, ...]:
    """Return the patterns of keys with a part that depends on the patient, the longest first."""
    found = {
        key for key in _written() if key.endswith(f".{HOLE}") and key.count(".") > 1 and key.count(HOLE) == 1
    }
    return tuple(sorted(found, key=len, reverse=True))


@lru_cache(maxsize=1)
def whole_keys() -> frozenset[str]:
    """Return the keys that the source of the plugins writes out in full."""
    names = _written() - _parameters()
    return frozenset(key for key in names if HOLE not in key and not key.endswith((".", "_")))


def named(key: str) -> str:
    """Return the pattern that ``key`` is made by, or the key itself."""
    for pattern in patterns():
        if key.startswith(pattern.removesuffix(HOLE)):
            return pattern
    return re.sub(r"\.\d+$", f".{HOLE}", key)


def worked_examples() -> Iterator[dict[str, object]]:
    """Yield every worked example of a plugin that is a whole state."""
    for plugin in find_plugins(Policy(), bundled_only=True):
        for case in yaml.safe_load(part_of(plugin, "cases.yaml") or "[]"):
            if "state" in case:
                yield case


def _parameters() -> set[str]:
    plugins = find_plugins(Policy(), bundled_only=True)
    return {name for one in plugins for name in yaml.safe_load(part_of(one, "parameters.yaml"))["parameters"]}


@lru_cache(maxsize=1)
def _written() -> frozenset[str]:
    found: set[str] = set()
    for plugin in find_plugins(Policy(), bundled_only=True):
        words = "|".join((plugin.name, *plugin.owns))
        shape = re.compile(rf"(?:{words})\.[a-z0-9_.{{}}]+")
        for path in sorted((ROOT / "plugins" / plugin.name).glob("**/*.py")):
            found |= {text for text in _keys_in(path) if shape.fullmatch(text)}
    return frozenset(found)


def _keys_in(path: Path) -> Iterator[str]:
    """Yield what a module writes as the key of an item or an action, with holes for its changing parts."""
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if not isinstance(node, ast.Call):
            continue
        given = [part.value for part in node.keywords if part.arg == "key"]
        for value in (*given, *node.args[:1]):
            yield from _texts(value)


def _texts(value: ast.expr) -> Iterator[str]:
    if isinstance(value, ast.Constant) and isinstance(value.value, str):
        yield value.value
    elif isinstance(value, ast.JoinedStr):
        yield "".join(part.value if isinstance(part, ast.Constant) else HOLE for part in value.values)
    elif isinstance(value, ast.IfExp):
        yield from _texts(value.body)
        yield from _texts(value.orelse)
