"""Read values out of validated nodes; what was struck out as entered in error is left aside."""

from __future__ import annotations

import re
from datetime import datetime
from functools import lru_cache

from handoff.state.clock import Clock
from handoff.state.nodes import List, Map, Node, Text
from handoff.state.quantity import QuantityError
from handoff.state.units import ALIASES, KINDS

_NUMBER_AND_UNIT = re.compile(r"([+-]?[0-9]+(?:\.[0-9]+)?)(?:/([0-9]+))? *(.*)")
_BARE = re.compile(r"[+-]?[0-9]+(?:\.[0-9]+)?")


def entries(node: Node | None) -> tuple[Map, ...]:
    """Return the entries of a list (or the one entry that stands alone), without struck-out ones."""
    if isinstance(node, Map):
        return () if "struck" in node else (node,)
    if isinstance(node, List):
        return tuple(entry for entry in node if isinstance(entry, Map) and "struck" not in entry)
    return ()


def without_struck(node: Node) -> Node:
    """Return ``node`` without the values that were struck out; a list keeps its places.

    A struck-out entry of a list is left aside by :func:`entries`, so that paths still count
    as in the file.
    """
    if isinstance(node, Map):
        kept = [
            (key, without_struck(value))
            for key, value in node.items()
            if not (isinstance(value, Map) and "struck" in value)
        ]
        return Map.at(kept, node.line, node.column, node.start, node.end, node.flow)  # type: ignore[arg-type]
    if isinstance(node, List):
        values = [without_struck(value) for value in node]
        return List.at(values, node.line, node.column, node.start, node.end, node.flow)
    return node


def child(node: Node | None, *names: str) -> Node | None:
    """Return what stands at ``names`` below ``node``, or None."""
    for name in names:
        node = node.get(name) if isinstance(node, Map) else None
    return node


def value_of(node: Node | None) -> Text | None:
    """Return the text of a value, whether it stands alone or as ``{value: ...}``."""
    if isinstance(node, Map):
        node = node.get("value")
    return node if isinstance(node, Text) else None


def words(node: Node | None) -> str:
    """Return the text of a value, or an empty string."""
    text = value_of(node)
    return "" if text is None else str(text)


def yes(node: Node | None) -> bool | None:
    """Return True for ``yes``, False for ``no``, None for anything else and for nothing."""
    return {"yes": True, "no": False}.get(words(node))


def amount(node: Node | None, unit: str, kind: str = "") -> float | None:
    """Return the quantity at ``node`` in ``unit``, not rounded; None when absent or not a number.

    Args:
        node: ``82 kg``, or a mapping with such a ``value``.
        unit: The unit wanted.
        kind: The kind of quantity, where the same two units convert differently
            (``mg/dL`` of glucose and of lactate).

    Raises:
        QuantityError: The unit written measures something else.
    """
    text = value_of(node)
    return None if text is None else _amount(str(text), unit, kind)


@lru_cache(maxsize=8192)
def _amount(text: str, unit: str, kind: str) -> float | None:
    match = _NUMBER_AND_UNIT.fullmatch(text)
    if match is None:
        return None
    have = ALIASES.get(match[3], match[3])
    number = float(match[1])
    if have == unit:
        return number
    answers = set()
    for name, units in KINDS.items():
        if have in units and unit in units and kind in ("", name):
            a, b = units[have], units[unit]
            if a.dimension == b.dimension:
                answers.add((number * a.factor + a.offset - b.offset) / b.factor)
    if len(answers) != 1:
        raise QuantityError(f"'{text}' cannot be read in {unit or 'a plain number'}", "check the unit")
    return answers.pop()


def unit_of(node: Node | None) -> str:
    """Return the unit written at ``node``, or an empty string."""
    match = _NUMBER_AND_UNIT.fullmatch(words(node))
    return ALIASES.get(match[3], match[3]) if match else ""


def number(node: Node | None) -> float | None:
    """Return the bare number at ``node`` (a score, a count), or None."""
    text = words(node)
    return float(text) if _BARE.fullmatch(text) else None


def pressure_pair(node: Node | None) -> tuple[float, float] | None:
    """Return systolic and diastolic pressure in mmHg, or None."""
    match = _NUMBER_AND_UNIT.fullmatch(words(node))
    return (float(match[1]), float(match[2])) if match and match[2] else None


def instant(node: Node | None, clock: Clock) -> datetime | None:
    """Return the instant at ``node``, or None."""
    text = words(node)
    return clock.read(text) if text else None
