"""What the nurse reads: why the airway is watched, what is old, what is doubted, what the lists prompt."""

from __future__ import annotations

from datetime import timedelta
from typing import Any

import pytest

from handoff.plugin import Findings, Flag, Urgency

from .build import FIRE, found, item, said, setup_of, setup_with, state_text

T = "2026-03-14 "
NRB = {"from": T + "10:30", "device": "non-rebreather mask", "flow": "15 L/min"}

LEG = [
    {
        "at": T + "10:30",
        "by": "EM",
        "method": "lund-browder",
        "burns": [{"region": "left thigh", "of_region": "50 %", "depth": "superficial partial"}],
    }
]


def action(findings: Findings, key: str) -> Any:
    return next((one for one in findings.actions if one.key == f"airway_watch.{key}"), None)


def looked(time: str, **signs: str) -> dict[str, str]:
    return {"at": T + time, "by": "EM", **{name.replace("_", " "): state for name, state in signs.items()}}


def test_the_check_is_one_line_with_the_interval_in_force() -> None:
    block = {"watch": {"start": T + "10:30"}, "signs": [looked("11:00", stridor="absent")]}
    early = action(found(state_text(block), at=T + "11:05"), "check")
    assert early.every == timedelta(minutes=15)
    assert early.urgency is Urgency.TIMED
    late = action(found(state_text(block), at=T + "15:00"), "check")
    assert late.every == timedelta(hours=1)
    assert late.urgency is Urgency.NOW


def test_without_any_check_the_first_is_due_now_and_then_at_the_first_interval() -> None:
    line = action(found(state_text({"oxygen": [NRB]}), at=T + "12:00"), "check")
    assert line.urgency is Urgency.NOW
    assert line.every == timedelta(minutes=15)


def test_a_leg_scald_has_no_airway_line_in_the_care_plan_and_no_rank() -> None:
    findings = found(state_text({}, injury={"causes": [{"kind": "scald"}]}, area=LEG))
    assert findings.actions == ()
    assert all(one.rank is None for one in findings.items)


@pytest.mark.parametrize("causes", [None, [{"kind": "flame"}], [{"kind": "flame", "setting": "not known"}]])
def test_an_unknown_fire_is_a_gap_that_can_kill(causes: Any) -> None:
    watch = item(found(state_text({}, injury={"causes": causes})), "watch")
    assert watch.flag is Flag.NOT_RECORDED
    assert watch.rank == 10


def test_a_blank_is_never_said_as_a_negative_finding() -> None:
    findings = found(state_text(injury={"causes": [{"kind": "flame"}], "at": None}))
    blank = "cannot be judged: smoke, setting, face, neck and signs not recorded"
    for key in ("watch", "next_check"):
        one = item(findings, key)
        assert (one.shown, one.flag) == (blank, Flag.NOT_RECORDED)
    ranked = sorted((one.rank, one.label) for one in findings.items if one.rank is not None)
    assert ranked == [(10, "Airway watch")]
    look = action(findings, "first_look")
    assert look.urgency is Urgency.NOW
    assert look.text == (
        "Look at and listen to the airway now; chart each sign as present, absent or not assessed"
    )


def test_a_scald_of_which_no_region_is_charted_may_be_of_the_face() -> None:
    findings = found(state_text({}, injury={"causes": [{"kind": "scald"}]}))
    assert item(findings, "watch").shown == "cannot be judged: face, neck and signs not recorded"
    assert action(findings, "first_look") is not None


def test_only_what_was_charted_is_said_to_ask_for_nothing() -> None:
    cause = {"kind": "flame", "setting": "open air"}
    block = {"signs": [looked("10:45", stridor="absent")]}
    shown = item(found(state_text(block, injury={"causes": [cause]}, area=LEG)), "watch").shown
    assert shown == (
        "not asked for by what is recorded: burns as charted, none of them of the face or deep of the neck; "
        "airway signs last looked for 10:45; not recorded: smoke breathed or not"
    )


