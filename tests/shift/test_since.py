"""What changed between two moments: direction, flags, gaps, tasks, and never between two patients."""

from __future__ import annotations

import json
from datetime import timedelta
from pathlib import Path

import pytest
from msgspec.structs import replace

from handoff.document import draft
from handoff.document.changes import Change, Changes
from handoff.document.read_back import text_of
from handoff.items_json import as_json
from handoff.shift.since import WrongOrder, changes
from handoff.shift.snapshot import NotItems, Planned, Seen, Snapshot, snapshot_in, snapshot_of
from tests.conftest import ROOT
from tests.document.fake import STEM, assessment
from tests.document.reading import cells, headings, tables
from tests.shift.helpers import EXAMPLES, assessed, run, small, text_of_example, write

NOW = assessment()
CLOCK = NOW.state.clock
BEFORE = replace(snapshot_of(NOW), at=NOW.now - timedelta(hours=8), items=(), plan=())
FIRE = ROOT / "examples/house-fire.yaml"
AT = EXAMPLES["house-fire"]


def seen(key: str = "one.a", **given: object) -> Seen:
    usual: dict[str, object] = {
        "label": "pulse",
        "system": "circulation",
        "value": 112.0,
        "unit": "/min",
        "shown": "112 /min",
        "flag": "no flag",
        "as_of": None,
    }
    return Seen(key, **{**usual, **given})  # type: ignore[arg-type]


def between(before: tuple[Seen, ...], now: tuple[Seen, ...], **given: object) -> Changes:
    later = replace(BEFORE, at=NOW.now, items=now, **given)  # type: ignore[arg-type]
    return changes(replace(BEFORE, items=before), later, CLOCK)


def rows(before: Seen | None, now: Seen | None) -> list[Change]:
    found = between((before,) if before else (), (now,) if now else ())
    return [row for system in found.systems for row in system.rows]


@pytest.mark.parametrize(
    ("before", "now", "how"),
    [
        ({"value": 112.0, "shown": "112 /min"}, {"value": 118.0, "shown": "118 /min"}, "up"),
        ({"value": 118.0, "shown": "118 /min"}, {"value": 112.0, "shown": "112 /min"}, "down"),
        (
            {"value": "104/62 mmHg", "shown": "104/62 mmHg"},
            {"value": "98/60 mmHg", "shown": "98/60 mmHg"},
            "down",
        ),
        ({"value": "36 C", "shown": "36 C; before: 35.8 C"}, {"value": "36.4 C", "shown": "36.4 C"}, "up"),
        ({"value": "9 mmol/L", "shown": "9 mmol/L"}, {"value": "10.2 mmol/L", "shown": "10.2 mmol/L"}, "up"),
        ({"value": "1,200 mL", "shown": "1,200 mL"}, {"value": "900 mL", "shown": "900 mL"}, "down"),
        ({"value": "-6 mmol/L", "shown": "-6 mmol/L"}, {"value": "-4 mmol/L", "shown": "-4 mmol/L"}, "up"),
        (
            {"value": "8.2 mmol/L", "shown": "8.2 mmol/L"},
            {"value": "148 mg/dL", "shown": "148 mg/dL"},
            "changed",
        ),
        (
            {"value": "alert", "shown": "alert"},
            {"value": "new confusion", "shown": "new confusion"},
            "changed",
        ),
        ({"value": None, "shown": "a"}, {"value": None, "shown": "b"}, "changed"),
    ],
)
def test_a_value_is_printed_from_and_to_with_its_direction(
    before: dict[str, object], now: dict[str, object], how: str
) -> None:
    (row,) = rows(seen(**before), seen(**now))
    assert row.how == how
    assert row.before == str(before["shown"]).partition(";")[0]
    assert row.now == str(now["shown"]).partition(";")[0]


def test_a_value_carries_its_time_and_its_date_where_it_is_of_another_day() -> None:
    old = NOW.now - timedelta(days=1)
    (row,) = rows(seen(as_of=old), seen(value=118.0, shown="118 /min", as_of=NOW.now))
    assert (row.before, row.now) == ("112 /min (19:30 on 13 Mar)", "118 /min (19:30)")


@pytest.mark.parametrize(
    "now",
    [
        {},
        {"as_of": NOW.now},
        {"value": 112.04},
        {"value": "alert", "shown": "alert; not rechecked since 14:15"},
        {"detail": True, "value": 200.0, "shown": "200 /min"},
    ],
)
def test_what_reads_the_same_is_no_change(now: dict[str, object]) -> None:
    before = {"value": "alert", "shown": "alert"} if now.get("value") == "alert" else {}
    assert rows(seen(**before), seen(**now)) == []


