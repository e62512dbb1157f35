"""Every kind of change in every layout: what was meant is there, and every character that was there still is."""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from handoff.chart.drafting import Draft
from handoff.chart.insertion import Insertion, woven
from handoff.chart.layout import CannotInsert
from handoff.state.nodes import Map, plain
from tests.chart.charts import is_kept, tree
from tests.chart.layouts import DAYS, ENTRIES, TEXTS, files

MANY = settings(max_examples=60, deadline=None, suppress_health_check=list(HealthCheck))
NEW = {"by": "EM", "dose": "3 mg", "note": "a, b: # {c}"}
MARKS = {"by": "JO", "at": "2026-03-14 19:30", "why": "entered in error, wrong patient"}


def proved(draft: Draft, old: str, data: dict[str, Any]) -> None:
    """Everything was kept, and the tree says what was meant."""
    assert draft.kept == old
    assert is_kept(old, draft.text)
    assert tree(draft.text) == data


@MANY
@given(files())
def test_what_the_test_writes_is_what_the_reader_reads(file: tuple[str, dict[str, Any]]) -> None:
    assert tree(file[0]) == file[1]


@MANY
@given(files(), st.sampled_from([("pain", "doses"), ("results",), ("events",), ("fluid", "given")]))
def test_an_entry_is_added_to_a_list(file: tuple[str, dict[str, Any]], path: tuple[str, ...]) -> None:
    text, data = file
    draft = Draft(text, "f")
    where = draft.append(path, NEW)
    place = data
    for name in path[:-1]:
        place = place.setdefault(name, {})
    place[path[-1]] = [*place.get(path[-1], []), NEW]
    proved(draft, text, data)
    assert plain(draft.node(where)) == NEW


@MANY
@given(files(), DAYS, st.sampled_from(["14:00", "15:30", "23:59"]))
def test_a_row_is_added_in_the_order_of_the_day(
    file: tuple[str, dict[str, Any]], day: str, time: str
) -> None:
    text, data = file
    draft = Draft(text, "f")
    draft.put(("observations", day), time, NEW, lambda other: other > time)
    data.setdefault("observations", {}).setdefault(day, {})[time] = NEW
    proved(draft, text, data)
    times = draft.node(("observations", day))
    assert isinstance(times, Map)
    if not times.flow:
        assert list(map(str, times)) == sorted(times)


@MANY
@given(files(), st.data())
def test_a_second_entry_stands_beside_the_first(
    file: tuple[str, dict[str, Any]], data: st.DataObject
) -> None:
    text, told = file
    path = _some_row(told, data)
    draft = Draft(text, "f")
    where = draft.beside(path, NEW)
    day = told["observations"][path[1]]
    there = day[path[2]]
    day[path[2]] = [*(there if isinstance(there, list) else [there]), NEW]
    proved(draft, text, told)
    assert plain(draft.node(where)) == NEW


@MANY
@given(files(), st.data())
def test_keys_are_added_to_an_entry(file: tuple[str, dict[str, Any]], data: st.DataObject) -> None:
    text, told = file
    path = _some_row(told, data)
    row = told["observations"][path[1]][path[2]]
    if isinstance(row, list):
        path, row = (*path, len(row) - 1), row[-1]
    draft = Draft(text, "f")
    draft.extend(path, {"urine": "35 mL", "struck": MARKS})
    row.update({"urine": "35 mL", "struck": MARKS})
    proved(draft, text, told)


@MANY
@given(files(), st.data(), TEXTS)
def test_a_new_value_stands_around_the_old(
    file: tuple[str, dict[str, Any]], data: st.DataObject, new: str
) -> None:
    text, told = file
    path = _some_row(told, data)
    row = told["observations"][path[1]][path[2]]
    if isinstance(row, list):
        path, row = (*path, 0), row[0]
    key = data.draw(st.sampled_from(sorted(row)))
    draft = Draft(text, "f")
    try:
        draft.correct((*path, key), {"value": new}, MARKS)
    except CannotInsert:
        old = draft.node((*path, key))
        raw = text[old.start : old.end]
        assert raw[0] in "|>"
        assert draft.text == text
        return
    row[key] = {"value": new, "corrects": {"value": row[key], **MARKS}}
    proved(draft, text, told)


