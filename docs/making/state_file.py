"""The page of the state file: every key with what it is, how it is written and what is refused."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from typing import Any, NamedTuple, TypeAlias

from docs.making.text import code, codes, page, table
from handoff.registry import Setup, schema_part
from handoff.state.schema import ENTRY
from handoff.state.units import ALIASES, KINDS, UNSAFE

Schema: TypeAlias = Mapping[str, Any]
HEADS = ("key", "what", "how it is written")
FEW = 4
CARRIES = "Carries the keys of an entry."


class Row(NamedTuple):
    """One line of a table: where the key stands, what it is, how it is written."""

    path: str
    what: str
    written: str


def state_file(setup: Setup) -> str:
    """Return the page of the state file for the plugins of ``setup``."""
    properties: Schema = setup.schema["properties"]
    blocks = [plugin.name for plugin in setup.plugins if plugin.name in properties]
    core = [key for key in properties if key not in blocks]
    owners = _owners(setup)
    sections = [_section(key, properties[key], key in setup.schema["required"], owners) for key in core]
    titles = {plugin.name: plugin.title for plugin in setup.plugins}
    for key in blocks:
        sections.append(_section(key, properties[key], False, owners, f"Block of the plugin: {titles[key]}."))
    return page("The state file, key by key", INTRODUCTION, *sections, _entry(), _units())


def _owners(setup: Setup) -> dict[str, str]:
    return {
        f"{place}.{key}": plugin.name
        for plugin in setup.plugins
        for place in ("observations", "results")
        for key in schema_part(plugin).get(place, {})
    }


def _section(key: str, schema: Schema, required: bool, owners: Mapping[str, str], intro: str = "") -> str:
    said = [f"## {key}", intro, f"{schema.get('description', '')}.".replace("..", ".").lstrip(".")]
    if "x-row" in schema:
        rows = _below(schema["x-row"], "")
    elif schema.get("type") == "array" and "properties" in schema["items"]:
        said.append(f"A list. {CARRIES}" if _is_entry(schema["items"]) else "A list.")
        rows = _below(schema["items"], "")
    elif "properties" in schema:
        said.append(CARRIES if _is_entry(schema) else "")
        rows = _below(schema, "")
    else:
        rows = _rows(key, schema, required)
    lines = [
        (code(row.path), row.what + _owner(owners.get(f"{key}.{row.path}")), row.written) for row in rows
    ]
    return "\n\n".join(part for part in [*said, table(HEADS, lines)] if part)


def _owner(name: str | None) -> str:
    return f" (plugin {name})" if name else ""


def _below(schema: Schema, path: str) -> Iterator[Row]:
    required = schema.get("required", ())
    entry = _is_entry(schema)
    for key, value in schema.get("properties", {}).items():
        if not (entry and key in ENTRY and key not in required):
            yield from _rows(f"{path}{key}", value, key in required)


def _rows(path: str, schema: Schema, required: bool) -> Iterator[Row]:
    must = "**Required.** " if required else ""
    yield Row(path, schema.get("description", ""), must + _written(schema))
    if "then" in schema and not _is_measured(schema):
        yield from _inside(path, schema["then"])
    yield from _inside(path, schema)


def _inside(path: str, schema: Schema) -> Iterator[Row]:
    if schema.get("type") == "array":
        items = schema.get("items", {})
        if "then" in items and not _is_measured(items):
            items = items["then"]
        yield from _below(items, f"{path}[].")
    elif isinstance(schema.get("additionalProperties"), Mapping):
        yield from _below(schema["additionalProperties"], f"{path}.NAME.")
    else:
        yield from _below(schema, f"{path}.")


def _is_entry(schema: Schema) -> bool:
    properties = schema.get("properties", {})
    return all(key in properties for key in ENTRY)


def _is_measured(schema: Schema) -> bool:
    then = schema.get("then", {})
    return "value" in then.get("properties", {}) and _is_entry(then)


def _written(schema: Schema) -> str:
    if _is_measured(schema):
        also = [key for key in schema["then"]["properties"] if key not in ENTRY and key != "value"]
        parts = ["value", *also]
        details = [
            f"`{key}`: {_written(schema['then']['properties'][key])}"
            for key in also
            if "enum" in schema["then"]["properties"][key]
        ]
        alone = _written(schema["else"])
        return " ".join([alone, f"Alone, or as a group with {codes(parts)}.", *details])
    if "then" in schema:
        both = [schema[branch] for branch in ("else", "then") if branch in schema]
        return " Or: ".join(_written(one) for one in both)
    return next((said(schema) for matches, said in WAYS if matches(schema)), "Anything.")


def _quantity(schema: Schema) -> str:
    kind = schema["x-quantity"]
    units = list(KINDS[kind])
    if kind == "pressure_pair":
        parts = ["Two numbers with unit: `104/62 mmHg`."]
    elif len(units) > FEW:
        parts = [f"Number with a unit of {kind.replace('_', ' ')}."]
    else:
        parts = [f"Number in {' or '.join(unit or 'no unit' for unit in units)}."]
    if words := schema.get("x-words"):
        parts.append(f"Or the words {codes(words)}.")
    impossible, unusual = schema.get("x-impossible"), schema.get("x-unusual")
    if impossible:
        parts.append(f"Refused outside {impossible[0]} to {impossible[1]}.")
    if unusual and unusual != impossible:
        parts.append(f"To be confirmed outside {unusual[0]} to {unusual[1]}.")
    return " ".join(parts)


def _instant(schema: Schema) -> str:
    rule = schema["x-instant"]
    since = {"burn": "not before the burn", "birth": "not before birth", "none": "of any age"}
    limits = [since[rule.get("not_before", "burn")]]
    limits.append("may lie ahead" if rule.get("future") else "not later than now")
    return f"Date and time; {', '.join(limits)}."


def _date(schema: Schema) -> str:
    rule = schema["x-date"]
    partial = " or month or year alone" if rule.get("partial") else ""
    return f"Date{partial}{'; may lie ahead' if rule.get('future') else ''}."


def _number(schema: Schema) -> str:
    what = "Whole number" if schema["type"] == "integer" else "Number without unit"
    low, high = schema.get("minimum"), schema.get("maximum")
    between = f" from {low} to {high}" if low is not None and high is not None else ""
    return f"{what}{between}."


def _array(schema: Schema) -> str:
    items = schema.get("items", {})
    if items.get("type") == "object" or "then" in items:
        many = f"A list of groups. {CARRIES if _is_entry(items) else ''}".strip()
        other = items.get("else")
        return f"{many} {f'An entry may also be: {_written(other)}' if other else ''}".strip()
    return f"A list; each entry: {_written(items)}"


def _object(schema: Schema) -> str:
    named = isinstance(schema.get("additionalProperties"), Mapping)
    return f"A group{' by name' if named else ''}. {CARRIES if _is_entry(schema) else ''}".strip()


WAYS: tuple[tuple[Callable[[Schema], bool], Callable[[Schema], str]], ...] = (
    (lambda schema: "enum" in schema, lambda schema: f"One of {codes(schema['enum'])}."),
    (lambda schema: "x-quantity" in schema, _quantity),
    (lambda schema: "x-instant" in schema, _instant),
    (lambda schema: "x-date" in schema, _date),
    (lambda schema: "x-zone" in schema, lambda _: "Time zone as `Area/City`."),
    (lambda schema: schema.get("type") in ("integer", "number"), _number),
    (lambda schema: schema.get("type") == "array", _array),
    (lambda schema: schema.get("type") == "object", _object),
    (lambda schema: schema.get("type") == "string", lambda _: "Text."),
)
"""How each kind of key is described; the first that fits is used."""


def _entry() -> str:
    rows = [row for key, schema in ENTRY.items() for row in _rows(key, schema, False)]
    lines = [(code(row.path), row.what, row.written) for row in rows]
    return "\n\n".join(["## The keys of an entry", ENTRIES, table(HEADS, lines)])


def _units() -> str:
    kinds = [
        (kind.replace("_", " "), codes(unit or "no unit" for unit in units)) for kind, units in KINDS.items()
    ]
    same = [(code(spelling), code(unit)) for spelling, unit in ALIASES.items()]
    unsafe = [(code(spelling), code(unit)) for spelling, unit in UNSAFE.items()]
    return "\n\n".join(
        [
            "## Units",
            table(("quantity", "units"), kinds),
            "Read as the unit named:",
            table(("written", "read as"), same),
            "Refused, because they are misread; the message names the safe form:",
            table(("written", "write"), unsafe),
        ]
    )


INTRODUCTION = """
One file holds one patient. It is YAML: a key, a colon, a value; what belongs together stands
deeper by two spaces. [The example](../examples/house-fire.yaml) fills most of it.

- What is not known is left out. Blank prints as "not recorded", never as a finding.
- A quantity carries its unit: `82 kg`, `35 mL`, `36.4 C`. A point stands for decimals.
- A time is local to `clock`: `2026-03-14 14:30`. An offset may follow it: `2026-10-25 01:30 +00:00`.
- `yes` and `no` are words. Only the words listed are read where words are listed.
- A value outside what is possible is refused. A value that is unusual is shown as such until
  `confirmed: yes` stands beside it.
- Text with a comma goes on a line of its own after `- `; long text goes after `|`.
- `handoff check FILE` names every fault with its line. `handoff schema` prints the same rules
  for an editor that completes and checks while you type.

In the tables `[]` stands for each entry of a list, and a point goes one level deeper:
`identifiers.record_number` is `record_number` below `identifiers`.
"""

ENTRIES = """
An entry is something that a person charted. These keys may stand in it, beside its own. Nothing is
erased: what was wrong stays readable under `corrects` or `struck`.
"""
