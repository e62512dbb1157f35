"""Find the plugins, check them at the door, and put them in order.

Built-ins and outsiders come in by the same door, the entry points ``handoff.plugins``.
An outside plugin runs only when the policy names it.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from graphlib import CycleError, TopologicalSorter
from importlib import import_module, metadata, resources
from pathlib import Path
from typing import Any

import yaml
from msgspec import Struct

from handoff.compiled import keep, kept, parsed
from handoff.outside.plugins import OutsidePlugin, load_outside
from handoff.outside.stopped import Stopped
from handoff.parameters import ParameterError, Parameters, read_parameters
from handoff.plugin import API_VERSION, Plugin
from handoff.policy import Policy, PolicyError
from handoff.policy_check import policy_faults
from handoff.state.schema import Schema, SchemaError, load_schema, merged_schema, schema_texts

GROUP = "handoff.plugins"
BUNDLED = "handoff.bundled."


class PluginError(Exception):
    """A plugin cannot be used; names both parties and the reason."""


class Setup(Struct, frozen=True):
    """Everything that is ready before a patient is read: plugins in order, their tables, the schema."""

    policy: Policy
    plugins: tuple[Plugin, ...]
    parameters: Mapping[str, Parameters]
    schema: Mapping[str, Any]
    outside: tuple[str, ...] = ()


def find_plugins(policy: Policy, bundled_only: bool = False) -> tuple[Plugin, ...]:
    """Return the bundled plugins and those outside ones that the policy names, in dependency order.

    Raises:
        PluginError: A plugin does not load, is not one, or the policy names one that is not installed.
    """
    found: list[Plugin] = []
    wanted = set(policy.plugins)
    for point in sorted(metadata.entry_points(group=GROUP), key=lambda point: point.name):
        is_bundled = point.value.startswith(BUNDLED)
        if not is_bundled and (bundled_only or point.name not in wanted):
            continue
        wanted.discard(point.name)
        found.append(_load(point) if is_bundled else _load_outside(point))
    if wanted and not bundled_only:
        raise PluginError(f"the policy names the plugin '{min(wanted)}', which is not installed")
    return in_order(found)


def _load(point: metadata.EntryPoint) -> Plugin:
    try:
        plugin = point.load()
    except Exception as error:
        raise PluginError(
            f"the plugin '{point.name}' does not load ({type(error).__name__}: {error})"
        ) from error
    if not isinstance(plugin, Plugin):
        raise PluginError(f"the entry point '{point.name}' is not a handoff.plugin.Plugin")
    return _of_that_name(plugin, point)


def _load_outside(point: metadata.EntryPoint) -> Plugin:
    try:
        return _of_that_name(load_outside(point), point)
    except Stopped as stopped:
        raise PluginError(
            f"the plugin '{point.name}' cannot be used: {stopped}; --bundled-only leaves it out"
        ) from None


def _of_that_name(plugin: Plugin, point: metadata.EntryPoint) -> Plugin:
    if plugin.name != point.name:
        raise PluginError(f"the entry point '{point.name}' brings a plugin that calls itself '{plugin.name}'")
    return plugin


def in_order(plugins: Iterable[Plugin]) -> tuple[Plugin, ...]:
    """Return ``plugins`` so that each comes after those it requires; equal ones by name.

    Raises:
        PluginError: Two of one name or with one key, another contract version, a missing
            requirement, or a circle; both parties are named.
    """
    by_name: dict[str, Plugin] = {}
    owners: dict[str, str] = {}
    for plugin in sorted(plugins, key=lambda plugin: plugin.name):
        if plugin.api_version != API_VERSION:
            raise PluginError(
                f"the plugin '{plugin.name}' speaks contract version {plugin.api_version}, handoff speaks {API_VERSION}"
            )
        if plugin.name in by_name:
            packages = f"{by_name[plugin.name].package} and {plugin.package}"
            raise PluginError(f"two plugins are called '{plugin.name}': {packages}")
        by_name[plugin.name] = plugin
        for word in (plugin.name, *plugin.owns):
            if word in owners:
                raise PluginError(f"both '{owners[word]}' and '{plugin.name}' report on '{word}'")
            owners[word] = plugin.name
    for plugin in by_name.values():
        for required in plugin.requires:
            if required not in by_name:
                raise PluginError(f"the plugin '{plugin.name}' requires '{required}', which is not there")
    try:
        order = TopologicalSorter(
            {name: sorted(plugin.requires) for name, plugin in by_name.items()}
        ).static_order()
        return tuple(by_name[name] for name in order)
    except CycleError as error:
        circle = " requires ".join(f"'{name}'" for name in reversed(error.args[1]))
        raise PluginError(f"plugins require each other in a circle: {circle}") from None


def part_of(plugin: Plugin, name: str) -> str | None:
    """Return the text of the file ``name`` in the plugin's package, or None when there is none."""
    if isinstance(plugin, OutsidePlugin):
        return plugin.parts.get(name) or None
    path = resources.files(plugin.package).joinpath(name)
    return path.read_text(encoding="utf-8") if path.is_file() else None


