"""Nothing that was charted about the burn is dropped without a word, and nothing unknown is printed as 0."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag

from .build import SEEN, assessed, faults, found, state_text

LATER = "2026-03-14 18:00"
DEEP = {"region": "left hand", "of_region": "50 %", "depth": "deep partial"}
BLANK = {"region": "trunk", "of_region": "10 %", "depth": "not assessed"}
FINER = ("full_thickness", "deep_partial", "superficial_partial", "not_counted", "counted")


def two(second: dict[str, Any]) -> str:
    first = {"at": SEEN, "by": "E. Marsh", "method": "lund-browder", "burns": [DEEP]}
    return state_text(area=[first, {"at": LATER, "by": "A. Orr", "method": "lund-browder", **second}])


def test_an_empty_list_of_burns_is_refused_until_somebody_says_that_none_was_found() -> None:
    assert faults(two({"burns": []})) == [
        "area[2].burns: the list of burns is empty, and an earlier assessment would no longer count; "
        "add the burns, delete the key, or add confirmed: yes to the assessment if no burn was found"
    ]
    made = found(two({"burns": [], "confirmed": "yes"}))
    counted = made.item("area.counted")
    assert counted is not None
    assert (counted.value, counted.shown) == (0, "0 %TBSA")
    differences = made.item("area.differences")
    assert differences is not None
    assert "Before: 1.3 %TBSA" in differences.shown


@pytest.mark.parametrize("key", FINER)
def test_no_depth_is_printed_as_0_while_the_depth_of_a_burn_is_not_assessed(key: str) -> None:
    shown = found(state_text([DEEP, BLANK])).item(f"area.{key}")
    assert shown is not None
    assert shown.value is None
    assert shown.flag is Flag.NOT_RECORDED
    assert shown.shown.startswith("not computed: depth of trunk (2.6 %TBSA) not assessed; ")


def test_a_burn_that_may_be_deep_stands_beside_the_figure_that_leaves_it_out() -> None:
    made = found(state_text([{**BLANK, "depth": "partial thickness"}]))
    shown = {key: made.item(f"area.{key}") for key in FINER}
    said = "0 %TBSA; 2.6 %TBSA more is partial thickness, superficial or deep not stated"
    assert shown["deep_partial"] is not None
    assert shown["deep_partial"].shown == said
    assert shown["full_thickness"] is not None
    assert shown["full_thickness"].shown == "0 %TBSA"
    unsure = found(state_text([{**BLANK, "depth": "indeterminate"}])).item("area.full_thickness")
    assert unsure is not None
    assert unsure.shown == "0 %TBSA; 2.6 %TBSA more is of indeterminate depth"


@pytest.mark.parametrize(
    ("region", "side", "said"),
    [
        ("left hand", "right", "side: right contradicts 'left hand'; keep the one that is right"),
        (
            "trunk",
            "left",
            "'trunk' is charted as one, and has no side; leave out side, and write left in note:",
        ),
    ],
)
def test_a_side_that_the_region_does_not_have_is_refused(region: str, side: str, said: str) -> None:
    burn = {**DEEP, "region": region, "side": side}
    (fault,) = faults(state_text([burn]))
    assert fault.startswith(f"area[1].burns[1].side: {said}")
    limb = {"region": region, "side": side, "pulse": "present"}
    (fault,) = faults(state_text(observations={"2026-03-14": {"15:00": {"limbs": [limb]}}}))
    assert fault.startswith(f"observations.2026-03-14.15:00.limbs[1].side: {said}")


def test_a_side_that_agrees_is_taken_and_a_limb_without_one_is_refused() -> None:
    assert faults(state_text([{**DEEP, "side": "left"}])) == []
    limb = {"region": "hand", "pulse": "present"}
    (fault,) = faults(state_text(observations={"2026-03-14": {"15:00": [{"limbs": [limb]}]}}))
    assert fault == (
        "observations.2026-03-14.15:00[1].limbs[1].region: 'hand' has no side; "
        "write region: left hand or region: right hand"
    )
    assert (
        faults(state_text(observations={"2026-03-14": {"15:00": {"limbs": [{**limb, "side": "left"}]}}}))
        == []
    )


def test_a_confirmed_absence_of_burns_makes_every_item_without_a_failure() -> None:
    made = assessed(two({"burns": [], "confirmed": "yes"}))
    assert made.item("area.region.1") is None
    assert made.item("area.circumferential") is not None