def test_comfort_care_asks_for_no_first_look() -> None:
    patient = {"resuscitation": {"decision": "comfort care"}}
    assert found(state_text({}, patient=patient, injury={"causes": None})).actions == ()


def test_a_fire_in_the_open_with_no_smoke_asks_for_nothing() -> None:
    cause = {"kind": "flame", "setting": "open air", "smoke": "no"}
    watch = item(found(state_text({}, injury={"causes": [cause]}, area=LEG)), "watch")
    assert watch.shown.startswith("not asked for")
    assert watch.rank is None


def test_an_electrical_flash_indoors_is_not_smoke() -> None:
    cause = {"kind": "flash", "setting": "enclosed space", "smoke": "no"}
    findings = found(state_text({}, injury={"causes": [cause]}, area=LEG))
    assert item(findings, "watch").shown.startswith("not asked for")


def test_an_assessed_sign_stays_assessed_when_the_next_check_left_it_out() -> None:
    block = {
        "watch": {"start": T + "10:30"},
        "signs": [
            looked("10:45", stridor="absent", hoarse_voice="present"),
            looked("11:00", drooling="absent"),
        ],
    }
    shown = item(found(state_text(block), at=T + "11:05"), "signs").shown
    assert "stridor: not reassessed since 10:45 (absent then)" in shown
    assert "hoarse voice present 10:45 by EM, not reassessed since" in shown
    assert "drooling absent 11:00 by EM" in shown
    assert "not assessed: soot in mouth" in shown


def test_the_lists_say_when_a_sign_was_last_absent() -> None:
    block = {
        "watch": {"start": T + "10:30"},
        "signs": [looked("10:45", stridor="absent", laboured_breathing="absent", drooling="absent")],
    }
    findings = found(state_text(block), at=T + "14:00")
    shown = item(findings, "list_aba_2011").shown
    assert "not reassessed: stridor (last absent 10:45, old)" in shown
    assert "respiratory distress (laboured breathing last absent 10:45, old)" in shown
    assert "stridor" not in shown.split("not recorded: ")[1].split(";")[0]


def test_a_note_is_printed_with_the_time_and_hand_of_its_entry() -> None:
    first = {**looked("10:45", stridor="absent"), "note": "calm"}
    later = {**looked("11:00", stridor="absent"), "note": "voice hoarser than at 10:45"}
    shown = item(found(state_text({"signs": [first, later]}), at=T + "11:05"), "signs").shown
    assert shown.endswith("; note 11:00 by EM: voice hoarser than at 10:45")
    assert "calm" not in shown


def test_a_note_without_any_sign_is_printed_too() -> None:
    only = {**looked("10:45", stridor="not assessed"), "note": "asleep, not woken"}
    shown = item(found(state_text({"signs": [only]}), at=T + "11:05"), "signs").shown
    assert shown == "not recorded; note 10:45 by EM: asleep, not woken"


def test_old_absences_of_a_patient_who_is_not_watched_ask_for_nothing() -> None:
    block = {"signs": [looked("10:45", stridor="absent", drooling="absent")]}
    scald = {"causes": [{"kind": "scald"}]}
    count = item(found(state_text(block, injury=scald, area=LEG)), "signs_present")
    assert (count.label, count.value, count.flag) == ("Airway signs", None, Flag.NONE)
    assert count.shown == "0 present of 2 signs looked for at 10:45; not reassessed since"
    watched = item(found(state_text(block)), "signs_present")
    assert watched.flag is Flag.REVIEW


def test_a_scald_is_not_asked_for_blood_gases_and_a_fire_is() -> None:
    scald = found(state_text({}, injury={"causes": [{"kind": "scald"}]}, area=LEG))
    for key, unit in (("carboxyhaemoglobin_now", "%"), ("pf_ratio", "mmHg")):
        one = item(scald, key)
        assert (one.value, one.unit, one.flag, one.detail) == (None, unit, Flag.NONE, True)
        assert one.shown == "not worked out: nothing recorded asks for it"
    for causes in (None, [{"kind": "flame"}], [FIRE]):
        fire = found(state_text({}, injury={"causes": causes}, area=LEG))
        assert item(fire, "carboxyhaemoglobin_now").flag is Flag.NOT_RECORDED
        assert item(fire, "pf_ratio").flag is Flag.NOT_RECORDED


