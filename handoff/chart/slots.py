"""What may stand in a slot of a phrase: a quantity, a listed word, a number, a word, a text, pairs."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Mapping
from typing import Protocol

from msgspec import Struct, field

from handoff.chart import shape
from handoff.chart.insertion import Value
from handoff.chart.shape import Schema
from handoff.state.keywords import nearest
from handoff.state.quantity import QuantityError, read_quantity
from handoff.state.units import ALIASES, KINDS, UNSAFE

ANYTHING = r".+?"
_NUMBER = r"[+-]?[.,]?\d+(?:[.,]\d+)*(?:/\d+)?"
_UNITS = sorted({unit for units in KINDS.values() for unit in units if unit} | {*ALIASES, *UNSAFE}, key=len)
_KNOWN_UNIT = "|".join(r"\s+".join(map(re.escape, unit.split())) for unit in reversed(_UNITS))
_QUANTITY = rf"{_NUMBER}(?:\s*(?:(?:{_KNOWN_UNIT})(?!\S)|[^\s\d]\S*))?"
_SPLIT = re.compile(rf"(?P<number>{_NUMBER})\s*(?P<unit>.*)")


class NotThat(ValueError):
    """A text is not what its slot takes; says what is wrong and what to do."""

    def __init__(self, what: str, cure: str) -> None:
        super().__init__(what)
        self.what = what
        self.cure = cure


class Slot(Protocol):
    """What a slot takes: ``pattern`` finds it in a phrase, ``read`` returns it as the file writes it."""

    @property
    def pattern(self) -> str:
        """A regular expression without groups."""
        ...

    @property
    def is_telling(self) -> bool:
        """Whether a text that fits says something about what was meant."""
        ...

    def read(self, text: str) -> Value:
        """Return the value; raises :class:`NotThat`."""
        ...


def spaced(words: str) -> str:
    """Return a pattern for ``words`` with any gap between them."""
    return r"\s+".join(re.escape(word) for word in words.split())


def alternatives(words: Iterable[str]) -> str:
    """Return a pattern for any of ``words``, the longest first."""
    found = sorted({spaced(word) for word in words}, key=lambda one: (-len(one), one))
    return f"(?:{'|'.join(found)})(?![\\w/])" if found else r"(?!)"


class Quantity(Struct, frozen=True):
    """A number with a unit of one kind, or one of a few words."""

    kind: str
    words: tuple[str, ...] = ()
    is_telling: bool = True

    @property
    def pattern(self) -> str:
        """A number with whatever stands where its unit is due, so that the reader can refuse it by name."""
        return f"(?:{alternatives(self.words)}|{_QUANTITY})" if self.words else f"(?:{_QUANTITY})"

    def read(self, text: str) -> Value:
        """Return number, space and unit (``35ml`` as ``35 mL``), or the word."""
        for word in self.words:
            if word.casefold() == " ".join(text.split()).casefold():
                return word
        match = _SPLIT.fullmatch(text)
        unit = " ".join(match["unit"].split()) if match else ""
        is_known = unit in ALIASES or any(unit in units for units in KINDS.values())
        said = f"{match['number']} {unit}" if match and unit and is_known else text
        try:
            found = read_quantity(self.kind, said)
        except QuantityError as error:
            words = f", or the words '{self.words[0]}'" if self.words else ""
            raise NotThat(error.what, error.cure + words) from None
        number = match["number"] if match else text
        return f"{number} {found.unit}".strip()


class Listed(Struct, frozen=True):
    """One of the words that the schema lists, or a short word for one."""

    name: str
    words: tuple[str, ...]
    also: Mapping[str, str] = field(default_factory=dict)
    is_telling: bool = True

    @property
    def pattern(self) -> str:
        """Any of the words."""
        return alternatives([*self.words, *self.also])

    def read(self, text: str) -> Value:
        """Return the word as the schema writes it."""
        said = " ".join(text.split())
        for word in self.words:
            if word == said:
                return word
        folded = {**{short.casefold(): word for short, word in self.also.items()}}
        folded |= {word.casefold(): word for word in self.words}
        if said.casefold() not in folded:
            raise NotThat(f"'{said}' is not a word for {self.name}", nearest(said, [*self.words, *self.also]))
        return folded[said.casefold()]


class Number(Struct, frozen=True):
    """A number without a unit; its limits are the schema's matter."""

    is_telling: bool = True

    @property
    def pattern(self) -> str:
        """Digits, perhaps with a sign and a point."""
        return r"[+-]?\d+(?:\.\d+)?(?![\w/%])"

    def read(self, text: str) -> Value:
        """Return the digits."""
        if re.fullmatch(self.pattern, text) is None:
            raise NotThat(f"'{text}' stands where a number is due", "write a number without a unit")
        return text.removeprefix("+")


