"""What is printed, and what is never printed."""

from __future__ import annotations

import re
from datetime import UTC, datetime, timedelta
from typing import Any

import pytest

from handoff.plugin import Findings, Flag, Urgency

from .build import NOW, assessed, computed, item, patient_state
from .patients import patient

NEVER = re.compile(
    r"\b(normal|stable|fine|OK|intubate|remaining|allowance)\b|mcg\.|µ|\bcc\b|\d\.0 |(?<!\d)\.\d| IU\b"
)
POSS_WORDS = ("easy to arouse", "slightly drowsy", "somnolent", "drifts off")
DAY = "2026-03-14"


def dose(time: str, drug: str, amount: str, route: str = "IV", **more: Any) -> dict[str, Any]:
    return {"at": f"{DAY} {time}", "drug": drug, "dose": amount, "route": route, **more}


READING = {"from": f"{DAY} 12:00", "to": f"{DAY} 18:00", "total": "9 mg", "presses": "1", "given": "1"}

RICH = patient_state(
    {
        "goal": {"scale": "numeric", "score": "3"},
        "self_report": {"able": "yes"},
        "doses": [
            dose("14:12", "morphine", "4 mg", place="ambulance"),
            dose("14:30", "acetaminophen", "1 g"),
            dose("15:00", "ibuprofen", "400 mg", "oral"),
            dose("18:00", "midazolam", "1 mg"),
            {
                "at": {"earliest": f"{DAY} 06:00", "latest": f"{DAY} 08:00"},
                "contains": [{"drug": "paracetamol", "dose": "1 g"}, {"drug": "codeine", "dose": "60 mg"}],
                "route": "oral",
                "place": "home",
            },
        ],
        "infusions": [
            {"line": "S1", "drug": "fentanyl", "from": f"{DAY} 16:00", "rate": "50 mcg/h", "running": f"{DAY} 18:00"},
            {"line": "patch", "drug": "buprenorphine", "route": "patch", "from": f"{DAY} 10:00", "rate": "20 mcg/h"},
            {"line": "K", "drug": "ketamine", "from": f"{DAY} 16:00", "rate": "0.1 mg/kg/h", "stopped": f"{DAY} 17:00"},
        ],
        "patient_controlled": [
            {
                "line": "P1",
                "drug": "morphine",
                "from": f"{DAY} 12:00",
                "bolus": "1 mg",
                "lockout": "5 min",
                "delivered": [READING],
            }
        ],
        "blocks": [
            {
                "at": f"{DAY} 15:30",
                "what": "fascia iliaca, left",
                "drug": "ropivacaine",
                "dose": "75 mg",
                "catheter": "yes",
                "effect": "cold not felt on the thigh",
                "checked": f"{DAY} 16:00",
            }
        ],
        "procedures": [
            {"at": f"{DAY} 12:00", "what": "escharotomy"},
            {
                "at": f"{DAY} 22:00",
                "what": "dressing change",
                "premedication": [
                    {"drug": "morphine", "route": "oral", "dose": "10 mg"},
                    {"drug": "fentanyl", "route": "intranasal"},
                    {"drug": "gabapentin", "route": "oral"},
                ],
            },
        ],
        "non_drug": [{"at": f"{DAY} 17:00", "what": "music, helped"}],
        "home_doses_asked": "no",
    },
    {
        DAY: {
            "14:15": {"pain": {"scale": "numeric", "score": "9", "during": "rest"}, "resp": "26 /min"},
            "17:00": {
                "pain": [
                    {"scale": "numeric", "score": "4", "during": "rest"},
                    {"scale": "numeric", "score": "7", "during": "movement"},
                ],
                "itch": "3",
                "anxiety": {"scale": "numeric", "score": "5"},
                "sedation": {"scale": "poss", "score": "3"},
                "resp": "8 /min",
            },
        }
    },
    conditions=["kidney disease"],
    weights=[{"value": "82 kg", "kind": "before burn", "known": "estimated"}],
)  # fmt: skip


