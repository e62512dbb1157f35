"""Cooling is asked about for a burn by heat, while it can help, and where it was too short."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag, Urgency
from tests.small_patient import action, action_keys, assessed, item, state_text

BURN = "2026-03-14 08:00"


def made(
    at: str = "2026-03-14 09:00", kind: str = "scald", aid: dict[str, str] | None = None, **more: Any
) -> Any:
    injury = {"at": BURN, "causes": [{"kind": kind}], **({"first_aid": aid} if aid else {})}
    return assessed(["first_hours"], state_text(injury=injury, **more), at=at)


def asked(found: Any) -> bool:
    keys = action_keys(found)
    assert ("first_hours.cool" in keys) == any(one.key == "first_hours.cooling" for one in found.items)
    return "first_hours.cool" in keys


def test_too_short_a_cooling_is_named_in_minutes_and_asked_about_now() -> None:
    found = made(aid={"cooled_for": "5 min"})
    shown = item(found, "first_hours.cooling")
    assert (shown.value, shown.flag) == (15, Flag.REVIEW)
    assert action(found, "first_hours.cool").urgency is Urgency.NOW
    assert "for 15 min more" in action(found, "first_hours.cool").text
    assert "until 11:00" in action(found, "first_hours.cool").why


def test_no_first_aid_lacks_all_of_it() -> None:
    assert item(made(aid={"none": "yes"}), "first_hours.cooling").value == 20


@pytest.mark.parametrize(
    ("at", "wanted"), [("2026-03-14 11:00", True), ("2026-03-14 11:01", False), ("2026-03-14 19:30", False)]
)
def test_three_hours_from_the_burn_it_ends(at: str, wanted: bool) -> None:
    assert asked(made(at, aid={"none": "yes"})) is wanted


@pytest.mark.parametrize("aid", [None, {"cooled_for": "20 min"}, {"note": "wet towel"}])
def test_nothing_is_asked_where_it_was_long_enough_or_nobody_wrote_how_long(
    aid: dict[str, str] | None,
) -> None:
    assert not asked(made(aid=aid))


@pytest.mark.parametrize("kind", ["chemical", "electrical", "cold", "radiation"])
def test_other_causes_have_care_of_their_own(kind: str) -> None:
    assert not asked(made(kind=kind, aid={"none": "yes"}))


def test_comfort_care_asks_for_none() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    assert not asked(made(aid={"none": "yes"}, patient=comfort))
