"""Before theatre: times to stop, what is missing, and nothing where nothing is planned."""

from __future__ import annotations

from typing import Any

from handoff.plugin import Flag
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["area", "infection", "nutrition", "theatre"]
READY = {"consent": "signed", "marked": "yes", "seen_by_anaesthetist": "yes"}


def made(*, start: str = "2026-03-15 02:00", last_food: str = "", **more: Any) -> Any:
    entry = {"at": start, "what": "excision and graft", **more.pop("entry", {})}
    theatre = {"planned": [entry], **more.pop("theatre", {})}
    if last_food:
        more["nutrition"] = {"last_food": {"at": last_food}}
    return assessed(NAMES, state_text(theatre=theatre, **more))


def test_no_operation_is_nothing_to_say() -> None:
    found = assessed(NAMES, state_text())
    assert not [one for one in (*found.items, *found.actions) if one.key.startswith("theatre")]


def test_food_less_than_six_hours_before_is_due_for_review() -> None:
    for at, flag in (("2026-03-14 19:30", Flag.NONE), ("2026-03-14 18:00", Flag.NONE)):
        assert item(made(last_food=at, start="2026-03-15 01:30"), "theatre.fasting").flag is flag
    short = item(made(last_food="2026-03-14 19:29", start="2026-03-15 01:00"), "theatre.fasting")
    assert short.flag is Flag.REVIEW
    assert "last food at 19:29, 29 min short at the planned start" in short.shown


def test_a_clear_drink_is_judged_by_its_own_time_and_any_other_as_food() -> None:
    for kind, flag in (("clear", Flag.NONE), ("breast milk", Flag.REVIEW), ("other", Flag.REVIEW)):
        drink = {"last_drink": {"at": "2026-03-14 19:00", "kind": kind}}
        found = item(made(start="2026-03-14 22:00", theatre=drink), "theatre.fasting")
        assert found.flag is flag


def test_nothing_known_of_food_and_drink_is_not_recorded_when_theatre_is_near() -> None:
    assert item(made(), "theatre.fasting").flag is Flag.NOT_RECORDED
    assert item(made(start="2026-03-16 09:00"), "theatre.fasting").flag is Flag.NONE


def test_the_anaesthetists_order_is_printed_first() -> None:
    found = item(made(entry={"fasting": "clear drinks until called"}), "theatre.fasting")
    assert found.shown.startswith("ordered: clear drinks until called")


def test_what_is_ready_is_not_asked_for() -> None:
    found = made(entry=READY)
    assert item(found, "theatre.operation").flag is Flag.NONE
    assert "theatre.ready" not in action_keys(found)
    missing = made(entry={**READY, "marked": "no", "consent": "not yet"})
    assert action(missing, "theatre.ready").text.endswith("consent and site marked")


def test_an_operation_far_off_is_shown_and_not_yet_asked_about() -> None:
    found = made(start="2026-03-16 09:00")
    assert item(found, "theatre.operation").flag is Flag.NONE
    assert found.item("theatre.blood") is None
    assert "theatre.ready" not in action_keys(found)


def test_times_to_stop_are_lines_of_the_care_plan_until_they_are_past() -> None:
    found = made(start="2026-03-15 02:00")
    assert action(found, "theatre.stop_food").first_due == item(found, "theatre.fasting").value
    soon = made(start="2026-03-14 22:00")
    assert "theatre.stop_food" not in action_keys(soon)
    assert "theatre.stop_clear" in action_keys(soon)


def test_an_operation_whose_time_is_past_is_asked_about_and_one_done_is_gone() -> None:
    past = made(start="2026-03-14 18:00")
    assert "its time is past" in item(past, "theatre.operation").shown
    assert not [key for key in action_keys(past) if key.startswith("theatre")]
    assert made(start="2026-03-14 18:00", entry={"done": "yes"}).item("theatre.operation") is None


def test_blood_that_is_not_valid_at_the_start_is_due_for_review() -> None:
    for until, flag in (("2026-03-15 01:59", Flag.REVIEW), ("2026-03-15 02:00", Flag.NONE)):
        blood = {"blood": [{"at": "2026-03-14 10:00", "valid_until": until, "ready": "4 units of red cells"}]}
        found = item(made(theatre=blood), "theatre.blood")
        assert found.flag is flag
        assert "4 units of red cells" in found.shown


def test_blood_without_an_operation_is_shown() -> None:
    text = state_text(theatre={"blood": [{"at": "2026-03-14 10:00", "valid_until": "2026-03-14 19:00"}]})
    found = item(assessed(NAMES, text), "theatre.blood")
    assert (found.flag, "no longer valid" in found.shown) == (Flag.REVIEW, True)


def test_edges_of_time_and_words() -> None:
    day_before = made(start="2026-03-15 19:30")
    assert "theatre.ready" in action_keys(day_before)
    assert "theatre.ready" not in action_keys(made(start="2026-03-15 19:31"))
    now = item(made(start="2026-03-14 19:30", entry=READY), "theatre.operation")
    assert (now.flag, "its time is past" in now.shown) == (Flag.NONE, False)
    assert "consent signed" in now.shown
    assert "consent signed" not in item(made(), "theatre.operation").shown


def test_food_and_drink_not_recorded_is_said_only_where_neither_is() -> None:
    assert item(made(), "theatre.fasting").shown.endswith("last food and drink not recorded")
    assert "not recorded" not in item(made(last_food="2026-03-14 18:00"), "theatre.fasting").shown


def test_a_sample_without_its_validity_says_so() -> None:
    found = item(made(theatre={"blood": [{"at": "2026-03-14 10:00"}]}), "theatre.blood")
    assert "validity not recorded; what is ready is not recorded" in found.shown