@MANY
@given(
    files(), st.lists(st.sampled_from(["dose", "row", "event", "result"]), min_size=2, max_size=5), ENTRIES
)
def test_many_changes_in_one_draft_keep_every_character(
    file: tuple[str, dict[str, Any]], kinds: list[str], entry: dict[str, str]
) -> None:
    text, _ = file
    draft = Draft(text, "f")
    count: dict[str, int] = {}
    for number, kind in enumerate(kinds):
        if kind == "dose":
            draft.append(("pain", "doses"), entry)
        elif kind == "event":
            draft.append(("events",), entry)
        elif kind == "result":
            draft.append(("results",), entry)
        else:
            draft.put(("observations", "2026-03-15"), f"0{9 - number}:00", entry, lambda other: other > "09")
        count[kind] = count.get(kind, 0) + 1
    told = tree(draft.text)
    assert draft.kept == text
    assert len(told.get("events", [])) == count.get("event", 0)
    assert len(told.get("observations", {}).get("2026-03-15", {})) == count.get("row", 0)


def _some_row(told: dict[str, Any], data: st.DataObject) -> tuple[str, str, str]:
    assume("observations" in told)
    day = data.draw(st.sampled_from(sorted(told["observations"])))
    time = data.draw(st.sampled_from(sorted(told["observations"][day])))
    return "observations", day, time


@given(st.text(max_size=30), st.lists(st.tuples(st.integers(0, 30), st.text(max_size=5)), max_size=5))
def test_what_is_woven_into_a_text_can_be_taken_out_again(text: str, added: list[tuple[int, str]]) -> None:
    parts = woven(text, [Insertion(min(place, len(text)), said) for place, said in added])
    assert "".join(part for part, is_old in parts if is_old) == text


@pytest.mark.parametrize(
    ("text", "line"),
    [
        ("pain:\n  doses: [drug: a, dose: b]\n", 2),
        ("observations:\n  2026-03-14: {14:15: [by: EM]}\n", 2),
    ],
)
def test_an_entry_without_its_braces_is_refused_by_line(text: str, line: int) -> None:
    draft = Draft(text, "f")
    path = ("pain", "doses", 0) if "pain" in text else ("observations", "2026-03-14", "14:15", 0)
    with pytest.raises(CannotInsert, match=f"line {line}: put braces"):
        draft.extend(path, {"urine": "35 mL"})
    assert draft.text == text


def test_a_text_that_would_change_by_what_follows_it_is_left_alone() -> None:
    text = "pain:\n  doses:\n    - drug: a\n      note: |\n        no newline at the end of the file"
    draft = Draft(text, "f")
    draft.append(("pain", "doses"), NEW)
    with pytest.raises(CannotInsert, match=r"line 5: .* put a line break at the end of the file"):
        assert draft.text
    assert draft.text == text


def test_blank_lines_that_belong_to_a_text_stay_in_it() -> None:
    text = "pain:\n  note: |+\n    one\n\n\nother: 1\n"
    draft = Draft(text, "f")
    draft.append(("pain", "doses"), {"drug": "a"})
    proved(draft, text, {"pain": {"note": "one\n\n\n", "doses": [{"drug": "a"}]}, "other": "1"})


def test_a_comment_stays_above_the_entry_that_it_speaks_of() -> None:
    text = (
        "observations:\n  2026-03-14:  # Saturday\n    # first\n    14:15: {pulse: 124 /min}  # on arrival\n"
        "    # the voice got hoarser here\n    16:00: {pulse: 118 /min}\n"
    )
    draft = Draft(text, "f")
    for time in ("15:00", "13:00", "17:00"):
        draft.put(
            ("observations", "2026-03-14"), time, {"resp": "20 /min"}, lambda other, time=time: other > time
        )
    assert draft.text.splitlines() == [
        "observations:",
        "  2026-03-14:  # Saturday",
        "    13:00: {resp: 20 /min}",
        "    # first",
        "    14:15: {pulse: 124 /min}  # on arrival",
        "    15:00: {resp: 20 /min}",
        "    # the voice got hoarser here",
        "    16:00: {pulse: 118 /min}",
        "    17:00: {resp: 20 /min}",
    ]