class Word(Struct, frozen=True):
    """One word, whatever it is."""

    is_telling: bool = False

    @property
    def pattern(self) -> str:
        """Anything without a gap."""
        return r"[^\s:,]+"

    def read(self, text: str) -> Value:
        """Return the word."""
        return text


class Free(Struct, frozen=True):
    """A text in the nurse's own words."""

    is_telling: bool = False

    @property
    def pattern(self) -> str:
        """Anything."""
        return r"\S(?:.*?\S)??"

    def read(self, text: str) -> Value:
        """Return the text."""
        return text


class Known(Struct, frozen=True):
    """A word that stands in the file already, such as the name of a line."""

    place: str
    key: str
    found: Callable[[str, str], tuple[str, ...]]
    is_telling: bool = True

    @property
    def pattern(self) -> str:
        """Any of the words that stand there."""
        return alternatives(self.found(self.place, self.key))

    def read(self, text: str) -> Value:
        """Return the word as it stands there."""
        known = self.found(self.place, self.key)
        for word in known:
            if word.casefold() == " ".join(text.split()).casefold():
                return word
        there = f"there: {', '.join(known)}" if known else "there is none yet"
        raise NotThat(f"no {self.key} '{text}' stands in {self.place}", f"begin one first; {there}")


class Pairs(Struct, frozen=True):
    """Several keys with their values, one after the other: ``pulse weak, refill 4 s``."""

    keys: Mapping[str, tuple[str, Slot]]
    is_telling: bool = False

    @property
    def pattern(self) -> str:
        """Something that begins with one of the keys."""
        return f"{alternatives(self.keys)}.+"

    def read(self, text: str) -> Value:
        """Return the values by key."""
        found: dict[str, Value] = {}
        place = 0
        while place < len(text):
            key, said, place = self._next(text, place)
            name, slot = self.keys[key]
            if name in found:
                raise NotThat(f"'{key}' stands twice", "say it once")
            found[name] = slot.read(said)
        return found

    def _next(self, text: str, place: int) -> tuple[str, str, int]:
        keys = alternatives(self.keys)
        begins = re.compile(rf"(?P<key>{keys})\s+(?P<value>.+?)(?:\s*,\s*|\s+(?={keys}\s)|$)", re.IGNORECASE)
        match = begins.match(text, place)
        if match is None:
            raise NotThat(
                f"'{text[place:]}' begins with no word known here", nearest(text[place:], self.keys)
            )
        return " ".join(match["key"].split()).casefold(), match["value"], match.end()


def slot_for(name: str, schema: Schema, also: Mapping[str, str]) -> Slot:
    """Return what a slot takes whose value is a text of ``schema``; ``also`` gives short words."""
    form = shape.text_form(schema) or shape.NOTHING
    if "x-quantity" in form:
        return Quantity(form["x-quantity"], tuple(form.get("x-words", ())))
    if "enum" in form:
        words = tuple(form["enum"])
        return Listed(
            name.replace("_", " "), words, {short: word for short, word in also.items() if word in words}
        )
    if form.get("type") in ("integer", "number"):
        return Number()
    return Free()
