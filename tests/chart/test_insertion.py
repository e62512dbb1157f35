"""Insertion: the new entry is read back, and every byte that was there is still there, in order."""

from __future__ import annotations

import pytest

from handoff.chart.insertion import Entry, applied, flow, scalar
from handoff.chart.layout import CannotInsert, Layout
from handoff.state.nodes import List, Map, plain
from handoff.state.reader import read_nodes

ENTRY: Entry = {"at": "2026-03-14 15:00", "drug": "morphine", "dose": "4 mg"}

LISTS = {
    "a block list": "pain:\n  doses:\n    - {at: x, drug: a}\n    - {at: y, drug: b}  # comment\nother: 1\n",
    "a block list at the margin of its key": "pain:\n  doses:\n  - {drug: a}\n  - drug: b\n    dose: 1 mg\nother: 1\n",
    "a flow list": "pain: {doses: [{drug: a}, {drug: b}]}\nother: 1\n",
    "an empty flow list": "pain:\n  doses: []\nother: 1\n",
    "a missing list": "pain:\n  goal: {scale: numeric}\nother: 1\n",
    "a missing list in braces": "pain: {goal: x}\nother: 1\n",
    "a blank list": "pain:\n  doses:  # to come\n  goal: x\n",
    "a blank block": "pain:\nother: 1\n",
    "a missing block": "other: 1\n",
    "no newline at the end": "other: 1\npain:\n  doses:\n    - {drug: a}",
    "a missing block without newline at the end": "other: 1",
    "windows lines": "pain:\r\n  doses:\r\n    - {drug: a}\r\nother: 1\r\n",
    "comments everywhere": (
        "# top\npain:  # p\n  # before\n  doses:  # d\n    # one\n    - {drug: a}  # two\n    # after\nother: 1\n"
    ),
    "text in a block below": "pain:\n  doses:\n    - drug: a\n      note: |\n        one\n        two\n\n\nother: 1\n",
    "a list over several lines": "pain:\n  doses: [\n    {drug: a},\n    {drug: b}\n  ]\nother: 1\n",
}


def is_kept(old: str, new: str) -> bool:
    """Whether ``new`` is ``old`` with one text put in."""
    start = 0
    while start < len(old) and old[start] == new[start]:
        start += 1
    tail = len(old) - start
    return new[len(new) - tail :] == old[start:] if tail else new.startswith(old)


@pytest.mark.parametrize("text", LISTS.values(), ids=list(LISTS))
def test_an_entry_is_added_at_the_end_of_its_list(text: str) -> None:
    root, faults = read_nodes(text, "f")
    assert not faults
    before = root.get("pain")
    doses = before.get("doses") if isinstance(before, Map) else None
    old = [plain(dose) for dose in doses] if isinstance(doses, List) else []
    new_text = applied(text, Layout(text, root).into_list(("pain", "doses"), ENTRY))
    new, faults = read_nodes(new_text, "f")
    assert not faults
    assert plain(new["pain"])["doses"] == [*old, ENTRY]  # type: ignore[index]
    kept = {key: value for key, value in plain(new).items() if key != "pain"}  # type: ignore[attr-defined]
    assert kept == {key: value for key, value in plain(root).items() if key != "pain"}  # type: ignore[attr-defined]
    assert is_kept(text, new_text)


def test_a_list_is_not_made_of_something_else() -> None:
    text = "pain: {doses: none}\n"
    root, _ = read_nodes(text, "f")
    with pytest.raises(CannotInsert):
        Layout(text, root).into_list(("pain", "doses"), ENTRY)


@pytest.mark.parametrize(
    "value",
    ["4 mg", "104/62 mmHg", "98 %", "a, b", "bed #3", "key: value", "{x}", "[x]", "'", '"', "", " x", "x ", "no", "-",
     "- x", "é", "\\", "a\nb", "@x", "`", "!x", "&x", "*x", "2026-03-14 14:30", "14:30", "?", "a:", "%",
     "lactated Ringer's", "NO", "none", "a\rb"],
)  # fmt: skip
def test_a_value_reads_back_as_it_was_in_braces_and_alone(value: str) -> None:
    root, faults = read_nodes(f"a: {scalar(value)}\nb: {flow({'c': value, 'd': [{'e': value}]})}\n", "f")
    assert not faults
    assert plain(root) == {"a": value, "b": {"c": value, "d": [{"e": value}]}}


def test_two_entries_in_one_minute_stand_in_a_list() -> None:
    text = "observations:\n  2026-03-14:\n    14:15: {by: EM, pulse: 124 /min}  # first\n"
    root, _ = read_nodes(text, "f")
    row = root["observations"]["2026-03-14"]["14:15"]  # type: ignore[index,call-overload]
    new_text = applied(text, Layout(text, root).beside(row, {"by": "JO", "urine": "35 mL"}))
    new, faults = read_nodes(new_text, "f")
    assert not faults
    rows = plain(new)["observations"]["2026-03-14"]["14:15"]  # type: ignore[index]
    assert rows == [{"by": "EM", "pulse": "124 /min"}, {"by": "JO", "urine": "35 mL"}]
    assert new_text.endswith("  # first\n")
