"""Quantities carry their unit: read ``82 kg``, ``104/62 mmHg`` or ``20 drops/min`` and convert.

Factors are definitions. Units mean what UCUM means by them; they are written as nurses
write them (``mcg``, ``mL``, ``C``). The text is kept for the document, the number for the sums.
"""

from __future__ import annotations

import re
from functools import lru_cache

from msgspec import Struct

from handoff.state.characters import look_alike
from handoff.state.units import ALIASES, DOSES, KINDS, UNSAFE, WHOLE, Unit


class QuantityError(ValueError):
    """A text is not a quantity of the kind that is due; says what is wrong and what to do."""

    def __init__(self, what: str, cure: str) -> None:
        super().__init__(what)
        self.what = what
        self.cure = cure


class Quantity(Struct, frozen=True):
    """A number with its unit, as written and convertible within its dimension."""

    text: str
    number: float
    unit: str
    kind: str
    second: float | None = None

    def to(self, unit: str) -> float:
        """Return the number in ``unit``, not rounded.

        Raises:
            QuantityError: ``unit`` measures something else (mg and units, say).
        """
        return _convert(self.kind, self.number, self.unit, unit)


_SHAPE = re.compile(r"(?P<number>[+-]?[0-9]+(?:\.[0-9]+)?)(?P<gap> *)(?P<unit>\S.*)?", re.DOTALL)
_PAIR = re.compile(r"(?P<first>[0-9]+)/(?P<second>[0-9]+)(?P<gap> *)(?P<unit>\S.*)?", re.DOTALL)
_COMMA = re.compile(r"([+-]?)([0-9]+)((?:,[0-9]+)+)(?:\.[0-9]+)?")
_THOUSAND = re.compile(r"[+-]?[1-9][0-9]{0,2}\.[0-9]{3}")
_DIGITS = re.compile(r"[0-9]{3}\b")


def comma_cure(text: str) -> str:
    """Return how a number with a comma is to be written; a comma may have meant thousands or decimals."""
    match = _COMMA.match(text)
    if match is None:
        return "write the number with a point, and without a comma"
    sign, whole, rest = match[1], match[2], match[3][1:]
    unit = text[match.end() :].strip()
    decimal = f"{sign}{whole}.{rest}"
    joined = f"{sign}{whole}{rest.replace(',', '')} {unit}".strip()
    if "," in rest or "." in match[0]:
        return f"write {match[0].replace(',', '')} {unit}".strip()
    if len(rest) == len("000") and whole.lstrip("0"):
        return f"write {joined}, or {decimal.rstrip('0').rstrip('.')} {unit}".strip() + ", whichever is meant"
    return f"write a decimal point: {decimal} {unit}".strip()


def _unit_list(kind: str) -> str:
    names = [name for name in KINDS[kind] if name]
    return " or ".join(names) if len(names) < 3 else ", ".join(names[:-1]) + " or " + names[-1]


def _example(kind: str, number: str = "") -> str:
    first = next(name for name in KINDS[kind])
    second = next((name for name in list(KINDS[kind])[1:2]), "")
    shown = number or "12"
    joined = f"{shown} {first}".strip()
    return f"write {joined} or {shown} {second}" if second else f"write {joined}"


def _find_unit(kind: str, written: str, text: str) -> str:
    units = KINDS[kind]
    name = ALIASES.get(written, written)
    if name in units:
        return name
    if written in UNSAFE:
        raise QuantityError(f"'{written}' is an unsafe abbreviation", f"write {UNSAFE[written]}")
    owner = next((other for other, known in KINDS.items() if name in known), None)
    if owner:
        raise QuantityError(
            f"'{text}' has the unit of another kind of quantity ({owner.replace('_', ' ')})",
            f"{kind.replace('_', ' ')} is due: use {_unit_list(kind)}",
        )
    if _DIGITS.match(written):
        raise QuantityError(f"'{text}' has a space in the number", "write it without: 1200, not 1 200")
    raise QuantityError(f"unknown unit '{written}'", f"use {_unit_list(kind)}")


