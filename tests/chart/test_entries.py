"""What charting writes: rows, lists, late marks, the date that is meant, and what it refuses or asks."""

from __future__ import annotations

import pytest

from handoff.chart.asking import Ask, Refused
from handoff.chart.charting import Charted
from handoff.chart.effect import changes
from handoff.state.faults import StateFaults
from handoff.state.load import MomentError
from handoff.work import assess_loaded
from tests.chart.charts import HEAD, charted, example, is_kept, rows, setup, tree, words

DAY = "2026-03-14"
ROW = f"{HEAD}observations:\n  {DAY}:\n    15:00: {{by: EM, pulse: 120 /min}}  # on the monitor\n"


def test_an_entry_of_a_new_minute_is_a_new_row() -> None:
    done = charted(HEAD, "urine 35 mL", "pulse 118 /min")
    assert (
        done.text == f"{HEAD}observations:\n  {DAY}:\n    19:30: {{by: EM, urine: 35 mL, pulse: 118 /min}}\n"
    )


def test_another_value_of_the_same_minute_and_author_goes_into_the_row() -> None:
    done = charted(ROW, "resp 20 /min", at="15:00", now=f"{DAY} 15:30")
    assert done.text == ROW.replace("120 /min}", "120 /min, resp: 20 /min}")


@pytest.mark.parametrize(
    ("by", "said"), [("JO", "resp 20 /min"), ("EM", "pulse 118 /min")], ids=["another author", "the same key"]
)
def test_what_cannot_go_into_the_row_stands_beside_it(by: str, said: str) -> None:
    done = charted(ROW, said, at="15:00", by=by, now=f"{DAY} 15:30")
    key, value = said.split(" ", 1)
    assert rows(done.text)["15:00"] == [{"by": "EM", "pulse": "120 /min"}, {"by": by, key: value}]
    assert done.text.endswith("]  # on the monitor\n")
    assert is_kept(ROW, done.text)


def test_a_second_value_of_the_same_minute_is_said() -> None:
    done = charted(ROW, "pulse 118 /min", at="15:00", by="JO", now=f"{DAY} 15:30")
    assert "beside pulse 120 /min charted by EM for the same minute; both stand" in " ".join(done.lines)


@pytest.mark.parametrize(
    "closed", ["confirmed: yes", f"written: {DAY} 16:00", "struck: {by: EM, at: 2026-03-14 15:10, why: x}"]
)
def test_nothing_joins_a_row_with_a_mark_that_speaks_for_all_of_it(closed: str) -> None:
    text = ROW.replace("120 /min}", f"120 /min, {closed}}}")
    done = charted(text, "resp 20 /min", at="15:00", now=f"{DAY} 16:00")
    assert rows(done.text)["15:00"][1] == {"by": "EM", "resp": "20 /min"}


def test_a_row_on_lines_of_its_own_is_extended_and_stood_beside() -> None:
    lines = ("15:00:", "  by: EM  # me", "  pulse: 120 /min", "# later", "15:20: {}\n")
    text = f"{HEAD}observations:\n  {DAY}:\n    " + "\n    ".join(lines)
    joined = charted(text, "resp 20 /min", at="15:00", now=f"{DAY} 15:30")
    assert rows(joined.text)["15:00"] == {"by": "EM", "pulse": "120 /min", "resp": "20 /min"}
    beside = charted(joined.text, "resp 22 /min", at="15:00", by="JO", now=f"{DAY} 15:30")
    assert rows(beside.text)["15:00"] == [
        {"by": "EM", "pulse": "120 /min", "resp": "20 /min"},
        {"by": "JO", "resp": "22 /min"},
    ]
    assert is_kept(text, beside.text)
    assert beside.text.index("# later") > beside.text.index("JO")


def test_pain_at_rest_and_on_movement_are_two_scores_of_one_row() -> None:
    done = charted(HEAD, "pain 3 numeric at rest", "pain 7 numeric on movement")
    assert [one["during"] for one in rows(done.text)["19:30"]["pain"]] == ["rest", "movement"]


def test_the_limbs_of_one_command_stand_in_one_list() -> None:
    done = charted(HEAD, "limb right hand pulse weak", "limb left hand pulse present")
    assert [one["region"] for one in rows(done.text)["19:30"]["limbs"]] == ["right hand", "left hand"]


