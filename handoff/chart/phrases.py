"""From a phrase to its one meaning, or to what is wrong with it."""

from __future__ import annotations

import difflib
import re
from collections.abc import Iterator, Mapping
from functools import lru_cache

from msgspec import Struct

from handoff.chart.insertion import Value
from handoff.chart.meanings import SLOT, Lexicon, Meaning, filled
from handoff.chart.slots import ANYTHING, Free, Known, Listed, NotThat, spaced
from handoff.words import joined

_STRICT, _LOOSE, _OPEN = range(3)
_LONGEST = {_LOOSE: 400, _OPEN: 100}
"""Up to how many letters a phrase is compared so: in a long text the ways to divide it are too many."""


class NotUnderstood(ValueError):
    """A phrase has no meaning here, or two; says what to do."""


class Said(Struct, frozen=True):
    """A phrase with its meaning and the values of its slots."""

    text: str
    meaning: Meaning
    values: Mapping[str, Value]
    say: str = ""

    @property
    def lead(self) -> str:
        """The fixed words with which it was said to begin."""
        return SLOT.split(self.say, maxsplit=1)[0]

    @property
    def is_free(self) -> bool:
        """Whether a part of it is a text in the nurse's own words."""
        return any(isinstance(slot, Free) for name, slot in self.meaning.slots.items() if name in self.values)

    def value(self, at: str, by: str) -> Value:
        """Return the value or entry that it charts, for the time and author written so."""
        value = filled(self.meaning.template, self.values, at, by)
        return {} if value is None else value


class _Miss(Struct, frozen=True):
    score: int
    said: str


def understand(phrase: str, lexicon: Lexicon) -> Said:
    """Return what ``phrase`` means.

    Raises:
        NotUnderstood: It means nothing, or two things; names the nearest, or both.
    """
    text = " ".join(phrase.split())
    if not text or not text.isprintable():
        what = "a character that cannot be printed" if text else "nothing"
        raise NotUnderstood(f'the entry holds {what}; write it like "pulse 118 /min"')
    found: list[Said] = []
    misses: list[_Miss] = []
    for meaning in lexicon.meanings:
        said = _fits(text, meaning, misses)
        if said is not None and not any(_same(said, other) for other in found):
            found.append(said)
    found = [one for one in found if not any(_is_nearer(other, one) for other in found)]
    if len(found) == 1:
        return found[0]
    if found:
        ways = "; ".join(f"{one.meaning.means} (say: {one.meaning.says[0]})" for one in found)
        raise NotUnderstood(f"'{text}' fits {len(found)} meanings: {ways}")
    raise NotUnderstood(_explained(text, lexicon, misses))


def _same(one: Said, other: Said) -> bool:
    return (
        one.meaning.kind == other.meaning.kind
        and one.meaning.place == other.meaning.place
        and one.value("@", "@") == other.value("@", "@")
    )


def _is_nearer(one: Said, other: Said) -> bool:
    """Whether ``other`` took as free text what ``one`` knows as its own words: "pupils unreactive 1"."""
    return other.is_free and len(one.lead) > len(other.lead)


def _fits(text: str, meaning: Meaning, misses: list[_Miss]) -> Said | None:
    for say in meaning.says:
        for match in _matches(text, say, meaning, _STRICT):
            values, faults = _read(match, meaning)
            if not faults:
                return Said(text, meaning, values, say)
            misses.append(_Miss(_score(say, values, meaning) + 1, str(faults[0])))
    return None


def _matches(text: str, say: str, meaning: Meaning, level: int) -> Iterator[re.Match[str]]:
    lead = SLOT.split(say, maxsplit=1)[0]
    whole = [word.strip(":,").casefold() for word in lead.split()][
        : None if lead.endswith(" ") or lead == say else -1
    ]
    if [word.strip(":,").casefold() for word in text.split()[: len(whole)]] != whole:
        return
    match = _pattern(say, meaning, level).fullmatch(text)
    if match is not None:
        yield match


