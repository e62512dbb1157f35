"""The survey says what was done, what was left, and never more."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, faults_of, item, state_text

NAMES = ["first_hours"]
STEPS = (
    "airway and neck",
    "breathing",
    "circulation and bleeding",
    "consciousness",
    "undressed and kept warm",
    "signs in full",
    "comfort",
    "history",
    "head to toe",
    "back",
)
DONE = {"at": "2026-03-14 09:00", "by": "EM", "found": "as charted"}


def made(*names: str, at: str = "2026-03-14 19:30", **more: Any) -> Any:
    block = {name: dict(DONE) for name in names}
    block.update(more.pop("steps", {}))
    return assessed(NAMES, state_text(**({"first_hours": block} if block else {}), **more), at=at)


def test_a_finished_survey_asks_for_nothing() -> None:
    found = made(*STEPS)
    assert (item(found, "first_hours.survey").value, item(found, "first_hours.survey").flag) == (
        10,
        Flag.NONE,
    )
    assert action_keys(found) == []


@pytest.mark.parametrize("missing", [name for name in STEPS if name != "back"])
def test_each_missing_step_is_named(missing: str) -> None:
    found = made(*(name for name in STEPS if name != missing))
    assert item(found, "first_hours.survey").flag is Flag.NOT_RECORDED
    assert action(found, "first_hours.finish").text.endswith(missing)
    assert "first_hours.inspect_back" not in action_keys(found)


def test_the_back_is_asked_about_by_itself() -> None:
    found = made(*STEPS[:-1])
    assert item(found, "first_hours.survey").flag is Flag.REVIEW
    assert action_keys(found) == ["first_hours.inspect_back"]
    assert action(found, "first_hours.inspect_back").urgency is Urgency.SHIFT


def test_a_survey_not_begun_is_one_line_of_the_care_plan() -> None:
    found = made()
    assert action_keys(found) == ["first_hours.finish"]
    assert "back (log-roll with enough hands)" in action(found, "first_hours.finish").text


def test_of_an_unknown_patient_the_survey_is_for_now() -> None:
    reading = {"19:00": {"pulse": "80 /min"}}
    known = action(assessed(NAMES, state_text(reading)), "first_hours.finish")
    assert (known.urgency, known.why) == (Urgency.SHIFT, "not charted step by step in first_hours")
    assert action(made(), "first_hours.finish").urgency is Urgency.NOW
    undated = assessed(NAMES, state_text(reading, injury={"at": None}))
    assert action(undated, "first_hours.finish").urgency is Urgency.NOW


def test_a_step_left_with_a_reason_is_not_done() -> None:
    left = {"back": {"at": "2026-03-14 09:00", "not_done": "spine not yet cleared"}}
    found = made(*STEPS[:-1], steps=left)
    assert item(found, "first_hours.survey").value == 9
    assert "not done: spine not yet cleared" in item(found, "first_hours.back").shown
    assert action_keys(found) == ["first_hours.inspect_back"]


def test_a_step_struck_out_is_not_recorded() -> None:
    struck = {"by": "EM", "at": "2026-03-14 10:00", "why": "wrong patient"}
    found = made(*STEPS[:-1], steps={"back": {**DONE, "struck": struck}})
    assert found.item("first_hours.back") is None
    assert item(found, "first_hours.survey").value == 9


def test_after_its_window_it_is_asked_about_only_where_it_was_begun() -> None:
    assert made(at="2026-03-15 08:00").item("first_hours.survey") is not None
    late = made(at="2026-03-15 08:01")
    assert (late.items, action_keys(late)) == ((), [])
    assert made("history", at="2026-03-15 08:01").item("first_hours.survey") is not None


def test_with_no_time_of_burn_it_is_asked_about() -> None:
    assert item(made(injury={"at": None}), "first_hours.survey").flag is Flag.NOT_RECORDED


def test_comfort_as_the_goal_of_care_asks_for_nothing() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    assert made(patient=comfort).items == ()
    found = made("history", patient=comfort)
    assert item(found, "first_hours.survey").flag is Flag.NONE
    assert action_keys(found) == []


def test_a_step_without_its_time_is_refused() -> None:
    said = faults_of(NAMES, state_text(first_hours={"back": {"found": "blisters"}}))
    assert any("first_hours.back" in fault and "'at' is missing" in fault for fault in said)