def test_a_scald_on_oxygen_is_asked_for_the_gas() -> None:
    findings = found(state_text({"oxygen": [NRB]}, injury={"causes": [{"kind": "scald"}]}, area=LEG))
    assert item(findings, "pf_ratio").flag is Flag.NOT_RECORDED


def test_an_estimate_that_crosses_ranges_names_none() -> None:
    text = state_text({"oxygen": [NRB]}, results=[{"at": T + "16:30", "pao2": "190 mmHg"}])
    ratio = item(found(text), "pf_ratio")
    assert ratio.shown == (
        "about 190 to 317 mmHg (estimated FiO2) at 16:30; no range named because the estimate crosses ranges"
    )
    assert not any("room air" in caution for caution in ratio.cautions)


def test_the_level_at_the_burn_needs_some_oxygen_before_the_sample() -> None:
    block = {"carboxyhaemoglobin": [{"at": T + "11:00", "value": "18 %"}]}
    assert found(state_text(block)).item("airway_watch.carboxyhaemoglobin_at_burn") is None
    level = item(found(state_text({**block, "oxygen": [NRB]})), "carboxyhaemoglobin_at_burn")
    assert level.detail
    assert any("nothing is decided by it" in caution for caution in level.cautions)


@pytest.mark.parametrize(
    ("choice", "line"), [("consensus", "not above the line of 10 mmol/L"), ("service", "below the line of")]
)
def test_a_lactate_under_the_line_is_said_with_the_line(choice: str, line: str) -> None:
    results = [{"at": T + "10:40", "lactate": "3.9 mmol/L"}]
    rows = {"2026-03-14": {"10:45": {"bp": "104/62 mmHg"}}}
    text = state_text({}, results=results, observations=rows)
    working = item(found(text, at=T + "11:00", setup=setup_with(cyanide=choice)), "cyanide").working
    assert working is not None
    read = {part.label: part.shown for part in working.inputs}
    assert read["lactate"].startswith("lactate 3.9 mmol/L (10:40), ")
    assert line in read["lactate"]
    assert read["blood pressure"].startswith("systolic 104 mmHg (10:45), above the line of ")


def test_not_assessed_is_no_assessment() -> None:
    block = {"signs": [looked("10:45", stridor="not assessed")]}
    findings = found(state_text(block), at=T + "10:50")
    assert item(findings, "signs_present").value is None
    assert item(findings, "signs_present").flag is Flag.NOT_RECORDED


def test_signs_from_before_an_extubation_are_old() -> None:
    block = {"signs": [looked("10:45", stridor="absent")]}
    events = [{"at": T + "11:00", "what": "intubation"}, {"at": T + "11:10", "what": "extubation"}]
    shown = item(found(state_text(block, events=events), at=T + "11:11"), "signs").shown
    assert "stridor: not reassessed since 10:45 (absent then)" in shown


def test_a_count_of_signs_is_never_an_all_clear() -> None:
    block = {"watch": {"start": T + "10:30"}, "signs": [looked("10:45", stridor="absent")]}
    count = item(found(state_text(block), at=T + "10:50"), "signs_present")
    assert count.value == 0
    assert "Absence of signs does not exclude inhalation injury." in count.cautions


def test_the_watch_can_be_ended_and_says_when() -> None:
    block = {
        "watch": {"start": T + "10:30", "ended": T + "12:00"},
        "signs": [looked("11:45", stridor="absent")],
    }
    findings = found(state_text(block))
    assert item(findings, "next_check").shown == "none: the watch ended 12:00"
    assert action(findings, "check") is None