def strings(findings: Findings) -> list[str]:
    said = []
    for one in findings.items:
        said += [one.label, one.shown, *one.cautions]
        if one.working is not None:
            said += [one.working.formula, one.working.sum, one.working.rule]
    for action in findings.actions:
        said += [action.text, action.why]
    return said


@pytest.mark.parametrize("seed", range(-1, 40))
def test_no_unsafe_word_and_no_allowance_is_printed(seed: int) -> None:
    state, choices = (RICH, {}) if seed < 0 else patient(seed)
    for said in strings(computed(state, **choices)):
        assert not NEVER.search(said), said
        assert not any(words in said.lower() for words in POSS_WORDS), said


def test_a_rich_file_runs_through_the_whole_road() -> None:
    found = assessed(RICH)
    assert not found.failures
    shown = {one.key: one.shown for one in found.items}
    assert shown["pain.infusion.s1"] == (
        "fentanyl IV 50 mcg/h (0.01 mcg/kg/min) from 16:00, last seen running 18:00; not confirmed for 2 h"
    )
    assert shown["pain.infusion.patch"].startswith(
        "buprenorphine transdermal 20 mcg/h from 10:00, not seen running since"
    )
    assert shown["pain.infusion.k"] == (
        "ketamine IV 0.1 mg/kg/h (8,200 mcg/h, 1.667 mcg/kg/min, weight 82 kg before burn) from 16:00, stopped 17:00"
    )
    assert shown["pain.patient_controlled.p1"] == (
        "morphine IV, bolus 1 mg, lockout 5 min, from 12:00; 9 mg delivered from 12:00 to 18:00, 1 press, "
        "1 gave a dose; "
        "not read for 2 h"
    )
    assert shown["pain.block.1"] == (
        "fascia iliaca, left, ropivacaine 75 mg, 15:30; catheter in place; "
        "effect: cold not felt on the thigh; checked 16:00"
    )
    assert shown["pain.non_drug"] == "music, helped, 17:00"
    assert shown["pain.procedure_not_closed"] == "escharotomy, 12:00"
    assert shown["pain.home_doses_asked"] == "not asked about; charted from ambulance and home"
    assert shown["pain.give_by"] == (
        "morphine 10 mg oral by 21:15 (45 min before); fentanyl intranasal between 21:50 and 21:55. "
        "Before giving: sedation POSS 3 at 17:00, breaths 8 /min at 17:00"
    )
    assert shown["pain.goal"] == (
        "not met: 7 (numeric rating scale, 0 to 10), on movement, 17:00; goal 3 or less (numeric rating scale, 0 to 10)"
    )


def test_asleep_is_shown_beside_the_last_score_and_is_no_score() -> None:
    rows = {
        "14:00": {"pain": {"scale": "numeric", "score": "5", "during": "rest", "site": "left arm"}},
        "15:00": {"pain": "asleep"},
    }
    found = item(computed(patient_state(None, {DAY: rows})), "pain.latest")
    assert found.shown == "5 (numeric rating scale, 0 to 10), at rest, left arm, 14:00; asleep 15:00"


def test_a_dose_taken_at_home_needs_no_reassessment() -> None:
    home = dose("08:00", "paracetamol", "1 g", "oral", place="home")
    assert item(computed(patient_state({"doses": [home]})), "pain.reassess_due").value is None


def test_the_opioid_total_is_exposure_with_the_hours_charted_and_the_table() -> None:
    total = item(computed(RICH), "pain.opioid_equivalent_24h")
    # morphine 4 x 3, codeine 60 x 0.13, fentanyl 100 mcg x 0.2, pump 9 x 3; the patch was never seen in place
    assert total.value == pytest.approx(12 + 7.8 + 20 + 27)
    assert total.shown == (
        "66.8 mg oral morphine equivalent in 24 h (10 h charted), factors: FPM-ANZCA June 2021"
    )
    assert "exposure only" in total.cautions[0]
    assert any("patch" in caution and "S1" in caution for caution in total.cautions)
    assert any("pump" in caution for caution in total.cautions)
    assert "factors were made in adults" not in total.cautions


