"""Electrical injury: rhythm first, limbs that look whole, nothing in a scald."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["area", "electrical"]


def made(
    block: dict[str, Any] | None = None, *, volts: str = "11 kV", at: str = "2026-03-14 19:30", **more: Any
) -> Any:
    cause = {"kind": "electrical", **({"voltage": volts} if volts else {})}
    injury = {"causes": [{"kind": "flame"}, cause], **more.pop("injury", {})}
    choices = more.pop("choices", None)
    if block:
        more["electrical"] = block
    return assessed(NAMES, state_text(injury=injury, **more), at=at, choices=choices)


def test_a_scald_hears_nothing_of_it() -> None:
    found = assessed(NAMES, state_text({"19:00": {"pulse": "80 /min"}}))
    assert not [one for one in (*found.items, *found.actions) if one.key.startswith("electrical")]


def test_lightning_is_watched_like_high_voltage() -> None:
    found = assessed(NAMES, state_text(injury={"causes": [{"kind": "lightning"}]}))
    assert "lightning" in item(found, "electrical.contact").shown
    assert "electrical.limbs" in action_keys(found)


def test_a_missing_electrocardiogram_is_on_page_one_and_asked_for_now() -> None:
    found = made(volts="230 V")
    assert (item(found, "electrical.ecg").rank, item(found, "electrical.ecg").flag) == (35, Flag.ACTION)
    assert action(found, "electrical.take_ecg").urgency is Urgency.NOW


def test_an_electrocardiogram_among_the_results_counts_as_taken_but_not_as_read() -> None:
    found = made(results=[{"at": "2026-03-14 14:00", "ecg": "sinus tachycardia"}])
    assert item(found, "electrical.ecg").shown == "sinus tachycardia"
    assert "electrical.take_ecg" not in action_keys(found)
    assert (
        "abnormal electrocardiogram"
        in item(found, "electrical.monitoring").shown.split("cannot be judged")[1]
    )


def test_one_that_nobody_read_is_due_for_review() -> None:
    block = {"ecg": [{"at": "2026-03-14 14:00", "abnormal": "not read yet"}]}
    assert item(made(block), "electrical.ecg").flag is Flag.REVIEW


def test_an_arrhythmia_is_on_page_one_for_a_day() -> None:
    events = [{"at": "2026-03-14 10:00", "what": "arrhythmia", "said": "run of ectopics"}]
    found = made(events=events)
    assert (item(found, "electrical.rhythm").rank, item(found, "electrical.rhythm").flag) == (30, Flag.ACTION)
    assert "arrhythmia at 10:00: run of ectopics" in item(found, "electrical.rhythm").shown
    assert item(made(events=events, at="2026-03-15 10:00"), "electrical.rhythm").flag is Flag.ACTION
    assert item(made(events=events, at="2026-03-15 10:01"), "electrical.rhythm").flag is Flag.NONE


@pytest.mark.parametrize(
    ("list_name", "block", "more", "asked"),
    [
        ("aba-2006", {}, {"injury": {"lost_consciousness": "yes"}}, True),
        ("aba-2006", {}, {"events": [{"at": "2026-03-14 10:00", "what": "cardiac arrest"}]}, True),
        ("aba-2006", {"arrhythmia_before_arrival": "yes"}, {}, True),
        ("aba-2006", {"ecg": [{"at": "2026-03-14 14:00", "abnormal": "yes"}]}, {}, True),
        ("aba-2006", {"path_across_chest": "yes", "chest_pain": "present"}, {}, False),
        ("emergency-text", {"path_across_chest": "yes"}, {}, True),
        ("emergency-text", {"chest_pain": "present"}, {}, True),
        ("emergency-text", {}, {"patient": {"conditions": ["heart disease"]}}, True),
        ("bailey-2007", {}, {}, True),
        ("bailey-2007", {"chest_pain": "present"}, {"volts": "230 V"}, False),
    ],
)
def test_each_list_asks_for_its_own_criteria(
    list_name: str, block: dict[str, Any], more: dict[str, Any], asked: bool
) -> None:
    found = made(block, choices={"electrical.monitoring": list_name}, **more)
    assert (item(found, "electrical.monitoring").flag is Flag.ACTION) is asked
    assert (item(found, "electrical.monitoring").rank == 32) is asked
    assert ("electrical.start_monitoring" in action_keys(found)) is asked


SEEN = {"at": "2026-03-14 19:20", "what": "arrhythmia", "said": "run of ectopics on the monitor"}


def test_an_arrhythmia_read_from_a_monitor_does_not_ask_to_connect_one() -> None:
    results = [{"at": "2026-03-14 14:00", "ecg": "sinus tachycardia"}]
    found = made(events=[SEEN], results=results)
    shown = item(found, "electrical.monitoring").shown
    assert shown.startswith("monitoring start and alarms not charted; arrhythmia charted at 19:20")
    assert action(found, "electrical.start_monitoring").text == (
        "Check that the rhythm monitor is on, alarms set; chart from when; "
        "12-lead electrocardiogram after the arrhythmia of 19:20 not charted: ask"
    )


def test_an_arrhythmia_without_a_monitor_still_asks_to_connect_one() -> None:
    found = made(events=[{**SEEN, "said": "pulse irregular"}])
    assert item(found, "electrical.monitoring").shown.startswith("not recorded; asked for by arrhythmia")
    text = action(found, "electrical.start_monitoring").text
    assert text == "Connect the rhythm monitor now, alarms on, and chart from when; tell the doctor"
    assert "electrical.take_ecg" in action_keys(found)


def test_an_electrocardiogram_after_the_arrhythmia_is_not_asked_about() -> None:
    block = {
        "ecg": [{"at": "2026-03-14 19:20", "abnormal": "yes"}],
        "monitoring": [{"from": "2026-03-14 09:00"}],
    }
    assert "not charted" not in action(made(block, events=[SEEN]), "electrical.keep_monitoring").text
    block["ecg"][0]["at"] = "2026-03-14 19:19"
    text = action(made(block, events=[SEEN]), "electrical.keep_monitoring").text
    assert text.endswith("12-lead electrocardiogram after the arrhythmia of 19:20 not charted: ask")


def test_contact_points_told_in_words_are_shown_as_such() -> None:
    assert "contact points not recorded" in item(made(), "electrical.contact").shown
    assert "free text" not in item(made(), "electrical.contact").shown
    found = item(made(injury={"what_happened": "Left hand on a crane chain."}), "electrical.contact")
    assert "contact points not recorded (free text: Left hand on a crane chain)" in found.shown
    assert found.flag is Flag.NOT_RECORDED


def test_what_nobody_recorded_cannot_be_judged() -> None:
    found = item(made(), "electrical.monitoring")
    assert found.flag is Flag.NOT_RECORDED
    assert "cannot be judged: loss of consciousness, arrhythmia and abnormal electrocardiogram" in found.shown


def test_monitoring_that_runs_is_kept_on_and_asked_about_after_a_day() -> None:
    block = {"monitoring": [{"from": "2026-03-14 09:00"}]}
    injury = {"lost_consciousness": "yes"}
    found = made(block, injury=injury)
    assert action(found, "electrical.keep_monitoring").first_due == item(found, "electrical.monitoring").value
    assert item(made(block, injury=injury, at="2026-03-15 09:00"), "electrical.monitoring").flag is Flag.NONE
    running = item(found, "electrical.monitoring").shown
    assert "running since Sat 14 Mar 2026 09:00, to at least Sun 15 Mar 2026 09:00" in running
    late = item(made(block, injury=injury, at="2026-03-15 09:01"), "electrical.monitoring")
    assert late.flag is Flag.REVIEW
    assert "24 h reached" in late.shown


def test_monitoring_ended_too_early_is_asked_for_again_and_a_full_day_is_enough() -> None:
    injury = {"lost_consciousness": "yes", "at": "2026-03-13 08:00"}
    for end, asked in (("2026-03-14 08:59", True), ("2026-03-14 09:00", False)):
        block = {"monitoring": [{"from": "2026-03-13 09:00", "until": end, "decided_by": "Dr A"}]}
        found = made(block, injury=injury)
        assert ("electrical.start_monitoring" in action_keys(found)) is asked
        assert "Dr A" in item(found, "electrical.monitoring").shown


def test_limbs_on_the_path_are_felt_each_hour_where_no_other_watch_covers_them() -> None:
    points = [{"where": "left hand", "kind": "entry"}, {"where": "sole of the right foot", "kind": "exit"}]
    burned = [
        {"region": "left forearm", "of_region": "100 %", "depth": "full thickness", "circumferential": "yes"}
    ]
    area = [{"at": "2026-03-14 09:00", "method": "lund-browder", "burns": burned}]
    found = action(made({"contact_points": points}, area=area), "electrical.limbs")
    assert found.every == timedelta(hours=1)
    assert found.text.startswith("Feel right leg,")
    assert "left arm and right leg" in action(made({"contact_points": points}), "electrical.limbs").text


def test_without_contact_points_all_four_limbs_are_felt() -> None:
    assert "left arm, right arm, left leg and right leg" in action(made(), "electrical.limbs").text


def test_limbs_are_not_asked_about_after_low_voltage_or_two_days() -> None:
    assert "electrical.limbs" not in action_keys(made(volts="230 V"))
    assert "electrical.limbs" in action_keys(made(volts=""))
    assert "electrical.limbs" in action_keys(made(at="2026-03-16 08:00"))
    assert "electrical.limbs" not in action_keys(made(at="2026-03-16 08:01"))


def test_a_check_of_every_limb_on_the_path_moves_the_next_one() -> None:
    points = [{"where": "left hand", "kind": "entry"}, {"where": "right foot", "kind": "exit"}]
    both = [{"region": "left hand", "pulse": "present"}, {"region": "right foot", "pulse": "present"}]
    found = assessed(
        NAMES,
        state_text(
            {"18:00": {"limbs": both}, "19:00": {"limbs": both[:1]}},
            injury={"causes": [{"kind": "electrical", "voltage": "11 kV"}]},
            electrical={"contact_points": points},
        ),
    )
    due = action(found, "electrical.limbs").first_due
    assert due is not None
    assert due.hour == 19


def test_exactly_1000_volts_says_that_prints_differ() -> None:
    assert "taken as high" in item(made(volts="1000 V"), "electrical.contact").shown


def test_comfort_as_the_goal_of_care_asks_for_nothing() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    events = [{"at": "2026-03-14 10:00", "what": "arrhythmia"}]
    found = made(patient=comfort, events=events, injury={"lost_consciousness": "yes"})
    assert [key for key in action_keys(found) if key.startswith("electrical")] == []
    assert all(one.flag is not Flag.ACTION for one in found.items if one.key.startswith("electrical"))
