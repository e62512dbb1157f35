"""Findings and faults as plain data and back: what a plugin in another process says is read, never run."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime, timedelta
from enum import Enum
from types import NoneType, UnionType
from typing import Any, TypeVar, get_args, get_origin, get_type_hints

from msgspec import Struct

from handoff.outside.stopped import Stopped

_MOMENT, _LENGTH, _MAP = "moment", "seconds", "map"
T = TypeVar("T")


class Described(Struct, frozen=True):
    """What a plugin says of itself, and the texts of its files."""

    name: str
    title: str
    package: str
    requires: tuple[str, ...]
    owns: tuple[str, ...]
    api_version: int
    has_check: bool
    schema: str
    parameters: str


class Told(Struct, frozen=True):
    """One fault that a plugin's check found: line and column, path, what is wrong, what to do."""

    line: int
    column: int
    path: tuple[int | str, ...]
    what: str
    cure: str
    severity: int | str


def packed(value: object) -> Any:
    """Return ``value`` (a record of the contract, or what it holds) as data that JSON can hold.

    Raises:
        Stopped: It holds something of another kind; named.
    """
    if isinstance(value, Struct):
        return {name: packed(getattr(value, name)) for name in value.__struct_fields__}
    if isinstance(value, Enum):
        return value.value
    if isinstance(value, datetime):
        return {_MOMENT: value.isoformat()}
    if isinstance(value, timedelta):
        return {_LENGTH: value.total_seconds()}
    if isinstance(value, Mapping):
        return {_MAP: {str(key): packed(one) for key, one in value.items()}}
    if isinstance(value, (list, tuple)):
        return [packed(one) for one in value]
    if isinstance(value, (str, int, float, NoneType)):
        return value
    raise Stopped(f"returned {type(value).__name__} among its findings")


def read(kind: type[T], data: object) -> T:
    """Return ``data`` as ``kind``, a dataclass of the contract; every part of it must fit.

    Raises:
        Stopped: It does not fit; says where.
    """
    found: T = _read(kind, data, kind.__name__)
    return found


def _read(kind: Any, data: Any, where: str) -> Any:
    origin = get_origin(kind)
    if origin is UnionType:
        return _one_of(get_args(kind), data, where)
    if origin is tuple and isinstance(data, list):
        return tuple(_read(get_args(kind)[0], one, where) for one in data)
    if origin is not None:  # the values that plugins hand to each other
        return _free(data) if isinstance(data, dict) else _misfit(where)
    if isinstance(kind, type) and issubclass(kind, Struct) and isinstance(data, dict):
        hints = get_type_hints(kind)
        if set(hints) != set(data):
            _misfit(where)
        made: Any = kind
        return made(**{name: _read(hint, data[name], name) for name, hint in hints.items()})
    if isinstance(kind, type) and issubclass(kind, Enum) and data in [one.value for one in kind]:
        return kind(data)
    if kind in (datetime, timedelta) and isinstance(data, dict):
        moment = _free(data)
        return moment if isinstance(moment, kind) else _misfit(where)
    if kind in (str, int, float, bool, NoneType) and isinstance(data, kind):
        return data
    return _misfit(where)


def _one_of(kinds: tuple[Any, ...], data: Any, where: str) -> Any:
    for kind in kinds:
        try:
            return _read(kind, data, where)
        except Stopped:
            continue
    return _misfit(where)


def _free(data: Any) -> Any:
    if isinstance(data, list):
        return tuple(_free(one) for one in data)
    if not isinstance(data, dict):
        return data
    try:
        ((kind, held),) = data.items()
        if kind == _MOMENT:
            return datetime.fromisoformat(held)
        if kind == _LENGTH:
            return timedelta(seconds=held)
        return {key: _free(one) for key, one in held.items()}
    except (ValueError, TypeError, AttributeError, OverflowError):
        return _misfit("values")


def _misfit(where: str) -> Any:
    raise Stopped(f"returned something that is not of the contract ({where})")
