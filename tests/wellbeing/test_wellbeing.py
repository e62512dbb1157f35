"""Mind, people and going home; comfort leads where it is the goal."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["wellbeing"]
COMFORT = {"resuscitation": {"decision": "comfort care"}}
LATE = {"injury": {"at": "2026-03-10 08:00"}}


def made(block: dict[str, Any] | None = None, *, at: str = "2026-03-14 19:30", **more: Any) -> Any:
    if block:
        more["wellbeing"] = block
    return assessed(NAMES, state_text(**more), at=at)


def test_in_the_first_day_nothing_charted_is_nothing_asked() -> None:
    found = made()
    assert (found.items, found.actions) == ((), ())
    assert made(at="2026-03-15 08:00").items == ()


def test_from_the_second_day_mood_and_sleep_are_asked_about() -> None:
    found = made(at="2026-03-15 08:01")
    assert [one.key for one in found.items] == ["wellbeing.mood", "wellbeing.sleep"]
    assert all(one.flag is Flag.NOT_RECORDED for one in found.items)
    assert action(found, "wellbeing.ask").every == timedelta(hours=24)


@pytest.mark.parametrize(("distress", "severe"), [("severe", True), ("some", False), ("not assessed", False)])
def test_severe_distress_is_told_today(distress: str, severe: bool) -> None:
    found = made({"mood": [{"at": "2026-03-14 10:00", "distress": distress, "found": "sees the fire again"}]})
    assert (item(found, "wellbeing.mood").flag is Flag.REVIEW) is severe
    assert ("wellbeing.distress" in action_keys(found)) is severe
    assert "sees the fire again" in item(found, "wellbeing.mood").shown


def test_a_later_mood_replaces_an_earlier_one() -> None:
    rows = [{"at": "2026-03-14 10:00", "distress": "severe"}, {"at": "2026-03-14 18:00", "distress": "some"}]
    assert "wellbeing.distress" not in action_keys(made({"mood": rows}))


def test_a_positive_screen_for_confusion_needs_action() -> None:
    found = made({"confusion_screen": [{"at": "2026-03-14 10:00", "tool": "local", "result": "positive"}]})
    assert item(found, "wellbeing.confusion").flag is Flag.ACTION
    assert action(found, "wellbeing.confusion_call").urgency is Urgency.NOW


def test_what_is_plainly_charted_is_repeated() -> None:
    block = {"body_image": "has not looked yet", "spiritual": "asked, none", "visitors": "sister only"}
    found = made(block)
    for key, said in block.items():
        assert item(found, f"wellbeing.{key}").shown == said
    slept = made({"sleep": [{"at": "2026-03-14 07:00", "slept": "3 h", "found": "itch"}]})
    assert item(slept, "wellbeing.sleep").shown == "slept 3 h; itch"


def test_teaching_is_asked_about_three_days_before_going_home() -> None:
    for day, near in (("2026-03-17", True), ("2026-03-18", False)):
        found = made({"discharge": {"planned": day, "needs": ["a chair for the shower"]}}, **LATE)
        assert ("wellbeing.teach" in action_keys(found)) is near
        assert ("wellbeing.need.1" in action_keys(found)) is near
        assert (item(found, "wellbeing.discharge").flag is Flag.REVIEW) is near


def test_everything_shown_back_leaves_nothing_to_teach() -> None:
    topics = ("wound care", "moving and splints", "scar and sun", "medicines", "danger signs")
    taught = [{"topic": topic, "shown_back": "yes"} for topic in topics]
    found = made({"teaching": taught, "discharge": {"planned": "2026-03-15"}}, **LATE)
    assert item(found, "wellbeing.teaching").flag is Flag.NONE
    assert "wellbeing.teach" not in action_keys(found)


def test_comfort_not_talked_over_is_a_gap_on_page_one() -> None:
    found = made(patient=COMFORT)
    assert (item(found, "wellbeing.comfort").flag, item(found, "wellbeing.comfort").rank) == (
        Flag.NOT_RECORDED,
        60,
    )
    assert action(found, "wellbeing.comfort_ask").urgency is Urgency.NOW
    assert action(found, "wellbeing.comfort_round").every == timedelta(hours=2)
    assert action(found, "wellbeing.comfort_medicines").urgency is Urgency.NOW


def test_comfort_talked_over_with_medicines_ready_asks_only_for_its_round() -> None:
    block = {"comfort": {"matters": ["no more needles"], "agreed_with": "patient", "medicines_ready": "yes"}}
    found = made(block, patient=COMFORT)
    assert (item(found, "wellbeing.comfort").flag, item(found, "wellbeing.comfort").rank) == (Flag.NONE, None)
    assert action_keys(found) == ["wellbeing.comfort_round"]


def test_without_that_goal_nothing_of_comfort_is_asked() -> None:
    assert not [key for key in action_keys(made(**LATE)) if "comfort" in key]


def test_comfort_leaves_teaching_for_home_out() -> None:
    found = made({"discharge": {"planned": "2026-03-15", "needs": ["x"]}}, patient=COMFORT, **LATE)
    assert not {"wellbeing.teach", "wellbeing.need.1"} & set(action_keys(found))
