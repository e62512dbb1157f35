"""What stands in free text is quoted and left to the nurse; it meets no criterion and settles none."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Findings
from tests.area.build import found, state_text

DISEASE, INJURY = "burn with other disease", "burn with other injury"
BURN = {"region": "trunk", "face": "front", "tbsa": "3 %", "depth": "superficial partial"}


def judged(patient: dict[str, Any], other_injuries: str = "none found") -> Findings:
    injury = {"other_injuries": other_injuries, "causes": [{"kind": "scald"}]}
    return found(state_text([BURN], patient=patient, injury=injury))


def is_met(findings: Findings, says: str) -> bool:
    return any(one.label.endswith(says) for one in findings.items if one.key.startswith("area.referral."))


def open_ones(findings: Findings) -> str:
    made = findings.item("area.referral_unknown")
    return made.shown if made else ""


@pytest.mark.parametrize("history", ["born at term, no illness", "no illness known", "asthma as a child"])
def test_a_history_in_free_text_leaves_disease_open(history: str) -> None:
    alone = judged({"history": [history]})
    assert not is_met(alone, DISEASE)
    assert f"{DISEASE} (conditions not recorded; history charted as free text: {history})" in open_ones(alone)


@pytest.mark.parametrize(("condition", "expected"), [("none of these", False), ("diabetes", True)])
def test_the_charted_conditions_settle_disease(condition: str, expected: bool) -> None:
    made = judged({"conditions": [condition], "history": ["no illness known"]})
    assert is_met(made, DISEASE) is expected
    assert DISEASE not in open_ones(made)
    if expected:
        (by,) = [one.shown for one in made.items if one.label.endswith(DISEASE)]
        assert by.endswith("met by diabetes")


@pytest.mark.parametrize(
    "said", ["spine cleared on examination", "none", "none found on examination", "fractured wrist"]
)
def test_other_injuries_in_free_text_are_quoted_and_left_open(said: str) -> None:
    made = judged({"conditions": ["none of these"]}, said)
    assert not is_met(made, INJURY)
    assert f"{INJURY} (other injuries charted as: {said})" in open_ones(made)


def test_none_found_settles_other_injuries() -> None:
    made = judged({"conditions": ["none of these"]})
    assert not is_met(made, INJURY)
    assert INJURY not in open_ones(made)
