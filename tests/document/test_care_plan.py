"""The checklist: rows, references, boxes, and the tags that find them again."""

from __future__ import annotations

from datetime import timedelta
from io import BytesIO

import pytest
from docx import Document
from msgspec.structs import replace

from handoff.document import draft
from handoff.document.care_plan import BLANK_BOXES, BLANK_ROWS
from handoff.document.names import WORD, WORD_2010
from handoff.document.read_back import text_of
from handoff.document.references import references
from handoff.document.schedule import MOST_BOXES, Shift, overdue_slot, slots
from handoff.plugin import Action, System, Urgency
from handoff.policy import Policy
from tests.document.fake import STEM, actions, assessment, at, state
from tests.document.reading import body, cells, headings, tables, tags, text


def action(**given: object) -> Action:
    plain = {"key": "a.b", "area": "Fluid", "text": "Do it", "why": "because", "system": System.FLUID}
    return Action(**{**plain, **given})  # type: ignore[arg-type]


def shift(hours: int = 12) -> Shift:
    patient = state()
    start = at(patient, "19:30")
    return Shift(start, start + timedelta(hours=hours), patient.clock)


def labels(given: Action, hours: int = 12) -> list[str]:
    return [slot.label for slot in slots(given, shift(hours))]


def test_areas_are_headings_with_the_airway_first(plan: bytes) -> None:
    found = headings(plan, 1)
    assert found[:2] == ["Airway", "Observations"]
    assert found[-3:] == ["Planned and awaited", "Added by hand in this shift", "Sources"]


def test_each_row_has_a_reference_a_text_and_a_reason(plan: bytes) -> None:
    rows = cells(tables(plan)["Ref"][0])
    assert rows[0] == ["Ref", "What to do, and why", "When due: tick, time done, initials"]
    assert rows[1][0] == ""  # python-docx does not read inside content controls
    assert "A1" in text_of(plan)
    assert rows[1][1].startswith(
        "NOW Look for voice change, stridor, swelling; head up\nswelling grows for a day [1]"
    )


def test_references_depend_on_the_actions_alone() -> None:
    given = actions(state())
    assert references(given) == references(list(given))
    assert references(given)["fluid.urine"] == "F1"
    assert len(set(references(given).values())) == len(given)


def test_areas_that_begin_alike_get_letters_of_their_own() -> None:
    given = [action(key=f"a.{n}", area=area) for n, area in enumerate(("Fluid", "Family", "Feeding", "Flu"))]
    assert len({ref[0] for ref in references(given).values()}) == 4


def test_no_reference_begins_with_a_letter_that_reads_as_a_digit() -> None:
    given = [action(area="Infection"), action(key="a.c", area="Oedema")]
    assert list(references(given).values()) == ["N1", "E1"]


def test_more_areas_than_letters_still_have_references_of_their_own() -> None:
    given = [action(key=f"a.{n}", area=f"area {n}") for n in range(60)]
    assert len(set(references(given).values())) == 60


def test_an_hourly_task_has_one_box_an_hour() -> None:
    hourly = action(first_due=at(state(), "20:00"), every=timedelta(hours=1))
    assert labels(hourly)[:2] == ["20:00", "21:00"]
    assert len(labels(hourly)) == 12
    assert labels(hourly)[-1] == "07:00"


def test_a_task_every_quarter_of_an_hour_has_a_box_for_each_quarter() -> None:
    often = action(first_due=at(state(), "19:30"), every=timedelta(minutes=15))
    assert labels(often)[:3] == ["19:30", "19:45", "20:00"]
    assert labels(often)[-1] == "07:15"
    assert len(labels(often)) == 48


def test_a_task_that_is_due_more_often_is_ticked_by_the_hour() -> None:
    often = action(first_due=at(state(), "19:30"), every=timedelta(minutes=10))
    assert labels(often)[:2] == ["19:00 (3 checks)", "20:00 (6 checks)"]
    assert labels(often)[-1] == "07:00 (3 checks)"
    assert len(labels(often)) == 13


@pytest.mark.parametrize("minutes", [1, 7, 15, 30, 60, 90, 720])
@pytest.mark.parametrize("hours", [1, 8, 12, 24, 36])
def test_a_row_never_has_more_boxes_than_fit_and_each_label_is_its_own(minutes: int, hours: int) -> None:
    often = action(first_due=at(state(), "19:30"), every=timedelta(minutes=minutes))
    found = slots(often, shift(hours))
    assert 0 < len(found) <= MOST_BOXES
    assert len({slot.stamp for slot in found}) == len(found)


def test_every_check_is_counted_in_some_box() -> None:
    often = action(first_due=at(state(), "19:30"), every=timedelta(minutes=10))
    assert sum(int(label.split("(")[1].split()[0]) for label in labels(often)) == 72


def test_an_overdue_task_has_a_box_for_what_was_missed_and_keeps_its_rhythm() -> None:
    late = action(first_due=at(state(), "18:15"), every=timedelta(hours=1))
    assert [slot.label for slot in overdue_slot(late, shift())] == ["18:15 overdue"]
    assert labels(late)[0] == "20:15"


