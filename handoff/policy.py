"""Local policy: which rule set, which local value, which outside plugin, which paper.

The policy is one YAML file that a unit's educator keeps; without one the built-in defaults
hold. It is read by the same strict reader as the patient state.
"""

from __future__ import annotations

import os
from collections.abc import Iterator, Mapping
from datetime import UTC, datetime, timedelta
from pathlib import Path
from typing import Any

from msgspec import Struct, field

from handoff.state.access import amount, words
from handoff.state.faults import Fault, StateFaults
from handoff.state.file_text import NotAStateFile, read_text
from handoff.state.findings import is_blank
from handoff.state.nodes import List, Map
from handoff.state.reader import read_nodes
from handoff.state.schema import expand, load_schema
from handoff.state.validate import check, without_blanks


class PolicyError(Exception):
    """The policy cannot be used; carries one line for each fault."""

    def __init__(self, lines: list[str]) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines


class Policy(Struct, frozen=True):
    """What the unit decided; ``choices`` and ``values`` are keyed ``plugin.name``."""

    name: str = "built-in defaults"
    unit_name: str = ""
    country: str = ""
    paper: str = "A4"
    care_plan_orientation: str = "landscape"
    shift_length: timedelta = timedelta(hours=12)
    late_entry_after: timedelta = timedelta(hours=1)
    units: str = "as charted"
    dates: str = "day month year"
    spelling: str = "as written"
    templates: str = ""
    """Folder of the unit's own templates; empty for the built-in ones."""
    plugins: tuple[str, ...] = ()
    choices: Mapping[str, str] = field(default_factory=dict)
    values: Mapping[str, Mapping[str, Any]] = field(default_factory=dict)
    file: str = "policy"
    places: Mapping[str, tuple[int, int]] = field(default_factory=dict)
    """Line and column of each choice and value, by ``choices.`` or ``values.`` and its key."""

    def choices_of(self, plugin: str) -> dict[str, str]:
        """Return the choices that concern ``plugin``, by their short names."""
        return {
            key.partition(".")[2]: value
            for key, value in self.choices.items()
            if key.startswith(f"{plugin}.")
        }

    def values_of(self, plugin: str) -> dict[str, Mapping[str, Any]]:
        """Return the local values that concern ``plugin``, by parameter id."""
        return {
            key.partition(".")[2]: value for key, value in self.values.items() if key.startswith(f"{plugin}.")
        }


def load_policy(path: Path | None) -> Policy:
    """Return the policy in ``path``, or the built-in defaults for None.

    Raises:
        PolicyError: The file is not a policy; every fault with its line.
    """
    if path is None:
        return Policy()
    try:
        policy = read_policy(read_text(path), os.fspath(path))
    except NotAStateFile as error:
        raise PolicyError([str(error)]) from None
    if policy.templates and not Path(policy.templates).is_dir():
        raise PolicyError(
            [
                f"{path}: templates: there is no folder {policy.templates}; write the built-in ones into it with "
                f"handoff templates write {policy.templates}"
            ]
        )
    return policy


def read_policy(text: str, file: str) -> Policy:
    """Return the policy written in ``text``; ``file`` names it in messages.

    Raises:
        PolicyError: Every fault with its line.
    """
    try:
        root, found = read_nodes(text, file, begin="policy: 1")
    except StateFaults as error:
        raise PolicyError([fault.said(file) for fault in error.faults]) from None
    schema = load_schema("policy.schema.json")
    common = load_schema("common.schema.json")["$defs"]
    blank = list(_blank(root))
    said = {fault.path for fault in blank}
    checked = check(root, expand(schema, common), datetime.now(UTC), found)
    faults = [*found, *blank, *(fault for fault in checked if fault.path not in said)]
    if faults:
        raise PolicyError([fault.said(file) for fault in sorted(faults)])
    kept = without_blanks(root)
    return _policy(kept if isinstance(kept, Map) else Map.at(), file)


def _blank(root: Map) -> Iterator[Fault]:
    """A choice or a value that names nothing: left alone, the built-in default would hold in silence."""
    for block, due in (("choices", "a rule set"), ("values", "value:, unit: and source:")):
        node = root.get(block)
        for key, value in node.items() if isinstance(node, Map) else ():
            if is_blank(value):
                place = node.key(key) if isinstance(node, Map) else value
                cure = f"write {due}, or delete the line to keep the built-in default"
                yield Fault(place.line, place.column, f"{block}.{key}", "it is left blank", cure)


def _policy(root: Map, file: str) -> Policy:
    built_in = Policy()
    minutes = {key: amount(root.get(key), "min") for key in ("shift_length", "late_entry_after")}
    choices, values, plugins = root.get("choices"), root.get("values"), root.get("plugins")
    name = words(root.get("name")) or Path(file).name
    dated = words(root.get("dated"))
    return Policy(
        name=f"{name}, {dated}" if dated else name,
        unit_name=words(root.get("unit_name")),
        country=words(root.get("country")),
        paper=words(root.get("paper")) or built_in.paper,
        care_plan_orientation=words(root.get("care_plan_orientation")) or built_in.care_plan_orientation,
        shift_length=_minutes(minutes["shift_length"], built_in.shift_length),
        late_entry_after=_minutes(minutes["late_entry_after"], built_in.late_entry_after),
        units=words(root.get("units")) or built_in.units,
        dates=words(root.get("dates")) or built_in.dates,
        spelling=words(root.get("spelling")) or built_in.spelling,
        templates=_beside(words(root.get("templates")), file),
        plugins=tuple(words(entry) for entry in plugins) if isinstance(plugins, List) else (),
        choices={str(key): words(value) for key, value in choices.items()}
        if isinstance(choices, Map)
        else {},
        values=_values(values) if isinstance(values, Map) else {},
        file=file,
        places={
            f"{block}.{key}": (node.key(key).line, node.key(key).column)
            for block, node in (("choices", choices), ("values", values))
            if isinstance(node, Map)
            for key in node
        },
    )


def _beside(folder: str, file: str) -> str:
    """A folder is meant from where the policy lies, so that both can be moved together."""
    return os.fspath(Path(file).parent / folder) if folder else ""


def _minutes(value: float | None, default: timedelta) -> timedelta:
    return default if value is None else timedelta(minutes=value)


def _values(node: Map) -> dict[str, Mapping[str, Any]]:
    return {
        str(key): {name: words(part) for name, part in entry.items()}
        for key, entry in node.items()
        if isinstance(entry, Map)
    }
