"""Amounts far outside what is usual for the weight are asked about; a slip of ten never passes in silence."""

from __future__ import annotations

from typing import Any

import pytest

from .build import assessed, burned, computed, faults, item, order, run, value

AT = "2026-03-14 09:00"
CHILD = {"kg": "10 kg", "pct": "20 %", "born": "2025-01-10"}


def asked(kg: str = "80 kg", born: str = "1985-02-11", **more: Any) -> list[str]:
    return faults(burned(kg, born=born, **more))


def child(**more: Any) -> list[str]:
    return asked("10 kg", "2025-01-10", **more)


def single(volume: str, **more: Any) -> list[dict[str, Any]]:
    return [{"at": AT, "volume": volume, "purpose": "resuscitation", **more}]


@pytest.mark.parametrize(
    ("right", "slip"),
    [
        ([run("100 mL/h", AT)], [run("1000 mL/h", AT)]),
        ([run("40 mL/h", AT, purpose="maintenance")], [run("400 mL/h", AT, purpose="maintenance")]),
        ([run("100 mL/h", AT)], [run("9 mL/h", AT)]),
        (single("100 mL", bolus="yes"), single("1000 mL", bolus="yes")),
        (single("100 mL", bolus="yes"), single("9 mL", bolus="yes")),
        (single("200 mL"), single("2000 mL")),
    ],
)
def test_a_slip_of_ten_in_a_child_is_asked_about(right: list[Any], slip: list[Any]) -> None:
    assert child(given=right) == []
    (found,) = child(given=slip)
    assert " is unusual for 10 kg before burn: " in found
    assert found.endswith("check it; if it is right, add confirmed: yes beside it")
    assert child(given=[{**slip[0], "confirmed": "yes"}]) == []


@pytest.mark.parametrize("rate", ["80 mL/h", "3200 mL/h"])
def test_the_lines_themselves_are_usual(rate: str) -> None:
    assert not [one for one in asked(given=[run(rate, AT)]) if "for 80 kg" in one]


@pytest.mark.parametrize(("rate", "shown"), [("79 mL/h", "0.99 mL/kg/h"), ("3201 mL/h", "40.01 mL/kg/h")])
def test_just_outside_the_lines_is_asked_about(rate: str, shown: str) -> None:
    (found,) = [one for one in asked(given=[run(rate, AT)]) if "for 80 kg" in one]
    assert shown in found


def test_a_line_set_to_nothing_and_a_later_rate_without_its_purpose_are_read_as_they_stand() -> None:
    assert asked(given=[run("500 mL/h", AT), run("0 mL/h", "2026-03-14 10:00")]) == []
    later = {"line": "R1", "from": "2026-03-14 10:00", "rate": "400 mL/h"}
    (found,) = child(given=[run("40 mL/h", AT, purpose="maintenance"), later])
    assert found.startswith("fluid.given[2].rate: ")


@pytest.mark.parametrize(
    ("volume", "is_asked"),
    [("0 mL", False), ("0.9 mL", True), ("1 mL", False), ("100 mL", False), ("101 mL", True)],
)
def test_hourly_urine_of_a_child_is_held_against_its_weight(volume: str, is_asked: bool) -> None:
    rows = {"09:00": {"urine": {"volume": volume, "over": "1 h"}}}
    assert bool(child(rows=rows)) is is_asked
    confirmed = {"09:00": {"urine": {"volume": volume, "over": "1 h", "confirmed": "yes"}}}
    assert child(rows=confirmed) == []
    assert child(rows={"09:00": {"urine": {"volume": volume, "over": "1 h"}, "confirmed": "yes"}}) == []


def test_the_same_urine_twice_in_a_minute_is_asked_about_and_another_volume_is_not() -> None:
    rows = {"09:00": [{"urine": "40 mL"}, {"urine": "40 mL", "pulse": "90 /min"}]}
    (found,) = asked(rows=rows)
    assert "the same urine stands on line" in found
    assert asked(rows={"09:00": [{"urine": "40 mL"}, {"urine": "30 mL", "pulse": "90 /min"}]}) == []


