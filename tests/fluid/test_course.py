"""What the items promise: plan, given, urine first, comfort, uncertain times, blank is not zero."""

from __future__ import annotations

import re
from typing import Any

import pytest

from handoff.plugin import Flag, Item, Urgency

from .build import assessed, burned, computed, item, order, run, value, whole

PLAN = (
    "total_24h",
    "first_8h",
    "rate_now",
    "due_by_now",
    "catch_up_rate",
    "against_plan",
    "formula_figure",
    "given_index",
    "projected_24h",
    "projected_per_kg",
)
CONTRACT = {
    "total_24h": "mL",
    "first_8h": "mL",
    "rate_now": "mL/h",
    "catch_up_rate": "mL/h",
    "due_by_now": "mL",
    "given": "mL",
    "not_confirmed": "mL",
    "given_index": "mL/kg/%",
    "projected_24h": "mL",
    "projected_per_kg": "mL/kg",
    "urine_rate": "mL/kg/h",
    "urine_last": "mL/h",
    "maintenance_rate": "mL/h",
    "balance": "mL",
}


def hour(ml: str, over: str = "1 h", **more: Any) -> dict[str, Any]:
    return {"urine": {"volume": ml, "over": over, **more}}


def bolus(ml: int, at: str = "2026-03-14 09:00", purpose: str = "resuscitation") -> dict[str, Any]:
    return {"at": at, "volume": f"{ml} mL", "purpose": purpose}


def full(**more: Any) -> dict[str, Any]:
    return burned(
        "20 kg",
        "30 %",
        born="2020-01-01",
        orders=[order("3 mL/kg/%")],
        given=[bolus(200), run("100 mL/h", "2026-03-14 10:00", running="2026-03-14 11:30")],
        rows={"11:00": hour("20 mL"), "12:00": hour("18 mL")},
        **more,
    )


@pytest.mark.parametrize("key", CONTRACT)
def test_every_key_of_the_contract_has_its_unit_and_its_working(key: str) -> None:
    found = item(computed(full()), key)
    assert isinstance(found.value, float)
    assert found.unit == CONTRACT[key]
    assert found.working is not None
    assert found.sources


@pytest.mark.parametrize("key", CONTRACT)
def test_on_an_almost_empty_file_every_key_says_that_it_is_not_recorded(key: str) -> None:
    found = item(computed(burned(None, None, burn=None)), key)
    assert found.value is None
    assert found.flag in (Flag.NOT_RECORDED, Flag.NONE)
    assert "not recorded" in found.shown or "missing" in found.shown or "none" in found.shown


@pytest.mark.parametrize("key", ["total_24h", "rate_now", "due_by_now"])
@pytest.mark.parametrize(
    ("left_out", "said"), [("kg", "weight"), ("pct", "burned area"), ("burn", "time of the burn")]
)
def test_what_is_missing_is_named(key: str, left_out: str, said: str) -> None:
    if key == "total_24h" and left_out == "burn":
        return  # the volume of 24 h needs no time of the burn
    state: dict[str, Any] = {"orders": [order("2 mL/kg/%")], left_out: None}
    assert said in item(computed(burned(**state)), key).shown


def test_every_computed_rate_says_formula_estimate_and_what_stands_beside_it() -> None:
    patient = {"conditions": ["heart disease", "frailty"], "pregnant": "yes"}
    smoke = {"kind": "flame", "smoke": "yes"}
    found = item(computed(burned(orders=[order()], cause=smoke, patient=patient)), "rate_now")
    assert "formula estimate" in found.shown
    said = " ".join(found.cautions)
    assert "Inhalation injury: the formula may be low." in said
    assert "Heart disease, frailty and pregnancy" in said


@pytest.mark.parametrize(("at", "late"), [("10:00", False), ("10:01", True)])
def test_a_start_later_than_two_hours_says_that_the_formula_may_be_low(at: str, late: bool) -> None:
    found = computed(burned(orders=[order()], given=[bolus(100, f"2026-03-14 {at}")]))
    assert ("Late start" in " ".join(item(found, "rate_now").cautions)) is late


def test_electrical_injury_says_that_the_formula_may_be_low() -> None:
    cause = {"kind": "electrical", "voltage": "11 kV"}
    found = computed(burned(orders=[order()], cause=cause))
    assert "Electrical injury: the formula may be low." in item(found, "total_24h").cautions


