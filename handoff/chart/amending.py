"""Correct or strike out what stands in a file: the old stays readable, with who, when and why."""

from __future__ import annotations

import re
from collections.abc import Container, Mapping
from typing import Any

from msgspec import Struct
from msgspec.structs import replace

from handoff.chart import shape
from handoff.chart.asking import Refused
from handoff.chart.describing import describe_entry, describe_key, named, same
from handoff.chart.drafting import Draft
from handoff.chart.entries import ROWS
from handoff.chart.insertion import Entry, Value
from handoff.chart.meanings import ADDITION, GROUP, LIST, RESULT, Lexicon
from handoff.chart.phrases import NotUnderstood, Said, understand
from handoff.chart.restating import Restating, SameAlready, tree_of
from handoff.chart.shape import Schema
from handoff.chart.standing import Standing, standing_at, stands
from handoff.chart.times import meant, spelled
from handoff.state.load import Loaded
from handoff.state.nodes import Map, plain

_REFERENCE = re.compile(
    r"(?P<when>(?:\d{4}-\d{2}-\d{2}[ T])?\d{1,2}:\d{2}(?: ?(?:Z|[+-]\d{2}:\d{2}))?)(?:\s+(?P<words>.+))?"
)

WHOLE = -1


class Amendment(Struct, frozen=True):
    """One correction (time and the entry as it should be) or one entry to strike out, by whom and why."""

    correct: str
    strike: str
    by: str
    why: str


def amend(
    draft: Draft,
    asked: Amendment,
    before: Loaded,
    schema: Schema,
    words: Lexicon,
    yes: Container[str],
    confirm: bool,
) -> list[str]:
    """Make the correction or strike in ``draft`` and return the lines that say what stood and what stands.

    Raises:
        Refused: Nothing fits, or more than one entry does.
        Ask: The time today has not come yet: is it yesterday's?
    """
    match = _REFERENCE.fullmatch(" ".join((asked.correct or asked.strike).split()))
    if match is None:
        raise Refused(
            'name the entry by its time and words: --correct "14:15 pulse 142 /min" or --strike "14:15 pulse"'
        )
    clock = before.state.clock
    at = meant(match["when"], before.now, clock, yes)
    there = standing_at(draft.root, at, clock, schema)
    when = clock.day_and_time(at)
    if not there:
        raise Refused(f"nothing is charted for {when}")
    marks = {"by": asked.by, "at": spelled(before.now, clock), "why": asked.why}
    signed = f"for {when} by {asked.by}: {asked.why}"
    work = _Work(Restating(draft, marks, confirm), schema, words, there, when, spelled(at, clock), signed)
    text = match["words"] or ""
    return work.correct(text) if asked.correct else work.strike(text)


