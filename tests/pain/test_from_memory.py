"""An interval known from memory only flags nothing unless local policy takes it as its own."""

from __future__ import annotations

from typing import Any

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, assessed, item, state_text

ROW = {"14:00": {"sedation": {"scale": "poss", "score": "1"}, "resp": "16 /min"}}


def made(route: str, at: str, choices: dict[str, str] | None = None, **more: str) -> Any:
    dose = {"at": "2026-03-14 14:05", "drug": "morphine", "dose": "4 mg", "route": route, **more}
    return assessed(["area", "pain"], state_text(ROW, pain={"doses": [dose]}), at=at, choices=choices)


def test_after_a_dose_under_the_skin_the_score_is_asked_for_in_its_time_and_not_as_urgent() -> None:
    found = made("subcutaneous", "2026-03-14 18:00")
    assert item(found, "pain.reassess_due").flag is Flag.NONE
    assert action(found, "pain.reassess").urgency is Urgency.TIMED
    taken = made("subcutaneous", "2026-03-14 18:00", {"pain.other_routes": "judged"})
    assert item(taken, "pain.reassess_due").flag is Flag.REVIEW
    assert action(taken, "pain.reassess").urgency is Urgency.NOW


def test_a_published_interval_flags_by_itself() -> None:
    assert item(made("IV", "2026-03-14 14:19"), "pain.reassess_due").flag is Flag.NONE
    assert item(made("IV", "2026-03-14 14:20"), "pain.reassess_due").flag is Flag.REVIEW


def test_sedation_not_looked_at_past_the_longest_published_interval_is_old_by_any_short_route() -> None:
    early, late = made("subcutaneous", "2026-03-14 15:04"), made("subcutaneous", "2026-03-14 15:05")
    assert item(early, "pain.sedation").flag is Flag.NONE
    assert item(late, "pain.sedation").flag is not Flag.NONE
    slow = made("oral", "2026-03-14 15:05", release="modified")
    assert item(slow, "pain.sedation").flag is Flag.NONE