def test_oversedation_and_slow_breathing_lead_page_one_and_call() -> None:
    found = computed(RICH)
    for key, rank in (("pain.sedation", 15), ("pain.breathing", 8)):
        assert item(found, key).flag is Flag.ACTION
        assert item(found, key).rank == rank
    call = next(action for action in found.actions if action.key == "pain.oversedation")
    assert call.urgency is Urgency.NOW
    assert "25 % to 50 % less" in call.text
    risks = " ".join(item(found, "pain.breathing").cautions)
    assert "first day of an opioid; sedatives given too: midazolam; kidney disease" in risks


def test_not_rousable_under_an_opioid_stands_before_the_airway_ranks() -> None:
    found = computed(patient_state({}, {DAY: {"19:50": {"sedation": {"scale": "poss", "score": "4"}}}}))
    assert item(found, "pain.sedation").rank == 8


def test_breathing_under_opioids_stands_in_the_detail_where_no_opioid_was_charted() -> None:
    breaths = {DAY: {"19:50": {"resp": "24 /min"}}}
    without = item(computed(patient_state({}, breaths)), "pain.breathing")
    assert without.detail
    assert without.shown == "24 /min, 19:50; no opioid charted in the last 24 h"
    dose = {"at": f"{DAY} 19:00", "drug": "morphine", "dose": "5 mg", "route": "IV"}
    assert not item(computed(patient_state({"doses": [dose]}, breaths)), "pain.breathing").detail


def test_the_published_reduction_is_worked_out_for_the_prescriber_only_in_the_working() -> None:
    line = {
        "line": "S1",
        "drug": "morphine",
        "from": f"{DAY} 16:00",
        "rate": "4 mg/h",
        "running": f"{DAY} 20:00",
    }
    state = patient_state(
        {"infusions": [line]}, {DAY: {"19:50": {"sedation": {"scale": "poss", "score": "3"}}}}
    )
    found = item(computed(state), "pain.sedation")
    assert found.working is not None
    assert found.working.sum == "4 mg/h less 25 % is 3 mg/h; less 50 % is 2 mg/h"
    assert "3 mg/h" not in found.shown


@pytest.mark.parametrize(
    "key", ["latest", "reassess_due", "opioid_equivalent_24h", "paracetamol_24h", "paracetamol_limit_24h"]
)
@pytest.mark.parametrize("pain", [None, {}, {"goal": {"scale": "numeric", "score": "3"}}, {"doses": []}])
def test_the_keys_that_scripts_rely_on_are_always_there(key: str, pain: Any) -> None:
    found = item(computed(patient_state(pain)), f"pain.{key}")
    assert found.shown
    assert found.unit == {"latest": "score", "reassess_due": "time"}.get(key, "mg")


def test_a_blank_file_flags_nothing_and_asks_for_scores_and_earlier_doses() -> None:
    state = patient_state()
    state["injury"] = {"at": f"{DAY} 13:20"}
    found = computed(state)
    assert not [one.key for one in found.items if one.flag in (Flag.ACTION, Flag.REVIEW)]
    assert [action.key for action in found.actions] == ["pain.score", "pain.ask_earlier_doses"]


def test_earlier_doses_are_not_asked_about_once_they_can_no_longer_count() -> None:
    state = patient_state({"doses": [dose("14:30", "paracetamol", "1 g")]})
    state["injury"] = {"at": "2026-03-13 19:59"}
    found = computed(state)
    assert found.item("pain.home_doses_asked") is None
    assert "not asked" not in item(found, "pain.paracetamol_24h").shown
    assert "pain.ask_earlier_doses" not in [action.key for action in found.actions]
    state["injury"] = {"at": "2026-03-13 20:00"}
    assert "not asked" in item(computed(state), "pain.paracetamol_24h").shown


def test_with_comfort_as_the_goal_of_care_pain_leads_and_sedation_does_not_call() -> None:
    patient_part = {**RICH["patient"], "resuscitation": {"decision": "comfort care"}}
    found = computed({**RICH, "patient": patient_part})
    assert item(found, "pain.class").rank == 12
    assert item(found, "pain.sedation").flag is Flag.REVIEW
    assert item(found, "pain.breathing").flag is Flag.REVIEW
    assert "pain.oversedation" not in [action.key for action in found.actions]