@pytest.mark.parametrize(
    ("before", "now", "how"),
    [
        ("no flag", "needs action", "new ACTION"),
        ("no flag", "due for review", "new REVIEW"),
        ("due for review", "needs action", "REVIEW became ACTION"),
        ("needs action", "due for review", "ACTION became REVIEW"),
        ("needs action", "no flag", "ACTION ended"),
        ("not recorded", "needs action", "recorded now, new ACTION"),
        ("not recorded", "no flag", "recorded now"),
        ("no flag", "not recorded", "not recorded now"),
        ("needs action", "not recorded", "not recorded now"),
    ],
)
def test_new_and_ended_flags_and_gaps_are_named_even_where_the_value_stays(
    before: str, now: str, how: str
) -> None:
    assert [row.how for row in rows(seen(flag=before), seen(flag=now))] == [how]


def test_value_and_flag_change_in_one_row() -> None:
    (row,) = rows(seen(), seen(value=140.0, shown="140 /min", flag="needs action"))
    assert row.how == "up, new ACTION"


def test_a_gap_that_stays_is_no_change_and_a_new_one_is() -> None:
    gap = seen(flag="not recorded", value=None, shown="not recorded")
    assert rows(gap, gap) == []
    assert [row.how for row in rows(None, gap)] == ["new, not recorded"]
    assert rows(gap, None) == []


def test_an_item_that_came_or_went_is_listed_with_its_flag() -> None:
    assert rows(None, seen(flag="needs action")) == [Change("Pulse", "", "112 /min", "new, ACTION")]
    assert rows(seen(flag="due for review"), None) == [
        Change("Pulse", "112 /min", "no longer listed", "REVIEW ended")
    ]


def test_numbered_items_are_known_by_what_they_say_and_not_by_their_number_or_day() -> None:
    def line(number: int, day: int, site: str) -> Seen:
        return seen(f"line.{number}", label="cannula", value=site, shown=f"{site}, placed 14 Mar, day {day}")

    found = between((line(1, 1, "left"), line(2, 1, "right")), (line(1, 2, "right"), line(2, 2, "foot")))
    said = [(row.before, row.now, row.how) for system in found.systems for row in system.rows]
    assert said == [
        ("", "foot, placed 14 Mar, day 2", "new"),
        ("left, placed 14 Mar, day 1", "no longer listed", "ended"),
    ]


def test_two_long_texts_that_begin_alike_are_printed_whole() -> None:
    start = "stridor absent, hoarse voice present; " * 4
    (row,) = rows(
        seen(value=None, shown=start + "drooling absent"), seen(value=None, shown=start + "drooling now")
    )
    assert (row.before[-15:], row.now[-12:]) == ("drooling absent", "drooling now")


def test_systems_stand_in_their_order_and_new_actions_first() -> None:
    found = between(
        (seen("a.a"),),
        (
            seen("a.a", value=118.0, shown="118 /min"),
            seen("a.b", label="limb", flag="needs action"),
            seen("a.c", system="airway"),
            seen("a.d", system="a system of an outside plugin"),
        ),
    )
    assert [system.title for system in found.systems] == [
        "Airway",
        "Circulation",
        "A system of an outside plugin",
    ]
    assert [row.what for row in found.systems[1].rows] == ["Limb", "Pulse"]


def test_tasks_that_are_new_or_gone_are_listed_numbered_ones_by_their_text() -> None:
    before = (Planned("airway.check", "look"), Planned("handover.request.1", "ring the surgeon"))
    now = (
        Planned("airway.check", "look harder", "A1"),
        Planned("handover.request.1", "ask for a review", "N1"),
        Planned("handover.request.2", "ring the surgeon", "N2"),
        Planned("pain.score", "score pain", "P1"),
    )
    found = changes(replace(BEFORE, plan=before), replace(BEFORE, plan=now), CLOCK)
    assert found.new_tasks == ("N1 ask for a review", "P1 score pain")
    assert found.ended_tasks == ()
    back = changes(replace(BEFORE, plan=now), replace(BEFORE, plan=before), CLOCK)
    assert back.ended_tasks == ("ask for a review", "score pain")


def test_nothing_changed_is_said_and_says_no_more() -> None:
    assert between((seen(),), (seen(),)).notes == (
        "no value, flag, gap or task changed; that does not say that nothing happened",
    )


def test_an_ended_flag_is_no_comfort_and_another_policy_is_said() -> None:
    assert between((seen(flag="needs action"),), (seen(),)).notes == (
        "a flag that ended does not say that the patient is well",
    )
    found = between((seen(),), (seen(value=9.0, shown="9 /min"),), policy="unit policy")
    assert found.notes == (
        f"the policy was {BEFORE.policy} and is unit policy; a figure may differ for that reason",
    )


