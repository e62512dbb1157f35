"""Dressings, grafts, tetanus, position, face and skin: only what concerns this patient."""

from __future__ import annotations

from datetime import UTC, datetime, timedelta
from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, faults_of, item, state_text

NAMES = ["area", "wounds"]
COMFORT = {"resuscitation": {"decision": "comfort care"}}


def area(*burns: dict[str, Any]) -> list[dict[str, Any]]:
    filled = [{"of_region": "100 %", "depth": "deep partial", **burn} for burn in burns]
    return [{"at": "2026-03-14 09:00", "method": "lund-browder", "burns": filled}]


def made(*burns: dict[str, Any], at: str = "2026-03-14 19:30", **more: Any) -> Any:
    if burns:
        more["area"] = area(*burns)
    return assessed(NAMES, state_text(**more), at=at)


def dressing(**more: Any) -> dict[str, Any]:
    entry = {"where": "chest", "product": "silver foam", "done": "2026-03-14 10:00", **more}
    return {"dressings": [entry]}


def test_a_burn_without_a_dressing_is_not_recorded_and_asks_for_a_plan() -> None:
    found = made({"region": "trunk", "face": "front"})
    assert item(found, "wounds.dressings").flag is Flag.NOT_RECORDED
    assert "wounds.first_dressing" in action_keys(found)


def test_nothing_burned_asks_for_nothing() -> None:
    found = made({"region": "trunk", "depth": "epidermal"})
    assert [key for key in action_keys(found) if key.startswith("wounds")] == ["wounds.tetanus_ask"]
    assert [one.key for one in found.items if one.key.startswith("wounds")] == []


def test_the_latest_dressing_of_a_place_counts_whatever_the_order_and_the_capitals() -> None:
    block = {
        "dressings": [
            {"where": "Right arm", "product": "silver foam", "done": "2026-03-14 12:00"},
            {"where": "right arm", "product": "silver sulfadiazine cream", "done": "2026-03-13 12:00"},
        ]
    }
    found = made(wounds=block, injury={"at": "2026-03-13 08:00"})
    assert "silver foam" in item(found, "wounds.dressing.1").shown
    assert found.item("wounds.dressing.2") is None


def test_a_struck_out_dressing_does_not_count() -> None:
    struck = {"by": "EM", "at": "2026-03-14 12:00", "why": "wrong patient"}
    assert made(wounds=dressing(struck=struck)).item("wounds.dressing.1") is None


@pytest.mark.parametrize(
    ("name", "text"), [("smell", "smell present"), ("spreading redness", "redness present")]
)
def test_a_wound_that_looks_worse_needs_action_now(name: str, text: str) -> None:
    found = made(wounds=dressing(**{name: "present"}))
    assert item(found, "wounds.dressing.1").flag is Flag.ACTION
    assert text in item(found, "wounds.dressing.1").shown
    assert action(found, "wounds.change.1").urgency is Urgency.NOW


def test_a_soaked_dressing_is_changed_now_and_an_absent_smell_is_nothing() -> None:
    found = made(wounds=dressing(soaked="yes", smell="absent"))
    assert item(found, "wounds.dressing.1").flag is Flag.REVIEW
    assert action(found, "wounds.change.1").urgency is Urgency.NOW


def test_a_product_without_a_published_time_says_that_its_change_is_not_recorded() -> None:
    found = made(wounds=dressing(product="other", called="honey"))
    one = item(found, "wounds.dressing.1")
    assert (one.value, one.flag) == (None, Flag.NONE)
    assert "honey" in one.shown
    assert "next change not recorded" in one.shown
    assert "Find out when" in action(found, "wounds.change.1").text


def test_days_from_memory_call_nothing_overdue() -> None:
    found = made(wounds=dressing(product="paraffin gauze"), at="2026-03-18 19:30")
    assert item(found, "wounds.dressing.1").flag is Flag.NONE


def test_a_graft_that_was_looked_at_is_not_asked_for_again() -> None:
    graft = {"where": "arm", "at": "2026-03-14 09:00", "looked": "2026-03-14 12:00", "taken": "95 %"}
    found = made(wounds={"grafts": [graft]})
    assert "taken 95 %" in item(found, "wounds.graft.1").shown
    assert "wounds.graft_look.1" not in action_keys(found)


