"""Hostile text in every free-text field of a patient file at once, and a patient file without end."""

from __future__ import annotations

import json
from collections.abc import Iterator
from datetime import datetime, timedelta
from functools import lru_cache
from pathlib import Path
from typing import Any

import pytest
import yaml
from openxml_audit import FileFormat, OpenXmlValidator

from handoff.document import draft
from handoff.document.printable import visible
from handoff.document.read_back import text_of
from handoff.state.load import StateFaults
from tests.document.reading import tables
from tests.shift.helpers import EXAMPLES, assessed, text_of_example

PATIENT = "house-fire"
AT = EXAMPLES[PATIENT]
LONGEST_NAME = 200
"""Names and places longer than this are refused; notes take two thousand letters."""

NEVER = datetime(2026, 3, 29, 1)
"""An hour that the clock of the example leaves out in spring."""

Place = tuple[str | int, ...]

HOSTILE = {
    "markup": "pain < 3 & worse > before \"quoted\" 'single' </w:t></w:p>]]><!-- -->",
    "template syntax": "{{ 7*7 }} {% for x in y %} {# gone #} {{r x }} {%p if %} }}",
    "right to left": "שלום 500 mg عربي",
    "emoji": "\U0001f525 \U0001f469\u200d\u2695\ufe0f end",
    "two thousand letters": ("very long note " * 134).strip(),
}


def leaves(tree: Any, place: Place = ()) -> Iterator[tuple[Place, str]]:
    """Every scalar of a file with its place."""
    if isinstance(tree, dict):
        for key, value in tree.items():
            yield from leaves(value, (*place, key))
    elif isinstance(tree, list):
        for number, value in enumerate(tree):
            yield from leaves(value, (*place, number))
    else:
        yield place, tree


def lines(tree: Any, place: Place = ()) -> Iterator[tuple[str, Place]]:
    """A file in flow style, one scalar a line, each line with the place that it holds."""
    if isinstance(tree, (dict, list)):
        opening, closing = "{}" if isinstance(tree, dict) else "[]"
        yield opening, place
        items = tree.items() if isinstance(tree, dict) else enumerate(tree)
        for key, value in items:
            name = f"{json.dumps(key)}: " if isinstance(tree, dict) else ""
            for number, (line, inside) in enumerate(lines(value, (*place, key))):
                yield (name if number == 0 else "") + line, inside
            yield ",", (*place, key)
        yield closing, place
    else:
        yield _quoted(tree), place


def _quoted(text: str) -> str:
    """A scalar between quotes; what a file cannot hold as it is stands as an escape."""
    quoted = json.dumps(text, ensure_ascii=False)
    return "".join(char if char.isprintable() else f"\\U{ord(char):08x}" for char in quoted)


def written(tree: Any, replaced: set[Place], text: str) -> tuple[str, list[Place]]:
    """A file with ``text`` in the places ``replaced``, and the place that each line holds."""
    found = [
        (_with(text, line, place) if place in replaced and line != "," else line, place)
        for line, place in lines(tree)
    ]
    return "\n".join(line for line, _ in found) + "\n", [place for _, place in found]


def _with(text: str, line: str, place: Place) -> str:
    name = f"{json.dumps(place[-1])}: " if isinstance(place[-1], str) else ""
    assert line.startswith(name)
    return name + _quoted(text)


@lru_cache(maxsize=1)
def patient() -> Any:
    """The adult example as plain data."""
    return yaml.load(text_of_example(PATIENT), yaml.BaseLoader)  # noqa: S506 (this loader makes nothing but text)


@lru_cache
def free_text(text: str = "Any text & more") -> frozenset[Place]:
    """The places of the example that take that text: what is refused is given back until nothing is."""
    left = {place for place, _ in leaves(patient())}
    for _ in range(20):
        content, places = written(patient(), left, text)
        try:
            assessed(content, AT)
        except StateFaults as refused:
            at = [places[fault.line - 1] for fault in refused.faults]
            left = {place for place in left if not any(place[: len(bad)] == bad for bad in at)}
        else:
            return frozenset(left)
    raise AssertionError("the example never became free of faults")


def test_the_fields_that_take_any_text_are_found() -> None:
    found = {".".join(str(step) for step in place) for place in free_text()}
    for name in ("patient.name", "injury.what_happened", "handovers.0.summary", "events.1.said"):
        assert name in found
    assert len(found) > 60
    assert "clock" not in found


@pytest.mark.parametrize("name", HOSTILE)
def test_hostile_text_in_every_free_field_of_a_file_stands_whole_in_valid_documents(
    name: str, tmp_path: Path
) -> None:
    text = HOSTILE[name]
    places = free_text(text) if len(text) > LONGEST_NAME else free_text()
    assert len(places) > 25
    content, _ = written(patient(), set(places), text)
    made = draft(assessed(content, AT), PATIENT)
    validator = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
    for file, document in made.items():
        assert visible(text) in text_of(document)
        (tmp_path / file).write_bytes(document)
        result = validator.validate(str(tmp_path / file))
        assert result.is_valid, [str(error) for error in result.errors][:5]


def test_control_characters_are_refused_with_the_field_and_never_reach_a_document() -> None:
    content, places = written(patient(), set(free_text()), "bell \x07 escape \x1b end")
    with pytest.raises(StateFaults) as refused:
        assessed(content, AT)
    assert {places[fault.line - 1] for fault in refused.value.faults} == free_text()


def test_sixty_burns_and_thirty_days_stand_in_valid_documents(tmp_path: Path) -> None:
    tree = json.loads(json.dumps(patient()))
    start, end = datetime(2026, 3, 14, 14), datetime(2026, 4, 13, 13)
    burn = {"region": "trunk", "face": "front", "tbsa": "0.2 %", "depth": "deep partial"}
    tree["area"][-1]["burns"] = [burn] * 60
    days: dict[str, dict[str, dict[str, str]]] = {}
    moment = start
    while moment < end:
        if moment != NEVER:
            day = days.setdefault(f"{moment:%Y-%m-%d}", {})
            day[f"{moment:%H:%M}"] = {"by": "EM", "urine": "41 mL", "pulse": "112 /min", "bp": "112/66 mmHg"}
        moment += timedelta(hours=1)
    tree["observations"] = days
    content, _ = written(tree, set(), "")
    made = draft(assessed(content, "2026-04-13 13:30"), PATIENT)
    found = tables(made[f"{PATIENT}-handover.docx"])
    assert len(found["Region"][0]._tbl.tr_lst) == 61
    assert len(found["Hour"][0]._tbl.tr_lst) > 24
    validator = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
    for file, document in made.items():
        (tmp_path / file).write_bytes(document)
        assert validator.validate(str(tmp_path / file)).is_valid
