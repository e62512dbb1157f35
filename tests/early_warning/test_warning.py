"""What the early warning score says and does not say."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, faults_of, item, state_text

NAMES = ["early_warning"]
WELL = {
    "resp": "18 /min",
    "spo2": "97 %",
    "on_oxygen": "no",
    "bp": "125/80 mmHg",
    "pulse": "80 /min",
    "consciousness": "alert",
    "temp": "37 C",
}
SICK = {**WELL, "resp": "30 /min", "spo2": "90 %", "on_oxygen": "yes", "bp": "85/50 mmHg"}
FIRE = {"causes": [{"kind": "flame", "setting": "enclosed space"}]}


def score_of(row: dict[str, Any], **more: Any) -> Any:
    return item(assessed(NAMES, state_text({"19:00": row}, **more)), "early_warning.score")


def test_a_score_of_seven_or_more_reaches_page_one_and_asks_for_a_call_now() -> None:
    made = assessed(NAMES, state_text({"19:00": SICK}))
    assert item(made, "early_warning.score").rank == 38
    call = action(made, "early_warning.call")
    assert call.urgency is Urgency.NOW
    assert "within 30 min" in call.text
    assert "breaths 30 /min (3)" in call.why


def test_an_urgent_score_asks_for_an_assessment_within_the_hour() -> None:
    made = assessed(
        NAMES, state_text({"19:00": {**WELL, "pulse": "120 /min", "resp": "22 /min", "temp": "38.5 C"}})
    )
    assert item(made, "early_warning.score").rank == 39
    assert "within 60 min" in action(made, "early_warning.call").text


def test_a_review_recorded_after_the_score_takes_the_call_off_the_plan_but_not_the_flag() -> None:
    events = [{"at": "2026-03-14 19:10", "what": "review by doctor", "who": "Dr A"}]
    made = assessed(NAMES, state_text({"19:00": SICK}, events=events))
    assert action_keys(made) == []
    assert item(made, "early_warning.score").flag is Flag.ACTION
    assert "review by doctor recorded at 19:10" in item(made, "early_warning.response").shown


def test_a_review_before_the_score_does_not_answer_it() -> None:
    events = [{"at": "2026-03-14 18:59", "what": "review by doctor", "who": "Dr A"}]
    assert action_keys(assessed(NAMES, state_text({"19:00": SICK}, events=events))) == ["early_warning.call"]


def test_a_low_score_asks_for_nothing_and_says_that_it_lowers_no_flag() -> None:
    found = score_of(WELL)
    assert found.value == 0
    assert found.rank is None
    assert any("never lowers another flag" in caution for caution in found.cautions)


@pytest.mark.parametrize("missing", ["resp", "spo2", "on_oxygen", "bp", "pulse", "consciousness", "temp"])
def test_a_set_without_any_one_part_has_no_total(missing: str) -> None:
    found = score_of({key: value for key, value in WELL.items() if key != missing})
    assert found.value is None
    assert found.flag is Flag.NOT_RECORDED
    assert "incomplete" in found.shown


@pytest.mark.parametrize(
    ("name", "word"), [("spo2", "no trace"), ("temp", "not measured"), ("bp", "not measured")]
)
def test_a_sign_written_as_not_measured_is_missing_and_not_zero(name: str, word: str) -> None:
    found = score_of({**WELL, name: word})
    assert found.value is None
    assert word in found.shown


def test_nothing_charted_is_not_recorded() -> None:
    found = item(assessed(NAMES, state_text()), "early_warning.score")
    assert (found.value, found.shown, found.flag) == (None, "not recorded", Flag.NOT_RECORDED)


def test_the_parts_name_their_lines() -> None:
    found = score_of(WELL)
    assert found.working is not None
    assert len(found.working.inputs) == 7
    assert all(part.line > 0 for part in found.working.inputs)


def test_oxygen_in_force_counts_where_the_row_does_not_say() -> None:
    row = {key: value for key, value in WELL.items() if key != "on_oxygen"}
    names = ["early_warning", "airway_watch", "area"]
    for oxygen, total in (
        ([{"from": "2026-03-14 09:00", "device": "simple mask", "flow": "6 L/min"}], 2),
        ([{"from": "2026-03-14 09:00", "device": "room air"}], 0),
        ([{"from": "2026-03-14 09:00", "device": "simple mask", "stopped": "2026-03-14 18:00"}], 0),
        ([{"from": "2026-03-14 09:00", "device": "simple mask", "stopped": "2026-03-14 19:15"}], 2),
        ([{"from": "2026-03-14 19:10", "device": "simple mask"}], None),
    ):
        made = assessed(names, state_text({"19:00": row}, airway_watch={"oxygen": oxygen}))
        assert item(made, "early_warning.score").value == total, oxygen


def test_the_row_goes_before_the_oxygen_in_force() -> None:
    oxygen = {"oxygen": [{"from": "2026-03-14 09:00", "device": "simple mask"}]}
    made = assessed(
        ["early_warning", "airway_watch", "area"], state_text({"19:00": WELL}, airway_watch=oxygen)
    )
    assert item(made, "early_warning.score").value == 0


@pytest.mark.parametrize(
    ("injury", "doubted"),
    [
        (FIRE, True),
        ({"causes": [{"kind": "flame", "setting": "open air", "trapped": "yes"}]}, True),
        ({"causes": [{"kind": "contact", "smoke": "yes"}]}, True),
        ({"causes": [{"kind": "flame", "setting": "open air", "smoke": "no"}]}, False),
        ({"causes": [{"kind": "scald", "setting": "enclosed space"}]}, False),
    ],
)
def test_smoke_without_a_carboxyhaemoglobin_may_make_it_read_falsely_low(
    injury: dict[str, Any], doubted: bool
) -> None:
    assert ("may read falsely low" in score_of(WELL, injury=injury).shown) is doubted


def test_a_raised_carboxyhaemoglobin_keeps_the_doubt() -> None:
    names = ["early_warning", "airway_watch", "area"]
    for pct, doubted in (("5.1 %", True), ("5 %", False)):
        block = {"carboxyhaemoglobin": [{"at": "2026-03-14 10:00", "value": pct}]}
        made = assessed(names, state_text({"19:00": WELL}, injury=FIRE, airway_watch=block))
        assert ("may read falsely low" in item(made, "early_warning.score").shown) is doubted


def test_scale_two_counts_only_while_it_is_prescribed() -> None:
    row = {**WELL, "on_oxygen": "yes"}
    for at, ended, total in (
        ("18:59", None, 5),
        ("19:01", None, 2),
        ("09:00", "19:00", 2),
        ("09:00", "19:01", 5),
    ):
        block = {"at": f"2026-03-14 {at}", "prescribed_by": "Dr A", "hypercapnic_failure": "confirmed"}
        if ended:
            block["ended"] = f"2026-03-14 {ended}"
        text = state_text({"19:00": row}, early_warning={"scale_2": block})
        assert item(assessed(NAMES, text), "early_warning.score").value == total


def test_scale_two_with_oxygen_unknown_has_points_only_where_both_tables_agree() -> None:
    row = {key: value for key, value in WELL.items() if key != "on_oxygen"}
    block = {
        "scale_2": {"at": "2026-03-14 09:00", "prescribed_by": "Dr A", "hypercapnic_failure": "confirmed"}
    }
    for pct, missing in (("97 %", True), ("92 %", False), ("84 %", False)):
        found = score_of({**row, "spo2": pct}, early_warning=block)
        assert ("scale 2 needs air or oxygen" in found.shown) is missing


def test_scale_two_without_its_prescriber_is_refused() -> None:
    said = faults_of(NAMES, state_text(early_warning={"scale_2": {"at": "2026-03-14 09:00"}}))
    assert any("prescribed_by" in fault for fault in said)


def test_comfort_as_the_goal_of_care_asks_for_nothing_and_names_no_threshold() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    row = {**SICK, "consciousness": "unresponsive", "gcs": {"eye": "1", "verbal": "1", "motor": "1"}}
    made = assessed(NAMES, state_text({"19:00": row}, patient=comfort))
    assert action_keys(made) == []
    assert all(one.flag is Flag.NONE and one.rank is None for one in made.items)
    found = item(made, "early_warning.score")
    assert found.shown == "not computed: the goal of care is comfort, and the score asks for nothing"
    assert found.detail
    assert not [
        one.key for one in made.items if "threshold" in one.shown or one.key == "early_warning.next_due"
    ]


def test_a_value_older_than_the_set_carries_its_own_time() -> None:
    early = {key: WELL[key] for key in ("temp", "on_oxygen")}
    late = {key: value for key, value in WELL.items() if key not in early}
    made = assessed(NAMES, state_text({"18:30": early, "19:00": late}))
    found = item(made, "early_warning.score")
    assert found.value == 0
    assert "temperature 37 C at 18:30 (0)" in found.shown
    assert "on air at 18:30 (0)" in found.shown
    assert "pulse 80 /min (0)" in found.shown
    assert found.working is not None
    shown = {one.label: one.shown for one in found.working.inputs}
    assert shown["temperature"] == "37 C at 18:30 = 0"
    assert shown["pulse"] == "80 /min = 0"


def test_oxygen_by_its_device_carries_its_start() -> None:
    block = {"oxygen": [{"from": "2026-03-14 17:35", "device": "simple mask", "flow": "6 L/min"}]}
    row = {key: value for key, value in WELL.items() if key != "on_oxygen"}
    made = assessed(["area", *NAMES, "airway_watch"], state_text({"19:00": row}, airway_watch=block))
    assert "on oxygen simple mask since 17:35 (2)" in item(made, "early_warning.score").shown


def test_the_trend_names_the_complete_scores_before() -> None:
    made = assessed(NAMES, state_text({"17:00": SICK, "18:00": {**WELL, "pulse": "95 /min"}, "19:00": WELL}))
    assert item(made, "early_warning.score").shown.endswith("Before: 11 at 17:00, 1 at 18:00")


def test_pregnancy_not_recorded_is_a_caution_where_it_is_possible() -> None:
    woman = score_of(WELL, patient={"sex": "female"})
    assert any("Pregnancy is not recorded" in caution for caution in woman.cautions)
    assert not any("Pregnancy" in caution for caution in score_of(WELL).cautions)


@pytest.mark.parametrize(
    ("born", "line"),
    [
        ("2026-02-14", 60),  # 28 days
        ("2026-02-13", 70),  # 29 days
        ("2025-03-15", 70),  # the day before the first birthday
        ("2025-03-14", 72),
        ("2016-03-14", 90),  # tenth birthday
        ("2015-03-14", 90),  # eleventh birthday: the fixed line
    ],
)
def test_the_line_of_low_pressure_follows_the_age(born: str, line: int) -> None:
    for value, acts in ((line - 1, True), (line, False)):
        text = state_text({"19:00": {"bp": f"{value}/20 mmHg"}}, patient={"born": born}, injury={"at": None})
        found = item(assessed(NAMES, text), "early_warning.child_systolic")
        assert (found.flag is Flag.ACTION) is acts
        assert f"{line} mmHg" in found.shown


def test_an_adult_has_no_ranges_of_children_and_a_child_has_no_score() -> None:
    adult = [one.key for one in assessed(NAMES, state_text({"19:00": WELL})).items]
    assert not any("child_" in key for key in adult)
    child = assessed(NAMES, state_text({"19:00": WELL}, patient={"born": "2020-01-01"}))
    assert item(child, "early_warning.score").value is None
    assert "early_warning.next_due" not in [one.key for one in child.items]


def test_without_a_table_only_the_fixed_lines_are_said() -> None:
    text = state_text({"19:00": {**WELL, "bp": "70/40 mmHg"}}, patient={"born": "2020-01-01"})
    made = assessed(NAMES, text, choices={"early_warning.child_ranges": "none"})
    keys = [one.key for one in made.items]
    assert "early_warning.child_pulse" not in keys
    assert item(made, "early_warning.child_systolic").rank == 34


def test_a_table_from_memory_raises_no_flag_by_itself(monkeypatch: pytest.MonkeyPatch) -> None:
    from handoff.parameters import Chosen, Parameters

    monkeypatch.setattr(Parameters, "chosen", lambda self, name: Chosen("apls-5", by_policy=False))
    text = state_text({"19:00": {"pulse": "175 /min"}}, patient={"born": "2025-10-10"})
    found = item(assessed(NAMES, text), "early_warning.child_pulse")
    assert "above 110 to 160" in found.shown
    assert found.flag is Flag.NONE


def test_a_fall_of_the_coma_scale_needs_action() -> None:
    rows = {
        "18:00": {"gcs": {"eye": "4", "verbal": "5", "motor": "6"}},
        "19:00": {"gcs": {"eye": "3", "verbal": "5", "motor": "6"}},
    }
    found = item(assessed(NAMES, state_text(rows)), "early_warning.coma_scale")
    assert (found.value, found.flag, found.rank) == (14, Flag.ACTION, None)
    rows["18:00"], rows["19:00"] = rows["19:00"], rows["18:00"]
    assert item(assessed(NAMES, state_text(rows)), "early_warning.coma_scale").flag is Flag.NONE


@pytest.mark.parametrize("verbal", ["tube", "not testable"])
def test_a_part_that_cannot_be_tested_leaves_no_sum(verbal: str) -> None:
    rows = {"19:00": {"gcs": {"eye": "2", "verbal": verbal, "motor": "4"}, "pupils_unreactive": "0"}}
    made = assessed(NAMES, state_text(rows))
    assert item(made, "early_warning.coma_scale").value is None
    assert "no sum" in item(made, "early_warning.coma_scale").shown
    assert "not computed" in item(made, "early_warning.coma_pupils").shown


def test_pupils_that_cannot_be_seen_are_not_counted_as_reacting() -> None:
    rows = {"19:00": {"gcs": {"eye": "4", "verbal": "5", "motor": "6"}, "pupils_unreactive": "not visible"}}
    found = item(assessed(NAMES, state_text(rows)), "early_warning.coma_pupils")
    assert (found.value, found.flag) == (None, Flag.NONE)
    assert "pupils not visible" in found.shown


def test_a_level_below_voice_is_on_page_one() -> None:
    for said, rank in (
        ("unresponsive", 17),
        ("responds to pain", 17),
        ("responds to voice", None),
        ("alert", None),
    ):
        found = item(
            assessed(NAMES, state_text({"19:00": {"consciousness": said}})), "early_warning.consciousness"
        )
        assert found.rank == rank
        assert (found.flag is Flag.ACTION) is (said != "alert")


def test_air_and_oxygen_are_named_as_they_are() -> None:
    assert "on air (0)" in score_of(WELL).shown
    assert "on oxygen (2)" in score_of({**WELL, "on_oxygen": "yes"}).shown
