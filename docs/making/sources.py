"""The page of sources: what a clinician is asked to confirm, then every value with its source."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any

import yaml

from docs.making.text import code, page, table
from handoff.parameters import Parameter, Parameters
from handoff.plugin import Plugin
from handoff.registry import Setup, part_of

INTRODUCTION = """
Every clinical number of the tool lies in a table (`plugins/NAME/parameters.yaml`) with its unit, its
kind of truth, its source and the place in it. This page is made from those tables.

| kind | means |
|---|---|
| definition | true by definition: a unit, a scale, a named class |
| guideline | recommended in a published guideline or a service's written protocol |
| study | measured or derived in a published study |
| common practice | done widely; no source is claimed, local policy decides |
| from memory | its source could not be read; printed as such, decides no flag unless the policy picks it |
| local | set by the unit's policy file |

"Read" says how much of the source the authors had before them: the whole, an excerpt, or nothing
(the value then comes by way of another text, which its place names).
"""

CONFIRM = """
## For a clinician to confirm

Nobody has yet set these against their source. Begin at the top. To confirm one, name the source and
the place, and change `kind` in the table; to use another value meanwhile, put it into the unit's
[policy](policy-guide.md).
"""


LONGEST = 600
"""Letters of a value that are still read in a table; a longer one is read in its own file."""


@dataclass(frozen=True, slots=True)
class First:
    """What must be confirmed before anything else: what, why, and the values or examples concerned."""

    what: str
    why: str
    values: tuple[str, ...]
    examples: tuple[str, ...]


def sources(setup: Setup, first: list[First]) -> str:
    """Return the page of sources for the plugins of ``setup``; ``first`` heads the list to confirm.

    Raises:
        KeyError: ``first`` names a value or a worked example that is not there.
    """
    memory, practice, examples = [], [], []
    for plugin in setup.plugins:
        for one in values(setup.parameters[plugin.name]):
            row = (code(f"{plugin.name}.{one.id}"), *_value(one), _cited(one))
            if one.kind == "from memory":
                memory.append(row)
            elif one.kind == "common practice":
                practice.append(row)
        for case in _cases(plugin):
            if case["kind"] == "from memory":
                examples.append((plugin.name, case["name"], str(case.get("locator") or "")))
    heads = ("value", "is", "unit", "known from")
    return page(
        "Sources",
        INTRODUCTION,
        CONFIRM,
        "### First",
        _first(setup, first),
        "### From memory",
        table(heads, memory),
        "### Worked examples from memory",
        table(("plugin", "example", "place"), examples) or "None.",
        "### Common practice",
        table(heads, practice),
        *(_plugin(plugin, setup.parameters[plugin.name]) for plugin in setup.plugins),
    )


def values(parameters: Parameters) -> Iterator[Parameter]:
    """Yield every value in the order of its table."""
    for identifier in parameters.ids():
        yield parameters[identifier]


def read_first(text: str) -> list[First]:
    """Return what is written in ``confirm-first.yaml``."""
    return [
        First(one["what"], one["why"], tuple(one.get("values", ())), tuple(one.get("examples", ())))
        for one in yaml.safe_load(text)
    ]


def _first(setup: Setup, first: list[First]) -> str:
    named = {plugin.name: {case["name"] for case in _cases(plugin)} for plugin in setup.plugins}
    lines = []
    for number, one in enumerate(first, start=1):
        for key in one.values:
            plugin, _, identifier = key.partition(".")
            setup.parameters[plugin][identifier]
        for key in one.examples:
            plugin, _, name = key.partition(": ")
            if name not in named[plugin]:
                raise KeyError(f"{plugin} has no worked example '{name}'")
        concerned = [*(code(key) for key in one.values), *(f'example "{key}"' for key in one.examples)]
        lines.append(f"{number}. **{one.what}.** {' '.join([one.why, ', '.join(concerned)]).strip()}")
    return "\n".join(lines)


def _cases(plugin: Plugin) -> list[Mapping[str, Any]]:
    return yaml.safe_load(part_of(plugin, "cases.yaml") or "[]") or []


def _plugin(plugin: Plugin, parameters: Parameters) -> str:
    by_source: dict[str, list[Parameter]] = {}
    for one in values(parameters):
        by_source.setdefault(one.source.key, []).append(one)
    parts = [f"## {plugin.name}: {plugin.title}"]
    for key in sorted(by_source, key=lambda key: (key == "none", key)):
        held = by_source[key]
        heads = ("value", "is", "unit", "kind", "place")
        rows = [(code(one.id), *_value(one), one.kind, one.source.locator) for one in held]
        parts += [
            f"### {plugin.name}: {key}" if key != "none" else f"### {plugin.name}: no source",
            _whole(held[0]),
        ]
        parts.append(table(heads, rows))
    if not by_source:
        parts.append("No values.")
    return "\n\n".join(part for part in parts if part)


def _whole(one: Parameter) -> str:
    source = one.source
    if source.key == "none":
        return ""
    said = [source.citation.rstrip(".")]
    said += [f"Edition: {source.edition}"] if source.edition else []
    said += [f"doi:{source.doi}"] if source.doi else []
    return f"{'. '.join(said)}. Read: {source.read}."


def _cited(one: Parameter) -> str:
    return ". ".join(part.rstrip(".") for part in (one.source.citation, one.source.locator) if part)


def _value(one: Parameter) -> tuple[str, str]:
    said = _said(one.value, outermost=True)
    if len(said) > LONGEST:
        said = f"{len(one.value)} entries, in the table itself"
    return said, one.unit


def _said(value: Any, outermost: bool = False) -> str:
    if isinstance(value, Mapping):
        said = ", ".join(f"{key}: {_said(part)}" for key, part in value.items())
        return said if outermost else f"({said})"
    if isinstance(value, list):
        said = ", ".join(_said(part) for part in value)
        return said if outermost else f"({said})"
    return {True: "yes", False: "no"}.get(value, str(value)) if isinstance(value, bool) else str(value)