def test_without_a_voltage_the_named_rule_is_not_applied() -> None:
    found = computed(burned(cause={"kind": "electrical"}, orders=[order()]))
    assert "missing voltage" in item(found, "formula_figure").shown


def test_a_frail_patient_whose_conditions_are_not_recorded_is_said() -> None:
    assert "not recorded; each changes the figure" in " ".join(
        item(computed(burned(orders=[order()])), "rate_now").cautions
    )


def test_without_an_order_there_is_a_range_and_no_single_rate() -> None:
    found = computed(burned())
    rate = item(found, "rate_now")
    assert rate.value is None
    assert rate.flag is Flag.REVIEW
    assert rate.shown.startswith("no order recorded; 400 to 800 mL/h by the published coefficients")
    assert any(action.key == "fluid.ask_order" for action in found.actions)


def test_an_order_that_was_ended_is_no_longer_in_force() -> None:
    ended = order(ended="2026-03-14 11:00")
    assert item(computed(burned(orders=[ended])), "order").flag is Flag.REVIEW
    assert value(computed(burned(orders=[ended]), "2026-03-14 10:30"), "rate_now") == 400


def test_the_order_in_force_counts_from_its_moment_and_a_rate_replaces_the_formula() -> None:
    later = order("4 mL/kg/%", "2026-03-14 11:00")
    assert value(computed(burned(orders=[later, order()])), "total_24h") == 12_800
    by_rate = {"at": "2026-03-14 10:00", "rate": "700 mL/h"}
    found = computed(burned(orders=[order(), by_rate]))
    assert value(found, "rate_now") == 700
    assert value(found, "due_by_now") == 400 * 2 + 700 * 2
    assert item(found, "rate_now").label == "Planned rate now, as ordered"
    assert "A rate of 700 mL/h was ordered at 10:00" in " ".join(item(found, "total_24h").cautions)


def test_a_rate_of_the_units_own_follows_on_the_volume_ordered_before_it() -> None:
    own = {"at": "2026-03-14 10:00", "formula": "local", "rate": "700 mL/h"}
    found = computed(burned(orders=[order(), own], given=[bolus(1500)]))
    assert value(found, "due_by_now") == 400 * 2 + 700 * 2
    assert item(found, "due_by_now").shown == "2,200 mL since the burn (formula estimate)"
    assert value(found, "against_plan") == 1500 - 2200
    assert value(found, "total_24h") == 6400


def test_where_only_rates_were_ordered_due_and_given_count_from_the_first_of_them() -> None:
    own = {"at": "2026-03-14 10:00", "formula": "local", "rate": "700 mL/h"}
    ran = [run("900 mL/h", "2026-03-14 08:30", stopped="2026-03-14 10:30")]
    found = computed(burned(orders=[own], given=ran))
    assert item(found, "due_by_now").shown == (
        "1,400 mL since the order of 10:00 (ordered rate); given since then 450 mL"
    )
    assert value(found, "given") == 1800
    assert value(found, "against_plan") == 450 - 1400
    assert item(found, "against_plan").shown.startswith("950 mL less than due since the order of 10:00;")


def test_a_plan_beside_a_burn_below_the_start_line_is_shown_because_it_was_ordered() -> None:
    found = computed(burned("80 kg", "12 %", orders=[order()]))
    assert value(found, "total_24h") == 1920
    assert "below the start line" in " ".join(item(found, "order").cautions)


def test_below_the_start_line_there_is_no_plan_and_electrical_injury_is_said() -> None:
    cause = {"kind": "electrical", "voltage": "11 kV"}
    found = computed(burned("80 kg", "12 %", cause=cause))
    rate = item(found, "rate_now")
    assert rate.value is None
    assert rate.flag is Flag.NONE
    assert rate.shown == "no plan: 12 %TBSA is below the start line of emergency-teaching (adult, above 15 %)"
    assert "the skin does not show" in " ".join(rate.cautions)
    assert not [action for action in found.actions if action.key == "fluid.ask_order"]