def test_an_extubation_after_the_end_starts_the_watch_again() -> None:
    block = {"watch": {"start": T + "10:30", "ended": T + "12:00"}}
    events = [{"at": T + "13:00", "what": "intubation"}, {"at": T + "18:00", "what": "extubation"}]
    due = item(found(state_text(block, events=events), at=T + "18:05"), "next_check")
    assert due.shown == "due 18:15; no check recorded"


def test_a_reading_taken_while_the_level_was_raised_keeps_its_doubt() -> None:
    block = {"oxygen": [NRB], "carboxyhaemoglobin": [{"at": T + "10:40", "value": "30 %"}]}
    rows = {"2026-03-14": {"10:45": {"spo2": "99 %"}}}
    findings = found(state_text(block, observations=rows), at=T + "19:30")
    spo2 = item(findings, "spo2")
    assert "may read falsely high: carboxyhaemoglobin 30 % at 10:40, above 5 %" in spo2.shown
    assert spo2.rank is None
    assert any("oxygenated haemoglobin at most about" in caution for caution in spo2.cautions)
    assert item(findings, "carboxyhaemoglobin_now").flag is Flag.NONE


def test_a_reading_before_the_first_level_is_in_doubt_after_smoke() -> None:
    block = {"oxygen": [NRB], "carboxyhaemoglobin": [{"at": T + "12:00", "value": "2 %"}]}
    rows = {"2026-03-14": {"11:00": {"spo2": "99 %"}}}
    spo2 = item(found(state_text(block, observations=rows), at=T + "12:10"), "spo2")
    assert "was not measured before 12:00" in spo2.shown


def test_a_half_life_from_memory_never_clears_a_raised_level() -> None:
    air = {"from": T + "10:10", "device": "room air"}
    block = {"oxygen": [air], "carboxyhaemoglobin": [{"at": T + "10:20", "value": "6 %"}]}
    now = item(found(state_text(block), at="2026-03-15 19:30"), "carboxyhaemoglobin_now")
    assert now.flag is Flag.ACTION
    assert any("From memory" in source.shown() for source in now.sources)


def test_full_oxygen_that_is_not_charted_is_asked_for() -> None:
    low = {"from": T + "10:30", "device": "nasal cannula", "flow": "2 L/min"}
    asked = action(found(state_text({"oxygen": [low]}), at=T + "11:00"), "full_oxygen")
    assert asked.urgency is Urgency.NOW
    kept = action(found(state_text({"oxygen": [NRB]}), at=T + "11:00"), "full_oxygen")
    assert kept.urgency is Urgency.ONGOING


def test_hydroxocobalamin_before_a_sample_is_said() -> None:
    block = {
        "antidotes": [{"at": T + "10:40", "drug": "hydroxocobalamin"}],
        "carboxyhaemoglobin": [{"at": T + "11:00", "value": "12 %"}],
    }
    measured = item(found(state_text(block), at=T + "11:10"), "carboxyhaemoglobin_measured")
    assert "Hydroxocobalamin was given 10:40" in measured.cautions[0]


def test_the_lactate_limit_names_the_burns_that_it_is_for() -> None:
    burn = {"region": "trunk", "of_region": "100 %", "depth": "deep partial"}
    area = [{"at": T + "10:30", "by": "EM", "method": "lund-browder", "burns": [burn]}]
    results = [{"at": T + "10:40", "lactate": "11 mmol/L"}]
    cyanide = item(found(state_text({}, area=area, results=results), at=T + "11:00"), "cyanide")
    assert cyanide.flag is Flag.ACTION
    assert "this burn is 26 %" in cyanide.cautions[0]
    assert "mg/kg" not in said(found(state_text({}, area=area, results=results), at=T + "11:00"))


def test_an_antidote_that_is_charted_ends_the_question() -> None:
    block = {"antidotes": [{"at": T + "10:50", "drug": "hydroxocobalamin"}]}
    results = [{"at": T + "10:40", "lactate": "11 mmol/L"}]
    findings = found(state_text(block, results=results), at=T + "11:00")
    assert item(findings, "cyanide").flag is Flag.NONE
    assert action(findings, "tell_prescriber") is None