def test_the_signs_of_one_check_are_one_entry() -> None:
    done = charted(HEAD, "stridor absent", "hoarse present", "give morphine 4 mg IV")
    assert tree(done.text)["airway_watch"]["signs"] == [
        {"at": "2026-03-14 19:30", "by": "EM", "stridor": "absent", "hoarse voice": "present"}
    ]


def test_what_stands_once_keeps_the_earlier_one_readable() -> None:
    text = charted(HEAD, "last food bread and soup", at="15:00", now="2026-03-14 15:00").text
    done = charted(text, "last food tea and toast")
    assert is_kept(text, done.text)
    food = tree(done.text)["nutrition"]["last_food"]
    assert (food["at"], food["what"]) == ("2026-03-14 19:30", "tea and toast")
    assert "bread and soup" in food["corrects"]["value"]
    with pytest.raises(Refused, match="a later 'last_food' stands there; change it by hand"):
        charted(done.text, "last food an apple", at="18:00")


def test_a_step_of_the_survey_is_charted_under_its_name() -> None:
    done = charted(HEAD, "survey back: log-rolled, no burn", "survey head to toe")
    assert tree(done.text)["first_hours"] == {
        "back": {"at": "2026-03-14 19:30", "by": "EM", "found": "log-rolled, no burn"},
        "head to toe": {"at": "2026-03-14 19:30", "by": "EM"},
    }


def test_the_results_of_one_sample_are_one_entry() -> None:
    done = charted(HEAD, "specimen arterial", "ph 7.31", "lactate 2.2 mmol/L")
    assert tree(done.text)["results"] == [
        {"at": "2026-03-14 19:30", "by": "EM", "specimen": "arterial", "ph": "7.31", "lactate": "2.2 mmol/L"}
    ]


@pytest.mark.parametrize(
    ("phrases", "what"),
    [
        (("pulse 118 /min", "hr 118 /min"), "chart the same; keep one"),
        (("pulse 118 /min", "pulse 118 /min"), "stands twice in this command"),
        (("stridor absent", "stridor present"), "contradict each other"),
        (("urine 35 mL", "puls 118 /min"), "did you mean 'pulse'"),
    ],
)
def test_of_a_command_that_cannot_be_charted_nothing_is(phrases: tuple[str, ...], what: str) -> None:
    with pytest.raises(Refused, match=what):
        charted(HEAD, *phrases)


def test_a_time_alone_is_today_and_a_whole_time_is_itself() -> None:
    assert "15:00" in rows(charted(HEAD, "urine 35 mL", at="15:00").text)
    late = charted(HEAD, "urine 35 mL", at="2026-03-14 23:50", now="2026-03-15 00:20")
    assert "23:50" in rows(late.text)


def test_after_midnight_a_time_of_the_evening_is_asked_about() -> None:
    with pytest.raises(Ask) as asked:
        charted(HEAD, "urine 35 mL", at="23:50", now="2026-03-15 00:20")
    (question,) = asked.value.questions
    assert question.asked == (
        "23:50 today has not come yet (it is Sun 15 Mar 2026 00:20). Is it Sat 14 Mar 2026 23:50, yesterday?"
    )
    assert "write '2026-03-14 23:50' for yesterday; today's, '2026-03-15 23:50'" in question.refused
    assert not question.by_confirm, "a date is never guessed"
    done = charted(HEAD, "urine 35 mL", at="23:50", now="2026-03-15 00:20", yes=("yesterday",))
    assert list(rows(done.text)) == ["23:50"]


def test_a_new_day_begins_its_own_rows() -> None:
    done = charted(ROW, "urine 35 mL", at="00:10", now="2026-03-15 00:20")
    assert list(tree(done.text)["observations"]) == [DAY, "2026-03-15"]
    before = charted(done.text, "urine 40 mL", at="2026-03-14 23:00", now="2026-03-15 00:20")
    assert list(rows(before.text)) == ["15:00", "23:00"]