def test_a_patient_between_the_rules_is_said_with_both_figures() -> None:
    found = computed(burned("45 kg", "25 %", born="2012-06-01", orders=[order()]))
    said = item(found, "formula_figure").shown
    assert "falls between the rules of abls-2010" in said
    assert "2,250 to 4,500 mL in 24 h, no single figure" in said


def test_an_uncertain_burn_time_gives_a_range() -> None:
    burn = {"earliest": "2026-03-14 03:00", "latest": "2026-03-14 08:00"}
    state = burned(burn=burn, orders=[order(at="2026-03-14 09:00")], given=[bolus(1000)])
    found = computed(state)
    assert value(found, "total_24h") == 6400
    assert item(found, "rate_now").value is None
    assert item(found, "rate_now").shown.startswith("200 to 400 mL/h (formula estimate")
    assert item(found, "due_by_now").shown.startswith("1,600 to 3,400 mL")
    assert item(found, "against_plan").value is None
    assert "8 h may have passed" in item(found, "catch_up_rate").shown


def test_catching_up_is_detail_and_flags_that_little_time_is_left() -> None:
    found = item(computed(burned(orders=[order()], given=[bolus(0)]), "2026-03-14 15:30"), "catch_up_rate")
    assert found.value == pytest.approx(6400)
    assert found.detail
    assert found.rank is None
    assert "16 times the planned rate" in " ".join(found.cautions)


def test_after_eight_hours_the_shortfall_is_shown_and_no_rate_invented() -> None:
    found = computed(burned(orders=[order()], given=[bolus(700)]), "2026-03-14 17:00")
    caught = item(found, "catch_up_rate")
    assert caught.value is None
    assert "no published rule follows; shortfall at 8 h 2,500 mL" in caught.shown
    assert value(found, "rate_now") == 200


def test_after_the_period_the_formula_gives_no_rate() -> None:
    found = item(computed(burned(orders=[order()]), "2026-03-15 08:00"), "rate_now")
    assert found.value is None
    assert found.shown == "the formula ends at 24 h; no rate by it now"


def test_what_nobody_confirmed_stands_apart() -> None:
    line = run("600 mL/h", "2026-03-14 09:00", running="2026-03-14 10:00")
    found = computed(burned(orders=[order()], given=[line]))
    assert value(found, "given") == 600
    assert value(found, "not_confirmed") == 1200
    assert item(found, "not_confirmed").flag is Flag.REVIEW
    assert "R1 600 mL/h, last seen running 10:00" in item(found, "not_confirmed").shown


def test_a_second_entry_on_a_line_replaces_the_rate_and_another_line_runs_beside() -> None:
    first = run("600 mL/h", "2026-03-14 09:00")
    same = {"line": "R1", "from": "2026-03-14 10:00", "rate": "100 mL/h", "stopped": "2026-03-14 11:00"}
    other = {**run("60 mL/h", "2026-03-14 10:00", stopped="2026-03-14 12:00"), "line": "R2"}
    found = computed(burned(orders=[order()], given=[same, first, other]))
    assert value(found, "given") == 600 + 100 + 120
    assert value(found, "not_confirmed") == 0


def test_a_restart_after_a_stop_leaves_the_gap_out() -> None:
    entries = [
        run("600 mL/h", "2026-03-14 09:00", stopped="2026-03-14 09:30", reason="line tissued"),
        {"line": "R1", "from": "2026-03-14 11:00", "rate": "300 mL/h", "running": "2026-03-14 12:00"},
    ]
    assert value(computed(burned(orders=[order()], given=entries)), "given") == 300 + 300


def test_only_resuscitation_is_set_against_the_plan_and_the_rest_stands_apart() -> None:
    entries = [
        bolus(500),
        bolus(100, purpose="drug carrier"),
        bolus(250, purpose="colloid"),
        bolus(200, purpose="feed"),
        {**bolus(300, purpose="blood product"), "reaction": "none"},
    ]
    found = computed(burned(orders=[order()], given=entries))
    assert value(found, "given") == 500
    assert value(found, "given_colloid") == 250
    assert value(found, "given_drug_carrier") == 100
    assert "reaction: none" in item(found, "given_blood_product").shown
    assert value(found, "balance") == 1350