def test_the_title_says_since_when_and_how_long() -> None:
    assert between((), ()).title == "What changed since Sat 14 Mar 2026 11:30 (8 h)"


def test_the_newer_file_as_the_earlier_one_is_refused() -> None:
    with pytest.raises(WrongOrder, match="give the newer file first"):
        changes(replace(BEFORE, at=NOW.now), BEFORE, CLOCK)


@pytest.mark.parametrize("name", EXAMPLES)
def test_items_json_gives_back_what_the_assessment_knows(name: str) -> None:
    made = assessed(text_of_example(name), EXAMPLES[name])
    read = snapshot_in(as_json(made), "x.items.json")
    straight = snapshot_of(made)
    assert read.person == straight.person
    assert (read.at, read.policy, read.digest) == (straight.at, straight.policy, straight.digest)
    assert read.items == tuple(replace(item, detail=False) for item in straight.items)
    assert read.plan == tuple(replace(one, ref="") for one in straight.plan)
    found = changes(read, straight, made.state.clock)
    assert (found.systems, found.new_tasks, found.ended_tasks) == ((), (), ())


GOOD = json.loads(as_json(assessed(small(), AT)))


@pytest.mark.parametrize(
    "broken",
    [
        "",
        "{",
        "[]",
        "null",
        "[" * 100_000,
        json.dumps({**GOOD, "patient": None}),
        json.dumps({key: value for key, value in GOOD.items() if key != "patient"}),
        json.dumps({**GOOD, "at": "2026-03-14T19:30"}),
        json.dumps({**GOOD, "at": 3}),
        json.dumps({**GOOD, "items": [3]}),
        json.dumps({**GOOD, "items": None}),
        json.dumps({**GOOD, "items": [{**GOOD["items"][0], "value": {}}]}),
        json.dumps({**GOOD, "actions": [{"key": 1}]}),
    ],
)
def test_what_is_no_items_json_is_refused_in_one_line(broken: str) -> None:
    with pytest.raises(NotItems) as refused:
        snapshot_in(broken, "x.json")
    assert str(refused.value).startswith("x.json ")
    assert "; give " in str(refused.value)


def earlier_text() -> str:
    rows = "observations: {2026-03-14: {15:00: {pulse: 112 /min}}}\n"
    return small(rows)


def later_text() -> str:
    return small("observations: {2026-03-14: {15:00: {pulse: 112 /min}, 19:00: {pulse: 131 /min}}}\n")


def test_an_earlier_state_file_is_read_for_its_last_entry(tmp_path: Path) -> None:
    write(tmp_path, old=earlier_text(), new=later_text())
    done = run("since", tmp_path / "new.yaml", tmp_path / "old.yaml", "--at", AT)
    assert done.code == 0, done.err
    lines = done.out.splitlines()
    assert lines[0] == "Tomas Ferrandel, born 11 Feb 1985, record number HSH-1"
    assert lines[1] == "What changed since Sat 14 Mar 2026 15:00 (4 h 30 min), to Sat 14 Mar 2026 19:30"
    assert "  Pulse: 112 /min (15:00) -> 131 /min (19:00) (up)" in lines


def test_since_names_the_moment_of_an_earlier_state_file(tmp_path: Path) -> None:
    write(tmp_path, old=earlier_text(), new=later_text())
    files = (tmp_path / "new.yaml", tmp_path / "old.yaml", "--at", AT)
    assert "since Sat 14 Mar 2026 16:00" in run("since", *files, "--since", "2026-03-14 16:00").out
    assert run("since", *files, "--since", "soon").code == 2
    assert run("since", *files, "--since", "2026-03-14 14:00").code == 1


def test_an_items_json_of_the_last_draft_is_compared(tmp_path: Path) -> None:
    write(tmp_path, p=earlier_text())
    assert run("draft", tmp_path / "p.yaml", "--at", "2026-03-14 16:00").code == 0
    write(tmp_path, p=later_text())
    items = tmp_path / "p.items.json"
    done = run("since", tmp_path / "p.yaml", items, "--at", AT)
    assert done.code == 0, done.err
    assert "since Sat 14 Mar 2026 16:00 (3 h 30 min)" in done.out
    assert "  Pulse: 112 /min (15:00) -> 131 /min (19:00) (up)" in done.out.splitlines()
    assert run("since", tmp_path / "p.yaml", items, "--at", AT, "--since", "2026-03-14 15:00").code == 2


def test_two_patients_are_never_joined(tmp_path: Path) -> None:
    write(tmp_path, a=small(), b=small(name="Ada Brisk", number="HSH-2"))
    done = run("since", tmp_path / "a.yaml", tmp_path / "b.yaml", "--at", AT)
    assert (done.code, done.out) == (2, "")
    assert "these are not the same patient; nothing was joined" in done.err
    assert "name: Ada Brisk and Tomas Ferrandel" in done.err
    assert "record number: HSH-2 and HSH-1" in done.err
    drafted = run("draft", tmp_path / "a.yaml", "--since", tmp_path / "b.yaml", "--at", AT)
    assert drafted.code == 2
    assert sorted(path.name for path in tmp_path.iterdir()) == ["a.yaml", "b.yaml"]


