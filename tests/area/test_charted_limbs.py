"""Checks of limbs that are not burned all round are printed and planned like those of limbs that are."""

from __future__ import annotations

import pytest

from handoff.assess import Assessment
from handoff.plugin import Flag, Urgency
from tests.area.build import assessed, state_text
from tests.area.test_watch import ROUND, action, item


def foot(
    finding: dict[str, str], time: str = "18:15", burns: tuple[dict[str, str], ...] = (ROUND,)
) -> Assessment:
    check = {"region": "right foot", "site": "dorsalis pedis", **finding}
    rows = {"2026-03-14": {time: {"by": "EM", "limbs": [check]}}}
    return assessed(state_text(burns, observations=rows))


def test_a_check_of_a_limb_that_is_not_burned_all_round_is_shown_with_its_age() -> None:
    made = foot({"pulse": "present", "sensation": "reduced"})
    shown = item(made, "area.perfusion.right_foot")
    assert shown.label == "Beyond the burn: right foot (no burn charted there)"
    assert (shown.flag, shown.rank) == (Flag.ACTION, 40)
    assert shown.shown == (
        "not reassessed since 18:15, overdue by 15 min. warning: feeling reduced. "
        "dorsalis pedis: pulse present, feeling reduced at 18:15"
    )
    planned = action(made, "area.watch.right_foot")
    assert planned is not None
    assert planned.text.startswith(
        "Check the right foot beyond the burn: dorsalis pedis and posterior tibial"
    )
    assert planned.why.startswith("checked at 18:15, feeling reduced: ")
    assert planned.first_due is not None
    assert made.state.clock.time(planned.first_due) == "19:15"
    assert planned.urgency is Urgency.NOW


@pytest.mark.parametrize(("time", "flag"), [("18:30", Flag.NONE), ("18:29", Flag.REVIEW)])
def test_a_limb_without_a_warning_is_due_by_the_same_hour(time: str, flag: Flag) -> None:
    made = foot({"pulse": "present"}, time, burns=())
    assert item(made, "area.perfusion.right_foot").flag is flag
    planned = action(made, "area.watch.right_foot")
    assert planned is not None
    assert planned.urgency is Urgency.TIMED


def test_the_burn_of_a_limb_that_is_only_checked_is_named() -> None:
    burned = {"region": "right foot", "tbsa": "1 %", "depth": "deeper than full thickness"}
    made = foot({"pulse": "present"}, burns=(burned,))
    label = item(made, "area.perfusion.right_foot").label
    assert label == "Beyond the burn: right foot (right foot deeper than full thickness)"


def test_every_charted_region_is_printed_somewhere() -> None:
    regions = ("right hand", "left hand", "left thigh", "chest", "left buttock", "head")
    checks = [{"region": name, "colour": "pale"} for name in regions]
    made = assessed(
        state_text([ROUND], observations={"2026-03-14": {"19:00": {"by": "EM", "limbs": checks}}})
    )
    shown = " ".join(one.label + one.shown for one in made.items if one.key.startswith("area.perfusion."))
    assert [name for name in regions if name not in shown] == []