def test_a_formula_that_holds_colloid_counts_colloid_too() -> None:
    entries = [bolus(500), bolus(250, purpose="colloid")]
    found = computed(burned(orders=[{"at": "2026-03-14 08:00", "formula": "evans"}], given=entries))
    assert value(found, "given") == 750
    assert found.item("fluid.given_colloid") is None


def test_fluid_before_arrival_is_credited_in_the_hour_of_arrival() -> None:
    state = burned(
        orders=[order()],
        given=[{"before_arrival": "500 mL", "purpose": "resuscitation", "fluid": "lactated Ringer's"}],
        events=[{"at": "2026-03-14 10:15", "what": "admission"}],
    )
    found = computed(state)
    assert value(found, "given") == 500
    rows = found.values["hours"]
    assert isinstance(rows, tuple)
    assert [row.given_ml for row in rows] == [0, 0, 500, 0]


def test_blank_is_not_zero() -> None:
    found = computed(burned(orders=[order()]))
    assert item(found, "given").value is None
    assert item(found, "against_plan").shown == "nothing given is recorded: blank is not zero"
    assert item(found, "catch_up_rate").value is None


@pytest.mark.parametrize(
    ("ml", "said", "flag"),
    [
        (
            "40 mL",
            "300 mL less than due; the last urine is not below its target, so this is not called behind",
            Flag.NONE,
        ),
        ("39 mL", "Behind the plan: 300 mL less than due; the last urine is below its target", Flag.REVIEW),
        ("0 mL", "Behind the plan: 300 mL less than due; the last urine is below its target", Flag.REVIEW),
    ],
)
def test_urine_comes_before_given_against_due(ml: str, said: str, flag: Flag) -> None:
    found = computed(burned(orders=[order()], given=[bolus(1300)], rows={"12:00": hour(ml)}))
    against = item(found, "against_plan")
    assert against.shown == said
    assert against.flag is flag
    assert against.rank is None


def test_a_run_of_low_hours_calls_for_action_and_is_said() -> None:
    rows = {"10:00": hour("60 mL"), "11:00": hour("30 mL"), "12:00": {"urine": "30 mL"}}
    found = computed(burned(orders=[order()], rows=rows))
    rate = item(found, "urine_rate")
    assert rate.flag is Flag.ACTION
    assert rate.rank is not None
    assert "below the target of 0.5 to 1 mL/kg/h for 2 h without a break" in rate.shown
    assert [a.urgency for a in found.actions if a.key == "fluid.urine_low"] == [Urgency.NOW]


def test_an_ordered_target_wins() -> None:
    ordered = {"at": "2026-03-14 10:00", "urine_target": {"from": "75 mL/h", "to": "100 mL/h"}}
    found = computed(burned(orders=[order(), ordered], rows={"12:00": hour("60 mL")}))
    assert item(found, "urine_target").shown == "75 to 100 mL/h (order of 10:00)"
    assert "below the target" in item(found, "urine_rate").shown


def test_urine_after_a_missed_hour_goes_over_its_true_interval() -> None:
    rows = {"09:00": hour("50 mL"), "10:00": {"urine": "not measured"}, "12:00": {"urine": "120 mL"}}
    found = computed(burned(orders=[order()], rows=rows))
    assert value(found, "urine_last") == 40
    assert "120 mL over 3 h" in item(found, "urine_rate").shown
    rows_out = found.values["hours"]
    assert isinstance(rows_out, tuple)
    assert rows_out[1].urine_text == "not measured"
    assert rows_out[1].urine_ml is None
    assert rows_out[3].urine_text == "120 mL over 3 h"


def test_urine_that_was_lost_begins_a_new_interval() -> None:
    rows = {"09:00": hour("50 mL"), "11:00": {"urine": "lost"}, "12:00": {"urine": "30 mL"}}
    assert value(computed(burned(orders=[order()], rows=rows)), "urine_last") == 30


def test_two_entries_of_one_minute_are_added_and_said() -> None:
    rows = {"11:00": hour("40 mL"), "12:00": [{"urine": "20 mL"}, {"urine": "25 mL"}]}
    found = computed(burned(orders=[order()], rows=rows))
    assert value(found, "urine_last") == 45
    assert "2 entries of that minute added" in item(found, "urine_rate").shown


