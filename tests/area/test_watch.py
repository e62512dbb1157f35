"""Checks beyond a burn that goes all round: last finding, its age, what warns, what is overdue.

Hourly checks and late signs: US Joint Trauma System, Burn Care; pressures: Orgill DP, Piccolo N.
J Burn Care Res 2009;30:759, and the MSD Manual; the bleeding intervals are common practice.
"""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from handoff.assess import Assessment
from handoff.plugin import Action, Flag, Item
from handoff.registry import Setup
from tests.area.build import NOW, assessed, found, setup_of, setup_with, state_text

ROUND = {"region": "right forearm", "of_region": "100 %", "depth": "full thickness", "circumferential": "yes"}
KEY = "area.perfusion.right_arm"


def charted(
    *checks: tuple[str, dict[str, str]],
    at: str = NOW,
    burn: dict[str, str] = ROUND,
    setup: Setup | None = None,
    **more: Any,
) -> Assessment:
    rows = {time: {"by": "EM", "limbs": [{"region": "right hand", **check}]} for time, check in checks}
    observations = {"observations": {"2026-03-14": rows}} if rows else {}
    return assessed(state_text([burn], **observations, **more), at, setup or setup_of())


def item(assessment: Assessment, key: str = KEY) -> Item:
    made = assessment.item(key)
    assert made is not None
    return made


def action(assessment: Assessment, key: str) -> Action | None:
    return next((one for one in assessment.actions if one.key == key), None)


def test_no_check_beyond_a_deep_burn_needs_action_on_page_one() -> None:
    made = item(charted())
    assert (made.flag, made.rank) == (Flag.ACTION, 41)
    assert made.shown == "no check charted; due every 60 min"


def test_a_check_inside_its_hour_raises_no_flag_and_shows_its_time() -> None:
    made = item(charted(("19:00", {"pulse": "present", "refill": "2 s"})))
    assert made.flag is Flag.NONE
    assert made.shown == "right hand: pulse present, refill 2 s at 19:00"


@pytest.mark.parametrize(("time", "flag"), [("18:30", Flag.NONE), ("18:29", Flag.REVIEW)])
def test_a_check_older_than_an_hour_is_not_reassessed_since(time: str, flag: Flag) -> None:
    made = item(charted((time, {"pulse": "present"})))
    assert made.flag is flag
    assert ("not reassessed since" in made.shown) is (flag is Flag.REVIEW)


@pytest.mark.parametrize(
    ("finding", "value"),
    [
        ("pulse", "weak"),
        ("pulse", "absent"),
        ("doppler", "absent"),
        ("doppler", "weaker than before"),
        ("colour", "dusky"),
        ("warmth", "cool"),
        ("sensation", "tingling"),
        ("sensation", "reduced"),
        ("movement", "absent"),
        ("pain_on_stretch", "present"),
        ("tightness", "tight"),
        ("refill", "absent"),
        ("spo2", "no trace"),
    ],
)
def test_a_failing_sign_needs_action(finding: str, value: str) -> None:
    made = item(charted(("19:00", {finding: value})))
    assert (made.flag, made.rank) == (Flag.ACTION, 40)
    assert made.shown.startswith("warning: ")


@pytest.mark.parametrize(
    ("finding", "value"),
    [("pulse", "not assessed"), ("doppler", "triphasic"), ("sensation", "not assessed"), ("refill", "9 s")],
)
def test_what_was_not_assessed_or_has_no_line_does_not_warn(finding: str, value: str) -> None:
    assert item(charted(("19:00", {finding: value}))).flag is Flag.NONE


def test_a_refill_that_grows_longer_warns_whatever_the_line() -> None:
    made = item(charted(("18:00", {"refill": "2 s"}), ("19:00", {"refill": "3 s"})))
    assert "refill longer (3 s, 2 s at 18:00)" in made.shown
    assert item(charted(("18:00", {"refill": "3 s"}), ("19:00", {"refill": "2 s"}))).flag is Flag.NONE


@pytest.mark.parametrize(("refill", "flag"), [("2 s", Flag.NONE), ("3 s", Flag.ACTION)])
def test_a_refill_line_holds_only_where_the_policy_chose_it(refill: str, flag: Flag) -> None:
    line = setup_with(refill_limit="over-two-seconds")
    assert item(charted(("19:00", {"refill": refill}), setup=line)).flag is flag
    assert item(charted(("19:00", {"refill": refill}))).flag is Flag.NONE