def test_the_surgeons_first_look_goes_before_the_table() -> None:
    graft = {"where": "arm", "at": "2026-03-14 09:00", "first_look": "2026-03-17 09:00"}
    found = made(wounds={"grafts": [graft]})
    assert "first look Tue 17 Mar 2026 09:00 (as charted)" in item(found, "wounds.graft.1").shown
    assert action(found, "wounds.graft_look.1").first_due == item(found, "wounds.graft.1").value


def test_a_soaked_donor_site_is_asked_about_and_a_healed_one_left_alone() -> None:
    for state, flag, keys in (
        ("soaked", Flag.REVIEW, ["wounds.donor_look.1"]),
        ("healed", Flag.NONE, []),
    ):
        donor = {"where": "thigh", "at": "2026-03-14 09:00", "state": state}
        found = made(wounds={"donors": [donor]}, injury={"tetanus": {"doses": "3 or more", "last": "2024"}})
        assert item(found, "wounds.donor.1").flag is flag
        assert action_keys(found) == keys


def test_tetanus_not_recorded_is_asked_about_and_named_by_the_background_alone() -> None:
    found = made()
    assert found.item("wounds.tetanus") is None
    assert "how many tetanus doses" in action(found, "wounds.tetanus_ask").text


def test_tetanus_given_today_closes_the_prompt() -> None:
    for given, keys in (("vaccine at 10:00", []), ("no", ["wounds.tetanus_prompt"])):
        found = made(injury={"tetanus": {"doses": "unknown", "given_today": given}})
        assert action_keys(found) == keys


def test_three_doses_without_a_date_are_asked_about() -> None:
    found = made(injury={"tetanus": {"doses": "3 or more"}})
    assert item(found, "wounds.tetanus").flag is Flag.NOT_RECORDED
    assert "date of the last" in action(found, "wounds.tetanus_ask").text


def test_a_year_alone_decides_only_where_all_of_it_agrees() -> None:
    for year, value in (("2020", "vaccine"), ("2021", None), ("2022", "none")):
        found = made(injury={"tetanus": {"doses": "3 or more", "last": year}})
        assert item(found, "wounds.tetanus").value == value


def test_no_dose_of_tetanus_product_is_ever_printed() -> None:
    found = made(injury={"tetanus": {"doses": "unknown"}})
    text = item(found, "wounds.tetanus").shown + action(found, "wounds.tetanus_prompt").text
    assert not any(character.isdigit() for character in text.replace("5 years", ""))


def test_a_burned_ear_brings_no_pillow_and_a_burned_foot_does_not() -> None:
    ear = made({"region": "head", "face": "front", "sites": ["ears"]})
    assert action(ear, "wounds.ear_care").text.startswith("No pillow")
    assert "wounds.ear_care" not in action_keys(made({"region": "left foot"}))


def test_a_wholly_burned_head_holds_the_ears_and_half_a_head_does_not() -> None:
    assert "wounds.ear_care" in action_keys(made({"region": "head"}))
    assert "wounds.ear_care" not in action_keys(made({"region": "head", "of_region": "50 %"}))
    assert "wounds.ear_care" not in action_keys(made({"region": "head", "face": "front"}))


def test_a_burned_face_has_its_eyes_examined_now_until_that_is_charted() -> None:
    face = {"region": "head", "face": "front"}
    found = made(face)
    assert item(found, "wounds.eyes").flag is Flag.NOT_RECORDED
    assert action(found, "wounds.eye_examination").urgency is Urgency.NOW
    seen = {"eyes": [{"at": "2026-03-14 18:00", "lids": "open", "cornea": "clear", "lenses": "removed"}]}
    found = made(face, wounds=seen)
    assert item(found, "wounds.eyes").flag is Flag.NONE
    assert "wounds.eye_examination" not in action_keys(found)
    assert "sight not recorded" in item(found, "wounds.eyes").shown


def test_the_back_of_the_head_is_no_face() -> None:
    found = made({"region": "head", "face": "back"})
    assert found.item("wounds.eyes") is None
    assert "wounds.eye_care" not in action_keys(found)


