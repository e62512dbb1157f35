"""What a nurse may write stays what it was: no type is guessed, no text is cut, blank is not recorded."""

from __future__ import annotations

from datetime import timedelta
from pathlib import Path

import pytest

from handoff.state.access import amount, child, words
from handoff.state.file_text import read_text
from handoff.state.nodes import List, Map, plain
from handoff.state.patient import PatientState
from handoff.state.reader import read_nodes
from tests.states.files import AT, HERE, command, loaded

FILES = sorted((HERE / "valid").glob("*.yaml"))


def state_of(name: str) -> PatientState:
    return loaded(HERE / "valid" / f"{name}.yaml").state


def written(node: object, *names: str) -> object:
    assert isinstance(node, Map)
    found = child(node, *names)
    return None if found is None else plain(found)


@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_a_valid_file_has_no_fault_and_nothing_unusual(path: Path) -> None:
    assert loaded(path).unusual == ()


def test_the_command_finds_no_fault() -> None:
    done = command("check", HERE / "valid" / "times-and-numbers.yaml", "--at", AT)
    assert (done.returncode, done.stderr) == (0, "")
    assert "record number 00451203" in done.stdout


@pytest.mark.parametrize("ending", ["\r\n", "\r"], ids=["CR LF", "CR"])
@pytest.mark.parametrize("mark", ["", "\N{ZERO WIDTH NO-BREAK SPACE}"], ids=["plain", "byte-order mark"])
@pytest.mark.parametrize("path", FILES, ids=lambda path: path.stem)
def test_line_endings_and_byte_order_mark_change_nothing(
    path: Path, mark: str, ending: str, tmp_path: Path
) -> None:
    same = tmp_path / path.name
    same.write_bytes((mark + path.read_text(encoding="utf-8").replace("\n", ending)).encode())
    old, _ = read_nodes(read_text(path), path.name)
    new, faults = read_nodes(read_text(same), path.name)
    assert faults == []
    assert plain(new) == plain(old)
    assert loaded(same).state.digest == loaded(path).state.digest


def test_times_stay_times_and_zeros_stay() -> None:
    state = state_of("times-and-numbers")
    assert state.identifiers == (
        ("record_number", "00451203"),
        ("temporary", "1e5"),
        ("national", "0x1F"),
        ("earlier", "1_000"),
    )
    assert written(state.patient, "location") == "012"
    assert written(state.patient, "pregnant") == "no"
    assert written(state.patient, "family") == {"phone": "0044.1632", "contact": "yes", "interpreter": "no"}
    assert [row.at.strftime("%H:%M") for row in state.rows] == [
        "13:30",
        "14:30",
        "15:00",
        "15:30",
        "16:00",
        "16:30",
    ]
    assert [words(row.entry.get("by")) for row in state.rows[:2]] == ["EM", "NO"]
    assert [amount(row.entry.get("base_excess"), "mmol/L") for row in state.results] == [-4, 1.5]
    assert [amount(row.entry.get("haematocrit"), "") for row in state.results] == [0.51, 0.51]


def test_two_entries_of_one_minute_are_both_kept() -> None:
    state = state_of("two-entries-in-one-minute")
    assert [words(row.entry.get("by")) for row in state.rows] == ["EM", "JO", "EM", "JO"]
    assert [amount(one.node, "/min") for one in state.series("pulse")] == [118, 124]
    assert [amount(one.node, "/min") for one in state.series("resp")] == [24, 26]


def test_comments_are_left_out_and_nothing_else_is() -> None:
    root = state_of("comments-everywhere").root
    assert written(root, "patient") == {
        "name": "Tomas Ferrandel",
        "location": "bed #3",
        "history": ["asthma", "finger #2 lost"],
        "medicines": ["metformin 500 mg", "ramipril 5 mg"],
        "capacity": "a#b, c# d",
    }
    (handover,) = written(root, "handovers")  # type: ignore[misc]
    assert handover["summary"] == "Hand #2 cooler than before.\n# this is text too\n"


def test_quoted_text_is_kept_to_the_letter() -> None:
    state = state_of("quoted-text")
    assert state.name == "Siobhán O'Brien"
    assert written(state.patient, "location") == "Ward 6: bed #3, by the window"
    assert written(state.patient, "history") == [
        'told us: "no, never"',
        'a backslash \\ and a quote " and a tab\tand a line\nend',
        "plain text with, commas; it's all kept (100 %) - even {these} and [those]",
        "{looks: like a mapping}",
        "# not a comment",
        "long text in quotes that goes on over a line\nand leaves one out",
        "-5 is not a list",
        "?, !, >5 and @home inside text",
        "日本語, ελληνικά, עברית, emoji 😀 and 1 ½ tablets",
    ]
    assert written(state.injury, "what_happened") == "fell: hit the stove, {twice}"
    assert words(state.handover.get("summary")) == "Folded text on two lines.\n"
    assert written(state.handover, "requests") == ["Kept\n  as written: no # comment"]


def test_what_was_left_empty_is_not_recorded() -> None:
    state = state_of("left-empty")
    assert plain(state.root) == {
        "handoff": "1",
        "clock": "Europe/Dublin",
        "patient": {"name": "unknown", "identifiers": {}},
        "injury": {"causes": []},
        "observations": {"2026-03-14": {"14:30": {}, "14:45": {}}},
    }
    now = loaded(HERE / "valid" / "left-empty.yaml").now
    assert (state.burn_time, state.weights, state.age_at(now)) == (None, (), None)


def test_braces_and_indentation_say_the_same() -> None:
    state = state_of("flow-and-block")
    assert [weight.node.get("value") for weight in state.weights] == ["82 kg", "181 lb"]
    assert [sorted(row.entry) for row in state.rows] == [["pulse"], ["bp"]]


def test_an_hour_that_came_twice_is_told_apart_by_its_offset() -> None:
    state = state_of("clock-changes")
    assert state.burn_time is not None
    since = [row.at - state.burn_time.earliest for row in state.rows]
    assert since == [timedelta(hours=1), timedelta(hours=2), timedelta(hours=3)]


def test_every_value_knows_its_line_and_column() -> None:
    root = state_of("two-entries-in-one-minute").root
    rows = child(root, "observations", "2026-03-14", "14:15")
    assert isinstance(rows, List)
    first, second = rows
    assert isinstance(first, Map)
    assert isinstance(second, Map)
    assert (first.line, first.column) == (8, 9)
    assert (second["pulse"].line, second["pulse"].column) == (9, 25)
    assert (second.key("pulse").line, second.key("pulse").column) == (9, 18)