def test_the_watch_lasts_while_an_opioid_runs() -> None:
    def keys(**entry: Any) -> list[str]:
        line = {"line": "S1", "drug": "morphine", "from": f"{DAY} 16:00", "rate": "2 mg/h", **entry}
        return [action.key for action in computed(patient_state({"infusions": [line]})).actions]

    assert "pain.opioid_watch" in keys()
    assert "pain.opioid_watch" not in keys(stopped=f"{DAY} 17:00")
    pump = {"line": "P1", "drug": "morphine", "from": f"{DAY} 14:00"}
    later = {**pump, "from": f"{DAY} 15:00", "stopped": f"{DAY} 16:00"}
    found = computed(patient_state({"patient_controlled": [pump, later]}))
    assert "pain.opioid_watch" not in [action.key for action in found.actions]


def test_the_next_hourly_watch_follows_the_older_of_sedation_and_breathing() -> None:
    line = {
        "line": "S1",
        "drug": "morphine",
        "from": f"{DAY} 16:00",
        "rate": "2 mg/h",
        "running": f"{DAY} 20:00",
    }
    rows = {"19:30": {"sedation": {"scale": "poss", "score": "1"}}, "19:50": {"resp": "14 /min"}}
    found = computed(patient_state({"infusions": [line]}, {DAY: rows}))
    watch = next(action for action in found.actions if action.key == "pain.opioid_watch")
    assert watch.first_due == datetime(2026, 3, 14, 20, 30, tzinfo=UTC)
    assert watch.every == timedelta(hours=1)


def test_premedication_actions_say_when_and_ask_where_no_lead_time_is_known() -> None:
    texts = {action.key: action.text for action in computed(RICH).actions}
    assert texts["pain.premedicate.1"].endswith("morphine 10 mg oral by 21:15 (45 min before)")
    assert texts["pain.premedicate.3"].endswith("gabapentin oral: no lead time in the tables")
    assert "again every 10 min until awake and settled" in texts["pain.after_procedure"]


def test_a_premedication_of_the_procedure_before_does_not_count_for_the_next() -> None:
    done = {"at": f"{DAY} 14:30", "what": "dressing change", "done": "yes"}
    after = {"at": f"{DAY} 22:00", "what": "bath", "premedication": [{"drug": "morphine", "route": "oral"}]}
    given = dose("13:40", "morphine", "10 mg", "oral", **{"for": "procedure"})
    found = computed(patient_state({"procedures": [done, after], "doses": [given]}))
    assert item(found, "pain.give_by").value == datetime(2026, 3, 14, 21, 15, tzinfo=UTC)
    found = computed(patient_state({"procedures": [after], "doses": [given]}))
    assert item(found, "pain.give_by").shown == "morphine oral given 13:40, 8 h 20 min before"


def test_an_old_premedication_does_not_count_for_the_next_procedure() -> None:
    procedure = {
        "at": "2026-03-15 10:00",
        "what": "dressing change",
        "premedication": [{"drug": "morphine", "route": "oral"}],
    }
    old = dose("09:00", "morphine", "10 mg", "oral", **{"for": "procedure"})
    found = computed(patient_state({"procedures": [procedure], "doses": [old]}))
    assert item(found, "pain.give_by").value is not None


def test_the_latest_score_of_a_minute_is_the_highest_of_the_first_scale() -> None:
    found = item(computed(RICH), "pain.latest")
    assert found.value == 7
    assert found.shown == (
        "4 (numeric rating scale, 0 to 10), at rest; 7 (numeric rating scale, 0 to 10), on movement, 17:00"
    )
    assert found.as_of == NOW - timedelta(hours=3)


def test_an_item_carries_the_line_of_the_file_it_came_from() -> None:
    found = assessed(RICH)
    by_key = {one.key: one for one in found.items}
    for key in ("pain.latest", "pain.goal", "pain.sedation", "pain.infusion.s1", "pain.block.1"):
        assert by_key[key].line > 0
    working = by_key["pain.opioid_equivalent_24h"].working
    assert working is not None
    assert all(one.line for one in working.inputs)
