"""The plan's change at 8 h is a task of its own, before anyone runs on at the old rate."""

from __future__ import annotations

from datetime import UTC, datetime
from pathlib import Path

import pytest

from handoff.assess import Assessment
from handoff.plugin import Action
from handoff.work import assess_loaded, make_setup, open_text

EXAMPLE = Path(__file__).parents[2] / "examples" / "house-fire.yaml"


def assessed(change: tuple[str, str] = ("", ""), at: str = "2026-03-14 19:30") -> Assessment:
    setup = make_setup()
    text = EXAMPLE.read_text(encoding="utf-8").replace(*change)
    return assess_loaded(open_text(text, "house-fire.yaml", setup, at), setup)


def step(assessment: Assessment) -> Action | None:
    return next((action for action in assessment.actions if action.key == "fluid.plan_step"), None)


def test_the_step_is_due_eight_hours_after_the_burn_with_the_next_rate_as_an_estimate() -> None:
    found = step(assessed())
    assert found is not None
    assert found.first_due == datetime(2026, 3, 14, 21, 20, tzinfo=UTC)
    # 4 mL/kg/% x 82 kg x 22.1 % = 7,248.8 mL; half of it over 16 h is 226.5 mL/h
    assert "227 mL/h" in found.why
    assert "formula estimate" in found.why


@pytest.mark.parametrize(
    "change",
    [
        ("decision: full treatment", "decision: comfort care"),
        ("  at: 2026-03-14 13:20", "  at: {earliest: 2026-03-14 13:00, latest: 2026-03-14 13:20}"),
    ],
    ids=["comfort care", "uncertain burn time"],
)
def test_there_is_no_step_where_no_single_moment_or_no_resuscitation_is_meant(
    change: tuple[str, str],
) -> None:
    assert step(assessed(change)) is None
