"""Read what phrases can mean from each plugin's ``words.json``, typed by the merged schema."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from msgspec import Struct

from handoff.chart import shape
from handoff.chart.meanings import (
    ADDITION,
    GROUP,
    LIST,
    OBSERVATION,
    REST,
    RESULT,
    SLOT,
    Lexicon,
    Meaning,
    Template,
)
from handoff.chart.shape import Schema
from handoff.chart.slots import Free, Known, Listed, NotThat, Pairs, Quantity, Slot, Word, slot_for
from handoff.plugin import Plugin
from handoff.registry import PluginError, Setup, part_of, schema_part
from handoff.state.schema import ENTRY
from handoff.state.units import KINDS


def lexicon(setup: Setup) -> Lexicon:
    """Return the meanings of the plugins of ``setup``.

    Raises:
        PluginError: A ``words.json`` is not JSON, or names a place, a key or a slot that is not there.
    """
    parts = [(plugin, _part(plugin)) for plugin in setup.plugins]
    found: dict[tuple[str, str], tuple[str, ...]] = {}
    also = {short: word for _, part in parts for short, word in part.get("also", {}).items()}
    maker = _Maker(setup.schema, also, found)
    meanings: list[Meaning] = []
    for plugin, part in parts:
        try:
            meanings += maker.rows(plugin, part)
            meanings += [maker.phrase(plugin.title, phrase) for phrase in part.get("phrases", ())]
        except (KeyError, TypeError, ValueError) as error:
            raise PluginError(f"words.json of the plugin '{plugin.name}': {error}") from None
    totals = tuple(key for _, part in parts for key in part.get("totals", ()))
    made = Lexicon(tuple(meanings), totals, tuple(plugin.title for plugin in setup.plugins))
    made.found = found
    return made


def _part(plugin: Plugin) -> Mapping[str, Any]:
    try:
        part: Mapping[str, Any] = json.loads(part_of(plugin, "words.json") or "{}")
    except ValueError as error:
        raise PluginError(f"words.json of the plugin '{plugin.name}' is not JSON ({error})") from None
    return part


class _Maker(Struct, frozen=True):
    schema: Schema
    also: Mapping[str, str]
    found: dict[tuple[str, str], tuple[str, ...]]

    def rows(self, plugin: Plugin, part: Mapping[str, Any]) -> Iterator[Meaning]:
        """The keys of a row that are one quantity, number or listed word, each by its words."""
        own = schema_part(plugin)
        for kind, plural in ((OBSERVATION, "observations"), (RESULT, "results")):
            words = {**{key: [] for key in own.get(plural, {})}, **part.get(plural, {})}
            for key, said in words.items():
                yield from self._row(plugin.title, kind, key, said or [key.replace("_", " ")])

    def _row(self, group: str, kind: str, key: str, said: Sequence[str]) -> Iterator[Meaning]:
        schema = self._value_schema(kind, key)
        slot = slot_for(key, schema, self.also)
        if isinstance(slot, Free):
            return
        example = _example(slot, schema)
        means = schema.get("description", key).partition(":")[0]
        says = tuple(f"{word} <value>" for word in said)
        yield Meaning(group, says, means, (f"{said[0]} {example}",), kind, key, "<value>", {"value": slot})
        known = shape.keys_of(schema)
        if "value" not in known:
            return
        for extra, form in known.items():
            also = slot_for(extra, form, self.also)
            if extra not in ENTRY and isinstance(also, Listed):
                yield Meaning(
                    group,
                    tuple(f"{say} <{extra}>" for say in says),
                    f"{means}, with its {extra}",
                    (f"{said[0]} {example} {also.words[0]}",),
                    kind,
                    key,
                    {"value": "<value>", extra: f"<{extra}>"},
                    {"value": slot, extra: also},
                )

    def phrase(self, group: str, phrase: Mapping[str, Any]) -> Meaning:
        """One phrase of ``words.json``."""
        kind = next(kind for kind in (OBSERVATION, RESULT, LIST, GROUP, ADDITION) if kind in phrase)
        place = str(phrase[kind])
        template = phrase["entry" if kind in (LIST, GROUP, ADDITION) else "value"]
        says = tuple([phrase["say"]] if isinstance(phrase["say"], str) else phrase["say"])
        examples = phrase["example"]
        schema, forms = self._place(kind, place)
        which = phrase.get("which")
        forms |= dict(self._forms(template, schema)) | dict(self._forms(which or {}, schema))
        kinds = {match["name"]: match["kind"] or "" for say in says for match in SLOT.finditer(say)}
        slots = {name: self._slot(name, kind, forms, place) for name, kind in kinds.items()}
        unsaid = sorted(set(forms) - set(slots))
        if unsaid:
            raise ValueError(f"'{says[0]}' never says <{unsaid[0]}>")
        return Meaning(
            group,
            says,
            phrase["means"],
            (examples,) if isinstance(examples, str) else tuple(examples),
            kind,
            place,
            template,
            slots,
            bool(phrase.get("together", False)),
            which,
        )

    def _place(self, kind: str, place: str) -> tuple[Schema, dict[str, tuple[str, Slot]]]:
        """The schema of what stands at a place, and the slot where its last step is one."""
        if kind in (LIST, ADDITION):
            return self._list_schema(place), {}
        if kind != GROUP:
            return self._value_schema(kind, place), {}
        above, _, last = place.rpartition(".")
        known = shape.keys_of(shape.at(self.schema, above.split(".")) or shape.NOTHING)
        groups = {key: form for key, form in known.items() if "struck" in shape.keys_of(form)}
        match = SLOT.fullmatch(last)
        if match and groups:
            return next(iter(groups.values())), {match["name"]: ("", self._keys(match["name"], groups))}
        if last not in groups:
            raise ValueError(f"'{place}' is not a group of the state file")
        return groups[last], {}

    def _value_schema(self, kind: str, key: str) -> Schema:
        look = shape.observation if kind == OBSERVATION else shape.result
        schema = look(self.schema, key)
        if schema is None:
            raise ValueError(f"{kind}s have no key '{key}'")
        return schema

    def _list_schema(self, place: str) -> Schema:
        schema = shape.at(self.schema, place.split("."))
        entry = shape.list_form(schema) if schema is not None else None
        if entry is None:
            raise ValueError(f"'{place}' is not a list of the state file")
        return entry

    def _forms(self, template: Template, schema: Schema) -> Iterator[tuple[str, tuple[str, Slot]]]:
        """Yield each slot of a template with the key it stands under and what the schema lets stand there."""
        if isinstance(template, str):
            match = SLOT.fullmatch(template)
            if match:
                yield match["name"], ("", slot_for(match["name"], schema, self.also))
        elif isinstance(template, list):
            entry = shape.list_form(schema)
            if entry is None:
                raise ValueError("a list stands where the schema has none")
            for part in template:
                yield from self._forms(part, entry)
        else:
            known = shape.keys_of(schema)
            for key, part in template.items():
                yield from self._key(key, part, known, set(template))

    def _key(
        self, key: str, part: Template, known: Mapping[str, Schema], literal: set[str]
    ) -> Iterator[tuple[str, tuple[str, Slot]]]:
        free = {name: form for name, form in known.items() if name not in ENTRY and name not in literal}
        match = SLOT.fullmatch(key)
        if key == REST:
            yield SLOT.fullmatch(part)["name"], (key, self._pairs(free))  # type: ignore[index]
        elif match:
            listed = {
                name: form for name, form in free.items() if isinstance(slot_for(name, form, {}), Listed)
            }
            yield match["name"], (key, self._keys(match["name"], listed))
            words = {word: None for form in listed.values() for word in shape.words_of(form)}
            yield from self._forms(part, {"enum": list(words)})
        elif key not in known:
            raise ValueError(f"the entry has no key '{key}'")
        else:
            for name, (_, slot) in self._forms(part, known[key]):
                yield name, (key, slot)

    def _keys(self, name: str, known: Mapping[str, Schema]) -> Slot:
        also = {short: word for short, word in self.also.items() if word in known}
        return Listed(name, tuple(known), also)

    def _pairs(self, known: Mapping[str, Schema]) -> Slot:
        said = {key.replace("_", " "): key for key in known}
        said |= {short: word for short, word in self.also.items() if word in known}
        return Pairs({word: (key, slot_for(key, known[key], self.also)) for word, key in said.items()})

    def _slot(self, name: str, kind: str, forms: Mapping[str, tuple[str, Slot]], place: str) -> Slot:
        if name not in forms:
            raise ValueError(f"<{name}> goes nowhere")
        key, slot = forms[name]
        if kind == "known":
            return Known(place, key, lambda at, under: self.found.get((at, under), ()))
        if kind == "word":
            return Word()
        if kind in KINDS:
            return Quantity(kind)
        if kind:
            raise ValueError(f"<{name}:{kind}>: write word, known or a kind of quantity")
        return slot


def _example(slot: Slot, schema: Schema) -> str:
    """An example that the slot takes, from the description of the key, else a first word."""
    for part in re.split(r"[:;,]| or ", schema.get("description", "")):
        try:
            value = slot.read(part.strip())
        except NotThat:
            continue
        if isinstance(value, str) and part.strip():
            return value
    return slot.words[0] if isinstance(slot, Listed | Quantity) and slot.words else "1"
