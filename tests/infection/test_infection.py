"""Temperature, triggers, toxic-shock prompts, lines and antibiotics as the nurse meets them."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, faults_of, item, state_text

NAMES = ["area", "infection"]
DAYS_AGO = {"at": "2026-03-08 08:00"}
CHILD = {"born": "2023-02-11"}
NO_ILLNESS = {"conditions": ["none of these"]}
SEPTIC = {"temp": "39.5 C", "pulse": "130 /min", "resp": "30 /min"}
LARGE = [
    {
        "at": "2026-03-14 09:00",
        "method": "lund-browder",
        "burns": [{"region": "trunk", "of_region": "100 %", "depth": "deep partial"}],
    }
]


def made(rows: dict[str, Any] | None = None, **more: Any) -> Any:
    choices = more.pop("choices", None)
    return assessed(NAMES, state_text(rows, **more), choices=choices)


def test_cold_is_on_page_one_and_is_measured_again_every_half_hour() -> None:
    found = made({"19:00": {"temp": "35.4 C"}})
    assert item(found, "infection.temperature").rank == 50
    warm = action(found, "infection.warm")
    assert (warm.urgency, warm.every) == (Urgency.NOW, timedelta(minutes=30))
    assert "35.4 C at 19:00 is cold" in warm.why


def test_a_large_burn_is_kept_warm_before_it_is_cold() -> None:
    warm = action(made({"19:00": {"temp": "36.8 C"}}, area=LARGE), "infection.warm")
    assert (warm.urgency, warm.every) == (Urgency.ONGOING, None)
    assert "is burned" in warm.why


def test_a_small_burn_that_is_warm_has_no_line_about_warming() -> None:
    assert "infection.warm" not in action_keys(made({"19:00": {"temp": "36.8 C"}}))


def test_a_skin_reading_is_said_not_to_be_core() -> None:
    for site, said in (("axillary", True), ("bladder", False)):
        found = item(made({"19:00": {"temp": {"value": "36.8 C", "site": site}}}), "infection.temperature")
        assert any("not a core temperature" in caution for caution in found.cautions) is said


def test_a_cold_room_is_a_caution_from_memory() -> None:
    for room, said in (("27.9 C", True), ("28 C", False)):
        found = item(made({"19:00": {"temp": "36.8 C", "room": room}}), "infection.temperature")
        assert any("from memory" in caution for caution in found.cautions) is said


def test_fahrenheit_is_judged_in_celsius() -> None:
    assert item(made({"19:00": {"temp": "96.7 F"}}), "infection.temperature").flag is Flag.ACTION  # 35.94 C
    assert item(made({"19:00": {"temp": "96.8 F"}}), "infection.temperature").flag is Flag.NONE  # 36.0 C


@pytest.mark.parametrize(("born", "hot"), [("1985-02-11", "38.9 C"), ("2023-02-11", "38.8 C")])
def test_fever_is_due_for_review_above_the_line_of_the_age(born: str, hot: str) -> None:
    patient = {"born": born}
    assert item(made({"19:00": {"temp": hot}}, patient=patient), "infection.temperature").flag is Flag.REVIEW
    at_line = {"19:00": {"temp": f"{float(hot[:4]) - 0.1:.1f} C"}}
    assert item(made(at_line, patient=patient), "infection.temperature").flag is Flag.NONE


def test_no_temperature_is_left_to_the_vital_signs_to_say() -> None:
    assert made().item("infection.temperature") is None


def test_three_triggers_after_the_first_day_ask_for_a_look_now() -> None:
    found = made({"19:00": SEPTIC}, injury=DAYS_AGO)
    assert (item(found, "infection.sepsis").flag, item(found, "infection.sepsis").rank) == (Flag.ACTION, 43)
    look = action(found, "infection.look_for_it")
    assert look.urgency is Urgency.NOW
    assert "temperature, fast pulse, fast breathing" in look.why


def test_the_same_in_the_first_day_is_only_due_for_review() -> None:
    for burn, early in (("2026-03-13 19:31", True), ("2026-03-13 19:30", False)):
        found = made({"19:00": SEPTIC}, injury={"at": burn})
        sepsis = item(found, "infection.sepsis")
        assert (sepsis.flag is Flag.REVIEW, sepsis.rank is None) == (early, early)
        assert ("infection.look_for_it" in action_keys(found)) is not early


def test_two_triggers_flag_nothing() -> None:
    found = made({"19:00": {**SEPTIC, "resp": "20 /min"}}, injury=DAYS_AGO)
    assert (item(found, "infection.sepsis").value, item(found, "infection.sepsis").flag) == (2, Flag.NONE)


def test_a_row_counts_once_however_many_ways_it_is_met() -> None:
    results = [{"at": "2026-03-14 06:00", "glucose": "300 mg/dL"}]
    rows = {"06:00": {"insulin": "8 units/h"}, "18:00": {"insulin": "12 units/h"}}
    found = made(rows, injury=DAYS_AGO, results=results, patient=NO_ILLNESS)
    assert item(found, "infection.sepsis").value == 1


@pytest.mark.parametrize(("later", "met"), [("5 units/h", 0), ("5.1 units/h", 1)])
def test_insulin_up_by_more_than_a_quarter_in_a_day_meets_its_row(later: str, met: int) -> None:
    rows = {"06:00": {"insulin": "4 units/h"}, "18:00": {"insulin": later, "pulse": "80 /min"}}
    results = [{"at": "2026-03-14 06:00", "glucose": "100 mg/dL"}]
    found = made(rows, injury=DAYS_AGO, results=results, patient=NO_ILLNESS)
    assert item(found, "infection.sepsis").value == met


def test_signs_older_than_a_day_are_not_judged() -> None:
    for at, met in (("2026-03-13 19:30", 1), ("2026-03-13 19:29", None)):
        results = [{"at": at, "platelets": "50 x10^9/L"}]
        found = item(made(injury=DAYS_AGO, results=results), "infection.sepsis")
        assert found.value == met
    assert found.flag is Flag.NOT_RECORDED


def test_diabetes_not_recorded_leaves_the_glucose_row_open() -> None:
    results = [{"at": "2026-03-14 06:00", "glucose": "300 mg/dL", "platelets": "200 x10^9/L"}]
    assert (
        "whether there is diabetes" in item(made(injury=DAYS_AGO, results=results), "infection.sepsis").shown
    )


def test_a_ventilated_patient_is_judged_by_minute_ventilation() -> None:
    events = [{"at": "2026-03-09 08:00", "what": "intubation"}]
    rows = {"18:00": {"resp": "30 /min", "minute_ventilation": "12.1 L/min"}}
    assert item(made(rows, injury=DAYS_AGO, events=events), "infection.sepsis").value == 1
    rows = {"18:00": {"resp": "30 /min", "minute_ventilation": "12 L/min"}}
    assert item(made(rows, injury=DAYS_AGO, events=events), "infection.sepsis").value == 0
    events.append({"at": "2026-03-10 08:00", "what": "extubation"})
    assert item(made(rows, injury=DAYS_AGO, events=events), "infection.sepsis").value == 1


def test_the_rows_for_children_are_from_memory_and_flag_nothing_by_themselves() -> None:
    block = {"feeding_not_possible": [{"from": "2026-03-12 08:00", "why": "diarrhoea"}]}
    results = [{"at": "2026-03-14 06:00", "glucose": "300 mg/dL"}]
    more: dict[str, Any] = {
        "patient": {**CHILD, **NO_ILLNESS},
        "injury": DAYS_AGO,
        "infection": block,
        "results": results,
    }
    found = item(made({"18:00": {"temp": "39.1 C"}}, **more), "infection.sepsis")
    assert (found.value, found.flag) == (3, Flag.NONE)
    named = made({"18:00": {"temp": "39.1 C"}}, choices={"infection.sepsis_list": "aba-2007"}, **more)
    assert item(named, "infection.sepsis").flag is Flag.ACTION


def test_lists_for_adults_are_not_used_for_children() -> None:
    found = made(
        {"19:00": SEPTIC}, patient=CHILD, injury=DAYS_AGO, choices={"infection.sepsis_list": "qsofa-2016"}
    )
    assert found.item("infection.sepsis") is None


def test_a_child_is_looked_at_for_toxic_shock_and_an_adult_is_not() -> None:
    child = made({"19:00": {"temp": "37.5 C"}}, patient=CHILD)
    assert item(child, "infection.toxic_shock").flag is Flag.NOT_RECORDED
    look = action(child, "infection.toxic_shock_look")
    assert look.every == timedelta(hours=4)
    adult = made({"19:00": {"temp": "39.5 C"}})
    assert adult.item("infection.toxic_shock") is None
    assert not any("toxic" in key for key in action_keys(adult))


def test_a_look_older_than_its_interval_is_due_and_a_later_look_replaces_an_earlier_one() -> None:
    signs = [{"at": "2026-03-14 12:00", "rash": "present"}, {"at": "2026-03-14 15:29", "rash": "absent"}]
    found = made(patient=CHILD, infection={"toxic_shock": signs})
    assert item(found, "infection.toxic_shock").flag is Flag.REVIEW
    signs[1]["at"] = "2026-03-14 15:30"
    found = made(patient=CHILD, infection={"toxic_shock": signs})
    assert item(found, "infection.toxic_shock").flag is Flag.NONE
    assert "infection.toxic_shock_call" not in action_keys(found)


def test_a_sign_of_toxic_shock_calls_the_childrens_doctor_now() -> None:
    signs = [{"at": "2026-03-14 18:00", "sudden change": "present"}]
    found = made(patient=CHILD, infection={"toxic_shock": signs})
    assert item(found, "infection.toxic_shock").rank == 34
    assert action(found, "infection.toxic_shock_call").urgency is Urgency.NOW


def test_a_line_without_a_date_is_due_for_review_and_a_removed_one_is_gone() -> None:
    lines = [
        {"what": "IV cannula", "site": "left hand"},
        {"what": "arterial line", "placed": "2026-03-12 08:00", "removed": "2026-03-14 08:00"},
    ]
    found = item(made(lines=lines), "infection.line_days")
    assert (found.value, found.flag) == (None, Flag.REVIEW)
    assert "arterial" not in found.shown


def test_the_day_of_a_line_follows_the_calendar_of_the_place() -> None:
    lines = [{"what": "IV cannula", "placed": "2026-03-28 23:59"}]
    text = state_text(lines=lines, injury={"at": "2026-03-28 20:00"})
    found = item(assessed(NAMES, text, at="2026-03-29 02:00"), "infection.line_days")  # the clocks go forward
    assert found.value == 2


def test_an_antibiotic_with_a_reason_is_only_shown() -> None:
    block = {"antibiotics": [{"drug": "flucloxacillin", "started": "2026-03-14 10:00", "why": "treatment"}]}
    assert item(made(infection=block), "infection.antibiotics").flag is Flag.NONE
    block["antibiotics"][0]["review"] = "2026-03-14 19:00"
    found = made(infection=block)
    assert "overdue" in item(found, "infection.antibiotics").shown
    assert "infection.ask_antibiotic" in action_keys(found)


def test_no_antibiotic_charted_brings_the_prompt_and_no_flag() -> None:
    found = item(made(), "infection.antibiotics")
    assert (found.flag, found.detail) == (Flag.NONE, True)
    assert "no routine systemic prophylaxis" in found.shown


def test_comfort_as_the_goal_of_care_asks_for_nothing() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}, **CHILD}
    block = {"toxic_shock": [{"at": "2026-03-14 18:00", "rash": "present"}]}
    lines = [{"what": "IV cannula", "through_burn": "yes"}]
    found = made(
        {"19:00": {**SEPTIC, "temp": "34 C"}}, patient=comfort, injury=DAYS_AGO, infection=block, lines=lines
    )
    assert action_keys(found) == []
    assert all(one.rank is None for one in found.items if one.key.startswith("infection"))
    assert all(one.flag is not Flag.ACTION for one in found.items if one.key.startswith("infection"))


def test_an_insulin_rate_in_another_unit_is_refused() -> None:
    assert any("insulin" in fault for fault in faults_of(NAMES, state_text({"18:00": {"insulin": "3 kg"}})))


def test_the_first_day_and_rows_from_memory_are_said_as_cautions() -> None:
    early = item(made({"19:00": SEPTIC}), "infection.sepsis")
    assert any("burn shock" in caution for caution in early.cautions)
    late = item(made({"19:00": SEPTIC}, injury=DAYS_AGO), "infection.sepsis")
    assert not any("burn shock" in caution for caution in late.cautions)
    assert not any("from memory" in caution for caution in late.cautions)
    child = item(made({"19:00": SEPTIC}, injury=DAYS_AGO, patient=CHILD), "infection.sepsis")
    assert any("from memory" in caution for caution in child.cautions)


def test_without_a_time_of_burn_platelets_cannot_be_judged() -> None:
    found = item(made({"19:00": SEPTIC}, injury={"at": None}), "infection.sepsis")
    assert "low platelets (time of burn not recorded)" in found.shown
    assert found.flag is Flag.ACTION


def test_no_sign_at_all_is_left_to_the_vital_signs_in_the_first_day() -> None:
    assert made().item("infection.sepsis") is None
    assert made(injury={"at": None}).item("infection.sepsis") is None
    assert item(made(injury=DAYS_AGO), "infection.sepsis").flag is Flag.NOT_RECORDED


def test_the_question_about_every_line_is_one_line_of_the_care_plan() -> None:
    lines = [
        {"what": "arterial line", "site": "left radial", "placed": "2026-03-12 09:00"},
        {
            "what": "urinary catheter",
            "site": "urethra",
            "placed": "2026-03-14 09:00",
            "removed": "2026-03-14 10:00",
        },
    ]
    asked = action(made(lines=lines), "infection.line_need")
    assert "arterial line" in asked.text
    assert "urinary catheter" not in asked.text
    assert asked.every == timedelta(hours=24)
    comfort = {"resuscitation": {"decision": "comfort care"}}
    assert "infection.line_need" not in action_keys(made(lines=lines, patient=comfort))
