"""Food, feed, tube, bowels and glucose, only where they concern this patient."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["area", "infection", "nutrition"]
FEED = [{"from": "2026-03-14 12:00", "rate": "40 mL/h"}]
COMFORT = {"resuscitation": {"decision": "comfort care"}}
LATE = {"injury": {"at": "2026-03-10 08:00"}}


def made(
    block: dict[str, Any] | None = None, rows: Any = None, *, names: list[str] = NAMES, **more: Any
) -> Any:
    if block:
        more["nutrition"] = block
    return assessed(names, state_text(rows, **more))


def mine(found: Any) -> list[str]:
    return [one.key for one in found.items if one.key.startswith("nutrition")]


def test_in_the_first_day_nothing_charted_leaves_last_food_a_gap_and_asks_for_nothing() -> None:
    found = made()
    assert mine(found) == ["nutrition.last_food"]
    assert not [key for key in action_keys(found) if key.startswith("nutrition")]


def test_bowels_are_asked_about_from_the_second_day() -> None:
    found = made(**LATE)
    assert item(found, "nutrition.bowels").flag is Flag.NOT_RECORDED
    assert action(found, "nutrition.ask_bowels").every == timedelta(hours=24)


def test_three_days_to_the_minute_are_not_yet_long() -> None:
    block = {"bowels": [{"at": "2026-03-11 19:30", "opened": "yes"}]}
    assert item(made(block, **LATE), "nutrition.bowels").flag is Flag.NONE


def test_never_open_counts_from_the_burn() -> None:
    block = {"bowels": [{"at": "2026-03-14 08:00", "opened": "no"}]}
    found = item(made(block, **LATE), "nutrition.bowels")
    assert (found.value, found.flag) == (None, Flag.REVIEW)
    assert "not open as charted" in found.shown


def test_an_opioid_without_a_laxative_asks_for_one() -> None:
    names = [*NAMES, "pain"]
    pain = {"doses": [{"at": "2026-03-14 10:00", "drug": "morphine", "dose": "4 mg", "route": "IV"}]}
    assert "nutrition.laxative" in action_keys(made(names=names, pain=pain, **LATE))
    assert "nutrition.laxative" not in action_keys(
        made({"laxative": "senna"}, names=names, pain=pain, **LATE)
    )
    pain["doses"][0]["drug"] = "paracetamol"
    assert "nutrition.laxative" not in action_keys(made(names=names, pain=pain, **LATE))


def test_feed_without_a_target_has_no_percent() -> None:
    found = item(made({"tube_feed": FEED}), "nutrition.tube_feed")
    assert (found.value, found.unit) == (None, "")


def test_a_stopped_feed_is_due_for_review_and_asked_about() -> None:
    stopped = [{**FEED[0], "stopped": "2026-03-14 15:00", "why": "vomiting"}]
    found = made({"tube_feed": stopped})
    assert item(found, "nutrition.tube_feed").flag is Flag.REVIEW
    assert "stopped since 15:00 (vomiting)" in item(found, "nutrition.tube_feed").shown
    assert "nutrition.restart" in action_keys(found)
    assert "nutrition.tube_position" not in mine(found)


def test_the_tube_is_checked_every_four_hours_while_feed_runs() -> None:
    for at, flag in (("2026-03-14 15:29", Flag.REVIEW), ("2026-03-14 15:30", Flag.NONE)):
        block = {"tube_feed": FEED, "tube_checks": [{"at": at, "position": "confirmed", "how": "strip"}]}
        found = made(block)
        assert item(found, "nutrition.tube_position").flag is flag
        assert action(found, "nutrition.check_tube").every == timedelta(hours=4)
    assert item(made({"tube_feed": FEED}), "nutrition.tube_position").flag is Flag.REVIEW


def test_a_tube_that_is_not_confirmed_stops_the_feed_and_reaches_page_one() -> None:
    block = {"tube_feed": FEED, "tube_checks": [{"at": "2026-03-14 19:00", "position": "not confirmed"}]}
    found = made(block)
    assert item(found, "nutrition.tube_position").rank == 28
    assert action(found, "nutrition.check_tube").text.startswith("Stop the feed")
    assert action(found, "nutrition.check_tube").urgency is Urgency.NOW


def test_glucose_is_shown_only_beside_insulin_or_when_low() -> None:
    results = [{"at": "2026-03-14 18:00", "glucose": "9 mmol/L"}]
    assert "nutrition.glucose" not in mine(made(results=results))
    beside = made(None, {"18:00": {"insulin": "3 units/h"}}, results=results)
    assert item(beside, "nutrition.glucose").flag is Flag.NONE
    assert action(beside, "nutrition.check_glucose").every == timedelta(hours=1)
    off = made(None, {"18:00": {"insulin": "3 units/h"}, "18:30": {"insulin": "0 units/h"}}, results=results)
    assert "nutrition.glucose" not in mine(off)


def test_glucose_below_four_needs_action_and_four_does_not() -> None:
    for written, low in (("3.9 mmol/L", True), ("4 mmol/L", False), ("71 mg/dL", True), ("73 mg/dL", False)):
        results = [{"at": "2026-03-14 18:00", "glucose": written}]
        found = made(results=results)
        assert ("nutrition.low_glucose" in action_keys(found)) is low
        if low:
            assert item(found, "nutrition.glucose").rank == 35


def test_insulin_that_runs_while_the_feed_is_stopped_needs_action() -> None:
    stopped = [{**FEED[0], "stopped": "2026-03-14 15:00"}]
    results = [{"at": "2026-03-14 18:00", "glucose": "9 mmol/L"}]
    found = made({"tube_feed": stopped}, {"18:00": {"insulin": "3 units/h"}}, results=results)
    assert item(found, "nutrition.glucose").flag is Flag.ACTION
    assert "insulin runs while the feed is stopped" in item(found, "nutrition.glucose").shown


def test_insulin_without_any_glucose_needs_action() -> None:
    found = item(made(None, {"18:00": {"insulin": "3 units/h"}}), "nutrition.glucose")
    assert (found.value, found.flag) == (None, Flag.ACTION)


def test_comfort_as_the_goal_of_care_flags_nothing() -> None:
    stopped = [{**FEED[0], "stopped": "2026-03-14 15:00"}]
    bowels = [{"at": "2026-03-14 08:00", "opened": "no"}]
    results = [{"at": "2026-03-14 18:00", "glucose": "3 mmol/L"}]
    found = made({"tube_feed": stopped, "bowels": bowels}, patient=COMFORT, results=results, **LATE)
    assert all(item(found, key).flag is Flag.NONE for key in mine(found))
    assert "nutrition.low_glucose" not in action_keys(found)


def test_the_plan_of_the_dietitian_is_repeated_in_its_words() -> None:
    found = made({"dietitian": "asked 16:00, plan tomorrow"})
    assert item(found, "nutrition.dietitian").shown == "asked 16:00, plan tomorrow"
    assert not [one for one in made().items if one.key == "nutrition.dietitian"]


def test_last_food_is_a_gap_in_the_first_day_and_not_in_comfort_care() -> None:
    def gaps(found: Any) -> list[str]:
        return [one.key for one in found.items if one.flag is Flag.NOT_RECORDED]

    assert "nutrition.last_food" in gaps(made())
    assert "nutrition.last_food" not in gaps(
        made({"last_food": {"at": "2026-03-14 07:30", "what": "porridge"}})
    )
    assert "nutrition.last_food" not in gaps(made(patient=COMFORT))
    assert "nutrition.last_food" not in gaps(made(**LATE))