@pytest.mark.parametrize(
    ("at", "what"),
    [
        ("2026-03-14 20:00", "has not come yet"),
        ("25:00", "is not a time of the calendar"),
        ("9:15", "write hours and minutes with two digits"),
        ("half past", "write 2026-03-14 14:30"),
        ("13:00", "is before the burn"),
        ("2026-02-30 10:00", "is not a time of the calendar"),
    ],
)
def test_a_time_that_cannot_be_is_refused(at: str, what: str) -> None:
    with pytest.raises(Refused, match=what):
        charted(HEAD, "urine 35 mL", at=at)


def test_an_hour_that_happened_twice_keeps_its_offset() -> None:
    head = HEAD.replace("2026-03-14 13:20", "2026-10-24 13:20")
    now = "2026-10-25 03:00"
    with pytest.raises(Refused, match="happened twice"):
        charted(head, "urine 35 mL", at="01:30", now=now)
    done = charted(head, "urine 35 mL", "give morphine 4 mg IV", at="01:30+00:00", now=now)
    again = charted(done.text, "urine 36 mL", at="01:30+01:00", now=now)
    assert list(rows(again.text, "2026-10-25")) == ["01:30+01:00", "01:30+00:00"]
    assert tree(done.text)["pain"]["doses"][0]["at"] == "2026-10-25 01:30+00:00"


def test_an_hour_that_never_was_is_refused_with_both_ways_to_write_it() -> None:
    with pytest.raises(Refused, match="did not exist"):
        charted(HEAD, "urine 35 mL", at="2026-03-29 01:30", now="2026-03-29 05:00")


def test_what_is_written_long_after_is_marked_late() -> None:
    done = charted(ROW, "resp 20 /min", "give morphine 4 mg IV", "lactate 2 mmol/L", at="15:00")
    written = {"written": "2026-03-14 19:30"}
    assert rows(done.text)["15:00"][1] == {"by": "EM", "resp": "20 /min", **written}, "beside, never inside"
    told = tree(done.text)
    assert written.items() <= told["pain"]["doses"][0].items()
    assert written.items() <= told["results"][0].items()
    assert done.lines[0] == (
        "charted for Sat 14 Mar 2026 15:00 by EM, late entry (written Sat 14 Mar 2026 19:30):"
    )
    assert "written" not in charted(ROW, "resp 20 /min", at="18:30").text, "an hour is not late yet"


def test_the_file_has_to_be_without_faults_first() -> None:
    with pytest.raises(StateFaults) as faults:
        charted(f"{HEAD}pateint: x\n", "urine 35 mL")
    assert faults.value.faults[0].line == 5


def test_a_moment_that_is_none_is_said() -> None:
    with pytest.raises(MomentError):
        charted(HEAD, "urine 35 mL", now="soon")


def test_a_fault_of_the_new_entry_is_said_of_its_phrase() -> None:
    with pytest.raises(Refused) as refused:
        charted(example("house-fire"), "urine 35 mL", "pulse 400 /min", "pain 12 numeric at rest")
    assert refused.value.lines == (
        "'pulse 400 /min': 400 /min is not possible here (0 /min to 350 /min); check the figure and the unit",
    )
    with pytest.raises(Refused, match=r"^'pain 12 numeric at rest': 12 is outside the numeric rating scale"):
        charted(example("house-fire"), "urine 35 mL", "pain 12 numeric at rest")


def test_an_unusual_value_is_asked_about_and_marked_as_checked() -> None:
    with pytest.raises(Ask) as asked:
        charted(ROW, "pulse 230 /min", "resp 20 /min", at="15:00", now=f"{DAY} 15:05", yes=("again",))
    (question,) = asked.value.questions
    assert question.asked == "pulse 230 /min: 230 /min is unusual (outside 30 /min to 220 /min). Is it right?"
    assert question.by_confirm
    done = charted(HEAD, "pulse 230 /min", "resp 20 /min", at="15:00", now=f"{DAY} 15:05", yes=("unusual",))
    assert rows(done.text)["15:00"] == {
        "by": "EM",
        "pulse": {"value": "230 /min", "confirmed": "yes"},
        "resp": "20 /min",
    }
    assert done.after.unusual == ()