def test_the_same_bolus_twice_is_asked_about_and_both_count_until_one_is_struck() -> None:
    twice = single("250 mL") * 2
    (found,) = asked(given=twice)
    assert found.startswith("fluid.given[2]: the same entry stands on line ")
    assert value(computed(burned(given=twice)), "given") == 500


def test_what_was_given_is_never_printed_as_nothing() -> None:
    shown = item(computed(burned("3 kg", "20 %", born="2026-03-01", given=single("0.3 mL"))), "given").shown
    assert "0.3 mL" in shown
    assert not shown.startswith("0 mL")


def test_a_urine_target_upside_down_is_refused() -> None:
    for name, unit in (("urine_target", "mL/h"), ("urine_target_per_kg", "mL/kg/h")):
        upside = {"at": AT, name: {"from": f"2 {unit}", "to": f"1 {unit}"}}
        (found,) = asked(orders=[upside])
        assert found == (
            f"fluid.orders[1].{name}.to: the highest (1 {unit}) lies below the lowest (2 {unit}); "
            "write the lower figure as from: and the higher as to:"
        )
        assert asked(orders=[{"at": AT, name: {"from": f"1 {unit}", "to": f"1 {unit}"}}]) == []


def test_an_order_that_ended_before_it_came_is_refused() -> None:
    (found,) = asked(orders=[order(at=AT, ended="2026-03-14 08:30")])
    assert found.startswith("fluid.orders[1].ended: ended Sat 14 Mar 2026 08:30 is before at ")


def test_nothing_is_due_between_the_end_of_a_formula_and_a_rate_ordered_later() -> None:
    # 2 mL/kg/% x 80 kg x 40 % = 6,400 mL: 400 mL/h in the first 8 h; 2 h of it, 1 h of nothing, 1 h at 700 mL/h
    orders = [order(ended="2026-03-14 10:00"), {"at": "2026-03-14 11:00", "rate": "700 mL/h"}]
    due = item(computed(burned(orders=orders), "2026-03-14 12:00"), "due_by_now")
    assert due.value == 800 + 700
    assert due.cautions[0] == "No order was in force from 10:00 to 11:00: nothing is due for that time."
    hours = computed(burned(orders=orders), "2026-03-14 12:00").values["hours"]
    assert [row.due_ml for row in hours] == [400, 400, 0, 700]  # type: ignore[attr-defined]


def test_nothing_is_due_between_the_end_of_a_rate_and_the_next() -> None:
    rates = [
        {"at": "2026-03-14 08:00", "rate": "500 mL/h", "ended": "2026-03-14 09:00"},
        {"at": "2026-03-14 10:00", "rate": "300 mL/h"},
    ]
    due = item(computed(burned(orders=rates), "2026-03-14 12:00"), "due_by_now")
    assert due.value == 500 + 600
    assert due.cautions[0].startswith("No order was in force from 09:00 to 10:00")


CATHETERS = [
    {"what": "Foley 14 Fr"},
    {"what": "urethral catheter"},
    {"what": "tube", "kind": "urinary catheter"},
    {"what": "silicone 12 Fr"},
]


@pytest.mark.parametrize("line", CATHETERS, ids=lambda line: line["what"])
def test_what_drained_at_insertion_is_never_lost(line: dict[str, str]) -> None:
    tube = {**line, "placed": AT, "drained_at_insertion": "200 mL"}
    rows = {"10:00": {"urine": "40 mL"}}
    found = computed(burned(lines=[tube], rows=rows))
    assert value(found, "balance") == -240
    assert value(found, "urine_last") == 40
    assert faults(burned(lines=[tube], rows=rows)) == []


def test_a_drained_volume_without_a_time_counts_and_is_asked_about() -> None:
    tube = {"what": "urinary catheter", "drained_at_insertion": "200 mL"}
    assert value(computed(burned(lines=[tube])), "balance") == -200
    (found,) = faults(burned(lines=[tube]))
    assert found.startswith("lines[1].drained_at_insertion: it does not say when the catheter was placed;")


