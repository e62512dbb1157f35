"""The keywords that check a state file: JSON Schema's own and ours, each with a nurse's message.

One keyword, one message, so that a fault is said once: what is wrong and what to do.
"""

from __future__ import annotations

import difflib
import re
from collections.abc import Iterable, Iterator, Mapping
from functools import lru_cache
from typing import Any, TypeAlias

from jsonschema import Draft202012Validator, TypeChecker, ValidationError, validators

from handoff.state.faults import Severity
from handoff.state.findings import Finding, closed, is_blank, kind_of
from handoff.state.moments import Moments
from handoff.state.nodes import List, Map, Text
from handoff.state.pair_keywords import PAIR_KEYWORDS
from handoff.state.quantity import Quantity, QuantityError, read_quantity
from handoff.state.time_keywords import TimeKeywords
from handoff.state.units import WRITTEN_SHORT

Schema: TypeAlias = Mapping[str, Any]
Found: TypeAlias = Iterator[ValidationError]


def nearest(word: str, known: Iterable[str]) -> str:
    """Return the cure for an unknown word: the nearest known one, or what is allowed."""
    names = list(known)
    close = difflib.get_close_matches(word.lower(), names, n=1, cutoff=0.6)
    if close:
        return f"did you mean '{close[0]}'?"
    shown = ", ".join(names[:24]) + (", ..." if len(names) > 24 else "")
    return f"allowed here: {shown}"


_DUE = {
    "object": "a group of keys",
    "array": "a list",
    "string": "text",
    "integer": "a whole number",
    "number": "a number",
}
_TYPE_CURES = {
    "object": "write keys and values below it, each on its own line",
    "array": "write each entry on its own line, beginning with '- '",
    "string": "write one value",
    "integer": "write a whole number without a unit",
    "number": "write a number with a decimal point and without a unit",
}


def _type(validator: Any, due: str, instance: Any, schema: Schema) -> Found:
    if not validator.is_type(instance, due):
        if isinstance(instance, Text):
            yield closed(instance, f"'{instance}' stands where {_DUE[due]} is due", _TYPE_CURES[due])
        else:
            yield Finding(f"{kind_of(instance)} stands where {_DUE[due]} is due", _TYPE_CURES[due])


def _properties(validator: Any, properties: Schema, instance: Any, schema: Schema) -> Found:
    if not isinstance(instance, Map):
        return
    others = schema.get("additionalProperties", True)
    for key, value in instance.items():
        if key in properties:
            if not is_blank(value):
                yield from validator.descend(value, properties[key], path=str(key), schema_path=str(key))
        elif isinstance(others, Mapping):
            yield from validator.descend(value, others, path=str(key))
        elif not others:
            cure = schema.get("x-instead", {}).get(key) or nearest(key, properties)
            yield closed(key, f"unknown key '{key}'", cure, instance.key(key))


def _required(validator: Any, required: list[str], instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Map):
        for key in required:
            if key not in instance or is_blank(instance[key]):
                hint = schema["properties"].get(key, {}).get("description", "")
                cure = f"add it ({hint[0].lower()}{hint[1:]})" if hint else f"add '{key}:'"
                yield Finding(f"'{key}' is missing", cure)


def _items(validator: Any, items: Schema, instance: Any, schema: Schema) -> Found:
    if isinstance(instance, List):
        for index, value in enumerate(instance):
            if is_blank(value):
                yield Finding(f"entry {index + 1} is empty", "fill it in or delete the '-'")
            else:
                yield from validator.descend(value, items, path=index)


def _enum(validator: Any, enum: list[str], instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Text) and str(instance) not in enum:
        yield closed(instance, f"'{instance}' is not a word for this", nearest(instance, enum))
    elif not isinstance(instance, Text):
        yield Finding(f"{kind_of(instance)} stands where a word is due", nearest("", enum))


def _number(instance: object) -> float | None:
    return float(str(instance)) if _is_number(None, instance) else None


def _minimum(validator: Any, limit: float, instance: Any, schema: Schema) -> Found:
    value = _number(instance)
    if value is not None and value < limit:
        yield Finding(
            f"{instance} is below {limit}", f"write a number from {limit} to {schema.get('maximum', '...')}"
        )


def _maximum(validator: Any, limit: float, instance: Any, schema: Schema) -> Found:
    value = _number(instance)
    if value is not None and value > limit:
        yield Finding(
            f"{instance} is above {limit}", f"write a number from {schema.get('minimum', '...')} to {limit}"
        )


def _max_length(validator: Any, limit: int, instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Text) and len(instance) > limit:
        yield Finding(f"{len(instance)} characters long", f"shorten it to {limit}")


_NO_NAMES = frozenset({"yes", "no", "true", "false", "on", "off", "null", "none", "nil", "~"})
_INITIALS = ("NO", "ON")


