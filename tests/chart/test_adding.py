"""A key added to an entry that stands: by insertion, to the one entry that is meant, never over what is there."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.chart.asking import Refused
from handoff.chart.meanings import ADDITION
from tests.chart.charts import HEAD, NOW, charted, is_kept, tree, words

STANDING = """\
lines:   # kept in order
  - {what: IV cannula 18 G, site: left forearm, placed: 2026-03-14 14:00}   # first one
  - what: urinary catheter
    site: urethra
    placed: 2026-03-14 14:25
    note: "14 Fr"   # as on the pack
  - {what: IV cannula 18 G, site: right foot, placed: 2026-03-14 14:05,}
events:
  - {at: 2026-03-14 16:00, what: escharotomy requested, site: right arm, said: Doppler weaker}
pain:
  patient_controlled:
    - {line: P1, drug: morphine, route: IV, from: 2026-03-14 15:00, bolus: 1 mg, lockout: 5 min,
       delivered: [{from: 2026-03-14 15:00, to: 2026-03-14 16:00, total: 3 mg}]}
    - line: P2
      drug: fentanyl
      route: IV
      from: 2026-03-14 15:30   # no reading yet
  procedures:
    - {at: 2026-03-14 18:30, what: dressing change}
  blocks:
    - {at: 2026-03-14 15:30, what: "fascia iliaca, left", catheter: yes}
theatre:
  planned:
    - at: 2026-03-14 18:00
      what: excision and graft, right arm
"""
TEXT = HEAD + STANDING
SAID: dict[str, tuple[tuple[Any, ...], dict[str, Any]]] = {
    "line out IV cannula 18 G at left forearm": (("lines", 0), {"removed": NOW}),
    "line out urinary catheter": (("lines", 1), {"removed": NOW, "note": "14 Fr"}),
    "line out IV cannula 18 G at right foot": (("lines", 2), {"removed": NOW}),
    "answered escharotomy requested: to be done in theatre at 21:00": (
        ("events", 0),
        {"answered": NOW, "outcome": "to be done in theatre at 21:00"},
    ),
    "pca P1 delivered 6 mg 9 presses 6 given": (
        ("pain", "patient_controlled", 0, "delivered", 1),
        {"from": "2026-03-14 16:00", "to": NOW, "total": "6 mg", "presses": "9", "given": "6", "by": "EM"},
    ),
    "pca P2 delivered 60 mcg": (
        ("pain", "patient_controlled", 1, "delivered", 0),
        {"from": "2026-03-14 15:30", "to": NOW, "total": "60 mcg", "by": "EM"},
    ),
    "pca P2 stopped": (("pain", "patient_controlled", 1), {"stopped": NOW}),
    "procedure done dressing change": (("pain", "procedures", 0), {"done": "yes"}),
    "catheter out fascia iliaca, left": (("pain", "blocks", 0), {"removed": NOW}),
    "theatre done excision and graft, right arm": (("theatre", "planned", 0), {"done": "yes"}),
}


def at(text: str, path: tuple[Any, ...]) -> Any:
    node = tree(text)
    for step in path:
        node = node[step]
    return node


@pytest.mark.parametrize("text", [TEXT, TEXT.replace("\n", "\r\n")], ids=["lf", "crlf"])
@pytest.mark.parametrize("said", SAID)
def test_the_key_stands_in_the_entry_that_was_meant_and_every_other_byte_as_before(
    said: str, text: str
) -> None:
    done = charted(text, said, yes=("unusual",))
    path, keys = SAID[said]
    assert is_kept(text, done.text)
    assert keys.items() <= at(done.text, path).items()


def test_every_way_to_add_is_tried_here() -> None:
    places = {meaning.place for meaning in words().meanings if meaning.kind == ADDITION}
    tried = {
        ".".join(step for step in path if isinstance(step, str) and step != "delivered")
        for path, _ in SAID.values()
    }
    assert tried == places


def test_who_added_it_is_kept_as_a_note() -> None:
    entry = at(charted(TEXT, "line out IV cannula 18 G at left forearm", by="JO").text, ("lines", 0))
    assert entry["note"] == f"removed: charted by JO for {NOW}"


@pytest.mark.parametrize(
    ("said", "told"),
    [
        ("line out IV cannula 18 G", "could mean 2 entries"),
        ("line out chest drain", "chest drain"),
        ("procedure done cleaning", "cleaning"),
        ("pca P9 delivered 6 mg", "P9"),
    ],
)
def test_what_is_not_one_entry_is_refused_and_named(said: str, told: str) -> None:
    with pytest.raises(Refused, match=told):
        charted(TEXT, said)


@pytest.mark.parametrize(
    "said", ["line out urinary catheter", "procedure done dressing change", "pca P2 stopped"]
)
def test_what_is_there_already_is_never_overwritten(said: str) -> None:
    once = charted(TEXT, said).text
    with pytest.raises(Refused, match="has that already"):
        charted(once, said)


def test_a_line_cannot_come_out_before_it_was_placed() -> None:
    with pytest.raises(Refused, match="line out urinary catheter"):
        charted(TEXT, "line out urinary catheter", at="2026-03-14 14:00")


def test_a_struck_out_line_is_none() -> None:
    struck = TEXT.replace(
        "site: left forearm, placed: 2026-03-14 14:00}",
        "site: left forearm, placed: 2026-03-14 14:00, struck: {by: EM, at: 2026-03-14 15:00, why: wrong patient}}",
    )
    entry = at(charted(struck, "line out IV cannula 18 G").text, ("lines", 2))
    assert entry["removed"] == NOW


def test_two_readings_follow_each_other() -> None:
    once = charted(TEXT, "pca P1 delivered 2 mg", at="2026-03-14 17:00").text
    twice = at(charted(once, "pca P1 delivered 4 mg").text, ("pain", "patient_controlled", 0, "delivered"))
    assert [(one["from"][-5:], one["to"][-5:]) for one in twice] == [
        ("15:00", "16:00"),
        ("16:00", "17:00"),
        ("17:00", "19:30"),
    ]