def test_a_task_of_yesterday_names_the_day() -> None:
    late = action(first_due=at(state(), "18:15", "2026-03-13"))
    assert [slot.label for slot in overdue_slot(late, shift())] == ["18:15 on 13 Mar overdue"]
    assert labels(late) == []


def test_a_task_due_after_the_shift_has_no_box(plan: bytes) -> None:
    after = action(first_due=at(state(), "10:00", "2026-03-16"))
    assert labels(after) == []
    assert "due 10:00 on 16 Mar, after this shift" in text_of(plan)


@pytest.mark.parametrize(
    ("urgency", "label"),
    [(Urgency.NOW, "now"), (Urgency.SHIFT, "this shift"), (Urgency.ONGOING, "through the shift")],
)
def test_a_task_without_a_time_has_one_box(urgency: Urgency, label: str) -> None:
    assert labels(action(urgency=urgency)) == [label]


def test_an_hour_that_the_clock_shows_twice_has_two_boxes_told_apart() -> None:
    patient = state()
    start = patient.clock.read("2026-10-24 23:30")
    night = Shift(start, start + timedelta(hours=4), patient.clock)
    hourly = action(first_due=start, every=timedelta(hours=1))
    assert [slot.label for slot in slots(hourly, night)] == ["23:30", "00:30", "01:30", "01:30 (time 2)"]


def test_boxes_are_real_tick_boxes_and_each_has_room_for_initials(plan: bytes) -> None:
    root = body(plan)
    ticks = [tag for tag in tags(plan) if tag.startswith("row:") and tag.count(":") == 2]
    assert len(list(root.iter(f"{WORD_2010}checkbox"))) == len(ticks) > 70
    assert {f"by:{tag[4:]}" for tag in ticks} <= set(tags(plan))
    assert "row:F1:2000" in ticks
    assert "row:A1:1515-overdue" in ticks


def test_each_row_has_a_bookmark_around_its_reference(plan: bytes) -> None:
    root = body(plan)
    names = [mark.get(f"{WORD}name") for mark in root.iter(f"{WORD}bookmarkStart")]
    assert names[:2] == ["row_A1", "row_A2"]
    assert len(names) == len(actions(state())) + BLANK_ROWS
    assert len(list(root.iter(f"{WORD}bookmarkEnd"))) == len(names)


def test_tags_are_short_enough_and_none_stands_twice(plan: bytes) -> None:
    found = tags(plan)
    assert max(map(len, found)) <= 64
    assert len(set(found)) == len(found)


def test_what_is_to_do_now_stands_at_the_top(plan: bytes) -> None:
    assert "DO NOW: A1, N1" in text_of(plan)


def test_a_plan_without_tasks_says_so() -> None:
    empty = draft(replace(assessment(), actions=()), STEM)[f"{STEM}-care-plan.docx"]
    assert "No task was worked out: write the plan by hand." in text_of(empty)


def test_there_are_lines_to_sign(plan: bytes) -> None:
    assert "sign:nurse:signature" in tags(plan)
    assert "Plan read and taken on" in text_of(plan)


def test_there_are_blank_rows_with_references_bookmarks_and_tags_of_their_own(plan: bytes) -> None:
    found = tags(plan)
    for number in range(1, BLANK_ROWS + 1):
        ref = f"X{number}"
        assert {f"row:{ref}", f"text:{ref}"} <= set(found)
        for box in range(1, BLANK_BOXES + 1):
            assert {f"row:{ref}:{box}", f"due:{ref}:{box}", f"by:{ref}:{box}"} <= set(found)
        assert f"row_{ref}" in [mark.get(f"{WORD}name") for mark in body(plan).iter(f"{WORD}bookmarkStart")]


def test_no_task_of_the_plan_gets_the_letter_of_the_rows_added_by_hand() -> None:
    assert list(references([action(area="X-ray")]).values()) == ["R1"]


def test_why_is_in_small_print_and_the_task_is_not(plan: bytes) -> None:
    styles = Document(BytesIO(plan)).styles
    assert styles["Small"].font.size.pt <= 8 < styles["Key"].font.size.pt
    (why,) = [p for p in body(plan).iter(f"{WORD}p") if text(p).startswith("swelling grows for a day")]
    assert why.find(f"{WORD}pPr/{WORD}pStyle").get(f"{WORD}val") == "Small"


def test_the_same_plan_lies_on_its_side_or_stands_as_the_policy_says() -> None:
    for orientation, turned in (("landscape", True), ("portrait", False)):
        made = draft(assessment(Policy(care_plan_orientation=orientation)), STEM)[f"{STEM}-care-plan.docx"]
        section = Document(BytesIO(made)).sections[0]
        assert (section.page_width > section.page_height) is turned
        assert tags(made) == tags(draft(assessment(), STEM)[f"{STEM}-care-plan.docx"])
