"""Several assessments, other methods, and wounds over the weeks."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.assess import Assessment
from handoff.plugin import Flag, Item
from tests.area.build import assessed, setup_with, state_text

FIRST = {
    "at": "2026-03-14 14:00",
    "by": "A. Doyle",
    "place": "referring hospital",
    "method": "rule of nines",
    "burns": [
        {"region": "right arm", "of_region": "100 %", "depth": "partial thickness"},
        {"region": "trunk", "face": "front", "of_region": "100 %", "depth": "partial thickness"},
    ],
}
SECOND = {
    "at": "2026-03-14 17:00",
    "by": "E. Marsh",
    "place": "burn unit",
    "method": "lund-browder",
    "burns": [
        {"region": "right arm", "of_region": "100 %", "depth": "deep partial"},
        {"region": "trunk", "face": "front", "of_region": "50 %", "depth": "superficial partial"},
        {"region": "trunk", "face": "front", "of_region": "30 %", "depth": "epidermal"},
    ],
}


def item(assessment: Assessment, key: str) -> Item:
    made = assessment.item(key)
    assert made is not None, key
    return made


def test_the_latest_is_used_in_whatever_order_they_are_written() -> None:
    for order in ([FIRST, SECOND], [SECOND, FIRST]):
        made = assessed(state_text(area=order))
        assert item(made, "area.counted").value == 16
        assert item(made, "area.assessment.1").value == 27


def test_the_difference_is_shown_with_who_where_and_how() -> None:
    made = item(assessed(state_text(area=[FIRST, SECOND])), "area.differences")
    assert made.value == -11
    assert "27 %TBSA (Sat 14 Mar 2026 14:00, referring hospital, by A. Doyle, rule of nines)" in made.shown
    assert "now 11 points less" in made.shown


def test_the_part_of_a_difference_that_is_the_method_is_computed_both_ways() -> None:
    """Right arm and front of trunk: 9 + 18 = 27 by nines, 9.5 + 13 = 22.5 by Lund-Browder."""
    made = item(assessed(state_text(area=[FIRST, SECOND])), "area.differences")
    assert "4.5 points less is the method alone (22.5 %TBSA by lund-browder)" in made.shown


@pytest.mark.parametrize(
    ("method", "burn", "other"),
    [
        ("lund-browder", {"region": "left arm"}, 9),
        ("lund-browder", {"region": "left hand"}, 2.5 * 9 / 9.5),
        ("lund-browder", {"region": "trunk", "face": "back"}, 13),
        ("lund-browder", {"region": "left buttock"}, 2.5),
        ("lund-browder", {"region": "head"}, 7),
        ("lund-browder", {"region": "genitalia"}, 1),
        ("lund-browder", {"region": "whole body"}, 100),
        ("rule of nines", {"region": "trunk", "face": "back"}, 18),
        ("rule of nines", {"region": "chest"}, 6.5),
        ("rule of nines", {"region": "head and neck"}, 9),
        ("rule of nines", {"region": "left leg", "face": "front"}, 10),
        ("rule of nines", {"region": "whole body"}, 100),
    ],
)
def test_one_region_by_the_other_method(method: str, burn: dict[str, str], other: float) -> None:
    whole = {**burn, "of_region": "100 %", "depth": "deep partial"}
    made = item(assessed(state_text([whole], method=method)), "area.by_other_method")
    assert made.value == pytest.approx(other)


def test_a_share_of_the_body_is_the_same_by_any_method() -> None:
    made = item(
        assessed(state_text([{"region": "left hand", "tbsa": "1.5 %", "depth": "deep partial"}])),
        "area.by_other_method",
    )
    assert made.value == 1.5


def test_redness_adds_nothing_by_the_other_method() -> None:
    burns = [{"region": "left arm", "of_region": "100 %", "depth": "erythema"}]
    assert item(assessed(state_text(burns)), "area.by_other_method").value == 0


def test_an_assessment_that_cannot_be_measured_is_kept_and_named() -> None:
    unknown = {**FIRST, "method": ""}
    made = assessed(state_text(area=[unknown, SECOND]))
    assert item(made, "area.assessment.1").flag is Flag.NOT_RECORDED
    assert made.item("area.differences") is None


@pytest.mark.parametrize(("at", "flag"), [("2026-03-16 17:00", Flag.NONE), ("2026-03-16 17:01", Flag.REVIEW)])
def test_a_reassessment_is_due_within_48_hours(at: str, flag: Flag) -> None:
    made = item(assessed(state_text(area=[FIRST, SECOND]), at), "area.reassess_due")
    assert made.flag is flag
    assert "16 Mar 2026 17:00" in made.shown


def test_a_charted_time_of_reassessment_comes_first() -> None:
    burns = [{**SECOND["burns"][0], "reassess": "2026-03-15 09:00"}]
    made = item(assessed(state_text(area=[{**SECOND, "burns": burns}])), "area.reassess_due")
    assert "15 Mar 2026 09:00" in made.shown


def wound(at: str, *areas: dict[str, Any]) -> dict[str, Any]:
    return {"at": at, "by": "EM", "method": "lund-browder", "wounds": list(areas)}


OPEN = {"region": "left thigh", "face": "front", "of_region": "100 %", "state": "open"}


def test_open_grafted_and_donor_areas_are_kept_apart_and_change_no_burn_size() -> None:
    later = wound(
        "2026-03-24 10:00",
        {**OPEN, "of_region": "20 %"},
        {"region": "right arm", "of_region": "60 %", "state": "grafted", "graft_taken": "95 %"},
        {"region": "right thigh", "face": "front", "of_region": "50 %", "state": "donor site open"},
    )
    made = assessed(state_text(area=[SECOND, wound("2026-03-20 10:00", OPEN), later]), "2026-03-24 12:00")
    assert item(made, "area.counted").value == 16
    assert item(made, "area.open_wound").value == pytest.approx(0.95)
    assert "before: 4.8 %TBSA on 20 Mar 2026" in item(made, "area.open_wound").shown
    assert item(made, "area.grafted").value == pytest.approx(5.7)
    assert "graft taken: right arm 95 %" in item(made, "area.grafted").shown
    assert item(made, "area.donor_open").value == 2.375


def test_a_wound_that_has_closed_is_shown_as_none_open() -> None:
    healed = wound("2026-03-28 10:00", {**OPEN, "state": "healed"})
    made = assessed(state_text(area=[SECOND, wound("2026-03-20 10:00", OPEN), healed]), "2026-03-28 12:00")
    assert item(made, "area.open_wound").value == 0
    assert item(made, "area.healed").value == 4.75


def test_wounds_of_one_region_may_not_be_more_than_the_region() -> None:
    from tests.area.build import faults

    both = wound("2026-03-20 10:00", OPEN, {**OPEN, "state": "grafted", "of_region": "20 %"})
    (said,) = faults(state_text(area=[SECOND, both]), "2026-03-21 10:00")
    assert said.startswith("area[2].wounds[2].of_region: the burns of 'left thigh, front' add to 5.7 %")


def test_depth_not_assessed_leaves_the_count_open_and_says_what_is_known() -> None:
    burns = [
        {"region": "left arm", "of_region": "100 %", "depth": "deep partial"},
        {"region": "left thigh", "of_region": "100 %", "depth": "not assessed"},
    ]
    made = assessed(state_text(burns))
    counted = item(made, "area.counted")
    assert counted.value is None
    assert counted.shown == "not computed: depth of left thigh (9.5 %TBSA) not assessed; 9.5 %TBSA without it"
    assert item(made, "area.not_assessed").value == 9.5
    assert made.findings["area"].values["counted_pct"] is None


def test_a_table_that_adds_to_102_says_so() -> None:
    heavy = {"weights": [{"value": "130 kg", "kind": "before burn", "known": "measured"}]}
    burns = [{"region": "trunk", "of_region": "100 %", "depth": "deep partial"}]
    made = item(assessed(state_text(burns, method="rule of fives", patient=heavy)), "area.counted")
    assert made.value == 50
    assert "the printed figures of this table add to 102 %, not to 100 %" in made.cautions


@pytest.mark.parametrize(
    ("palm", "pct"), [("one-percent", 12), ("measured-adult-0.8", 9.6), ("measured-child-1.06", 12.72)]
)
def test_palms_by_the_value_the_policy_chose(palm: str, pct: float) -> None:
    burns = [{"region": "whole body", "palms": "12", "depth": "superficial partial"}]
    made = item(assessed(state_text(burns, method="palm"), setup=setup_with(palm_value=palm)), "area.counted")
    assert made.value == pytest.approx(pct)
    assert any("fingers closed" in caution for caution in made.cautions)


def test_rule_of_eights_goes_by_weight_where_the_policy_chose_it() -> None:
    burns = [{"region": "left leg", "of_region": "100 %", "depth": "deep partial"}]
    setup = setup_with(child_nines="rule-of-eights")
    by_weight = {
        kg: item(
            assessed(
                state_text(
                    burns,
                    method="rule of nines",
                    born="2025-09-01",
                    patient={"weights": [{"value": f"{kg} kg", "kind": "before burn", "known": "measured"}]},
                ),
                setup=setup,
            ),
            "area.counted",
        ).value
        for kg in ("9.9", "10")
    }
    assert by_weight == {"9.9": 16, "10": 18}
    unknown = assessed(state_text(burns, method="rule of nines", born="2025-09-01"), setup=setup)
    assert "weight not recorded" in item(unknown, "area.counted").shown


def test_what_other_plugins_read() -> None:
    burns = [
        {
            "region": "right forearm",
            "of_region": "100 %",
            "depth": "full thickness",
            "circumferential": "yes",
        },
        {"region": "head", "face": "front", "of_region": "50 %", "depth": "superficial dermal"},
        {"region": "trunk", "face": "back", "of_region": "10 %", "depth": "first degree"},
    ]
    values = assessed(state_text(burns)).findings["area"].values
    assert (values["counted_pct"], values["full_thickness_pct"], values["not_counted_pct"]) == (4.75, 3, 1.3)
    assert values["circumferential_regions"] == ("right forearm",)
    assert values["circumferential_limbs"] == ("right arm",)
    assert values["special_sites"] == ("face",)
    assert values["deep_sites"] == ()
    first, second, third = values["burns"]
    assert (first.region, first.depth, first.tbsa_pct, first.counted, first.circumferential) == (
        "right forearm",
        "full thickness",
        3,
        True,
        True,
    )
    assert second.face == "front"
    assert third.counted is False


NO_DEPTH = {
    "at": "2026-03-14 13:58",
    "by": "P. Loughran",
    "place": "before hospital",
    "method": "rule of nines",
    "burns": [
        {"region": "head and neck", "face": "front", "of_region": "100 %", "depth": "not assessed"},
        {"region": "trunk", "face": "front", "of_region": "100 %", "depth": "not assessed"},
        {"region": "right arm", "of_region": "100 %", "depth": "not assessed"},
    ],
}


def test_an_earlier_extent_without_depth_is_shown_apart_and_not_counted() -> None:
    made = assessed(state_text(area=[NO_DEPTH, SECOND]))
    earlier, against = item(made, "area.assessment.1"), item(made, "area.differences")
    assert earlier.shown == "31.5 %TBSA as charted, depth not assessed"
    assert (earlier.value, earlier.flag) == (None, Flag.NOT_RECORDED)
    assert (against.value, against.flag) == (None, Flag.NOT_RECORDED)
    assert "Before: 31.5 %TBSA as charted, depth not assessed (Sat 14 Mar 2026 13:58, before" in against.shown
    assert against.shown.endswith("; not counted, difference not computed")


def test_an_earlier_extent_with_and_without_depth_shows_both_parts() -> None:
    burns = [*NO_DEPTH["burns"][:2], {**NO_DEPTH["burns"][2], "depth": "deep partial"}]  # type: ignore[index,dict-item]
    made = item(assessed(state_text(area=[{**NO_DEPTH, "burns": burns}, SECOND])), "area.assessment.1")
    assert made.shown == "22.5 %TBSA as charted, depth not assessed, and 9 %TBSA that counts"


def test_a_place_that_the_role_or_the_name_already_says_is_printed_once() -> None:
    latest = {**SECOND, "role": "RN, burn unit"}
    told = item(assessed(state_text(area=[latest])), "area.method").shown
    assert told.count("burn unit") == 1
    first = {**FIRST, "by": "referring hospital"}
    earlier = item(assessed(state_text(area=[first, SECOND])), "area.assessment.1").label
    assert earlier.count("referring hospital") == 1
