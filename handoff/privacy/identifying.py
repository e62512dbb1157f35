"""Which keys of a state file say who somebody is, where they are, or under which number they are kept."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from handoff.privacy.free_text import NUMBER, PERSON, PLACE
from handoff.state.nodes import List, Map, Node, Text, path_text

PEOPLE = frozenset(
    (
        "by",
        "who",
        "told",
        "contact",
        "phone_to",
        "agreed_with",
        "position_confirmed",
        "by_doctor",
        "turned_by",
    )
)
"""Keys that hold people, wherever they stand; those that end in ``_by`` do as well."""

PLACES = frozenset(("location", "hospital", "centre", "ward", "unit_name", "address"))
NUMBERS = frozenset(
    ("phone", "record_number", "temporary", "national", "earlier", "unit_number", "lot", "serial")
)
PEOPLE_AT = frozenset(
    (
        ("from", "name"),
        ("to", "name"),
        ("patient", "name"),
        ("patient", "earlier_names"),
        ("accepted_by", "name"),
        ("certified_by", "name"),
        ("escort", "name"),
        ("advice", "to"),
    )
)
"""The same for keys that hold people only below a certain key."""

PLACES_AT = frozenset((("discharge", "to"), ("patient", "location")))

Path = tuple[str | int, ...]


def instead_of(path: Path) -> str:
    """Return what stands in place of the text at ``path``; empty where it is no identifier by its key."""
    names = [step for step in path if isinstance(step, str)]
    last = names[-1] if names else ""
    pair = tuple(names[-2:])
    if pair in PEOPLE_AT or last in PEOPLE or last.endswith("_by"):
        return PERSON
    if pair in PLACES_AT or last in PLACES:
        return PLACE
    if last in NUMBERS or "identifiers" in names:
        return NUMBER
    return ""


def is_text(schema: Mapping[str, Any]) -> bool:
    """Return whether a value of ``schema`` is words of a person, and no number, word of a list or time."""
    kinds = ("enum", "x-quantity", "x-instant", "x-date", "x-zone")
    return schema.get("type") not in ("integer", "number") and not any(kind in schema for kind in kinds)


def fits(node: Node, schema: Mapping[str, Any]) -> Mapping[str, Any]:
    """Return the branch of ``schema`` that holds for ``node``."""
    while "if" in schema:
        kind = schema["if"].get("type", "string")
        holds = isinstance(node, {"object": Map, "array": List}.get(kind, Text))
        schema = {**_rest(schema), **schema.get("then" if holds else "else", {})}
    return schema


def _rest(schema: Mapping[str, Any]) -> dict[str, Any]:
    return {key: value for key, value in schema.items() if key not in ("if", "then", "else")}


def vocabulary(schema: Mapping[str, Any]) -> frozenset[str]:
    """Return the words of the trade that the schema itself uses, in small letters."""
    found: set[str] = set(_EPONYMS)
    _gather(schema, found)
    return frozenset(found)


def _gather(schema: object, found: set[str]) -> None:
    if isinstance(schema, Mapping):
        for key, value in schema.items():
            if key in ("enum", "x-words"):
                found.update(word for one in value for word in str(one).lower().split())
            elif key == "description":
                found.update(word.strip(".,:;()'") for word in str(value).lower().split())
            else:
                _gather(value, found)
    elif isinstance(schema, list):
        for value in schema:
            _gather(value, found)


_EPONYMS = """
    doppler glasgow parkland brooke lund browder foley hartmann hartmann's ringer ringer's evans galveston haifa muir
    barclay guedel yankauer boyle fr spo2 fio2 pao2 paco2 etco2 ph cpr ecg iv hb na nacl co
    """.split()  # noqa: SIM905 (a list of so many words is read as words)
"""Names that are methods, fluids and things of the trade, and its abbreviations."""


def place_said(path: Path, node: Node) -> str:
    """Return where a text stands, for the person who has to look at it."""
    return f"line {getattr(node, 'line', 0)}, {path_text(path)}"