def test_an_unknown_patient_who_was_identified_is_followed_and_said(tmp_path: Path) -> None:
    unknown = small().replace("name: Tomas Ferrandel, born: 1985-02-11", "name: unknown")
    unknown = unknown.replace("record_number: HSH-1", "temporary: T-7")
    known = small().replace("record_number: HSH-1", "record_number: HSH-1, earlier: T-7")
    write(tmp_path, old=unknown, new=known)
    done = run("since", tmp_path / "new.yaml", tmp_path / "old.yaml", "--at", AT)
    assert done.code == 0, done.err
    assert "temporary T-7 of the earlier file is kept as the earlier identifier" in done.out
    assert "the name was unknown and is now Tomas Ferrandel" in done.out


@pytest.mark.parametrize("content", ["{}", "[3", "handoff: 1\n"])
def test_a_file_that_is_neither_is_named(tmp_path: Path, content: str) -> None:
    write(tmp_path, a=small())
    (tmp_path / "x.json").write_text(content)
    done = run("since", tmp_path / "a.yaml", tmp_path / "x.json", "--at", AT)
    assert done.code == 2
    assert done.err.startswith(f"{tmp_path / 'x.json'} ")
    missing = run("since", tmp_path / "a.yaml", tmp_path / "no.json", "--at", AT)
    assert (missing.code, "no.json" in missing.err) == (2, True)
    assert run("since", tmp_path / "a.yaml", tmp_path / "no.yaml", "--at", AT).code == 2


def test_the_newer_file_given_second_is_said_in_one_line(tmp_path: Path) -> None:
    write(tmp_path, old=earlier_text(), new=later_text())
    done = run("since", tmp_path / "old.yaml", tmp_path / "new.yaml", "--at", "2026-03-14 16:00")
    assert (done.code, done.err.count("\n")) == (2, 1)
    assert "Give the newer file first" in done.err
    faulty = write(tmp_path, bad=small("pulse: 1\n")) / "bad.yaml"
    assert run("since", tmp_path / "old.yaml", faulty, "--at", "2026-03-14 16:00").code == 1


def test_the_draft_shows_what_changed_after_page_one_when_asked() -> None:
    told = Changes(
        "What changed since yesterday",
        ("a note",),
        between((seen(),), (seen(value=131.0, shown="131 /min"),)).systems,
        ("A1 look & <listen>",),
        ("score pain",),
    )
    content = draft(assessment(), STEM, told)[f"{STEM}-handover.docx"]
    assert headings(content, 1)[:2] == ["What changed since yesterday", "Situation"]
    assert cells(tables(content)["Circulation"][0]) == [
        ["Circulation", "Before", "Now", "Change"],
        ["Pulse", "112 /min", "131 /min", "up"],
    ]
    assert cells(tables(content)["New in the care plan"][0])[1] == ["A1 look & <listen>"]
    assert cells(tables(content)["No longer in the care plan"][0])[1] == ["score pain"]
    assert text_of(content).index("DUE OR OVERDUE") < text_of(content).index("a note")


def test_without_since_the_draft_has_no_such_heading() -> None:
    assert "What changed" not in text_of(draft(assessment(), STEM)[f"{STEM}-handover.docx"])


def test_draft_since_writes_it_into_the_handover(tmp_path: Path) -> None:
    write(tmp_path, old=earlier_text(), new=later_text())
    done = run("draft", tmp_path / "new.yaml", "--since", tmp_path / "old.yaml", "--at", AT)
    assert done.code == 0, done.err
    page = text_of((tmp_path / "new-handover.docx").read_bytes())
    assert "What changed since Sat 14 Mar 2026 15:00 (4 h 30 min)" in page
    assert "112 /min (15:00)" in page


def test_the_same_two_files_give_the_same_lines(tmp_path: Path) -> None:
    write(tmp_path, old=earlier_text(), new=later_text())
    first, second = (run("since", tmp_path / "new.yaml", tmp_path / "old.yaml", "--at", AT) for _ in range(2))
    assert first == second


def test_items_json_says_whose_it_is() -> None:
    assert GOOD["patient"] == {
        "name": "Tomas Ferrandel",
        "born": "1985-02-11",
        "identifiers": {"record_number": "HSH-1"},
        "earlier_names": [],
    }
    assert isinstance(snapshot_in(json.dumps(GOOD), "x"), Snapshot)
