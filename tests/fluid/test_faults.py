"""Entries that do not say when, how much or on which line are refused with what to do."""

from __future__ import annotations

from typing import Any

import pytest

from .build import burned, faults, order, run

GIVEN = "2026-03-14 09:00"
LATER = "2026-03-14 10:00"


def given(*entries: dict[str, Any]) -> list[str]:
    return faults(burned(given=list(entries)))


@pytest.mark.parametrize(
    ("entry", "path", "said"),
    [
        ({"fluid": "milk", "purpose": "oral"}, "fluid.given[1]", "does not say how much"),
        ({"volume": "200 mL", "purpose": "oral"}, "fluid.given[1].volume", "does not say when"),
        ({"at": GIVEN, "volume": "200 mL"}, "fluid.given[1].volume", "what it was for"),
        ({"before_arrival": "500 mL"}, "fluid.given[1].before_arrival", "what it was for"),
        ({"line": "R1", "rate": "100 mL/h", "purpose": "resuscitation"}, "fluid.given[1].rate", "no start"),
        ({"line": "R1", "from": GIVEN, "rate": "100 mL/h"}, "fluid.given[1]", "what it is for"),
        (
            {"line": "R1", "from": GIVEN, "drops": "40 drops/min", "purpose": "resuscitation"},
            "fluid.given[1].drops",
            "drop factor",
        ),
        (
            run("100 mL/h", GIVEN, drops="40 drops/min", drop_factor="20 drops/mL"),
            "fluid.given[1].drops",
            "rate and drops",
        ),
        (run("100 mL/h", GIVEN, volume="200 mL", at=GIVEN), "fluid.given[1].volume", "a volume and a rate"),
        ({"running": GIVEN}, "fluid.given[1].running", "which line"),
        ({"line": "R1", "running": GIVEN}, "fluid.given[1].running", "before the line began"),
        (run("100 mL/h", GIVEN, stopped=GIVEN), "fluid.given[1].stopped", "before the line began"),
        (
            {"from": LATER, "to": GIVEN, "volume": "200 mL", "purpose": "resuscitation"},
            "fluid.given[1].to",
            "ends before it began",
        ),
    ],
)
def test_an_entry_that_leaves_something_open_is_refused(entry: dict[str, Any], path: str, said: str) -> None:
    found = [fault for fault in given(entry) if fault.startswith(f"{path}: ") and said in fault]
    assert len(found) == 1, given(entry)
    assert "; " in found[0]


def test_two_rates_on_one_line_at_one_minute_are_refused() -> None:
    (found,) = given(run("100 mL/h", GIVEN), run("200 mL/h", GIVEN))
    assert found.startswith("fluid.given[2].from: two rates begin at the same minute on one line")


def test_a_line_seen_running_after_its_stop_is_refused() -> None:
    found = given(run("100 mL/h", GIVEN, stopped=LATER), {"line": "R1", "running": "2026-03-14 11:00"})
    assert found == [
        "fluid.given[2].running: the line was stopped before and not begun again; "
        "add the entry that began it again: from: and rate:"
    ]


def test_a_line_begun_again_after_its_stop_is_accepted() -> None:
    assert not given(
        run("100 mL/h", GIVEN, stopped=LATER),
        {"line": "R1", "from": LATER, "rate": "500 mL/h"},
        {"line": "R1", "running": "2026-03-14 11:00"},
    )


@pytest.mark.parametrize(
    ("entry", "said"),
    [
        ({"at": GIVEN}, "orders nothing"),
        ({"at": GIVEN, "formula": "local"}, "no figure"),
        (
            {"at": GIVEN, "urine_target": {"from": "75 mL/h"}, "urine_target_per_kg": {"from": "1 mL/kg/h"}},
            "two urine targets",
        ),
    ],
)
def test_an_order_that_orders_nothing_is_refused(entry: dict[str, Any], said: str) -> None:
    (found,) = faults(burned(orders=[entry]))
    assert said in found


def test_two_orders_at_one_minute_are_refused_and_a_struck_one_is_not_counted() -> None:
    (found,) = faults(burned(orders=[order(), order("4 mL/kg/%")]))
    assert "two orders of fluid stand at the same minute" in found
    struck = {"by": "EM", "at": GIVEN, "why": "wrong patient"}
    assert not faults(burned(orders=[order(), order("4 mL/kg/%", struck=struck)]))


@pytest.mark.parametrize(
    ("state", "said"),
    [
        (burned(given=[{"at": "2026-03-14 07:00", "volume": "1 mL", "purpose": "oral"}]), "before the burn"),
        (burned(given=[{"at": "2026-03-14 13:00", "volume": "1 mL", "purpose": "oral"}]), "is later than"),
        (burned(given=[{"at": GIVEN, "volume": "500", "purpose": "oral"}]), "no unit"),
        (
            burned(given=[{"at": GIVEN, "volume": "500 mL", "purpose": "resuscitatoin"}]),
            "did you mean 'resuscitation'",
        ),
        (burned(given=[{"at": GIVEN, "volum": "500 mL", "purpose": "oral"}]), "did you mean 'volume'"),
        (burned(orders=[order("0.4 mL/kg/%")]), "is unusual"),
        (burned(orders=[order("4 mL")]), "4 mL"),
        (burned(rows={"12:00": {"urine": "35"}}), "no unit"),
        (burned(rows={"12:00": {"urine": "25000 mL"}}), "not possible"),
    ],
)
def test_what_the_schema_refuses(state: dict[str, Any], said: str) -> None:
    (found,) = faults(state)
    assert said in found


def test_rates_without_a_line_that_run_at_one_time_are_refused() -> None:
    first = {"purpose": "resuscitation", "from": GIVEN, "rate": "500 mL/h"}
    second = {**first, "from": LATER, "rate": "300 mL/h"}
    assert given(first, second) == [
        "fluid.given[2]: two rates run at the same time and no line is named; "
        "name the line: the same name replaces the rate, another name runs beside it"
    ]
    assert not given({**first, "stopped": LATER}, second)
    assert not given({**first, "line": "R1"}, {**second, "line": "R2"})


def test_a_stop_in_the_minute_of_the_start_is_refused() -> None:
    assert given(run("100 mL/h", GIVEN), {"line": "R1", "stopped": GIVEN}) == [
        "fluid.given[2].stopped: the line was begun in the same minute; "
        "write the minute at which it was stopped, or strike out the entry that is wrong"
    ]
    assert not given(run("100 mL/h", GIVEN), run("500 mL/h", LATER), {"line": "R1", "stopped": LATER})


def test_a_line_seen_running_after_the_stop_that_ended_it_all_is_refused() -> None:
    (found,) = given(
        run("100 mL/h", GIVEN),
        run("50 mL/h", LATER),
        {"line": "R1", "stopped": LATER},
        {"line": "R1", "running": "2026-03-14 11:00"},
    )
    assert found.startswith("fluid.given[4].running: the line was stopped before and not begun again")
