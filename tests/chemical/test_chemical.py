"""Chemical injury: rinse long enough, know the chemical, nothing in a scald."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, item, state_text

NAMES = ["chemical"]


def made(block: dict[str, Any] | None = None, *, at: str = "2026-03-14 19:30", **more: Any) -> Any:
    cause = {"kind": "chemical", "agent": "caustic soda", **more.pop("cause", {})}
    if block:
        more["chemical"] = block
    choices = more.pop("choices", None)
    text = state_text(injury={"causes": [{key: value for key, value in cause.items() if value}]}, **more)
    return assessed(NAMES, text, at=at, choices=choices)


def span(start: str, end: str | None) -> dict[str, str]:
    return {"from": f"2026-03-14 {start}", **({"until": f"2026-03-14 {end}"} if end else {})}


def test_a_scald_hears_nothing_of_it() -> None:
    found = assessed(NAMES, state_text())
    assert (found.items, found.actions) == ((), ())


def test_no_rinsing_charted_asks_for_it_now() -> None:
    found = made()
    assert item(found, "chemical.rinsed").flag is Flag.ACTION
    assert "for 60 min more" in action(found, "chemical.rinse").text
    assert action(found, "chemical.rinse").urgency is Urgency.NOW


def test_times_that_overlap_count_once() -> None:
    found = made({"rinsed": [span("08:10", "08:40"), span("08:30", "09:00")]})
    assert item(found, "chemical.rinsed").value == pytest.approx(50)


def test_what_was_told_counts_where_it_is_longer() -> None:
    found = made({"rinsed": [span("08:10", "08:40")]}, cause={"irrigated_for": "45 min"})
    assert item(found, "chemical.rinsed").value == pytest.approx(45)


def test_rinsing_that_runs_raises_no_flag_but_goes_on() -> None:
    found = made({"rinsed": [span("19:00", None)]})
    assert item(found, "chemical.rinsed").flag is Flag.NONE
    assert "still running" in item(found, "chemical.rinsed").shown
    assert "Rinse on" in action(found, "chemical.rinse").text
    assert "for 30 min more" in action(found, "chemical.rinse").text


def test_enough_is_enough_at_the_minute() -> None:
    for end, flag in (("09:09", Flag.ACTION), ("09:10", Flag.NONE)):
        found = made({"rinsed": [span("08:10", end)]})
        assert item(found, "chemical.rinsed").flag is flag
        assert ("chemical.rinse" in action_keys(found)) is (flag is Flag.ACTION)


def test_a_duration_from_memory_flags_only_where_the_policy_names_it() -> None:
    block = {"rinsed": [span("08:10", "09:10")]}
    found = made(block, choices={"chemical.rinse": "alkali-120"})
    assert item(found, "chemical.rinsed").flag is Flag.ACTION


def test_a_strip_that_differs_from_skin_not_hit_is_due_for_review() -> None:
    for skin, flag in (("6", Flag.REVIEW), ("9", Flag.NONE), (None, Flag.NONE)):
        strip = {"at": "2026-03-14 09:30", "wound": "9", **({"skin": skin} if skin else {})}
        assert item(made({"ph": [strip]}), "chemical.acidity").flag is flag


def test_an_unknown_chemical_is_not_recorded_and_asked_about() -> None:
    found = made({"group": "not known"}, cause={"agent": None})
    assert item(found, "chemical.agent").flag is Flag.NOT_RECORDED
    assert "label or data sheet" in action(found, "chemical.poisons").text


@pytest.mark.parametrize("block", [{"group": "hydrofluoric acid"}, None])
def test_hydrofluoric_acid_is_on_page_one(block: dict[str, Any] | None) -> None:
    found = made(block, cause={"agent": "hydrofluoric acid" if block is None else "rust remover"})
    assert item(found, "chemical.agent").rank == 36
    assert action(found, "chemical.hydrofluoric").urgency is Urgency.NOW
    assert action(found, "chemical.poisons").urgency is Urgency.NOW


def test_advice_that_was_taken_is_shown_and_not_asked_for_again() -> None:
    advice = {"at": "2026-03-14 10:00", "said": "rinse on, no antidote"}
    found = made({"poisons_advice": advice})
    assert "rinse on, no antidote" in item(found, "chemical.agent").shown
    assert "chemical.poisons" not in action_keys(found)


def test_a_chemical_in_the_eye_is_rinsed_now() -> None:
    assert action(made({"in_eye": "yes"}), "chemical.eye").urgency is Urgency.NOW
    assert "chemical.eye" not in action_keys(made({"in_eye": "no"}))


def test_after_a_day_nothing_is_asked_for() -> None:
    assert "chemical.rinse" in action_keys(made(at="2026-03-15 08:00"))
    late = made(at="2026-03-15 08:01")
    assert action_keys(late) == []
    assert item(late, "chemical.rinsed").flag is Flag.NOT_RECORDED


def test_comfort_as_the_goal_of_care_asks_for_nothing() -> None:
    found = made(
        patient={"resuscitation": {"decision": "comfort care"}}, cause={"agent": "hydrofluoric acid"}
    )
    assert action_keys(found) == []
    assert all(one.rank is None and one.flag is not Flag.ACTION for one in found.items)


def test_the_chemical_is_shown_with_what_is_known_of_it_and_nothing_else() -> None:
    found = item(made({"group": "alkali", "clothes_off": "yes", "in_eye": "no"}), "chemical.agent")
    assert found.shown == (
        "caustic soda, alkali; poisons service: no advice recorded; contaminated clothes off: yes; in the eye: no"
    )
    assert found.cautions == ()
    bare = item(made(), "chemical.agent")
    assert bare.shown == "caustic soda; poisons service: no advice recorded"
    assert bare.flag is Flag.NONE
    only_group = item(made({"group": "cement"}, cause={"agent": None}), "chemical.agent")
    assert only_group.flag is Flag.NONE


def test_hydrofluoric_acid_says_why_a_small_patch_matters() -> None:
    found = item(made({"group": "hydrofluoric acid"}), "chemical.agent")
    assert any("stop the heart" in caution for caution in found.cautions)
    assert found.sources[0].key == "hf-sheet"


def test_the_working_names_each_time_and_what_was_told() -> None:
    found = item(made({"rinsed": [span("08:10", "08:40"), span("19:00", None)]}), "chemical.rinsed")
    assert found.working is not None
    assert [one.shown for one in found.working.inputs] == [
        "2026-03-14 08:10 to 2026-03-14 08:40",
        "2026-03-14 19:00 to now",
    ]
    told = item(made(cause={"irrigated_for": "20 min"}), "chemical.rinsed")
    assert told.working is not None
    assert [one.label for one in told.working.inputs] == ["told"]