class _Work(Struct, frozen=True):
    restating: Restating
    schema: Schema
    words: Lexicon
    there: list[Standing]
    when: str
    spelled: str
    signed: str

    def correct(self, text: str) -> list[str]:
        """Put the new value around the old one, or strike the old entry and add one that carries the rest."""
        work, text = self._of_author(text)
        said = understand(text, work.words)
        new = said.value(work.spelled, "")
        if said.meaning.kind in (GROUP, ADDITION):
            raise Refused(f"'{text}': this stands once in the file; change it by hand")
        if said.meaning.kind == LIST:
            return work._correct_entry(said, new if isinstance(new, Mapping) else {})
        key = said.meaning.place
        place = "results" if said.meaning.kind == RESULT else ROWS
        one = work._one(
            [found for found in work.there if found.place == place and stands(found.entry, key)], text
        )
        look = shape.result if said.meaning.kind == RESULT else shape.observation
        try:
            old, now = work.restating.value(one, key, new, look(work.schema, key) or shape.NOTHING)
        except SameAlready as there:
            raise Refused(f"{there} is what stands there for {work.when}; nothing to correct") from None
        return [
            f"corrected {work.signed}",
            f"  was: {describe_key(key, old)}{_charted(one)}",
            f"  is now: {describe_key(key, now)}",
        ]

    def strike(self, text: str) -> list[str]:
        """Strike out one entry, or one value of a row: then the rest of the row is written anew."""
        work, text = self._of_author(text)
        one, key, index = work._found(text)
        said = describe_key(key, _part(one, key, index)) if key else _told(one)
        if key and (index is not None or _clinical(one.entry) != [key]):
            look = shape.observation if one.place == ROWS else shape.result
            work.restating.strike_value(one, key, index, look(work.schema, key) or shape.NOTHING)
        else:
            work.restating.strike(one)
        return [
            f"struck out {work.signed}",
            f"  {said}{_charted(one)}",
            "  it stays readable in the file and counts nowhere",
        ]

    def _of_author(self, text: str) -> tuple[_Work, str]:
        """Where the words begin with somebody who charted that minute, their entries alone are meant."""
        for by in sorted({one.by for one in self.there if one.by}, key=lambda by: (-len(by), by)):
            if text == by or text.startswith(f"{by} "):
                own = [one for one in self.there if one.by == by]
                return replace(self, there=own), text.removeprefix(by).strip()
        return self, text

    def _one(self, found: list[Standing], text: str) -> Standing:
        if len(found) == 1:
            return found[0]
        said = f"'{text}'" if text else "the time alone"
        listed = [f"  line {one.entry.line}: {_told(one)}{_charted(one)}" for one in found or self.there]
        if not found:
            raise Refused(f"{said} fits nothing that is charted for {self.when}; there:", *listed)
        time = self.spelled[11:]
        cure = f'name one by its list, its words or who charted it: "{time} {found[0].place}"'
        raise Refused(f"{said} fits {len(found)} entries of {self.when}; {cure}", *listed)

    def _correct_entry(self, said: Said, new: Entry) -> list[str]:
        known = self._told_of(said.meaning.place, new)
        found = [one for one in self.there if one.place == said.meaning.place]
        changes = [_changed(one, known) for one in found]
        fewest = min(map(len, changes), default=0)
        nearest = [one for one, changed in zip(found, changes, strict=True) if len(changed) == fewest]
        one = self._one(nearest, said.text)
        changed = _changed(one, known)
        if not changed:
            raise Refused(f"{_told(one)} is what stands there for {self.when}; nothing to correct")
        was = [describe_key(key, _of(one, key)) for key in changed if key in one.entry]
        now = self.restating.entry(one, known, ", ".join(was) or f"no {named(changed[0])}")
        return [
            f"corrected {self.signed}",
            f"  was: {_told(one)}{_charted(one)}; struck out, it stays readable",
            f"  is now: {describe_entry(now)}",
        ]

    def _told_of(self, place: str, entry: Entry) -> dict[str, Value]:
        """What an entry of a list says, without its author and its times."""
        form = shape.at(self.schema, place.split(".")) or shape.NOTHING
        entry_form = shape.list_form(form) or form
        aside = ("by", *shape.times_of(entry_form))
        return {key: value for key, value in entry.items() if key not in aside}

    def _found(self, text: str) -> tuple[Standing, str, int | None]:
        """The entry that the words name, the key of a row where they name one value, its place in a list."""
        listed = [one for one in self.there if one.place == text.casefold()] if text else self.there
        if listed:
            return self._one(listed, text), "", None
        lead = self.words.leads.get(text.casefold())
        if lead is not None and lead.is_row:
            return self._one(self._with_key(lead.place), text), lead.place, None
        tokens = text.casefold().replace(",", " ").split()
        by_words = [one for one in self.there if one.place != ROWS and _holds(one, tokens)]
        try:
            said = understand(text, self.words)
        except NotUnderstood as error:
            if not by_words:
                raise Refused(str(error)) from None
            return self._one(by_words, text), "", None
        place, value = said.meaning.place, said.value(self.spelled, "")
        if said.meaning.is_row:
            found = [one for one in self._with_key(place) if _index(one, place, value) is not None]
            one = self._one(found, text)
            index = _index(one, place, value)
            return one, place, None if index == WHOLE else index
        path = ".".join(said.meaning.path(said.values))
        known = self._told_of(path, value if isinstance(value, Mapping) else {})
        fitting = [one for one in self.there if one.place == path and not _changed(one, known)]
        return self._one(fitting, text), "", None

    def _with_key(self, key: str) -> list[Standing]:
        return [one for one in self.there if one.place in (ROWS, "results") and stands(one.entry, key)]


def _of(one: Standing, key: str) -> Any:
    return plain(one.entry[key]) if key in one.entry else ""


def _part(one: Standing, key: str, index: int | None) -> Any:
    value = plain(one.entry[key])
    return value[index] if index is not None and isinstance(value, list) else value


def _index(one: Standing, key: str, value: Value) -> int | None:
    """WHOLE where ``value`` is all that stands under a key, its place where it is one of a list, else None."""
    there = plain(one.entry[key])
    if same(there, value):
        return WHOLE
    group = value[0] if isinstance(value, list) and len(value) == 1 else value
    parts = there if isinstance(there, list) else []
    return next((place for place, part in enumerate(parts) if same(part, group)), None)


def _changed(one: Standing, known: Mapping[str, Value]) -> list[str]:
    return [key for key, value in known.items() if not same(_of(one, key), value)]


def _clinical(entry: Map) -> list[str]:
    signs = ("at", "by", "written", "confirmed", "struck", "corrects")
    return [str(key) for key in entry if key not in signs]


def _told(one: Standing) -> str:
    return f"{one.place}: {describe_entry(tree_of(one.entry)) or 'an entry'}"


def _charted(one: Standing) -> str:
    return f", charted by {one.by}" if one.by else ""


def _holds(one: Standing, said: list[str]) -> bool:
    told = describe_entry(tree_of(one.entry)).casefold().replace(",", " ").split()
    return all(word in told for word in said)