def schema_part(plugin: Plugin) -> Mapping[str, Any]:
    """Return the plugin's ``schema.json``; an empty one when it has none.

    Raises:
        PluginError: The file is not JSON.
    """
    try:
        part: Mapping[str, Any] = json.loads(part_of(plugin, "schema.json") or "{}")
    except ValueError as error:
        raise PluginError(f"schema.json of the plugin '{plugin.name}' is not JSON ({error})") from None
    return part


def parameters_of(plugin: Plugin) -> Parameters:
    """Return the plugin's cited tables.

    Raises:
        PluginError: ``parameters.yaml`` is not YAML or a value is not cited.
    """
    text = part_of(plugin, "parameters.yaml") or "{}"
    try:
        data = kept([text]) or parsed(text)
        where = f"parameters.yaml of '{plugin.name}'"
        if _is_outside(plugin):
            _hold_to_schema(data, where)
        return read_parameters(data, where)
    except (yaml.YAMLError, ParameterError) as error:
        raise PluginError(str(error)) from None


def _is_outside(plugin: Plugin) -> bool:
    return isinstance(plugin, OutsidePlugin) or not plugin.package.startswith(BUNDLED)


def _hold_to_schema(data: Any, where: str) -> None:
    """Refuse an outside table with the place of its first fault; the bundled ones are held to it by tests."""
    from jsonschema import Draft202012Validator  # noqa: PLC0415  (only an outside plugin needs it here)

    for error in Draft202012Validator(load_schema("parameters.schema.json")).iter_errors(data):
        raise PluginError(f"{where}: {error.json_path}: {error.message}")


def prepare(policy: Policy, plugins: Iterable[Plugin]) -> Setup:
    """Return the plugins with their tables, policy put in, and the merged schema.

    Raises:
        PluginError: A table or a schema part cannot be used.
        PolicyError: The policy names a choice, rule set or value that is not there.
    """
    ordered = tuple(plugins)
    schema = kept(_schema_sources(ordered)) or _merged(ordered)
    tables = {plugin.name: parameters_of(plugin) for plugin in ordered}
    faults = policy_faults(policy, tables)
    if faults:
        raise PolicyError([fault.said(policy.file) for fault in faults])
    parameters = {
        name: table.with_policy(policy.choices_of(name), policy.values_of(name))
        for name, table in tables.items()
    }
    outside = tuple(plugin.name for plugin in ordered if _is_outside(plugin))
    return Setup(policy, ordered, parameters, schema, outside)


def _schema_sources(plugins: Iterable[Plugin]) -> tuple[str, ...]:
    parts = ((plugin.name, part_of(plugin, "schema.json") or "{}") for plugin in plugins)
    return (*schema_texts(), *(text for part in parts for text in part))


def _merged(plugins: Iterable[Plugin]) -> Schema:
    try:
        return merged_schema((plugin.name, schema_part(plugin)) for plugin in plugins)
    except SchemaError as error:
        raise PluginError(str(error)) from None


def compile_bundled(folder: Path, file: Path) -> None:
    """Write the tables and the merged schema of the plugins in ``folder`` to ``file``; for the build.

    Raises:
        PluginError: A schema part cannot be used.
        ValueError: A table does not survive as JSON.
    """
    names = sorted(path.parent.name for path in folder.glob("*/__init__.py"))
    ordered = in_order(import_module(f"{BUNDLED}{name}").plugin for name in names)
    tables = [part_of(plugin, "parameters.yaml") or "{}" for plugin in ordered]
    tables += [path.read_text(encoding="utf-8") for path in sorted(Path(__file__).parent.rglob("*.yaml"))]
    made = [((text,), parsed(text)) for text in tables]
    keep([*made, (_schema_sources(ordered), _merged(ordered))], file)
