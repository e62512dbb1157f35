"""Faults of the airway block that no schema can see, each with its cure."""

from __future__ import annotations

from typing import Any

import pytest

from .build import faults, state_text

T = "2026-03-14 "


def oxygen(*entries: dict[str, Any], **more: Any) -> str:
    return state_text({"oxygen": list(entries)}, **more)


def test_a_block_without_faults_has_none() -> None:
    text = oxygen({"from": T + "10:30", "device": "non-rebreather mask", "flow": "15 L/min"})
    assert faults(text) == []


def test_a_check_that_names_no_sign_is_refused() -> None:
    text = state_text({"signs": [{"at": T + "11:00", "by": "EM"}]})
    assert faults(text) == [
        "airway_watch.signs[1]: the check names no sign; add the signs looked for, as stridor: absent"
    ]


def test_two_kinds_of_oxygen_from_one_minute_are_refused_with_both_lines() -> None:
    text = oxygen(
        {"from": T + "10:30", "device": "room air"}, {"from": T + "10:30", "device": "CPAP", "fio2": "40 %"}
    )
    (fault,) = faults(text)
    assert fault.startswith(
        "airway_watch.oxygen[2]: two oxygen entries begin at 2026-03-14 10:30 (also line "
    )


@pytest.mark.parametrize("extra", [{"flow": "2 L/min"}, {"fio2": "40 %"}, {"valve": "red"}])
def test_room_air_with_a_setting_is_refused(extra: dict[str, str]) -> None:
    (fault,) = faults(oxygen({"from": T + "10:30", "device": "room air", **extra}))
    assert "room air with a flow or an oxygen setting" in fault


def test_a_valve_belongs_to_a_venturi_mask() -> None:
    (fault,) = faults(oxygen({"from": T + "10:30", "device": "nasal cannula", "valve": "red"}))
    assert "only a venturi mask has a valve" in fault


@pytest.mark.parametrize(
    ("device", "flow", "warned"),
    [
        ("non-rebreather mask", "9.9 L/min", True),
        ("non-rebreather mask", "10 L/min", False),
        ("simple mask", "4.9 L/min", True),
        ("simple mask", "5 L/min", False),
        ("nasal cannula", "1 L/min", False),
    ],
)
def test_a_flow_too_low_for_its_mask_is_shown_until_confirmed(device: str, flow: str, warned: bool) -> None:
    entry = {"from": T + "10:30", "device": device, "flow": flow}
    assert bool(faults(oxygen(entry))) is warned
    assert faults(oxygen({**entry, "confirmed": "yes"})) == []


def test_one_sample_with_two_levels_is_refused() -> None:
    block = {"carboxyhaemoglobin": [{"at": T + "11:00", "value": "18 %"}]}
    same = [{"at": T + "11:00", "carboxyhaemoglobin": "18.0 %"}]
    other = [{"at": T + "11:00", "carboxyhaemoglobin": "19 %"}]
    assert faults(state_text(block, results=same)) == []
    (fault,) = faults(state_text(block, results=other))
    assert "18 % here and 19 % in results at the same time" in fault


@pytest.mark.parametrize(
    ("block", "path"),
    [
        ({"oxygen": [{"from": T + "12:00", "device": "CPAP", "stopped": T + "11:00"}]}, "oxygen[1].stopped"),
        ({"tube": [{"placed": T + "12:00", "removed": T + "11:00"}]}, "tube[1].removed"),
        ({"watch": {"start": T + "12:00", "ended": T + "11:00"}}, "watch.ended"),
    ],
)
def test_an_end_before_its_start_is_refused(block: dict[str, Any], path: str) -> None:
    (fault,) = faults(state_text(block))
    assert fault.startswith(f"airway_watch.{path}: ")
    assert fault.endswith("check both times")


def test_a_struck_out_entry_is_not_checked_and_not_counted() -> None:
    struck = {"by": "EM", "at": T + "12:00", "why": "wrong patient"}
    assert faults(state_text({"signs": [{"at": T + "11:00", "struck": struck}]})) == []


@pytest.mark.parametrize(
    ("block", "words"),
    [
        (
            {"oxygen": [{"from": T + "10:30", "device": "non-rebreathing mask"}]},
            "did you mean 'non-rebreather mask'?",
        ),
        ({"signs": [{"at": T + "10:30", "strider": "present"}]}, "did you mean 'stridor'?"),
        ({"oxygen": [{"from": T + "10:30", "device": "CPAP", "fio2": "40"}]}, "not possible here"),
        ({"carboxyhaemoglobin": [{"at": T + "10:30", "value": "18"}]}, "has no unit"),
        ({"bronchoscopy": [{"at": T + "10:30", "grade": "5"}]}, "above 4"),
        ({"signs": [{"at": T + "09:30", "stridor": "absent"}]}, "before the burn"),
    ],
)
def test_the_schema_says_what_is_wrong(block: dict[str, Any], words: str) -> None:
    assert any(words in fault for fault in faults(state_text(block)))