@pytest.mark.parametrize(
    "seen", [{"cornea": "stains"}, {"cornea": "cloudy"}, {"lids": "do not close"}, {"lenses": "still in"}]
)
def test_an_eye_in_danger_needs_action(seen: dict[str, str]) -> None:
    block = {"eyes": [{"at": "2026-03-14 18:00", **seen}]}
    assert item(made(wounds=block), "wounds.eyes").flag is Flag.ACTION


def test_eyes_not_looked_at_for_more_than_eight_hours_say_so() -> None:
    for at, flag in (("2026-03-14 11:29", Flag.REVIEW), ("2026-03-14 11:30", Flag.NONE)):
        found = item(made(wounds={"eyes": [{"at": at, "cornea": "clear"}]}), "wounds.eyes")
        assert found.flag is flag
    assert "not looked at again" not in found.shown


def test_a_pressed_ear_needs_action() -> None:
    found = item(made(wounds={"ears": [{"at": "2026-03-14 18:00", "pressure": "pressed"}]}), "wounds.ears")
    assert found.flag is Flag.ACTION


def test_positions_are_for_burns_that_shrink() -> None:
    hand = {"region": "left hand"}
    assert "left wrist" in item(made(hand), "wounds.positions").shown
    assert made({**hand, "depth": "superficial partial"}).item("wounds.positions") is None
    assert "left wrist" in item(made({**hand, "depth": "not assessed"}), "wounds.positions").shown


@pytest.mark.parametrize(
    ("joint", "part"),
    [
        ("shoulder", "axilla"),
        ("elbow", "elbow"),
        ("wrist", "wrist"),
        ("finger joints", "knuckles"),
        ("hip", "hip"),
        ("knee", "knee"),
        ("ankle", "ankle"),
    ],
)
def test_a_charted_joint_brings_its_position(joint: str, part: str) -> None:
    region = "left thigh" if joint in ("hip", "knee", "ankle") else "left upper arm"
    assert f"left {part}" in item(made({"region": region, "joint": joint}), "wounds.positions").shown


def test_one_side_of_a_joint_burned_does_not_put_it_on_the_list() -> None:
    assert made({"region": "left thigh"}).item("wounds.positions") is None
    both = made({"region": "left thigh"}, {"region": "right lower leg"})
    assert both.item("wounds.positions") is None


def test_all_positions_are_one_line_of_the_care_plan() -> None:
    found = made({"region": "left arm"}, {"region": "right leg"}, {"region": "neck", "face": "front"})
    lines = [one for one in found.actions if one.key.startswith("wounds.position")]
    assert len(lines) == 1
    assert lines[0].every == timedelta(hours=2)
    assert "no pillow" in lines[0].text


def test_the_skin_under_a_splint_is_due_from_its_last_look() -> None:
    for checked, flag in (
        ("2026-03-14 15:29", Flag.REVIEW),
        ("2026-03-14 15:30", Flag.NONE),
        (None, Flag.REVIEW),
    ):
        splint = {"where": "right hand", **({"checked": checked} if checked else {})}
        assert item(made(wounds={"splints": [splint]}), "wounds.splint.1").flag is flag


def test_a_large_burn_is_turned_and_a_small_one_is_not() -> None:
    large = made({"region": "trunk"})
    turn = action(large, "wounds.turn")
    assert turn.every == timedelta(hours=4)
    assert "back of the trunk burned" in turn.text
    assert "wounds.turn" not in action_keys(made({"region": "left foot"}))


def test_turning_by_the_units_own_interval() -> None:
    text = state_text(area=area({"region": "trunk"}))
    found = assessed(NAMES, text, choices={"wounds.turning": "two-hourly"})
    assert action(found, "wounds.turn").every == timedelta(hours=2)


def test_a_sore_heel_needs_action_until_it_is_charted_as_mended() -> None:
    sore = {"at": "2026-03-14 12:00", "where": "left heel", "found": "red, does not blanch"}
    assert item(made(wounds={"pressure_areas": [sore]}), "wounds.pressure_areas").flag is Flag.ACTION
    mended = {"at": "2026-03-14 18:00", "where": "Left heel", "found": "skin unbroken"}
    found = item(made(wounds={"pressure_areas": [sore, mended]}), "wounds.pressure_areas")
    assert found.flag is Flag.NONE


