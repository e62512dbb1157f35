"""A decision not to give anything is a decision; a blank is not one."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["area", "prevention"]
CHILD = {"born": "2023-02-11"}


def area(palms: str) -> list[dict[str, Any]]:
    burn = {"region": "trunk", "palms": palms, "depth": "deep partial"}
    return [{"at": "2026-03-14 09:00", "method": "palm", "burns": [burn]}]


def made(block: dict[str, Any] | None = None, *, at: str = "2026-03-14 19:30", **more: Any) -> Any:
    if block:
        more["prevention"] = block
    return assessed(NAMES, state_text(**more), at=at)


def decided(what: str = "drug", **more: Any) -> dict[str, Any]:
    return {"clots": {"decided": what, "at": "2026-03-14 10:00", **more}}


def test_an_adult_is_asked_about_clots_and_a_child_is_not() -> None:
    assert item(made(), "prevention.clots").flag is Flag.NOT_RECORDED
    assert "prevention.ask_clots" in action_keys(made())
    child = made(patient=CHILD)
    assert child.item("prevention.clots") is None
    assert "prevention.ask_clots" not in action_keys(child)


def test_a_day_without_a_decision_is_due_for_review_to_the_minute() -> None:
    assert item(made(at="2026-03-15 08:00"), "prevention.clots").flag is Flag.NOT_RECORDED
    assert item(made(at="2026-03-15 08:01"), "prevention.clots").flag is Flag.REVIEW


@pytest.mark.parametrize(("palms", "asked"), [("20", False), ("20.1", True)])
def test_ulcers_are_asked_about_over_20_percent(palms: str, asked: bool) -> None:
    found = made(area=area(palms))
    assert (found.item("prevention.ulcers") is not None) is asked
    assert ("prevention.ask_ulcers" in action_keys(found)) is asked


def test_a_ventilated_patient_is_asked_about_ulcers_until_the_tube_is_out() -> None:
    events = [{"at": "2026-03-14 10:00", "what": "intubation"}]
    assert "ventilated" in action(made(events=events), "prevention.ask_ulcers").why
    events.append({"at": "2026-03-14 18:00", "what": "extubation"})
    assert "prevention.ask_ulcers" not in action_keys(made(events=events))


def test_a_child_for_whom_it_was_decided_shows_the_decision() -> None:
    found = item(made(decided(what="nothing for now", why="walks about"), patient=CHILD), "prevention.clots")
    assert "walks about" in found.shown
    assert "by whom not recorded" in found.shown


def test_an_overdue_review_is_asked_about() -> None:
    found = made(decided(review="2026-03-14 19:00"))
    assert item(found, "prevention.clots").flag is Flag.REVIEW
    assert action(found, "prevention.ask_clots").why == "review overdue"
    assert item(made(decided(review="2026-03-14 20:00")), "prevention.clots").flag is Flag.NONE


def test_pumps_bring_the_look_at_the_legs() -> None:
    assert "prevention.legs" in action_keys(made(decided("drug and pumps")))
    assert "prevention.legs" not in action_keys(made(decided("drug")))


def test_a_struck_out_decision_is_none() -> None:
    struck = {"by": "EM", "at": "2026-03-14 12:00", "why": "wrong patient"}
    assert item(made(decided(struck=struck)), "prevention.clots").flag is Flag.NOT_RECORDED


def test_comfort_as_the_goal_of_care_asks_for_nothing() -> None:
    found = made(patient={"resuscitation": {"decision": "comfort care"}}, area=area("30"))
    assert [one.key for one in found.items if one.key.startswith("prevention")] == []
    assert not [key for key in action_keys(found) if key.startswith("prevention")]