def _pattern(say: str, meaning: Meaning, level: int) -> re.Pattern[str]:
    """A pattern for one way to say it: as it must be, with any listed word, or with anything in its slots."""
    parts: list[str] = []
    place = 0
    for slot in SLOT.finditer(say):
        parts.append(_literal(say[place : slot.start()]))
        kind = meaning.slots[slot["name"]]
        is_open = level == _OPEN or (level == _LOOSE and isinstance(kind, Listed | Known))
        parts.append(f"(?P<{slot['name']}>{ANYTHING if is_open else kind.pattern})")
        place = slot.end()
    return _compiled("".join([*parts, _literal(say[place:])]))


@lru_cache(maxsize=4096)
def _compiled(pattern: str) -> re.Pattern[str]:
    return re.compile(pattern, re.IGNORECASE)


def _literal(text: str) -> str:
    if not text.strip():
        return r"\s+" if text else ""
    begin = r"\s+" if text[0] == " " and text.strip()[0] not in ":," else r"\s*"
    end = r"\s+" if text[-1] == " " and text.strip()[-1] not in ":," else r"\s*"
    return f"{begin}{spaced(text)}{end}"


def _read(match: re.Match[str], meaning: Meaning) -> tuple[dict[str, Value], list[str]]:
    values: dict[str, Value] = {}
    faults = []
    for name, text in match.groupdict().items():
        try:
            values[name] = meaning.slots[name].read(text)
        except NotThat as error:
            faults.append(f"{error.what}; {error.cure}")
    return values, faults


def _score(say: str, values: Mapping[str, Value], meaning: Meaning) -> int:
    literal = SLOT.sub(" ", say)
    telling = sum(meaning.slots[name].is_telling for name in values)
    return 4 * len(literal.split()) + 3 * telling - len(SLOT.findall(say))


def _explained(text: str, lexicon: Lexicon, misses: list[_Miss]) -> str:
    """What is wrong with a phrase that fits no meaning: a slot of the meaning that it comes nearest to."""
    near = [*misses, *_incomplete(text, lexicon)]
    for level in (_LOOSE, _OPEN):
        for meaning in lexicon.meanings if len(text) <= _LONGEST[level] else ():
            for say in meaning.says:
                for match in _matches(text, say, meaning, level):
                    values, faults = _read(match, meaning)
                    score = _score(say, values, meaning) - 3 * (len(faults) - 1)
                    if faults and score > 0:
                        near.append(_Miss(score, faults[0]))
    if near:
        best = max(near, key=lambda one: one.score)
        return f"'{text}': {best.said}"
    return _nearest_lead(text, lexicon)


def _incomplete(text: str, lexicon: Lexicon) -> Iterator[_Miss]:
    """What is missing, where a phrase says the beginning of a meaning."""
    for meaning in lexicon.meanings:
        for say in meaning.says:
            slots = list(SLOT.finditer(say))
            for count in range(len(slots) - 1, -1, -1):
                begin = say[: slots[count].start()].rstrip(" :,(")
                if not SLOT.sub("", begin).strip() and count < 2:
                    continue
                for match in _matches(text, begin, meaning, _STRICT):
                    values, faults = _read(match, meaning)
                    if not faults:
                        missing = joined([slot["name"].replace("_", " ") for slot in slots[count:]])
                        said = f'missing: {missing}; say it like "{meaning.examples[0]}"'
                        yield _Miss(_score(begin, values, meaning) + 2 - len(slots) + count, said)


def _nearest_lead(text: str, lexicon: Lexicon) -> str:
    words = text.casefold().split()
    for count in range(min(3, len(words)), 0, -1):
        lead = " ".join(words[:count])
        if lead in lexicon.leads:
            return f"'{text}' is not understood; say it like \"{lexicon.leads[lead].examples[0]}\""
    for count in range(min(3, len(words)), 0, -1):
        close = difflib.get_close_matches(" ".join(words[:count]), list(lexicon.leads), n=1, cutoff=0.7)
        if close:
            example = lexicon.leads[close[0]].examples[0]
            return f"'{text}': nothing is called that; did you mean '{close[0]}', as in \"{example}\"?"
    return f"'{text}': nothing is called that; handoff chart --words lists what can be said"
