"""The keywords that check a state file: JSON Schema's own and ours, each with a nurse's message.

One keyword, one message, so that a fault is said once: what is wrong and what to do.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Iterator, Mapping
from functools import lru_cache
from typing import Any, TypeAlias

from jsonschema import Draft202012Validator, TypeChecker, ValidationError, validators

from handoff.state.clock import Clock, ClockError, read_date
from handoff.state.faults import Severity
from handoff.state.moments import Finding, Moments
from handoff.state.nodes import List, Map, Text
from handoff.state.quantity import Quantity, QuantityError, read_quantity

Schema: TypeAlias = Mapping[str, Any]
Found: TypeAlias = Iterator[ValidationError]


def nearest(word: str, known: Iterable[str]) -> str:
    """Return the cure for an unknown word: the nearest known one, or what is allowed."""
    names = [name for name in known]
    close = difflib.get_close_matches(word.lower(), names, n=1, cutoff=0.6)
    if close:
        return f"did you mean '{close[0]}'?"
    shown = ", ".join(names[:24]) + (", ..." if len(names) > 24 else "")
    return f"allowed here: {shown}"


def is_blank(node: object) -> bool:
    return isinstance(node, Text) and not node


def _kind_of(node: object) -> str:
    if isinstance(node, Map):
        return "a group of keys"
    return "a list" if isinstance(node, List) else "text"


_DUE = {"object": "a group of keys", "array": "a list", "string": "text", "integer": "a whole number", "number": "a number"}
_TYPE_CURES = {
    "object": "write keys and values below it, each on its own line",
    "array": "write each entry on its own line, beginning with '- '",
    "string": "write one value",
    "integer": "write a whole number without a unit",
    "number": "write a number with a decimal point and without a unit",
}


def _type(validator: Any, due: str, instance: Any, schema: Schema) -> Found:
    if not validator.is_type(instance, due):
        shown = f"'{instance}'" if isinstance(instance, Text) else _kind_of(instance)
        yield Finding(f"{shown} stands where {_DUE[due]} is due", _TYPE_CURES[due])


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
            yield Finding(f"unknown key '{key}'", cure, key=instance.key(key))


def _required(validator: Any, required: list[str], instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Map):
        for key in required:
            if key not in instance or is_blank(instance[key]):
                hint = schema["properties"].get(key, {}).get("description", "")
                yield Finding(f"'{key}' is missing", f"add it ({hint[0].lower()}{hint[1:]})" if hint else f"add '{key}:'")


def _items(validator: Any, items: Schema, instance: Any, schema: Schema) -> Found:
    if isinstance(instance, List):
        for index, value in enumerate(instance):
            if is_blank(value):
                yield Finding(f"entry {index + 1} is empty", "fill it in or delete the '-'")
            else:
                yield from validator.descend(value, items, path=index)


def _enum(validator: Any, enum: list[str], instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Text) and str(instance) not in enum:
        yield Finding(f"'{instance}' is not a word for this", nearest(instance, enum))
    elif not isinstance(instance, Text):
        yield Finding(f"{_kind_of(instance)} stands where a word is due", nearest("", enum))


def _number(instance: object) -> float | None:
    try:
        return float(str(instance))
    except ValueError:
        return None


def _minimum(validator: Any, limit: float, instance: Any, schema: Schema) -> Found:
    value = _number(instance)
    if value is not None and value < limit:
        yield Finding(f"{instance} is below {limit}", f"write a number from {limit} to {schema.get('maximum', '...')}")


def _maximum(validator: Any, limit: float, instance: Any, schema: Schema) -> Found:
    value = _number(instance)
    if value is not None and value > limit:
        yield Finding(f"{instance} is above {limit}", f"write a number from {schema.get('minimum', '...')} to {limit}")


def _max_length(validator: Any, limit: int, instance: Any, schema: Schema) -> Found:
    if isinstance(instance, Text) and len(instance) > limit:
        yield Finding(f"{len(instance)} characters long", f"shorten it to {limit}")


def _condition(validator: Any, condition: Schema, instance: Any, schema: Schema) -> Found:
    branch = "then" if validator.is_type(instance, condition["type"]) else "else"
    if branch in schema:
        yield from validator.descend(instance, schema[branch], schema_path=branch)


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
            f"{instance} is not possible here ({impossible[0]} to {impossible[1]})", "check the figure and the unit"
        )
    elif unusual and _outside(quantity, unusual, kind):
        yield Finding(
            f"{instance} is unusual (outside {unusual[0]} to {unusual[1]})",
            "check it; if it is right, add confirmed: yes beside it",
            Severity.UNUSUAL,
        )


def make_validator(moments: Moments) -> Any:
    """Return the validator class for one file, whose times are limited by ``moments``."""

    def x_instant(validator: Any, rule: Schema, instance: Any, schema: Schema) -> Found:
        if moments.clock is None or not isinstance(instance, Text):
            return
        try:
            refused = moments.refuse(moments.clock.read(instance), rule)
        except ClockError as error:
            refused = Finding(error.what, error.cure)
        if refused is not None:
            yield refused

    def x_date(validator: Any, rule: Schema, instance: Any, schema: Schema) -> Found:
        if not isinstance(instance, Text):
            return
        try:
            first = read_date(instance, partial=rule.get("partial", False)).earliest()
        except ClockError as error:
            yield Finding(error.what, error.cure)
            return
        today = moments.clock.local(moments.now).date() if moments.clock else moments.now.date()
        if first > today and not rule.get("future", False):
            yield Finding(f"{instance} is later than today", "check the year")
        elif today.year - first.year > 125:
            yield Finding(f"{instance} is more than 125 years ago", "check the year")

    def x_zone(validator: Any, rule: bool, instance: Any, schema: Schema) -> Found:
        try:
            Clock(str(instance))
        except ClockError as error:
            yield Finding(error.what, error.cure)

    def x_rows(validator: Any, rule: bool, instance: Any, schema: Schema) -> Found:
        if not isinstance(instance, Map):
            yield Finding(f"{_kind_of(instance)} stands where dates are due", "write a date, and times below it")
            return
        for day, times in instance.items():
            try:
                read_date(day)
            except ClockError as error:
                yield Finding(error.what, error.cure, key=instance.key(day))
                continue
            if isinstance(times, Map):
                for error in _times(validator, day, times, schema["x-row"]):
                    error.relative_path.appendleft(str(day))
                    yield error
            elif not is_blank(times):
                yield Finding(
                    f"{_kind_of(times)} stands where times are due", "write 14:30: {...} below the date", key=instance.key(day)
                )

    def _times(validator: Any, day: str, times: Map, row: Schema) -> Found:
        for time, entry in times.items():
            if moments.clock is not None:
                try:
                    refused = moments.refuse(moments.clock.read_time(day, time), {})
                except ClockError as error:
                    refused = Finding(error.what, error.cure)
                if refused is not None:
                    refused.key = times.key(time)
                    yield refused
            if is_blank(entry):
                continue
            due = {"type": "array", "items": row} if isinstance(entry, List) else row
            yield from validator.descend(entry, due, path=str(time))

    keywords = {
        "type": _type,
        "properties": _properties,
        "required": _required,
        "items": _items,
        "enum": _enum,
        "minimum": _minimum,
        "maximum": _maximum,
        "maxLength": _max_length,
        "if": _condition,
        "x-quantity": _quantity,
        "x-instant": x_instant,
        "x-date": x_date,
        "x-zone": x_zone,
        "x-rows": x_rows,
    }
    return validators.create(
        meta_schema=Draft202012Validator.META_SCHEMA, validators=keywords, type_checker=_TYPES
    )


def _is_number(checker: TypeChecker, instance: object) -> bool:
    digits = str(instance).removeprefix("-").split(".")
    return isinstance(instance, Text) and len(digits) < 3 and all(part.isascii() and part.isdigit() for part in digits)


_TYPES = TypeChecker(
    {
        "object": lambda checker, instance: isinstance(instance, Map),
        "array": lambda checker, instance: isinstance(instance, List),
        "string": lambda checker, instance: isinstance(instance, Text),
        "number": _is_number,
        "integer": lambda checker, instance: _is_number(checker, instance) and "." not in str(instance),
    }
)
