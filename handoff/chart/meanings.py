"""What a short phrase can mean, and the entry that it makes."""

from __future__ import annotations

import re
from collections.abc import Mapping
from functools import cached_property
from typing import Any, TypeAlias

from msgspec import Struct, field

from handoff.chart.insertion import Value
from handoff.chart.slots import Slot

Template: TypeAlias = Any
SLOT = re.compile(r"<(?P<name>\w+)(?::(?P<kind>\w+))?>")
OBSERVATION, RESULT, LIST, GROUP, ADDITION = "observation", "result", "list", "group", "addition"
REST = "*"


class Meaning(Struct, frozen=True):
    """One thing that can be charted: how it is said, what it means, where it goes.

    ``kind`` is observation, result, list, group or addition; ``place`` is the key of the row, or the
    path of the list or group, whose last step may be a slot. ``template`` is the value or entry with
    ``<slot>``, ``@at`` and ``@by`` in it. An addition puts its keys into the one entry of the list
    that ``which`` describes.
    """

    group: str
    says: tuple[str, ...]
    means: str
    examples: tuple[str, ...]
    kind: str
    place: str
    template: Template
    slots: Mapping[str, Slot]
    together: bool = False
    which: Template = None

    @property
    def is_row(self) -> bool:
        """Whether it charts a value of a row of observations or results."""
        return self.kind in (OBSERVATION, RESULT)

    def path(self, values: Mapping[str, Value]) -> tuple[str, ...]:
        """Return the path of the list or group that it goes into, for the values of its slots."""
        steps = self.place.split(".")
        match = SLOT.fullmatch(steps[-1])
        return (*steps[:-1], str(values[match["name"]]) if match else steps[-1])


class Lexicon(Struct, dict=True):
    """Every meaning of the plugins in use, and which figures are worth saying after a change.

    ``found`` holds, for the file at hand, the words that stand at a place under a key.
    """

    meanings: tuple[Meaning, ...]
    totals: tuple[str, ...]
    groups: tuple[str, ...]
    found: dict[tuple[str, str], tuple[str, ...]] = field(default_factory=dict)

    @cached_property
    def leads(self) -> dict[str, Meaning]:
        """The words with which a phrase can begin."""
        known: dict[str, Meaning] = {}
        for meaning in self.meanings:
            for say in meaning.says:
                lead = SLOT.split(say)[0].strip(" :,").casefold()
                if lead:
                    known.setdefault(lead, meaning)
        return known


def filled(template: Template, values: Mapping[str, Value], at: str, by: str) -> Value | None:
    """Return ``template`` with its slots filled in; a slot that was not said leaves its key out (None)."""
    if isinstance(template, str):
        match = SLOT.fullmatch(template)
        if match:
            return values.get(match["name"])
        return {"@at": at, "@by": by}.get(template, template)
    if isinstance(template, list):
        parts = [filled(part, values, at, by) for part in template]
        return [part for part in parts if part is not None]
    made: dict[str, Value] = {}
    for key, part in template.items():
        value = filled(part, values, at, by)
        match = SLOT.fullmatch(key)
        if value is None or (match and match["name"] not in values):
            continue
        if key == REST and isinstance(value, Mapping):
            made.update(value)
        else:
            made[str(values[match["name"]]) if match else key] = value
    return made
