"""The page of choices: where sources differ, which rule sets there are, which is the default and why."""

from __future__ import annotations

from collections import Counter

from docs.making.text import code, page, table
from handoff.parameters import Choice, Parameters
from handoff.registry import Setup

INTRODUCTION = """
Where published sources differ, the tool holds each of them as a named rule set and prints the one
that was used. The local policy picks one by its name; without a policy the default holds:

```yaml
policy: 1
choices:
  area.palm_value: measured-adult-0.8
```

A rule set that stands on memory alone, not on a source that was read, decides no flag unless the
policy picks it by name. `handoff plugins --policy FILE` shows what is in use.
[Sources](sources.md) has every value; the [policy guide](policy-guide.md) says how to change one.
"""


def choices(setup: Setup) -> str:
    """Return the page of choices for the plugins of ``setup``."""
    sections = []
    for plugin in setup.plugins:
        parameters = setup.parameters[plugin.name]
        if parameters.choices:
            sections.append(f"## {plugin.name}: {plugin.title}")
        sections.extend(
            _choice(f"{plugin.name}.{name}", choice, parameters)
            for name, choice in parameters.choices.items()
        )
    return page("Choices", INTRODUCTION, *sections)


def _choice(key: str, choice: Choice, parameters: Parameters) -> str:
    values = values_of(choice, parameters)
    rows = [
        (code(name), "default" if name == choice.default else "", _rests_on(values[name], parameters))
        for name in choice.among
    ]
    why = f"Why this default: {choice.why.rstrip('.')}."
    return "\n\n".join([f"### {key}", why, table(("rule set", "", "rests on"), rows)])


def values_of(choice: Choice, parameters: Parameters) -> dict[str, list[str]]:
    """Return the ids of the values that belong to each rule set of ``choice``.

    Ids name their rule set as one of their parts. Two choices may share such a name; the first
    part of the id that occurs with most of the rule sets is then the one that belongs here.
    """
    held = {name: [one for one in parameters.ids() if f".{name}." in f".{one}."] for name in choice.among}
    heads = Counter(head for ids in held.values() for head in {_head(one) for one in ids})
    best = max(heads, key=lambda head: (heads[head], head == choice.name), default="")
    return {name: [one for one in ids if _head(one) == best] for name, ids in held.items()}


def _head(identifier: str) -> str:
    return identifier.partition(".")[0]


def _rests_on(ids: list[str], parameters: Parameters) -> str:
    places: dict[tuple[str, str], list[str]] = {}
    for one in ids:
        source = parameters.source_of(one)
        places.setdefault((source.kind, source.citation.rstrip(".")), []).append(source.locator)
    said = []
    for (kind, citation), found in places.items():
        place = "; ".join(dict.fromkeys(part for part in found if part))
        said.append(f"{kind}: {'. '.join(part for part in (citation, place) if part)}")
    return ". ".join(said)
