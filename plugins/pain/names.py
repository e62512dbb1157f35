"""Drugs and routes by one name each, however they were spelled."""

from __future__ import annotations

from collections.abc import Iterable

from msgspec import Struct

from handoff.plugin import Case, Map, Node, words

OPIOID = "opioid"
PARACETAMOL = "paracetamol"
IBUPROFEN = "ibuprofen"
PATCH = "transdermal"


class Drug(Struct, frozen=True):
    """A drug: the name it is counted under, the group it belongs to, and whether it is in our list."""

    name: str
    group: str
    listed: bool = True


def drug_of(case: Case, node: Node | None) -> Drug | None:
    """Return the drug written at ``node`` under its one name; None when nothing is written."""
    if isinstance(node, Map):
        other = words(node.get("other"))
        return Drug(other, words(node.get("group")), listed=False) if other else None
    name = _one_name(case, "drugs", words(node))
    return Drug(name, str(case.parameters.table("drugs")[name]["group"])) if name else None


def route_of(case: Case, node: Node | None) -> str:
    """Return the route written at ``node`` under its one name, or an empty string."""
    return _one_name(case, "routes", words(node))


def factor_heading(case: Case, route: str) -> str:
    """Return the heading under which a factor table lists ``route`` (IV: parenteral)."""
    routes = case.parameters.table("routes")
    return str(routes[route]["factors"]) if route in routes else route


def _one_name(case: Case, table: str, written: str) -> str:
    known = case.parameters.table(table)
    if written in known:
        return written
    return next((name for name, entry in known.items() if written in entry.get("also", ())), "")


def slug(text: str) -> str:
    """Return ``text`` as part of a key."""
    return "_".join("".join(char if char.isalnum() else " " for char in text.lower()).split()) or "unnamed"


def unique_keys(names: Iterable[str]) -> tuple[str, ...]:
    """Return one key part for each name, in order; names that would share one are told apart by a number."""
    seen: dict[str, int] = {}
    keys = []
    for name in names:
        key = slug(name)
        seen[key] = seen.get(key, 0) + 1
        keys.append(key if seen[key] == 1 else f"{key}_{seen[key]}")
    return tuple(keys)