def _refuse_shape(kind: str, text: str) -> QuantityError:
    if _COMMA.match(text):
        return QuantityError(f"'{text}' has a comma in the number", comma_cure(text))
    if re.match(r"[+-]?\.[0-9]", text):
        sign = text[0] if text[0] in "+-" else ""
        return QuantityError(f"'{text}' has no zero before the point", f"write {sign}0{text.lstrip('+-')}")
    if re.match(r"[+-]?\.?(inf|nan)\b", text, re.IGNORECASE):
        return QuantityError(f"'{text}' is not a measured number", _example(kind))
    if re.match(r"[+-]?[0-9]+(\.[0-9]+)?[eE][+-]?[0-9]", text):
        return QuantityError(f"'{text}' has an exponent", "write the number out")
    return QuantityError(f"'{text}' is not a quantity", _example(kind))


def _checked(quantity: Quantity, number: str) -> Quantity:
    """Return ``quantity`` unless its number can be read in two ways, ten or a thousand times apart."""
    unit = quantity.unit
    digits = number.lstrip("+-")
    said = f"{number} {unit}".strip()
    if digits[0] == "0" and digits[1:2].isdigit():
        whole = digits.lstrip("0")
        bare = f"0{whole}" if whole[:1] in (".", "") else whole
        fraction = "" if "." in digits else f", or 0.{digits[1:]} {unit}".rstrip()
        raise QuantityError(f"'{said}' begins with a zero", f"write {bare} {unit}".rstrip() + fraction)
    if _THOUSAND.fullmatch(number) and (unit in WHOLE or (unit in DOSES and number.endswith("0"))):
        point = number.rstrip("0").rstrip(".")
        raise QuantityError(
            f"'{said}' can be read as {number.replace('.', '')} or as {point}",
            f"write {number.replace('.', '')} {unit}, or {point} {unit} with fewer than three decimals",
        )
    return quantity


@lru_cache(maxsize=8192)
def read_quantity(kind: str, text: str) -> Quantity:
    """Return ``text`` as a quantity of ``kind`` (a key of :data:`handoff.state.units.KINDS`).

    Raises:
        QuantityError: No number, no unit, a unit of another kind, a comma, an exponent,
            ``.inf``, or number and unit run together.
    """
    foreign = look_alike(text)
    if foreign is not None:
        raise QuantityError(*foreign)
    if kind == "pressure_pair":
        return _read_pair(text)
    match = _SHAPE.fullmatch(text)
    if match is None:
        raise _refuse_shape(kind, text)
    number, written = match["number"], match["unit"]
    if written and (written[0] in ",." or re.match(r"[eE][+-]?[0-9]", written)):
        raise _refuse_shape(kind, text)
    if not written:
        if "" in KINDS[kind]:
            return _checked(Quantity(text, float(number), "", kind), number)
        raise QuantityError(f"'{text}' has no unit", _example(kind, number))
    unit = _find_unit(kind, written, text)
    if not match["gap"] and unit != "%":
        raise QuantityError("the number and the unit run together", f"write {number} {unit}")
    return _checked(Quantity(text, float(number), unit, kind), number)


def _read_pair(text: str) -> Quantity:
    match = _PAIR.fullmatch(text)
    if match is None:
        raise QuantityError(f"'{text}' is not a blood pressure", "write systolic/diastolic: 104/62 mmHg")
    if not match["unit"]:
        raise QuantityError(f"'{text}' has no unit", f"write {text} mmHg")
    unit = _find_unit("pressure_pair", match["unit"], text)
    first, second = float(match["first"]), float(match["second"])
    if second >= first:
        raise QuantityError(
            f"'{text}' has a diastolic at or above the systolic", "write systolic/diastolic: 104/62 mmHg"
        )
    return Quantity(text, first, unit, "pressure_pair", second)


def _convert(kind: str, number: float, have: str, want: str) -> float:
    units: dict[str, Unit] = KINDS[kind]
    if want not in units or units[want].dimension != units[have].dimension:
        raise QuantityError(f"{have} cannot be turned into {want}", f"use {_unit_list(kind)}")
    if have == want:
        return number
    base = number * units[have].factor + units[have].offset
    return (base - units[want].offset) / units[want].factor