def test_a_first_measure_without_an_interval_gives_no_rate() -> None:
    found = item(computed(burned(orders=[order()], rows={"12:00": {"urine": "60 mL"}})), "urine_rate")
    assert found.value is None
    assert "interval not recorded" in found.shown


def test_a_pad_counts_by_the_weight_it_gained() -> None:
    rows = {"11:00": {"urine": {"pad": "10 g"}}, "12:00": {"urine": {"pad": "64 g", "dry": "50 g"}}}
    assert value(computed(burned("14 kg", "20 %", born="2023-01-01", rows=rows)), "urine_rate") == 1


def test_urine_not_measured_for_long_says_since_when() -> None:
    found = item(computed(burned(orders=[order()], rows={"10:00": hour("60 mL")})), "urine_rate")
    assert found.flag is Flag.REVIEW
    assert "not measured since 10:00" in found.shown


def test_pigmented_urine_of_a_child_gets_no_invented_target() -> None:
    state = burned(
        "20 kg", "30 %", born="2020-01-01", orders=[order()], rows={"12:00": hour("30 mL", colour="brown")}
    )
    found = computed(state)
    assert "ask the prescriber for the target" in " ".join(item(found, "urine_target").cautions)
    assert item(found, "urine_colour").flag is Flag.ACTION
    assert any(action.key == "fluid.creatine_kinase" for action in found.actions)


def test_comfort_stops_every_prompt_and_keeps_what_was_charted() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    state = burned(
        orders=[order()],
        given=[bolus(500), run("100 mL/h", "2026-03-14 09:00")],
        rows={
            "11:00": hour("5 mL"),
            "12:00": {"urine": "5 mL", "bp": "70/40 mmHg", "bladder_pressure": "30 mmHg"},
        },
        results=[{"at": "2026-03-14 11:00", "potassium": "7.0 mmol/L"}],
        patient=comfort,
    )
    found = assessed(state, "2026-03-14 12:00", titration="uthealth-2021").findings["fluid"]
    assert found.actions == ()
    for key in PLAN:
        assert item(found, key).value is None
        assert item(found, key).shown == "not prompted: the goal of care is comfort"
    assert value(found, "given") == 500
    assert value(found, "urine_last") == 5
    assert {one.flag for one in found.items} <= {Flag.NONE, Flag.NOT_RECORDED}
    assert all(one.rank is None for one in found.items)


def test_too_much_fluid_is_projected_with_the_time_of_each_line() -> None:
    line = run("1500 mL/h", "2026-03-14 08:00", running="2026-03-14 12:00")
    found = computed(burned(orders=[order()], given=[line]))
    projected = item(found, "projected_24h")
    assert projected.value == 36_000
    assert projected.flag is Flag.REVIEW
    assert "6 mL/kg/% (19,200 mL) would be crossed at 20:48" in projected.shown
    assert "250 mL/kg (20,000 mL) would be crossed at 21:20" in projected.shown
    assert {"fluid.too_much", "fluid.bladder_pressure_check"} <= {action.key for action in found.actions}


def test_the_titration_table_is_named_and_to_be_confirmed() -> None:
    line = run("500 mL/h", "2026-03-14 08:00", running="2026-03-14 12:00")
    state = burned("80 kg", "25 %", orders=[order()], given=[line], rows={"12:00": hour("20 mL")})
    assert computed(state).item("fluid.titration") is None
    said = item(computed(state, titration="uthealth-2021"), "titration").shown
    assert said == (
        "table uthealth-2021 says: raise the rate by 20 % of the running rate; from 500 mL/h that is 600 mL/h; "
        "confirm with prescriber"
    )


def test_maintenance_is_never_added_to_a_formula_that_holds_it() -> None:
    patient = {"height": "110 cm"}
    for name in ("galveston", "cincinnati"):
        ordered = [{"at": "2026-03-14 08:00", "formula": name}]
        found = computed(burned("20 kg", "30 %", born="2020-01-01", orders=ordered, patient=patient))
        assert item(found, "maintenance_rate").value is None
        assert "holds maintenance already" in item(found, "maintenance_rate").shown


def test_a_small_child_is_asked_about_glucose() -> None:
    found = computed(burned("14 kg", "20 %", born="2023-01-01", orders=[order()]))
    assert item(found, "glucose_small_child").flag is Flag.NOT_RECORDED
    assert any(action.key == "fluid.glucose" for action in found.actions)