def test_a_burned_perineum_is_washed() -> None:
    assert "wounds.perineum" in action_keys(made({"region": "genitalia"}))
    assert "wounds.perineum" in action_keys(made({"region": "left thigh", "sites": ["perineum"]}))


def test_comfort_as_the_goal_of_care_leaves_position_and_turning_to_the_patient() -> None:
    found = made({"region": "trunk"}, {"region": "left arm"}, patient=COMFORT, wounds=dressing(soaked="yes"))
    keys = action_keys(found)
    assert "wounds.dressing_comfort" in keys
    assert not {"wounds.position", "wounds.turn", "wounds.change.1"} & set(keys)
    mine = [one for one in found.items if one.key.startswith("wounds")]
    assert all(one.flag in (Flag.NONE, Flag.NOT_RECORDED) for one in mine)


def test_an_unknown_product_is_refused_with_the_nearest_one() -> None:
    said = faults_of(NAMES, state_text(wounds=dressing(product="silver foams")))
    assert any("silver foam" in fault for fault in said)


def test_doses_that_are_not_recorded_are_not_taken_as_unknown() -> None:
    found = made(injury={"tetanus": {"given_today": "no"}})
    assert found.item("wounds.tetanus") is None
    assert "wounds.tetanus_ask" in action_keys(found)


def test_a_dose_after_the_burn_calls_for_no_further_one() -> None:
    injury = {"at": "2026-03-10 08:00", "tetanus": {"doses": "3 or more", "last": "2026-03-12"}}
    assert item(made(injury=injury), "wounds.tetanus").value == "none"


def test_the_years_are_counted_to_the_burn_and_without_its_time_to_now() -> None:
    tetanus = {"doses": "3 or more", "last": "2021-03-14"}
    assert item(made(injury={"at": "2026-03-13 08:00", "tetanus": tetanus}), "wounds.tetanus").value == "none"
    assert item(made(injury={"at": None, "tetanus": tetanus}), "wounds.tetanus").value == "vaccine"


def test_a_dressing_is_shown_with_what_was_seen_and_nothing_else() -> None:
    found = item(made(wounds=dressing(soaked="yes", exudate="heavy", look="pink edge")), "wounds.dressing.1")
    assert found.shown.endswith("soaked through; exudate heavy; pink edge")
    assert found.working is not None
    plain = item(made(wounds=dressing(next="2026-03-15 10:00")), "wounds.dressing.1")
    assert "soaked" not in plain.shown
    assert "exudate" not in plain.shown
    assert plain.working is None


def test_a_change_that_is_due_has_its_time_in_the_plan_and_one_without_a_time_has_none() -> None:
    timed = action(made(wounds=dressing()), "wounds.change.1")
    assert (timed.urgency, timed.first_due is not None) == (Urgency.TIMED, True)
    untimed = action(made(wounds=dressing(product="film")), "wounds.change.1")
    assert (untimed.urgency, untimed.first_due) == (Urgency.SHIFT, None)


def test_comfort_without_a_dressing_has_no_line_about_dressings() -> None:
    assert "wounds.dressing_comfort" not in action_keys(made({"region": "trunk"}, patient=COMFORT))


def test_the_look_under_every_splint_is_one_line_due_from_the_oldest() -> None:
    worn = [
        {"where": "right hand", "checked": "2026-03-14 18:00"},
        {"where": "left elbow", "checked": "2026-03-14 17:00"},
    ]
    line = action(made(wounds={"splints": worn}), "wounds.splints")
    assert line.text == "Skin and feeling under the splint: right hand, left elbow"
    oldest = datetime(2026, 3, 14, 17, 0, tzinfo=UTC)
    assert line.first_due == oldest + line.every
    never = made(wounds={"splints": [*worn, {"where": "neck"}]})
    assert action(never, "wounds.splints").first_due == never.now
    assert "wounds.splints" not in action_keys(made(wounds={"splints": worn}, patient=COMFORT))


def test_a_burned_face_has_its_mouth_cleaned_and_a_burned_leg_has_not() -> None:
    found = made({"region": "head", "face": "front"})
    assert "open wide" in action(found, "wounds.mouth_care").text
    assert "wounds.mouth_care" not in action_keys(made({"region": "left leg"}))
