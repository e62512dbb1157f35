"""Every item and action that a plugin can return stands in an example and in its documents.

The keys come from two places: the source of the plugins, and every worked example that is a
whole state. What no state of the plugins ever records (an entry that only says what is
missing) has to stand there as missing; everything else has to stand there recorded.
"""

from __future__ import annotations

import re
from functools import lru_cache
from typing import NamedTuple

from handoff.assess import Assessment
from handoff.plugin import Flag
from tests.examples.patients import FILES, assessment_of, in_one_line, pages_of
from tests.examples.universe import named, whole_keys, worked_examples
from tests.test_cases import assessment_of as assessment_of_case

WITH_POLICY = ("house-fire", "ventilated-smoke")
IN_A_TABLE = re.compile(r"; |, due |, telephone result to |: | at ")
SHOWN = [(name, False) for name in FILES] + [(name, True) for name in WITH_POLICY]

TABLES = ("handover.if_then", "handover.pending", "handover.to_do")


class Text(NamedTuple):
    """What one entry of an assessment says."""

    kind: str
    key: str
    said: str
    recorded: bool


def texts_of(made: Assessment) -> list[Text]:
    items = [Text("item", named(one.key), one.shown, one.flag is not Flag.NOT_RECORDED) for one in made.items]
    return items + [Text("action", named(one.key), one.text, True) for one in made.actions]


def _stands(one: Text, pages: str) -> bool:
    """Whether an entry is printed as it is; what the nurse asks of the next one is a table of its pieces."""
    if in_one_line(one.said) in pages:
        return True
    pieces = IN_A_TABLE.split(in_one_line(one.said).removeprefix("if "))
    return one.key in TABLES and all(piece.removeprefix("if ") in pages for piece in pieces)


@lru_cache(maxsize=1)
def in_examples() -> frozenset[tuple[str, str, bool]]:
    """Kind, key and whether it is recorded, of what stands in the documents of an example."""
    found = set()
    for name, policy in SHOWN:
        pages = pages_of(name, policy)
        found |= {
            (one.kind, one.key, one.recorded)
            for one in texts_of(assessment_of(name, policy))
            if _stands(one, pages)
        }
    return frozenset(found)


def test_every_entry_of_the_worked_examples_stands_in_an_example_and_in_its_documents() -> None:
    wanted: dict[tuple[str, str], bool] = {}
    for case in worked_examples():
        for one in texts_of(assessment_of_case(case)):
            wanted[one.kind, one.key] = wanted.get((one.kind, one.key), False) or one.recorded
    assert len(wanted) > len(FILES)
    for kind, key, recorded in in_examples():
        wanted[kind, key] = wanted.get((kind, key), False) or recorded
    missing = [key for key, recorded in wanted.items() if (*key, recorded) not in in_examples()]
    assert sorted(missing) == []


def test_every_key_that_the_source_of_a_plugin_writes_stands_in_an_example_and_in_its_documents() -> None:
    keys = {key for _, key, _ in in_examples()}
    assert sorted({named(key) for key in whole_keys()} - keys) == []
