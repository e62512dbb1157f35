"""What a receiving nurse reads in the examples: each finding at its age, in its place and in words."""

from __future__ import annotations

from datetime import timedelta

import pytest

from handoff.document.page_one import PageOne, page_one
from handoff.document.schedule import Shift
from handoff.plugin import Flag
from tests.examples.patients import FILES, assessment_of


def shown(name: str, key: str) -> str:
    found = assessment_of(name).item(key)
    assert found is not None
    return found.shown


def first_page(name: str) -> PageOne:
    made = assessment_of(name)
    return page_one(made, Shift(made.now, made.now + timedelta(hours=12), made.state.clock))


def test_due_and_given_of_the_second_day_are_both_counted_from_the_burn() -> None:
    assert shown("ventilated-smoke", "fluid.due_by_now") == "13,303 mL since the burn (formula estimate)"
    assert shown("ventilated-smoke", "fluid.given").startswith("14,383 mL")


def test_cyanide_is_history_on_the_second_day() -> None:
    made = assessment_of("ventilated-smoke")
    assert "airway_watch.tell_prescriber" not in {action.key for action in made.actions}


def test_at_over_sedation_stop_the_opioid_comes_first_and_low_pressure_stands_on_the_page() -> None:
    page = first_page("first-hour")
    assert page.actions[0].what == "Breathing under opioids"
    assert "stop the opioid" in page.tasks[0].text
    assert "Systolic pressure below its line" in [row.what for row in page.actions]


def test_toxic_shock_stands_above_glucose_and_a_late_task_is_named_once() -> None:
    page = first_page("infant-fever")
    names = [row.what for row in page.actions]
    assert names.index("Toxic-shock signs in a child") < names.index("Glucose, low")
    assert "Glucose beyond a line" not in names
    due = " ".join(row.value for row in page.due) + page.more_due
    assert "Reassess area and depth" in due
    assert "Reassessment of area" not in " ".join(row.what for row in page.due) + due


def test_a_child_going_home_is_checked_four_hourly_and_asked_for_no_glucose() -> None:
    made = assessment_of("going-home")
    check = next(action for action in made.actions if action.key == "vital.check")
    assert check.every == timedelta(hours=4)
    assert made.item("fluid.glucose_small_child") is None
    sick = next(one for one in assessment_of("grafted-day-20").actions if one.key == "vital.check")
    assert sick.every == timedelta(hours=1)  # home is planned there too, and she has a fever
    breaths = made.item("vital.resp")
    assert breaths is not None
    assert breaths.flag is Flag.NONE
    assert shown("going-home", "injury.hours_since") == "14 days 4 h"


@pytest.mark.parametrize("name", FILES)
def test_no_key_and_no_half_name_is_printed_as_the_name_of_a_result(name: str) -> None:
    labels = [one.label for one in assessment_of(name).items]
    assert not [label for label in labels if label in ("Fio2", "C reactive protein", "Ecg", "Ph")]


def test_a_site_that_is_taken_from_a_larger_region_says_so() -> None:
    assert "feet (full thickness; taken from the larger region charted whole: ask)" in shown(
        "comfort-decided", "area.special_sites"
    )


def test_an_interval_that_nobody_wrote_says_from_when_it_is_counted() -> None:
    said = shown("infant-fever", "fluid.urine_rate")
    assert "6 mL over 2 h 30 min, counted from 17:00, none charted between" in said


def test_an_old_blood_gas_says_how_old_it_is() -> None:
    assert shown("high-flow", "airway_watch.pf_ratio").endswith("; no gas for 10 h")


def test_the_eye_is_rinsed_before_anybody_is_telephoned() -> None:
    keys = [
        action.key for action in assessment_of("acid-splash").actions if action.key.startswith("chemical.")
    ]
    assert keys == ["chemical.rinse", "chemical.eye", "chemical.hydrofluoric", "chemical.poisons"]
