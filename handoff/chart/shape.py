"""What the merged schema says about a place: its texts, its groups, its lists."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any, TypeAlias

Schema: TypeAlias = Mapping[str, Any]
NOTHING: Schema = {}


def variants(schema: Schema) -> Iterator[Schema]:
    """Yield every form that a value may have, without the choice between them."""
    if "if" in schema:
        for branch in ("then", "else"):
            yield from variants(schema.get(branch, NOTHING))
    else:
        yield schema


def text_form(schema: Schema) -> Schema | None:
    """Return the form of a value that is one text, or None."""
    return next((one for one in variants(schema) if one.get("type") not in ("object", "array")), None)


def words_of(schema: Schema) -> tuple[str, ...]:
    """Return the words that a text of ``schema`` may be; none where any text may stand."""
    form = text_form(schema)
    return tuple(form.get("enum", ())) if form is not None else ()


def group_form(schema: Schema) -> Schema | None:
    """Return the form of a value that is a group of keys, or None."""
    return next((one for one in variants(schema) if one.get("type") == "object" or "properties" in one), None)


def list_form(schema: Schema) -> Schema | None:
    """Return what one entry is where a value is a list, or None."""
    found = next((one for one in variants(schema) if one.get("type") == "array"), None)
    return None if found is None else found.get("items", NOTHING)


def keys_of(schema: Schema) -> Mapping[str, Schema]:
    """Return the keys of the group form of ``schema``; none where it has no such form."""
    group = group_form(schema)
    return {} if group is None else group.get("properties", {})


def at(root: Schema, path: Sequence[str]) -> Schema | None:
    """Return the schema of the key at ``path`` below ``root``, or None where there is none."""
    found: Schema | None = root
    for name in path:
        found = keys_of(found).get(name) if found is not None else None
    return found


def observation(root: Schema, key: str) -> Schema | None:
    """Return the schema of one value of a row of observations, or None."""
    row = root["properties"]["observations"]["x-row"]
    return keys_of(row).get(key)


def result(root: Schema, key: str) -> Schema | None:
    """Return the schema of one value of a row of results, or None."""
    return keys_of(root["properties"]["results"]["items"]).get(key)


def times_of(entry: Schema) -> tuple[str, ...]:
    """Return the keys of an entry that hold a moment of its own."""
    known = keys_of(entry)
    return tuple(
        key
        for key, schema in known.items()
        if key != "written" and any("x-instant" in form for form in variants(schema))
    )