def test_a_mark_for_a_whole_entry_confirms_nothing_else() -> None:
    done = charted(HEAD, "urine 3000 mL", "resp 20 /min", yes=("unusual",))
    assert rows(done.text)["19:30"] == [
        {"by": "EM", "resp": "20 /min"},
        {"by": "EM", "urine": "3000 mL", "confirmed": "yes"},
    ] or rows(done.text)["19:30"] == [
        {"by": "EM", "urine": "3000 mL", "confirmed": "yes"},
        {"by": "EM", "resp": "20 /min"},
    ]
    assert done.after.unusual == ()


def test_an_unusual_dose_is_asked_about_by_the_plugin_that_knows_it() -> None:
    with pytest.raises(Ask, match="1 questions"):
        charted(HEAD, "give morphine 100 mg IV")
    done = charted(HEAD, "give morphine 100 mg IV", yes=("unusual",))
    assert tree(done.text)["pain"]["doses"][0]["confirmed"] == "yes"
    assert done.after.unusual == ()


def test_what_was_unusual_before_is_not_asked_about_again() -> None:
    text = ROW.replace("120 /min}", "230 /min}")
    done = charted(text, "resp 20 /min", at="15:00", by="JO", now=f"{DAY} 15:05")
    assert [fault.what for fault in done.after.unusual] == [fault.what for fault in done.before.unusual]


@pytest.mark.parametrize("by", ["EM", "JO"])
def test_the_same_value_of_the_same_minute_is_asked_about(by: str) -> None:
    with pytest.raises(Ask) as asked:
        charted(ROW, "pulse 120 /min", at="15:00", by=by, now=f"{DAY} 15:05")
    (question,) = asked.value.questions
    assert question.asked == (
        "pulse 120 /min is charted already for Sat 14 Mar 2026 15:00 by EM. Chart it a second time?"
    )
    done = charted(ROW, "pulse 120 /min", at="15:00", by=by, now=f"{DAY} 15:05", yes=("again",))
    assert len(rows(done.text)["15:00"]) == 2


def test_the_same_dose_of_the_same_minute_is_asked_about_whoever_charts_it() -> None:
    text = charted(HEAD, "give morphine 4 mg IV").text
    for by in ("EM", "JO"):
        with pytest.raises(Ask, match="1 questions"):
            charted(text, "give morphine 4 mg IV", by=by)
    assert len(tree(charted(text, "give morphine 3 mg IV").text)["pain"]["doses"]) == 2


@pytest.mark.parametrize("by", ["EM", "E. Marsh, RN", "No", 'O\'Brien: "Pat"', "NO", "Zoë"])
def test_whoever_charts_is_written_so_that_it_is_read_back(by: str) -> None:
    assert rows(charted(HEAD, "urine 35 mL", by=by).text)["19:30"]["by"] == by


def test_a_name_that_cannot_be_printed_is_refused() -> None:
    with pytest.raises(Refused, match="--by holds a character that cannot be printed"):
        charted(HEAD, "urine 35 mL", by="E\x07M")


@pytest.mark.parametrize(
    "note",
    ["a, b: c # d", "{x} [y]", "\"quoted\" and 'quoted'", "back\\slash", "- dash", "@ at", "é 🙂 مرحبا"],
)
def test_a_note_in_any_words_is_read_back_as_it_was_said(note: str) -> None:
    assert rows(charted(HEAD, f"note {note}").text)["19:30"]["note"] == note


def said(done: Charted) -> list[str]:
    before, after = assess_loaded(done.before, setup()), assess_loaded(done.after, setup())
    return list(changes(before, after, words().totals))


def test_what_changed_is_said_with_what_it_was() -> None:
    done = charted(example("house-fire"), "urine 20 mL", "give paracetamol 1 g IV", at="19:30")
    lines = said(done)
    assert any(line.startswith("Paracetamol in 24 h") and line.endswith("(was: 1,000 mg)") for line in lines)
    assert any("mL/kg/h" in line and "(was: 0.44 mL/kg/h" in line for line in lines)
    assert all("\n" not in line and len(line) < 300 for line in lines)


def test_a_new_flag_is_said_first() -> None:
    lines = said(charted(example("house-fire"), "stridor present", "pulse 140 /min"))
    assert lines[0].startswith(("ACTION: ", "REVIEW: "))
    assert said(charted(example("house-fire"), "note mother at the bedside")) == []