@pytest.mark.parametrize(
    ("table", "pressure", "said"),
    [
        ("orgill-piccolo", 25, ""),
        ("orgill-piccolo", 26, "consider release above 25 mmHg"),
        ("orgill-piccolo", 40, "consider release above 25 mmHg"),
        ("orgill-piccolo", 41, "says release above 40 mmHg"),
        ("msd-manual", 30, ""),
        ("msd-manual", 31, "says release above 30 mmHg"),
    ],
)
def test_pressure_lines_name_their_table_and_ask_to_confirm(table: str, pressure: int, said: str) -> None:
    made = item(
        charted(("19:00", {"pressure": f"{pressure} mmHg"}), setup=setup_with(compartment_pressure=table))
    )
    assert (made.flag is Flag.ACTION) is bool(said)
    if said:
        assert said in made.shown
        assert f"table {table}" in made.shown
        assert "confirm with the burn surgeon" in made.shown


@pytest.mark.parametrize(
    ("beyond", "elsewhere", "flag"),
    [
        ("94 %", "99 %", Flag.ACTION),
        ("95 %", "99 %", Flag.NONE),
        ("90 %", "92 %", Flag.NONE),
        ("94 %", "", Flag.ACTION),
    ],
)
def test_low_saturation_beyond_the_burn_counts_only_where_it_is_not_low_elsewhere(
    beyond: str, elsewhere: str, flag: Flag
) -> None:
    row = {
        "by": "EM",
        "limbs": [{"region": "right hand", "spo2": beyond}],
        **({"spo2": elsewhere} if elsewhere else {}),
    }
    text = state_text([ROUND], observations={"2026-03-14": {"19:00": row}})
    assert item(assessed(text)).flag is flag


def test_a_finding_at_one_site_is_not_hidden_by_a_later_one_at_another() -> None:
    made = item(
        charted(
            ("18:45", {"site": "index finger", "doppler": "absent"}),
            ("19:00", {"site": "radial", "pulse": "present"}),
        )
    )
    assert made.flag is Flag.ACTION
    assert "Doppler absent" in made.shown


def test_a_check_of_the_other_limb_is_no_check_of_this_one() -> None:
    row = {"by": "EM", "limbs": [{"region": "left hand", "pulse": "present"}]}
    text = state_text([ROUND], observations={"2026-03-14": {"19:00": row}})
    assert item(assessed(text)).shown.startswith("no check charted")


def test_the_check_is_planned_an_hour_after_the_last_one() -> None:
    made = charted(("19:00", {"pulse": "present"}))
    planned = action(made, "area.watch.right_arm")
    assert planned is not None
    assert planned.first_due is not None
    assert planned.every is not None
    assert (made.state.clock.time(planned.first_due), planned.every.total_seconds()) == ("20:00", 3600)


@pytest.mark.parametrize(("at", "planned"), [("2026-03-16 13:20", True), ("2026-03-16 13:21", False)])
def test_the_watch_ends_48_hours_after_the_burn(at: str, planned: bool) -> None:
    made = charted(at=at)
    assert (action(made, "area.watch.right_arm") is not None) is planned
    assert ("the watch of 48 h after the burn is over" in item(made).shown) is not planned


def test_an_overdue_check_is_planned_for_when_it_was_due() -> None:
    made = charted(("17:00", {"pulse": "present"}))
    planned = action(made, "area.watch.right_arm")
    assert planned is not None
    assert planned.first_due is not None
    assert made.state.clock.time(planned.first_due) == "18:00"
    assert "not reassessed since 17:00, overdue by 1 h 30 min" in item(made).shown


def test_a_superficial_burn_all_round_is_watched_without_page_one() -> None:
    made = charted(burn={**ROUND, "depth": "superficial partial"})
    assert (item(made).flag, item(made).rank) == (Flag.NOT_RECORDED, None)
    assert action(made, "area.watch.right_arm") is not None


def test_redness_all_round_is_not_watched() -> None:
    made = charted(burn={**ROUND, "depth": "epidermal"})
    assert made.item(KEY) is None


def test_a_tight_chest_is_watched_by_breaths() -> None:
    chest = {"region": "trunk", "of_region": "60 %", "depth": "full thickness", "circumferential": "near"}
    text = state_text([chest], observations={"2026-03-14": {"19:00": {"by": "EM", "resp": "28 /min"}}})
    made = assessed(text)
    assert item(made, "area.perfusion.trunk").shown == "breaths 28 /min at 19:00"
    planned = action(made, "area.watch.trunk")
    assert planned is not None
    assert planned.area == "breathing"


def test_whether_it_goes_round_is_asked_of_a_deep_burn_that_spares_no_face() -> None:
    deep = {"region": "left thigh", "of_region": "50 %", "depth": "deep partial"}
    made = assessed(state_text([deep])).item("area.circumferential")
    assert made is not None
    assert (made.flag, made.shown) == (Flag.NOT_RECORDED, "none charted; not recorded for left thigh")
    front = assessed(state_text([{**deep, "face": "front"}])).item("area.circumferential")
    assert front is not None
    assert (front.flag, front.shown) == (Flag.NONE, "none charted; not recorded for left thigh front")


