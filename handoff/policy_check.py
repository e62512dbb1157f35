"""What a policy asks for that the plugins do not have, or that no unit can mean: each with its line and its cure."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from handoff.parameters import Parameter, Parameters
from handoff.policy import Policy
from handoff.state.faults import Fault
from handoff.state.keywords import nearest
from handoff.state.schema import load_schema
from handoff.words import number

SMALL_PLACES = 2


def policy_faults(policy: Policy, tables: Mapping[str, Parameters]) -> list[Fault]:
    """Return everything in ``choices`` and ``values`` that cannot be used, in the order of the file.

    Args:
        policy: The policy as it was read.
        tables: The tables of every plugin by its name, without the policy.
    """
    bounds = load_schema("policy.schema.json")["properties"]["values"]["x-bounds"]
    found = [*_choices(policy, tables), *_values(policy, tables, bounds)]
    return sorted(found)


def _at(policy: Policy, block: str, key: str, what: str, cure: str) -> Fault:
    line, column = policy.places.get(f"{block}.{key}", (1, 1))
    return Fault(line, column, f"{block}.{key}", what, cure)


def _owner(tables: Mapping[str, Parameters], key: str) -> tuple[Parameters | None, str]:
    plugin, _, name = key.partition(".")
    return tables.get(plugin), name


def _no_plugin(policy: Policy, block: str, key: str, tables: Mapping[str, Parameters]) -> Fault:
    known = [
        f"{plugin}.{name}"
        for plugin, table in tables.items()
        for name in (table.choices if block == "choices" else _numbers(table))
    ]
    cure = nearest(key, known)
    cure = cure if cure.startswith("did you mean") else f"write plugin.name; the plugins: {', '.join(tables)}"
    return _at(policy, block, key, f"'{key}' names no plugin", cure)


def _choices(policy: Policy, tables: Mapping[str, Parameters]) -> Iterator[Fault]:
    for key, picked in policy.choices.items():
        table, name = _owner(tables, key)
        if table is None:
            yield _no_plugin(policy, "choices", key, tables)
        elif name not in table.choices:
            yield _at(policy, "choices", key, f"no choice '{name}'", _nearest(name, list(table.choices)))
        elif picked not in table.choices[name].among:
            among = table.choices[name].among
            what = f"'{picked}' is not a rule set of '{name}'; there are: {', '.join(among)}"
            close = nearest(picked, among)
            cure = close if close.startswith("did you mean") else "take one of these"
            yield _at(policy, "choices", key, what, cure)


def _nearest(name: str, known: Sequence[str]) -> str:
    return nearest(name, known) if known else "this plugin has none; delete the line"


def _numbers(table: Parameters) -> list[str]:
    """The ids of the single numbers of a table: those that a policy can set."""
    return [name for name in table.ids() if isinstance(table[name].value, (int, float))]


def _values(
    policy: Policy, tables: Mapping[str, Parameters], bounds: Mapping[str, Sequence[float]]
) -> Iterator[Fault]:
    for key, local in policy.values.items():
        table, name = _owner(tables, key)
        if table is None:
            yield _no_plugin(policy, "values", key, tables)
        elif name not in table:
            yield _at(policy, "values", key, f"no value '{name}'", _nearest(name, _numbers(table)))
        else:
            problem = _problem(name, table[name], local, bounds)
            if problem is not None:
                yield _at(policy, "values", key, *problem)


def _problem(
    name: str, original: Parameter, local: Mapping[str, Any], bounds: Mapping[str, Sequence[float]]
) -> tuple[str, str] | None:
    if isinstance(original.value, bool) or not isinstance(original.value, (int, float)):
        what = "a table" if isinstance(original.value, (Mapping, list)) else "a text"
        return f"'{name}' is {what}; choose another rule set instead", "pick it under choices:"
    unit = original.unit
    if local["unit"] != unit:
        return f"'{name}' is in {unit}, not in {local['unit']}", f"give the number in {unit}"
    value = float(local["value"])
    if value == original.value:
        return None
    if unit not in bounds:
        low_said = f"{value:g} {unit} is not possible for '{name}'"
        return None if value > 0 else (low_said, "write a number above 0")
    low, high = bounds[unit]
    if low <= value <= high or (value == 0 and original.value == 0):
        return None
    span = f"{number(low, SMALL_PLACES)} to {number(high, SMALL_PLACES)} {unit}"
    return f"{value:g} {unit} is not possible for '{name}' ({span})", "check the figure and the unit"
