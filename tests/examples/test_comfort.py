"""Where comfort is the goal of care, the documents of the examples ask for nothing that only a cure needs."""

from __future__ import annotations

import pytest

from handoff.plugin import Flag
from tests.examples.patients import assessment_of


@pytest.mark.parametrize("name", ["comfort-care", "comfort-decided"])
def test_a_dying_patient_is_asked_for_no_tetanus_vaccine(name: str) -> None:
    made = assessment_of(name)
    found = made.item("wounds.tetanus")
    assert found is None or found.flag is not Flag.REVIEW
    assert [one.key for one in made.actions if one.key.startswith("wounds.tetanus")] == []


NOT_ASKED = ("airway_watch.pf_ratio", "airway_watch.carboxyhaemoglobin", "fluid.urine_rate", "pain.movement")


def test_where_comfort_is_the_goal_what_only_a_rescue_needs_is_no_gap() -> None:
    made = assessment_of("comfort-decided")
    assert [key for key in NOT_ASKED if key in {one.key for one in made.not_recorded}] == []
    for key in ("fluid.urine_rate", "pain.movement"):
        found = made.item(key)
        assert found is not None
        assert found.shown == "not recorded; not asked for: the goal of care is comfort"
    assert "wellbeing.comfort" in {one.key for one in made.not_recorded}


def test_where_comfort_is_the_goal_no_other_scale_is_asked_for_than_the_one_that_is_used() -> None:
    found = assessment_of("comfort-decided").item("pain.scale_fit")
    assert found is not None
    assert found.flag is Flag.NONE
    assert "latest score used" not in found.shown


def test_where_comfort_is_the_goal_nobody_opens_swollen_lids_to_examine_the_eyes() -> None:
    keys = {action.key for action in assessment_of("comfort-care").actions}
    assert "wounds.eye_care" in keys
    assert "wounds.eye_examination" not in keys