@pytest.mark.parametrize(
    ("charted_as", "row", "said"),
    [
        ("", None, "none charted; not recorded for right forearm"),
        ("no", False, "none charted"),
        ("yes", True, "right forearm (full thickness)"),
        ("near", "near", "right forearm (full thickness, nearly all round)"),
        ("not assessed", "not assessed", "none charted; not assessed for right forearm"),
    ],
)
def test_a_blank_is_handed_on_as_blank_and_never_as_no(charted_as: str, row: object, said: str) -> None:
    burn = {key: value for key, value in ROUND.items() if key != "circumferential"}
    made = assessed(state_text([{**burn, **({"circumferential": charted_as} if charted_as else {})}]))
    (handed_on,) = made.findings["area"].values["burns"]  # type: ignore[misc]
    assert handed_on.circumferential == row
    assert item(made, "area.circumferential").shown == said


def test_a_request_for_release_waits_until_it_is_answered_or_done() -> None:
    request = {
        "at": "2026-03-14 17:10",
        "what": "escharotomy requested",
        "who": "EM to burns registrar",
        "site": "right arm",
    }
    made = item(charted(events=[request]), "area.release_requested.1")
    assert made.flag is Flag.ACTION
    assert (
        made.shown
        == "requested at 17:10; charted as: EM to burns registrar; no answer charted for 2 h 20 min"
    )
    answered = charted(events=[{**request, "answered": "2026-03-14 17:40"}])
    done = charted(
        events=[request, {"at": "2026-03-14 18:00", "what": "escharotomy", "site": "right forearm and hand"}]
    )
    other = charted(events=[request, {"at": "2026-03-14 18:00", "what": "escharotomy", "site": "left leg"}])
    undecided = item(answered, "area.release_requested.1")
    assert undecided.flag is Flag.REVIEW
    assert undecided.shown.endswith("answered at 17:40, what was decided is not recorded")
    decided = charted(events=[{**request, "answered": "2026-03-14 17:40", "outcome": "not wanted now"}])
    assert decided.item("area.release_requested.1") is None
    assert done.item("area.release_requested.1") is None
    assert other.item("area.release_requested.1") is not None


RELEASE = {"at": "2026-03-14 19:00", "what": "escharotomy", "site": "right forearm"}


@pytest.mark.parametrize(
    ("at", "flag"),
    [
        ("2026-03-14 19:15", Flag.NOT_RECORDED),
        ("2026-03-14 19:16", Flag.REVIEW),
        ("2026-03-15 19:01", Flag.NONE),
    ],
)
def test_bleeding_is_looked_for_a_quarter_of_an_hour_after_a_release(at: str, flag: Flag) -> None:
    assert item(charted(events=[RELEASE], at=at), "area.release.1").flag is flag


def test_active_bleeding_after_a_release_needs_action() -> None:
    made = item(charted(("19:10", {"bleeding": "active"}), events=[RELEASE]), "area.release.1")
    assert (made.flag, made.rank) == (Flag.ACTION, 40)
    assert "bleeding active at 19:10" in made.shown


def test_bleeding_checks_become_hourly_after_the_first_hour() -> None:
    early = action(charted(events=[RELEASE]), "area.bleeding_check.1")
    late = action(charted(events=[RELEASE], at="2026-03-14 20:30"), "area.bleeding_check.1")
    assert early is not None
    assert late is not None
    assert early.every is not None
    assert late.every is not None
    assert (early.every.total_seconds(), late.every.total_seconds()) == (900, 3600)
    assert early.first_due is not None
    assert charted().state.clock.time(early.first_due) == "19:15"


@settings(max_examples=25, deadline=None, derandomize=True)
@given(
    st.lists(
        st.tuples(st.integers(0, 5), st.sampled_from(["present", "weak", "absent"])), min_size=1, max_size=4
    )
)
def test_the_order_in_which_checks_are_written_changes_nothing(checks: list[tuple[int, str]]) -> None:
    rows = {
        f"{14 + hour}:30": {"by": "EM", "limbs": [{"region": "right hand", "pulse": pulse}]}
        for hour, pulse in checks
    }
    forward = found(state_text([ROUND], observations={"2026-03-14": rows}))
    backward = found(state_text([ROUND], observations={"2026-03-14": dict(reversed(rows.items()))}))
    ahead, back = forward.item(KEY), backward.item(KEY)
    assert ahead is not None
    assert back is not None
    assert (ahead.shown, ahead.flag) == (back.shown, back.flag)