def test_the_balance_of_the_shift_begins_at_the_last_handover() -> None:
    state = burned(
        orders=[order()],
        given=[run("100 mL/h", "2026-03-14 08:00", running="2026-03-14 12:00")],
        rows={"09:00": hour("50 mL"), "12:00": hour("20 mL")},
        fluid={"losses": [{"at": "2026-03-14 11:00", "what": "vomit", "volume": "30 mL"}]},
        handovers=[{"at": "2026-03-14 10:00"}, {"at": "2026-03-14 12:00"}],
    )
    found = computed(state)
    assert value(found, "balance") == 400 - 100
    assert value(found, "balance_shift") == 200 - 20 - 30
    assert value(found, "balance_chart_day") == 300


def test_what_drained_at_insertion_is_in_the_balance_and_not_in_the_hour() -> None:
    lines = [
        {"what": "urinary catheter 14 Fr", "placed": "2026-03-14 11:00", "drained_at_insertion": "200 mL"}
    ]
    found = computed(burned(orders=[order()], rows={"12:00": {"urine": "40 mL"}}, lines=lines))
    assert value(found, "urine_last") == 40
    assert value(found, "balance") == -240


def test_the_second_day_shows_colloid_by_the_printed_bands_and_asks_for_sodium() -> None:
    found = computed(burned("70 kg", "60 %", orders=[order()]), "2026-03-15 09:00")
    assert value(found, "second_day_colloid") == pytest.approx(1680)
    assert item(found, "sodium_watch").flag is Flag.NOT_RECORDED
    overlap = item(
        computed(burned("70 kg", "50 %", orders=[order()]), "2026-03-15 09:00"), "second_day_colloid"
    )
    assert overlap.value is None
    assert "1,050 to 1,400 mL" in overlap.shown
    assert computed(burned("70 kg", "60 %", orders=[order()])).item("fluid.second_day_colloid") is None


def test_cannulas_through_a_burn_are_said() -> None:
    lines = [
        {"what": "IV cannula 16 G", "site": "left arm", "through_burn": "no"},
        {"what": "IV cannula 14 G", "site": "right arm", "through_burn": "yes"},
        {"what": "IV cannula 22 G", "site": "foot", "through_burn": "no"},
    ]
    found = item(computed(burned(orders=[order()], lines=lines)), "cannulas")
    assert found.value == 2
    assert "1 of them through a burn" in found.shown
    assert found.flag is Flag.REVIEW


def test_nothing_says_that_a_patient_is_well() -> None:
    forbidden = re.compile(r"\b(normal|stable|fine|ok)\b", re.IGNORECASE)
    for state in (full(), burned(orders=[order()], given=[bolus(500)])):
        found = computed(state, titration="jts-prolonged")
        said = [text_of(one) for one in found.items] + [f"{a.text} {a.why}" for a in found.actions]
        assert not [line for line in said if forbidden.search(line)]


def text_of(one: Item) -> str:
    return " ".join((one.label, one.shown, *one.cautions))


def test_the_hours_are_rows_of_seven_for_the_table() -> None:
    rows = computed(full()).values["hours"]
    assert isinstance(rows, tuple)
    assert len(rows) == 4
    assert all(len(row) == 7 for row in rows)
    assert [row.hour for row in rows] == [1, 2, 3, 4]
    assert [row.due_ml for row in rows] == [112.5] * 4
    assert [row.given_ml for row in rows] == [200, 0, 100, 50]
    assert [row.not_confirmed_ml for row in rows] == [0, 0, 0, 50]
    assert [row.urine_ml for row in rows] == [None, None, 20, 18]


def test_fluid_that_ran_before_arrival_is_no_late_start() -> None:
    state = burned(
        orders=[order()],
        given=[{"before_arrival": "500 mL", "purpose": "resuscitation"}],
        events=[{"at": "2026-03-14 11:15", "what": "admission"}],
    )
    assert "Late start" not in " ".join(item(computed(state), "rate_now").cautions)


