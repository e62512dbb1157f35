"""A seeded sample of the slips of one key: none changes a figure in silence unless the change is plausible."""

from __future__ import annotations

import pytest

from handoff.state.load import Loaded
from handoff.work import open_text
from tests.chart.charts import HEAD, MOMENTS, NOW, example, setup

from .__main__ import judged
from .judging import FAULT, LEFT, MEANT, SAME_READING, WARNING, Patient
from .making import Slip, neighbours, slips

HOUSE_FIRE = example("house-fire")


def read(text: str) -> Loaded:
    return open_text(text, "patient.yaml", setup(), NOW)


def test_no_slip_of_a_seeded_sample_is_left() -> None:
    outcomes = judged(MOMENTS, 250, 7)
    assert [(name, one) for name, one in outcomes if one.verdict == LEFT] == []
    assert sum(one.verdict == FAULT for _, one in outcomes) > len(outcomes) / 2


def slip(start: str, typed: str, over: str = "", text: str = HOUSE_FIRE, kind: str = "by hand") -> Slip:
    place = text.index(start) + len(start)
    assert text[place:].startswith(over)
    return Slip(kind, place, place + len(over), typed)


@pytest.mark.parametrize(
    ("made", "verdict"),
    [
        (slip("\nclock", ";", over=":"), FAULT),
        (slip("\n  - {", " "), SAME_READING),
        (slip("injury:\n  at: 2026-03-14 13:2", "5", over="0"), MEANT),
        (slip("IV cann", "n"), WARNING),
    ],
)
def test_each_verdict(made: Slip, verdict: str) -> None:
    patient = Patient("house-fire", HOUSE_FIRE, MOMENTS["house-fire"], setup())
    assert patient.judge(made).verdict == verdict


def test_another_unit_that_nobody_warns_of_would_be_left() -> None:
    text = f"{HEAD}results:\n  - {{at: 2026-03-14 15:00, glucose: 91 mg/dL}}\n"
    changed = text.replace("91 mg/dL", "9.1 mg/dL")
    assert Patient("small", text, NOW, setup()).judge(Slip("by hand", 0, len(text), changed)).verdict in (
        LEFT,
        WARNING,
        FAULT,
    )


def test_a_comma_in_a_list_in_brackets_is_what_the_list_is_for() -> None:
    text = f"{HEAD}lines:\n  - {{what: IV cannula 16 G, failed_sites: [left hand foot]}}\n"
    patient = Patient("small", text, NOW, setup())
    assert "a comma" in patient.judge(slip("left hand", ",", text=text)).why


def test_the_slips_of_a_short_text() -> None:
    made = {one.done_to("a: 1\n") for one in slips("a: 1\n")}
    assert {": 1\n", "aa: 1\n", ":a 1\n", "s: 1\n", "a: 2\n", "a: 0\n", "a:: 1\n", "a: 1", "#a: 1\n"} <= made
    assert "a: 1\n" not in made
    assert neighbours("g") == ["f", "h", "t", "b"]


COMMENTED = "injury:\n  at: 2026-03-14 13:20\nlines:\n  - {what: IV cannula 16 G}\n"


@pytest.mark.parametrize(
    ("line", "column"),
    [
        ("#  - {what: IV cannula 16 G}", 4),
        ("  # - left hand", 5),
        ("# pain: 4", 3),
        ("#17:40: {pulse: 80 /min}", 2),
    ],
)
def test_an_entry_behind_a_hash_is_named(line: str, column: int) -> None:
    text = HEAD + line + "\n"
    assert [(one.line, one.column) for one in read(text).unusual] == [(HEAD.count("\n") + 1, column)]


@pytest.mark.parametrize(
    "line", ["# Draft it with: handoff", "# area:   # burns seen", "# two units", "", "#", "# A - b"]
)
def test_a_remark_is_not(line: str) -> None:
    assert read(f"{HEAD}{line}\n").unusual == ()


@pytest.mark.parametrize(
    ("written", "entry"),
    [
        ("  - a\n  summary: |\n    two lines\n    concerns:\n    - none", "'concerns:'"),
        ("  - a\n  summary: |\n    one line    concerns:\n", "'concerns:'"),
        ("  - left hand    - foot\n", "'- f'"),
    ],
)
def test_an_entry_inside_a_text_is_named(written: str, entry: str) -> None:
    text = HEAD.replace(
        "injury: {at: 2026-03-14 13:20}", "injury:\n  at: 2026-03-14 13:20\n  what_happened: TEXT"
    )
    value = written.partition("summary: ")[2] or written.partition("- ")[2]
    found = read(text.replace("TEXT", value.rstrip("\n"))).unusual
    assert [one.what.partition(" stands")[0] for one in found] == [entry]


@pytest.mark.parametrize(
    "value", ["plan: rest", "A - b", '"a  - b"', "|\n    Plan:\n    - rest", "fell  -two steps"]
)
def test_other_texts_are_texts(value: str) -> None:
    text = HEAD.replace(
        "injury: {at: 2026-03-14 13:20}", "injury:\n  at: 2026-03-14 13:20\n  what_happened: TEXT"
    )
    value = value if value != "plan: rest" else '"plan: rest"'
    assert read(text.replace("TEXT", value)).unusual == ()


def test_nor_is_a_line_of_a_text() -> None:
    text = HEAD.replace("injury: {at", "injury:\n  what_happened: |\n    #- fell\n    # by: himself\n  at")
    assert read(text.replace("13:20}", "13:20")).unusual == ()
