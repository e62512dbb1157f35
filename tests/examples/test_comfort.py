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
