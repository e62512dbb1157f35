"""The merged JSON Schema of the state file: the core keys and each plugin's part.

Schemas are JSON Schema 2020-12 with a few keywords of our own for what JSON cannot say
(quantities with units, local times, rows of observations). They are expanded and every
``$ref`` is put in place here, because a validator that follows references is several times
slower.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Mapping
from pathlib import Path
from typing import Any, TypeAlias

from handoff.state.units import KINDS

Schema: TypeAlias = dict[str, Any]

DATE = r"\d{4}-\d{2}-\d{2}"
TIME = r"\d{2}:\d{2}( ?(Z|[+-]\d{2}:\d{2}))?"

ENTRY: Schema = {
    "by": {"type": "string", "maxLength": 200, "x-name": True, "description": "Who charted it"},
    "written": {"x-instant": {"not_before": "birth"}, "description": "When it was written, if later"},
    "note": {"type": "string", "maxLength": 4000, "description": "Anything else, in words"},
    "confirmed": {"enum": ["yes", "no"], "description": "yes: an unusual value was checked and is right"},
    "corrects": {
        "type": "object",
        "description": "What stood here before, who changed it, when and why",
        "required": ["value", "by", "at", "why"],
        "properties": {
            "value": {"type": "string", "maxLength": 4000, "description": "The entry before"},
            "by": {"type": "string", "maxLength": 200, "x-name": True, "description": "Who changed it"},
            "at": {"x-instant": {"not_before": "birth"}, "description": "When it was changed"},
            "why": {"type": "string", "maxLength": 4000, "description": "Why"},
        },
    },
    "struck": {
        "type": "object",
        "description": "Entered in error: kept readable, counted nowhere",
        "required": ["by", "at", "why"],
        "properties": {
            "by": {"type": "string", "maxLength": 200, "x-name": True, "description": "Who struck it out"},
            "at": {"x-instant": {"not_before": "birth"}, "description": "When"},
            "why": {"type": "string", "maxLength": 4000, "description": "Why, for example: wrong patient"},
        },
    },
}
"""Keys that every entry may carry."""


class SchemaError(ValueError):
    """A schema part cannot be merged; says which and why."""


def schema_folder() -> Path:
    """Return the folder of the core schemas, in a checkout or in an installed wheel."""
    package = Path(__file__).resolve().parents[1]
    installed = package / "schemas"
    return installed if installed.is_dir() else package.parent / "schemas"


def schema_texts() -> tuple[str, ...]:
    """Return everything that the merged schema is made from besides the plugins' parts: schemas and code."""
    files = [schema_folder() / "patient-state.schema.json", schema_folder() / "common.schema.json"]
    code = [Path(__file__), Path(__file__).with_name("units.py")]
    return tuple(path.read_text(encoding="utf-8") for path in (*files, *code))


def load_schema(name: str) -> Schema:
    """Return the core schema file ``name``."""
    loaded: Schema = json.loads((schema_folder() / name).read_text(encoding="utf-8"))
    return loaded


def merged_schema(parts: Iterable[tuple[str, Mapping[str, Any]]]) -> Schema:
    """Return the state schema with the ``schema.json`` of each (plugin name, content) merged in.

    Raises:
        SchemaError: Two parties define the same key, or a reference leads nowhere.
    """
    core = load_schema("patient-state.schema.json")
    defs = {**load_schema("common.schema.json")["$defs"], **core.pop("$defs")}
    schema: Schema = expand(core, defs)
    properties = schema["properties"]
    row = properties["observations"]["x-row"]["properties"]
    result = properties["results"]["items"]["properties"]
    owners = {**dict.fromkeys(properties, "the core")}
    row_owners = dict.fromkeys(row, "the core")
    result_owners = dict.fromkeys(result, "the core")
    for name, part in parts:
        own = {**defs, **part.get("$defs", {})}
        if "block" in part:
            _add(properties, owners, name, name, expand(part["block"], own))
        for key, value in part.get("observations", {}).items():
            _add(row, row_owners, name, key, expand(value, own))
        for key, value in part.get("results", {}).items():
            _add(result, result_owners, name, key, expand(value, own))
    _mark_laboratory(result)
    return schema


def _mark_laboratory(schema: Any) -> None:
    """Mark every quantity of a laboratory result: there a zero after the point says how exact the figure is."""
    for part in schema.values() if isinstance(schema, dict) else ():
        _mark_laboratory(part)
    if isinstance(schema, dict) and "x-quantity" in schema:
        schema["x-laboratory"] = True