def test_a_drained_volume_of_another_kind_of_line_is_asked_about() -> None:
    tube = {"what": "tube", "kind": "drain", "placed": AT, "drained_at_insertion": "200 mL"}
    (found,) = faults(burned(lines=[tube]))
    assert "a volume drained at insertion stands with a drain; it counts as urine" in found


def weighed(*weights: tuple[str, str, str, str]) -> dict[str, Any]:
    written = [{"value": kg, "kind": kind, "known": known, "at": at} for kg, kind, known, at in weights]
    return burned(None, patient={"weights": written}, orders=[order()])


def test_a_measured_weight_is_used_before_a_later_estimate_and_the_other_is_named() -> None:
    state = weighed(
        ("82 kg", "before burn", "measured", "2026-03-14 08:30"),
        ("90 kg", "before burn", "estimated", "2026-03-14 11:00"),
    )
    total = item(assessed(state), "total_24h")
    assert total.value == 2 * 82 * 40
    said = [one for one in total.cautions if "differs" in one]
    assert len(said) == 1
    assert said[0].startswith(
        "82 kg before burn (measured) is used; another weight before the burn differs: 90 kg (estimated, line "
    )
    (found,) = faults(state)
    assert found.startswith(
        "patient.weights[2].value: 90 kg differs from the other weight before burn on line "
    )
    assert "82 kg (measured), which is used" in found
    state["patient"]["weights"][1]["confirmed"] = "yes"
    assert faults(state) == []
    assert [one for one in item(assessed(state), "total_24h").cautions if "differs" in one]


def test_of_two_equally_known_weights_the_later_is_used() -> None:
    state = weighed(
        ("82 kg", "before burn", "estimated", "2026-03-14 08:30"),
        ("90 kg", "before burn", "estimated", "2026-03-14 11:00"),
    )
    assert value(computed(state), "total_24h") == 2 * 90 * 40
    assert len(faults(state)) == 1


def test_weights_of_today_follow_each_other_and_the_same_weight_in_pounds_does_not_differ() -> None:
    today = weighed(
        ("82 kg", "today", "measured", "2026-03-14 08:30"), ("90 kg", "today", "measured", "2026-03-14 11:00")
    )
    assert faults(today) == []
    assert value(computed(today), "total_24h") == 2 * 90 * 40
    pounds = weighed(
        ("82 kg", "before burn", "measured", "2026-03-14 08:30"),
        ("181 lb", "before burn", "reported by patient", "2026-03-14 11:00"),
    )
    assert faults(pounds) == []


BY_WEIGHT = (
    "total_24h",
    "rate_now",
    "catch_up_rate",
    "given_index",
    "projected_24h",
    "projected_per_kg",
    "urine_rate",
)


@pytest.mark.parametrize("key", BY_WEIGHT)
def test_each_figure_by_weight_names_the_weight_and_the_one_that_differs(key: str) -> None:
    state = weighed(
        ("82 kg", "before burn", "measured", "2026-03-14 08:30"),
        ("90 kg", "before burn", "estimated", "2026-03-14 11:00"),
    )
    state["fluid"]["given"] = [run("500 mL/h", "2026-03-14 09:00", running="2026-03-14 12:00")]
    state["observations"] = {"2026-03-14": {"11:00": {"urine": {"volume": "40 mL", "over": "1 h"}}}}
    said = " ".join(item(computed(state), key).cautions)
    assert "82 kg before burn" in said
    assert "90 kg (estimated, " in said


def test_oedema_asks_for_the_weight_before_the_burn_and_the_height() -> None:
    today = [{"value": "90 kg", "kind": "today", "known": "measured"}]
    for height, asked_for in (({}, " and the height."), ({"height": "180 cm"}, "before the burn.")):
        state = burned(None, patient={"weights": today, **height}, orders=[order()])
        cautions = item(computed(state), "total_24h").cautions
        assert any("may hold oedema" in one and one.endswith(asked_for) for one in cautions)