def test_a_late_lactate_is_not_a_sign_of_cyanide() -> None:
    results = [{"at": "2026-03-15 10:01", "lactate": "11 mmol/L"}]
    assert item(found(state_text({}, results=results), at="2026-03-15 11:00"), "cyanide").flag is Flag.NONE


def test_the_question_about_cyanide_becomes_history_when_the_first_day_is_over() -> None:
    results = [{"at": T + "10:40", "lactate": "11 mmol/L"}]
    text = state_text({}, results=results)
    last, after = found(text, at="2026-03-15 10:00"), found(text, at="2026-03-15 10:01")
    assert item(last, "cyanide").flag is Flag.ACTION
    assert action(last, "tell_prescriber") is not None
    assert item(after, "cyanide").flag is Flag.NONE
    assert item(after, "cyanide").rank is None
    assert item(after, "cyanide").shown.startswith("of the first 24 h after the fire, history now: ")
    assert action(after, "tell_prescriber") is None


def test_signs_from_before_the_tube_do_not_count_as_present_with_it() -> None:
    signs = [looked("10:30", stridor="present"), looked("11:20", wheeze="present")]
    block = {"signs": signs, "tube": [{"placed": T + "11:00"}]}
    findings = found(state_text(block), at=T + "11:30")
    assert item(findings, "signs_present").value == 1
    assert item(findings, "signs_present").shown == (
        "1 present of 1 sign looked for: wheeze; last looked for before the tube of 11:00: stridor present"
    )
    assert "stridor present 10:30" not in item(findings, "signs").shown
    alone = found(state_text({**block, "signs": signs[:1]}), at=T + "11:30")
    assert item(alone, "signs_present").value is None
    assert item(alone, "signs_present").shown.startswith("none looked for since the tube; last looked for")


def test_stridor_keeps_asking_after_a_review() -> None:
    block = {"signs": [looked("10:30", stridor="present")], "reviews": [{"at": T + "10:35", "who": "Dr A"}]}
    review = item(found(state_text(block), at=T + "10:40"), "senior_review")
    assert review.flag is Flag.ACTION
    assert review.rank == 10


def test_a_list_from_memory_asks_for_nothing_until_the_policy_takes_it_in() -> None:
    burn = {"region": "trunk", "of_region": "100 %", "depth": "deep partial"}
    legs = [
        {"region": f"{side} {part}", "of_region": "100 %", "depth": "superficial partial"}
        for side in ("left", "right")
        for part in ("thigh", "lower leg")
    ]
    area = [{"at": T + "10:30", "by": "EM", "method": "lund-browder", "burns": [burn, *legs]}]
    block = {"watch": {"start": T + "10:30"}, "signs": [looked("10:35", stridor="absent")]}
    text = state_text(block, area=area, injury={"causes": [{"kind": "scald"}]})
    shown = item(found(text, at=T + "10:40"), "list_abls_2018")
    assert shown.value == 1
    assert "(from memory)" in shown.label
    assert item(found(text, at=T + "10:40"), "senior_review").flag is Flag.NONE
    taken = found(text, at=T + "10:40", setup=setup_with(review_lists="all"))
    assert item(taken, "senior_review").flag is Flag.ACTION


def test_the_whole_face_rule_needs_the_whole_face() -> None:
    block = {"signs": [looked("10:30", whole_face_burned="present", stridor="present")]}
    assert item(found(state_text(block), at=T + "10:40"), "list_sfar_2020").value == 1
    block = {"signs": [looked("10:30", whole_face_burned="absent", stridor="present")]}
    assert item(found(state_text(block), at=T + "10:40"), "list_sfar_2020").value == 0


def test_with_a_tube_in_place_no_one_is_called_to_look_for_the_need_of_one() -> None:
    block = {"signs": [looked("10:30", stridor="present")], "tube": [{"placed": T + "11:00"}]}
    findings = found(state_text(block), at=T + "11:05")
    assert item(findings, "senior_review").flag is Flag.NONE
    assert action(findings, "call_for_review") is None
    assert item(findings, "cuff_pressure").flag is Flag.NOT_RECORDED
    assert item(findings, "tube_ties").flag is Flag.NOT_RECORDED