def _name(validator: Any, rule: bool, instance: Any, schema: Schema) -> Found:
    if (
        isinstance(instance, Text)
        and instance.plain
        and instance.lower() in _NO_NAMES
        and instance not in _INITIALS
    ):
        yield Finding(
            f"'{instance}' stands where a name, a place or a number is due",
            f'leave it empty if it is not recorded, or put it in quotes if that is the name: "{instance}"',
        )


def _condition(validator: Any, condition: Schema, instance: Any, schema: Schema) -> Found:
    branch = "then" if validator.is_type(instance, condition["type"]) else "else"
    if branch in schema:
        yield from validator.descend(instance, schema[branch], schema_path=branch)


ENDING_ZEROS = re.compile(r"(?P<kept>[+-]?[0-9]+(?=\.)(?:\.[0-9]*[1-9])?)\.?0+(?![0-9.])")
"""A number with zeros at the end of its decimals; what is kept is the number without them."""


@lru_cache(maxsize=1024)
def _limit(kind: str, text: str) -> Quantity:
    if kind == "pressure_pair":
        return read_quantity("pressure", text)
    return read_quantity(kind, text)


def _outside(quantity: Quantity, limits: list[str] | None, kind: str) -> bool:
    if limits is None:
        return False
    for index, text in enumerate(limits):
        limit = _limit(kind, text)
        try:
            value = quantity.to(limit.unit)
        except QuantityError:
            return False
        if value < limit.number if index == 0 else value > limit.number:
            return True
    return False


def _quantity(validator: Any, kind: str, instance: Any, schema: Schema) -> Found:
    if not isinstance(instance, Text) or str(instance) in schema.get("x-words", ()):
        return
    try:
        quantity = read_quantity(kind, str(instance))
    except QuantityError as error:
        cure = error.cure
        if schema.get("x-words"):
            cure += f", or the words '{schema['x-words'][0]}'"
        yield Finding(error.what, cure)
        return
    impossible, unusual = schema.get("x-impossible"), schema.get("x-unusual")
    if impossible and _outside(quantity, impossible, kind):
        yield Finding(
            f"{instance} is not possible here ({impossible[0]} to {impossible[1]})",
            "check the figure and the unit",
        )
    elif unusual and _outside(quantity, unusual, kind):
        yield Finding(
            f"{instance} is unusual (outside {unusual[0]} to {unusual[1]})",
            "check it; if it is right, add confirmed: yes beside it",
            Severity.UNUSUAL,
        )
    elif (
        quantity.unit in WRITTEN_SHORT
        and "x-laboratory" not in schema
        and (zeros := ENDING_ZEROS.match(str(instance)))
    ):
        short = zeros["kept"]
        yield Finding(
            f"{instance} ends in a zero after the point; it is soon read as {zeros[0].replace('.', '')}",
            f"write {short} {quantity.unit}, or the figure without the point, whichever is meant",
            Severity.UNUSUAL,
        )


KEYWORDS: dict[str, Any] = {
    "type": _type,
    "properties": _properties,
    "required": _required,
    "items": _items,
    "enum": _enum,
    "minimum": _minimum,
    "maximum": _maximum,
    "maxLength": _max_length,
    "if": _condition,
    "x-name": _name,
    "x-quantity": _quantity,
    **PAIR_KEYWORDS,
}


def make_validator(moments: Moments) -> Any:
    """Return the validator class for one file, whose times are limited by ``moments``."""
    made: Any = validators.create(
        meta_schema=Draft202012Validator.META_SCHEMA,
        validators={**KEYWORDS, **TimeKeywords(moments).by_name()},
        type_checker=_TYPES,
    )
    # The library makes a new validator for every value below; without references one is enough.
    made.descend = _descend
    made.is_type = _is_type
    return made


def _descend(
    validator: Any, instance: Any, schema: Schema, path: Any = None, schema_path: Any = None
) -> Found:
    checks = validator.VALIDATORS
    for keyword, value in schema.items():
        check = checks.get(keyword)
        if check is None:
            continue
        for error in check(validator, value, instance, schema) or ():
            if path is not None:
                error.relative_path.appendleft(path)
            yield error


def _is_type(validator: Any, instance: Any, due: str) -> bool:
    return _TYPES.is_type(instance, due)


def _is_number(checker: TypeChecker | None, instance: object) -> bool:
    digits = str(instance).removeprefix("-").split(".")
    return (
        isinstance(instance, Text)
        and len(digits) < 3
        and all(part.isascii() and part.isdigit() for part in digits)
    )


_CHECKS: dict[str, Any] = {
    "object": lambda checker, instance: isinstance(instance, Map),
    "array": lambda checker, instance: isinstance(instance, List),
    "string": lambda checker, instance: isinstance(instance, Text),
    "number": _is_number,
    "integer": lambda checker, instance: _is_number(checker, instance) and "." not in str(instance),
}
_TYPES = TypeChecker(_CHECKS)
