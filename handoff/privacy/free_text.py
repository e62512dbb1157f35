"""Take out of free text what can tell who the patient is, and say what could not be judged."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterable

from msgspec import Struct, field

_MONTH = (
    r"(?:jan(?:uary)?|feb(?:ruary)?|mar(?:ch)?|apr(?:il)?|(?-i:[Mm]ay|MAY)|june?|july?|aug(?:ust)?|"
    r"sept?(?:ember)?|oct(?:ober)?|nov(?:ember)?|dec(?:ember)?)"
)
_MONTH_FIRST = _MONTH.replace("[Mm]ay", "May")
"""A small 'may' before a number is the verb."""
_WEEKDAY = r"(?:(?:mon|tues?|wed(?:nes)?|thu(?:rs)?|fri|sat(?:ur)?|sun)(?:day)?)"
_DAY = r"\d{1,2}(?:st|nd|rd|th)?"
DATES = re.compile(
    rf"\b(?:{_WEEKDAY},? )?(?:\d{{4}}-\d{{1,2}}(?:-\d{{1,2}})?\b|\d{{1,2}}[./-]\d{{1,2}}[./-]\d{{2,4}}\b"
    rf"|{_DAY}(?: of)? {_MONTH}\b(?:,? \d{{4}}\b)?|{_MONTH_FIRST} {_DAY}\b(?:,? \d{{4}}\b)?|{_MONTH} \d{{4}}\b)",
    re.IGNORECASE,
)
_UNITS = r"(?:m?L|ml|m?g|mcg|kg|kcal|k?V|mmol|mmHg|%|units?|U|J|/)"
_YEARS_AND_WEEKDAYS = re.compile(
    rf"\b(?:19|20)\d\d\b(?! ?{_UNITS})|\b(?:mon|tues|wednes|thurs|fri|satur|sun)days?\b", re.IGNORECASE
)
CLOCK_TIMES = re.compile(r"(?<![\d:+-])(?:[01]?\d|2[0-3])[:h][0-5]\d(?![\d:])(?: ?[ap]m\b)?")
_TITLED = re.compile(
    r"\b(?:Dr|Doctor|Mr|Mrs|Ms|Miss|Mx|Prof|Professor|Sr|Sister|Nurse|Fr|Father|Rev|Sgt|Garda|Constable)\b\.?"
    r"(?: (?:[A-Z]\.? ?)*[A-Z][\w'\u2019-]+)+"
)
_INITIAL_AND_NAME = re.compile(r"\b(?:[A-Z]\. ?)+[A-Z][\w'\u2019-]+")
_ADDRESSES = (
    re.compile(r"[\w.+'-]+@[\w-]+(?:\.[\w-]+)+"),
    re.compile(r"\b(?:https?://|www\.)\S+", re.IGNORECASE),
)
_NUMBERS = (
    re.compile(r"(?:\+|\b0)\d[\d ()-]{5,}\d"),
    re.compile(r"\b\d{3}[- ]\d{3,4}[- ]\d{3,4}\b"),
    re.compile(r"\b[A-Z]{1,5}[-/ ]?\d{4,}\w*\b"),
    re.compile(r"\b\d{6,}\b"),
    re.compile(r"\b[A-Z]{1,2}\d[A-Z\d]? ?\d[A-Z]{2}\b"),
    re.compile(r"\b(?:ext|extension|bleep|bed|room|ward|bay|tel|phone|mrn|no)\.? ?\d[\w-]*", re.IGNORECASE),
)
_CAPITAL = re.compile(r"(?<![\w'])[A-Z][\w'\u2019]*[a-z][\w'\u2019-]*")
_SENTENCE_START = re.compile(r"(?:^|[.!?:;]\s|\n)\s*$")

PERSON, PLACE, NUMBER, DATE, TIME, NAME = (
    "[person]",
    "[place]",
    "[number]",
    "[date]",
    "[time]",
    "[name?]",
)


class Scrubber(Struct):
    """Replaces what it knows and what looks like it; counts, and keeps what a person must look at.

    ``known`` are (text, what stands in its place); ``vocabulary`` are the words of the trade in small letters.
    """

    known: tuple[tuple[str, str], ...]
    vocabulary: frozenset[str]
    counted: Counter[str] = field(default_factory=Counter)
    doubtful: list[tuple[str, str]] = field(default_factory=list)

    def known_out(self, text: str) -> str:
        """Return ``text`` without the names, places and numbers that the file itself gives."""
        for pattern, instead in _patterns(self.known):
            text, times = pattern.subn(instead, text)
            self.counted[instead] += times
        return text

    def dates_out(self, text: str) -> str:
        """Return ``text`` without dates."""
        text, times = DATES.subn(DATE, text)
        self.counted[DATE] += times
        return text

    def printed(self, text: str) -> str:
        """Return a text that the tool made without what is known and without dates."""
        return self.dates_out(self.known_out(text))

    def free_text(self, text: str, where: str) -> str:
        """Return what a nurse wrote without all that is known or looks like a name, a number, a date or a time."""
        for pattern in _ADDRESSES:
            text, times = pattern.subn(NUMBER, text)
            self.counted[NUMBER] += times
        text = self.dates_out(self.known_out(text))
        patterns = [
            (_YEARS_AND_WEEKDAYS, DATE),
            (CLOCK_TIMES, TIME),
            (_TITLED, PERSON),
            (_INITIAL_AND_NAME, PERSON),
        ]
        patterns += [(pattern, NUMBER) for pattern in _NUMBERS]
        for pattern, instead in patterns:
            text, times = pattern.subn(instead, text)
            self.counted[instead] += times
        return self._capitals_out(text, where)

    def _capitals_out(self, text: str, where: str) -> str:
        def judged(match: re.Match[str]) -> str:
            word = match[0]
            if word.lower().removesuffix("'s") in self.vocabulary:
                return word
            if _SENTENCE_START.search(text[: match.start()]):
                self.doubtful.append((where, word))
                return word
            self.counted[NAME] += 1
            return NAME

        return _CAPITAL.sub(judged, text)


def known_terms(whole: Iterable[tuple[str, str]], trade: frozenset[str]) -> tuple[tuple[str, str], ...]:
    """Return names, places and numbers with their single words, the longest first.

    What holds nothing but words of the ``trade`` (a role, "patient") names nobody and is left out.
    """
    found: dict[str, str] = {}
    for text, instead in whole:
        words = [word.strip(".:-'\u2019\"") for word in re.split(r"[\s,;()/]+", text)]
        if all(word.lower() in trade or word.lower() in ROLES for word in words if word):
            continue
        found.setdefault(text.strip(), instead)
        for word in words:
            is_name = word[:1].isupper() or word.isdigit()
            if instead != NUMBER and is_name and word.lower() not in ROLES:
                found.setdefault(word, instead)
    usable = [
        (text, instead) for text, instead in found.items() if len(text) > 1 and not _is_small_number(text)
    ]
    return tuple(sorted(usable, key=lambda term: (-len(term[0]), term[0])))


def _is_small_number(text: str) -> bool:
    """A number of two digits stands in too many sums to be taken out of all of them."""
    return text.isdigit() and len(text) <= 2


def _patterns(known: tuple[tuple[str, str], ...]) -> list[tuple[re.Pattern[str], str]]:
    """Longer terms first; a term of two letters is looked for in capitals only, others in any letters."""
    return [
        (re.compile(rf"(?<!\w){re.escape(text)}(?!\w)", re.IGNORECASE if len(text) > 2 else 0), instead)
        for text, instead in known
    ]


ROLES = frozenset(
    """
    a an and at by for from in of on the to with after before dr mr mrs ms miss mx prof rn sister nurse nurses
    doctor doctors registrar consultant surgeon anaesthetist anaesthetics anaesthetic intensivist physiotherapist
    dietitian pharmacist psychologist chaplain crew ambulance paramedic paramedics team on-call call burn burns
    plastics emergency charge ward bed room bay unit hospital icu centre night day shift patient parent parents
    mother father brother wife husband son daughter partner family neighbour friend interpreter none
    """.split()  # noqa: SIM905 (a list of so many words is read as words)
)
"""Words that say what somebody is or which kind of place it is, and not who or which."""