def test_a_line_at_zero_is_not_asked_about() -> None:
    lines = [
        run("100 mL/h", "2026-03-14 09:00"),
        {"line": "R1", "from": "2026-03-14 10:00", "rate": "0 mL/h"},
    ]
    found = computed(burned(orders=[order()], given=lines))
    assert not [action for action in found.actions if action.key == "fluid.lines_running"]
    assert value(found, "not_confirmed") == 0


def test_a_heavy_adult_without_a_height_is_asked_for_it() -> None:
    assert "Height is not recorded" in " ".join(
        item(computed(burned("120 kg", orders=[order()])), "rate_now").cautions
    )


def test_a_rate_is_rounded_only_by_the_rule_that_the_policy_names() -> None:
    state = burned("70 kg", "25 %", orders=[order()])
    found = item(computed(state, rounding="uthealth-2021"), "rate_now")
    assert found.value == 218.75
    assert found.shown.endswith("; 220 mL/h rounded up by uthealth-2021")
    assert "rounded" not in item(computed(state), "rate_now").shown


def test_the_ends_of_the_urine_target_are_passed_on_in_ml_an_hour() -> None:
    assert computed(burned(orders=[order()])).values["urine_target_ml_h"] == (40, 80)
    child = burned("20 kg", "30 %", born="2020-01-01", orders=[order()])
    assert computed(child).values["urine_target_ml_h"] == (20, None)
    assert computed(burned(None, orders=[order()])).values["urine_target_ml_h"] is None


@pytest.mark.parametrize(
    "state",
    [
        burned(None, None, burn=None),
        burned("80 kg", "12 %"),
        burned(orders=[order()]),
        burned(patient={"resuscitation": {"decision": "comfort care", "by": "Dr A. Quill"}}),
    ],
)
def test_a_figure_that_is_not_there_keeps_its_unit(state: dict[str, Any]) -> None:
    found = computed(state)
    assert {key: item(found, key).unit for key in CONTRACT} == CONTRACT


def test_an_area_that_is_not_there_keeps_its_unit() -> None:
    counted = whole(burned(None, None, burn=None)).item("area.counted")
    assert counted is not None
    assert (counted.value, counted.unit) == (None, "%")


def test_a_stop_in_the_minute_of_a_new_rate_ends_a_line_that_was_running() -> None:
    given = [run("100 mL/h", "2026-03-14 09:00"), run("50 mL/h", "2026-03-14 10:00")]
    stopped = computed(burned(given=[*given, {"line": "R1", "stopped": "2026-03-14 10:00"}]))
    assert (value(stopped, "given"), value(stopped, "not_confirmed")) == (100, 0)
    again = [run("100 mL/h", "2026-03-14 09:00", stopped="2026-03-14 10:00"), given[1]]
    assert value(computed(burned(given=again)), "not_confirmed") == 100


def test_a_line_unseen_for_long_is_said_without_a_volume() -> None:
    given = [
        run("748 mL/h", "2026-03-14 09:00"),
        run("80 mL/h", "2026-03-14 09:00", line="M1", purpose="maintenance"),
    ]
    found = computed(burned(given=given), "2026-06-24 10:00")
    open_ = item(found, "not_confirmed")
    assert open_.shown == (
        "R1 748 mL/h, last seen running 09:00 on 14 Mar: not confirmed for 102 days: chart the stop"
    )
    assert open_.value == pytest.approx(748 * (102 * 24))
    assert open_.flag is Flag.REVIEW
    assert item(found, "balance").shown == (
        "0 mL (in 0 mL, out 0 mL); a line not confirmed for 102 days: chart the stop"
    )
    assert item(found, "given_maintenance").shown == "0 mL; not confirmed for 102 days: chart the stop"


def test_a_line_unseen_for_long_stands_beside_one_seen_lately() -> None:
    given = [run("100 mL/h", "2026-03-14 09:00"), run("50 mL/h", "2026-03-15 10:00", line="R2")]
    found = computed(burned(given=given), "2026-03-15 12:00")
    assert item(found, "not_confirmed").shown == (
        "100 mL if it has run on: R2 50 mL/h, last seen running 10:00; "
        "R1 100 mL/h, last seen running 09:00 on 14 Mar: not confirmed for 27 h: chart the stop"
    )
    assert "; 100 mL more in, not confirmed; a line not confirmed for 27 h" in item(found, "balance").shown