def _add(into: Schema, owners: dict[str, str], plugin: str, key: str, value: Schema) -> None:
    if key in into:
        raise SchemaError(f"both {owners[key]} and the plugin '{plugin}' define '{key}'")
    into[key] = value
    owners[key] = f"the plugin '{plugin}'"


def expand(schema: Any, defs: Mapping[str, Any]) -> Any:
    """Return ``schema`` with references put in place and our own keywords spelled out."""
    if isinstance(schema, list):
        return [expand(part, defs) for part in schema]
    if not isinstance(schema, Mapping):
        return schema
    if "$ref" in schema:
        name = str(schema["$ref"]).removeprefix("#/$defs/")
        if name not in defs:
            raise SchemaError(f"'{schema['$ref']}' leads nowhere")
        siblings = {key: value for key, value in schema.items() if key != "$ref"}
        return expand({**defs[name], **siblings}, defs)
    found: Schema = dict(schema)
    also = found.pop("x-measured", None)
    if also is not None:
        return _measured(found, also, defs)
    _spell_out(found)
    if found.pop("x-entry", False):
        found["properties"] = {**found.get("properties", {}), **ENTRY}
    if "properties" in found:
        found.setdefault("type", "object")
        found.setdefault("additionalProperties", False)
        found["properties"] = {key: expand(value, defs) for key, value in found["properties"].items()}
    for key in ("items", "if", "then", "else", "x-row", "additionalProperties"):
        if key in found:
            found[key] = expand(found[key], defs)
    return found


def _measured(scalar: Schema, also: Mapping[str, Any], defs: Mapping[str, Any]) -> Schema:
    description = scalar.pop("description", "")
    entry = {
        "type": "object",
        "required": ["value"],
        "properties": {"value": {**scalar, "description": description}, **also},
        "x-entry": True,
    }
    return {
        "description": description,
        "if": {"type": "object"},
        "then": expand(entry, defs),
        "else": expand(scalar, defs),
    }


def _spell_out(schema: Schema) -> None:
    kind = schema.get("x-quantity")
    if kind is not None:
        if kind not in KINDS:
            raise SchemaError(f"unknown kind of quantity '{kind}'")
        schema["type"] = "string"
        schema["pattern"] = _quantity_pattern(kind, schema.get("x-words", ()))
    elif "x-instant" in schema:
        schema["type"] = "string"
        schema["pattern"] = f"^{DATE}[T ]{TIME}$"
    elif "x-date" in schema:
        partial = schema["x-date"].get("partial", False)
        schema["type"] = "string"
        schema["pattern"] = r"^\d{4}(-\d{2}(-\d{2})?)?$" if partial else f"^{DATE}$"


def _quantity_pattern(kind: str, allowed_words: Iterable[str]) -> str:
    if kind == "pressure_pair":
        body = r"\d+/\d+ mmHg"
    else:
        units = "|".join(_escaped(unit) for unit in KINDS[kind] if unit)
        unit = f" ({units})" if "" not in KINDS[kind] else f"( ({units}))?"
        body = r"-?\d+(\.\d+)?" + unit.replace(" (%", " ?(%")
    return "^(" + "|".join([body, *(_escaped(word) for word in allowed_words)]) + ")$"


def _escaped(text: str) -> str:
    return "".join("\\" + char if char in r".^$*+?{}[]()|\/" else char for char in text)


def editor_schema(schema: Any) -> Any:
    """Return the merged schema as an editor needs it, which reads bare numbers as numbers."""
    if isinstance(schema, list):
        return [editor_schema(part) for part in schema]
    if not isinstance(schema, Mapping):
        return schema
    found: Schema = {}
    for key, value in schema.items():
        if key == "properties":
            found[key] = {name: editor_schema(part) for name, part in value.items()}
        elif key == "x-row":
            row = editor_schema(value)
            one = {"if": {"type": "array"}, "then": {"type": "array", "items": row}, "else": row}
            day = {"type": "object", "patternProperties": {f"^{TIME}$": one}, "additionalProperties": False}
            found.update(
                {"type": "object", "patternProperties": {f"^{DATE}$": day}, "additionalProperties": False}
            )
        elif not key.startswith("x-"):
            found[key] = editor_schema(value)
    has_pattern = (
        "x-instant" in schema or "x-date" in schema or schema.get("x-quantity", "fraction") != "fraction"
    )
    if found.get("type") == "string" and not has_pattern:
        found["type"] = ["string", "number"]
    if "enum" in found:
        found["enum"] = [*found["enum"], *(int(word) for word in found["enum"] if str(word).isdigit())]
    return found
