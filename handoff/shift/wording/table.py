"""The table of rules: cited data, read once, patterns ready to use."""

from __future__ import annotations

import re
from collections.abc import Mapping
from functools import lru_cache
from importlib import resources
from typing import Any

from msgspec import Struct

from handoff.compiled import kept, parsed
from handoff.parameters import UNCITED_KINDS, Source

FILE = "rules.yaml"
GROUPS = ("do not use", "error-prone", "vague", "value", "identity")
"""Groups in the order in which a stretch of text that two rules speak of is given to one of them."""

_FRAGMENT = re.compile(r"<(\w+)>")


class RuleError(ValueError):
    """The table of rules cannot be used; names the rule."""


class Rule(Struct, frozen=True):
    """What is pointed out, the safe form, the reason and the list it comes from."""

    id: str
    group: str
    pattern: re.Pattern[str] | None
    unless: re.Pattern[str] | None
    missing: re.Pattern[str] | None
    key: str
    once: bool
    only_in: tuple[str, ...]
    not_in: tuple[str, ...]
    safe: str
    why: str
    source: Source

    def speaks_of(self, path: str) -> bool:
        """Return whether the rule holds for what stands at ``path`` (without counts) of a state file."""
        if any(_below(path, place) for place in self.not_in):
            return False
        return not self.only_in or any(_below(path, place) for place in self.only_in)


class Rules(Struct, frozen=True):
    """All rules, in the order in which they claim a stretch of text, with their examples."""

    rules: tuple[Rule, ...]
    examples: Mapping[str, Mapping[str, tuple[str, ...]]]

    def rule(self, identifier: str) -> Rule:
        """Return the rule of that id."""
        return next(rule for rule in self.rules if rule.id == identifier)


@lru_cache(maxsize=1)
def load_rules() -> Rules:
    """Return the table of rules that lies beside this file."""
    text = resources.files(__package__).joinpath(FILE).read_text(encoding="utf-8")
    return read_rules(kept([text]) or parsed(text))


def read_rules(data: Mapping[str, Any]) -> Rules:
    """Return the rules in ``data``, a loaded table.

    Raises:
        RuleError: A rule is not cited, stands twice, or has a pattern that cannot be used.
    """
    made: dict[str, Rule] = {}
    examples = {}
    for entry in data["rules"]:
        identifier = entry["id"]
        if identifier in made:
            raise RuleError(f"two rules are called '{identifier}'")
        try:
            made[identifier] = _rule(entry, data["sources"], data["fragments"])
        except (re.error, KeyError) as error:
            raise RuleError(f"rule '{identifier}': {error}") from None
        examples[identifier] = {name: tuple(texts) for name, texts in entry["examples"].items()}
    ordered = sorted(made.values(), key=lambda rule: GROUPS.index(rule.group))
    return Rules(tuple(ordered), examples)


def _rule(entry: Mapping[str, Any], sources: Mapping[str, Any], fragments: Mapping[str, str]) -> Rule:
    flags = re.MULTILINE | (re.NOFLAG if entry.get("exact") else re.IGNORECASE)

    def pattern(name: str) -> re.Pattern[str] | None:
        if name not in entry:
            return None
        return re.compile(_FRAGMENT.sub(lambda found: fragments[found[1]], entry[name]), flags)

    return Rule(
        id=entry["id"],
        group=entry["group"],
        pattern=pattern("pattern"),
        unless=pattern("unless"),
        missing=pattern("missing"),
        key=entry.get("key", ""),
        once=entry.get("once", False),
        only_in=tuple(entry.get("only_in", ())),
        not_in=tuple(entry.get("not_in", ())),
        safe=entry["safe"],
        why=entry["why"],
        source=_source(entry, sources),
    )


def _source(entry: Mapping[str, Any], sources: Mapping[str, Any]) -> Source:
    key, kind, locator = entry["source"], entry["kind"], entry["locator"]
    if key == "none":
        if kind not in UNCITED_KINDS:
            raise RuleError(f"rule '{entry['id']}' is {kind} and needs a source")
        return Source("none", "", locator, kind)
    if key not in sources:
        raise RuleError(f"rule '{entry['id']}' names an unknown source '{key}'")
    cited = sources[key]
    return Source(
        key, cited["citation"], locator, kind, cited["doi"] or "", cited["edition"] or "", cited["read"]
    )


def _below(path: str, place: str) -> bool:
    return path == place or path.startswith(f"{place}.")
