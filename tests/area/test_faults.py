"""An extent that cannot be is named by its place with the cure; a possible one passes."""

from __future__ import annotations

import pytest

from tests.area.build import assessed, faults, state_text


def deep(region: str, **more: str) -> dict[str, str]:
    return {"region": region, "depth": "deep partial", **more}


def test_an_extent_is_never_bare() -> None:
    (said,) = faults(state_text([deep("trunk")]))
    assert said.startswith("area[1].burns[1]: the extent is missing; write one of of_region: 40 %")


def test_an_extent_without_its_unit_is_refused() -> None:
    (said,) = faults(state_text([deep("trunk", of_region="70")]))
    assert said.startswith("area[1].burns[1].of_region: '70' has no unit")


def test_two_extents_for_one_burn_are_refused() -> None:
    (said,) = faults(state_text([deep("trunk", of_region="70 %", tbsa="9 %")]))
    assert "two extents for one burn" in said


def test_more_than_a_region_is_refused() -> None:
    (said,) = faults(state_text([deep("trunk", of_region="120 %")]))
    assert "120 % is not possible here (0 % to 100 %)" in said


def test_parts_over_the_region_are_refused_with_their_lines() -> None:
    text = state_text(
        [deep("trunk", face="front", of_region="60 %"), deep("trunk", face="front", of_region="41 %")]
    )
    (said,) = faults(text)
    assert said.startswith(
        "area[1].burns[2].of_region: the burns of 'trunk, front' add to 13.13 % of the body"
    )
    assert "the region is 13 %" in said
    assert "lines" in said


def test_depth_shares_of_one_region_may_fill_it_exactly() -> None:
    parts = [deep("trunk", face="front", of_region="33.3 %") for _ in range(3)] + [
        deep("trunk", face="front", of_region="0.1 %")
    ]
    assert faults(state_text(parts)) == []


def test_a_body_share_larger_than_its_region_is_refused() -> None:
    (said,) = faults(state_text([deep("left hand", tbsa="3 %")]))
    assert "'left hand' is given 3 % of the body, and the region is 2.5 %" in said


def test_parts_over_a_limb_are_seen_across_its_regions() -> None:
    text = state_text([deep("left arm", of_region="100 %"), deep("left hand", tbsa="0.5 %")])
    (said,) = faults(text)
    assert "'left arm' add to 10 % of the body, and the region is 9.5 %" in said


def test_parts_over_a_region_are_seen_without_an_age() -> None:
    text = state_text([deep("trunk", of_region="60 %"), deep("trunk", of_region="60 %")], born="")
    (said,) = faults(text)
    assert "'trunk' add to 120 % of the region" in said


def test_stated_percentages_over_the_body_are_refused() -> None:
    text = state_text([deep("whole body", tbsa="60 %"), deep("whole body", tbsa="60 %")], method="direct")
    assert "the burns add to 120 % of the body" in faults(text)[0]


def test_an_unknown_region_names_the_nearest_one() -> None:
    (said,) = faults(state_text([deep("left hnad", of_region="50 %")]))
    assert said == "area[1].burns[1].region: 'left hnad' is not a word for this; did you mean 'left hand'?"


def test_a_region_that_the_method_lacks_names_the_methods_regions() -> None:
    (said,) = faults(state_text([deep("left hand", of_region="50 %")], method="rule of nines"))
    assert said.startswith("area[1].burns[1].region: rule of nines, adult has no region 'left hand'")
    assert "its regions: head and neck, left arm, right arm" in said
    assert "trunk" in said


def test_a_small_region_may_stand_under_nines_as_a_share_of_the_body() -> None:
    text = state_text(
        [deep("left hand", tbsa="1 %"), deep("left arm", face="front", of_region="50 %")],
        method="rule of nines",
    )
    assert faults(text) == []


def test_a_paired_region_needs_its_side() -> None:
    (said,) = faults(state_text([deep("hand", of_region="50 %")]))
    assert said.endswith("'hand' has no side; write region: left hand or region: right hand")
    assert faults(state_text([deep("hand", side="left", of_region="50 %")])) == []


def test_superficial_alone_is_refused_because_it_is_read_in_two_ways() -> None:
    (said,) = faults(state_text([{"region": "trunk", "of_region": "10 %", "depth": "superficial"}]))
    assert "epidermal (not counted) and superficial dermal (counted)" in said
    assert said.endswith("write epidermal or superficial partial")


def test_a_face_that_a_region_does_not_have_is_refused() -> None:
    (said,) = faults(state_text([deep("left buttock", face="front", of_region="50 %")]))
    assert "counts 'left buttock' on the back only" in said


def test_palm_and_direct_take_no_share_of_a_region() -> None:
    (said,) = faults(state_text([deep("trunk", of_region="50 %")], method="palm"))
    assert "write palms: 2 or tbsa: 2 %" in said


def test_a_direct_percentage_needs_its_assessor() -> None:
    entry = {"at": "2026-03-14 14:20", "method": "direct", "burns": [deep("whole body", tbsa="12 %")]}
    (said,) = faults(state_text(area=[entry]))
    assert "a direct percentage has no assessor" in said


def test_an_assessment_without_burns_is_refused() -> None:
    (said,) = faults(state_text(area=[{"at": "2026-03-14 14:20", "by": "EM"}]))
    assert "has no burns" in said


@pytest.mark.parametrize("confirmed", ["", "yes"])
def test_more_palms_than_a_region_holds_is_unusual_until_confirmed(confirmed: str) -> None:
    burn = {"region": "left hand", "depth": "deep partial", "palms": "4"}
    text = state_text([{**burn, "confirmed": confirmed} if confirmed else burn], method="palm")
    warned = [fault.what for fault in assessed(text).warnings]
    assert bool(warned) == (not confirmed)
    assert all("more than 'left hand' holds (2.5 %" in what for what in warned)


def test_a_table_for_another_build_is_unusual() -> None:
    heavy = {"weights": [{"value": "72 kg", "kind": "before burn", "known": "measured"}]}
    (said,) = faults(state_text([deep("trunk", of_region="10 %")], method="rule of fives", patient=heavy))
    assert "published for a weight above 80 kg, and 72 kg is recorded" in said


def test_a_struck_burn_counts_nowhere() -> None:
    struck = {"struck": {"by": "EM", "at": "2026-03-14 15:00", "why": "wrong patient"}}
    text = state_text([deep("trunk", of_region="60 %"), {**deep("trunk", of_region="60 %"), **struck}])
    assert faults(text) == []
    counted = assessed(text).item("area.counted")
    assert counted is not None
    assert counted.value == pytest.approx(15.6)
