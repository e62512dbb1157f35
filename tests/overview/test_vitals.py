"""Vital signs of the overview: each with its time, old ones said, silent where the goal is comfort."""

from __future__ import annotations

from handoff.plugin import Flag
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["area", "airway_watch", "overview"]
ROW = {
    "resp": "18 /min",
    "spo2": "97 %",
    "bp": "125/80 mmHg",
    "pulse": "80 /min",
    "consciousness": "alert",
    "temp": "37 C",
}
COMFORT = {"resuscitation": {"decision": "comfort care"}}


def test_an_old_vital_sign_is_due_again_and_says_since_when() -> None:
    made = assessed(NAMES, state_text({"09:00": ROW}))
    found = item(made, "vital.pulse")
    assert found.flag is Flag.REVIEW
    assert "not rechecked since 09:00" in found.shown
    assert "pulse last at 09:00" in action(made, "vital.check").why


def test_a_trend_names_each_value_with_its_time() -> None:
    made = assessed(NAMES, state_text({"18:00": {**ROW, "pulse": "95 /min"}, "19:00": ROW}))
    assert item(made, "vital.pulse").shown == "80 /min; before: 95 /min at 18:00"


def test_a_saturation_after_smoke_without_carboxyhaemoglobin_may_read_falsely_high_wherever_it_is_printed() -> (
    None
):
    fire = {"causes": [{"kind": "flame", "setting": "enclosed space", "smoke": "yes"}]}
    rows = {"18:00": ROW, "19:00": ROW}
    shown = item(assessed(NAMES, state_text(rows, injury=fire)), "vital.spo2").shown
    assert "97 %, may read falsely high: carboxyhaemoglobin is not recorded after smoke exposure" in shown
    assert "97 % at 18:00 (in doubt)" in shown
    assert "falsely" not in item(assessed(NAMES, state_text(rows)), "vital.spo2").shown


def test_where_the_goal_is_comfort_no_sign_is_called_late_or_missing_and_none_is_asked_for() -> None:
    made = assessed(NAMES, state_text({"09:00": {"pulse": "80 /min"}}, patient=COMFORT))
    assert "vital.check" not in action_keys(made)
    assert item(made, "vital.pulse").flag is Flag.NONE
    assert [one.key for one in made.items if one.key.startswith("vital.")] == ["vital.pulse"]