def test_comfort_care_stops_the_prompts() -> None:
    block = {"signs": [looked("10:30", stridor="present")], "oxygen": [NRB]}
    patient = {"resuscitation": {"decision": "comfort care"}}
    results = [{"at": T + "10:40", "lactate": "15 mmol/L", "carboxyhaemoglobin": "30 %"}]
    findings = found(state_text(block, patient=patient, results=results), at=T + "11:00")
    assert findings.actions == ()
    asking = (Flag.ACTION, Flag.REVIEW)
    assert [one.key for one in findings.items if one.flag in asking or one.rank is not None] == []


@pytest.mark.parametrize(
    ("earliest", "phases"),
    [
        ("2026-03-14 08:00", "building"),
        ("2026-03-14 06:00", "building or peak"),
        ("2026-03-13 18:00", "building or may rise"),
        ("2026-03-12 18:00", "building or later"),
    ],
)
def test_an_uncertain_burn_time_gives_every_phase_it_may_be(earliest: str, phases: str) -> None:
    at = {"earliest": earliest, "latest": T + "10:00"}
    shown = item(found(state_text({}, injury={"at": at}), at=T + "19:30"), "swelling_phase")
    assert shown.value == phases
    assert "9 h 30 min to " in shown.shown


def test_the_height_below_the_line_is_said_and_a_child_has_no_line() -> None:
    block = {"tube": [{"placed": T + "11:00"}]}
    short = item(found(state_text(block, patient={"height": "150 cm"})), "predicted_body_weight")
    assert any("where the line begins" in caution for caution in short.cautions)
    child = item(found(state_text(block, patient={"born": "2020-01-01"})), "predicted_body_weight")
    assert child.value is None
    assert "adults" in child.shown


def test_a_named_diagnosis_is_not_made_from_a_ratio() -> None:
    block = {
        "ventilator": [{"at": T + "11:00", "fio2": "100 %", "peep": "10 cmH2O"}],
        "tube": [{"placed": T + "11:00"}],
    }
    text = state_text(block, results=[{"at": T + "11:30", "pao2": "80 mmHg"}])
    ratio = item(found(text, at=T + "12:00"), "pf_ratio")
    assert ratio.shown.startswith("80 mmHg (10.7 kPa), P/F in the 0 to 100 mmHg range")
    assert any("PEEP 10 cmH2O charted" in caution for caution in ratio.cautions)


def test_every_figure_has_a_source_and_every_computed_one_its_working() -> None:
    block = {
        "watch": {"start": T + "10:30"},
        "signs": [looked("10:45", hoarse_voice="present")],
        "oxygen": [NRB],
        "carboxyhaemoglobin": [{"at": T + "10:40", "value": "18 %"}],
    }
    findings = found(state_text(block, results=[{"at": T + "11:00", "pao2": "90 mmHg"}]), at=T + "11:05")
    for key in ("next_check", "signs_present", "carboxyhaemoglobin_now", "pf_ratio"):
        one = item(findings, key)
        assert one.sources, key
        assert one.working is not None, key
        assert one.working.sum, key
    level = item(findings, "carboxyhaemoglobin_now").working
    assert level is not None
    assert level.inputs[0].line > 0
    assert level.inputs[1].line > 0


def test_no_smoke_no_doubt_about_a_saturation() -> None:
    rows = {"2026-03-14": {"11:00": {"spo2": "99 %"}}}
    findings = found(state_text({}, injury={"causes": [{"kind": "scald"}]}, observations=rows))
    assert "falsely" not in said(findings)


def test_the_same_file_gives_the_same_findings_twice() -> None:
    text = state_text(
        {"signs": [looked("10:45", hoarse_voice="present")], "oxygen": [NRB]}, injury={"causes": [FIRE]}
    )
    assert found(text) == found(text, setup=setup_of())
