"""Each published referral list keeps its own comparators, and says by what a criterion is met.

Sources: American Burn Association 2022; ABA and ACS 1999 and early 1990s; National Network for
Burn Care 2012; South West UK; North Bristol NHS Trust; ANZBA and its 2004 wording; South
Australia; DGV; Belgian criteria (BMC Health Serv Res 2015); European Burns Association (from
memory). Boundary patients are composed.
"""

from __future__ import annotations

from typing import Any

import pytest
from handoff.bundled.area.criteria import Fact, judge, meets

from handoff.plugin import Findings, Flag
from tests.area.build import assessed, found, setup_with, state_text

NONE_ELSE = {
    "conditions": ["none of these"],
    "weights": [{"value": "82 kg", "kind": "before burn", "known": "measured"}],
}
QUIET = {"other_injuries": "none found", "causes": [{"kind": "scald"}]}


def judged(
    listed: str,
    pct: str,
    depth: str = "superficial partial",
    *,
    born: str = "1985-02-11",
    region: str = "trunk",
    **more: Any,
) -> Findings:
    burns = [{"region": region, "tbsa": f"{pct} %", "depth": depth, "circumferential": "no"}]
    patient = {**NONE_ELSE, **more.pop("patient", {})}
    injury = {**QUIET, **more.pop("injury", {})}
    text = state_text(burns, method="direct", born=born, patient=patient, injury=injury, **more)
    return found(text, setup=setup_with(referral=listed))


def met(findings: Findings) -> list[str]:
    return [item.label.partition(": ")[2] for item in findings.items if item.key.startswith("area.referral.")]


ADULT, CHILD, OLD = "1985-02-11", "2019-01-05", "1955-01-05"


@pytest.mark.parametrize(
    ("listed", "says", "born", "below", "at", "above"),
    [
        ("aba-2022", "partial thickness of 10 % or more", ADULT, (9.9, False), (10.0, True), (10.1, True)),
        ("aba-1999", "partial thickness over 10 %", ADULT, (9.9, False), (10.0, False), (10.1, True)),
        ("anzba", "adult over 10 %", ADULT, (9.9, False), (10.0, False), (10.1, True)),
        ("anzba", "child over 5 %", CHILD, (4.9, False), (5.0, False), (5.1, True)),
        ("anzba-2004", "over 10 %", CHILD, (9.9, False), (10.0, False), (10.1, True)),
        ("south-australia", "child over 5 %", CHILD, (4.9, False), (5.0, False), (5.1, True)),
        ("uk-2012", "child with 2 % or more", CHILD, (1.9, False), (2.0, True), (2.1, True)),
        ("uk-2012", "adult with 3 % or more", ADULT, (2.9, False), (3.0, True), (3.1, True)),
        ("uk-south-west", "child over 1 %", CHILD, (0.9, False), (1.0, False), (1.1, True)),
        ("uk-south-west", "adult over 3 %", ADULT, (2.9, False), (3.0, False), (3.1, True)),
        ("uk-adult-centre", "adult over 40 %", ADULT, (39.9, False), (40.0, False), (40.1, True)),
        (
            "aba-1990",
            "partial thickness of 20 % or more at 10 to 50 years",
            ADULT,
            (19.9, False),
            (20.0, True),
            (20.1, True),
        ),
        (
            "aba-1990",
            "partial thickness of 10 % or more under 10 or over 50 years",
            OLD,
            (9.9, False),
            (10.0, True),
            (10.1, True),
        ),
        ("dgv", "second degree over 15 %", ADULT, (14.9, False), (15.0, False), (15.1, True)),
        (
            "belgium",
            "second and third degree over 20 % at other ages",
            ADULT,
            (19.9, False),
            (20.0, False),
            (20.1, True),
        ),
        (
            "belgium",
            "second and third degree over 10 % at 10 years or less or over 49",
            CHILD,
            (9.9, False),
            (10.0, False),
            (10.1, True),
        ),
        (
            "african-wound-care",
            "over 2 years and partial thickness over 10 %",
            ADULT,
            (9.9, False),
            (10.0, False),
            (10.1, True),
        ),
        (
            "eba",
            "superficial dermal over 20 % in adults (from memory)",
            ADULT,
            (19.9, False),
            (20.0, False),
            (20.1, True),
        ),
    ],
)
def test_each_list_keeps_its_comparator(
    listed: str,
    says: str,
    born: str,
    below: tuple[float, bool],
    at: tuple[float, bool],
    above: tuple[float, bool],
) -> None:
    for pct, expected in (below, at, above):
        assert (says in met(judged(listed, str(pct), born=born))) is expected, pct


@pytest.mark.parametrize(
    ("listed", "says", "pct", "expected"),
    [
        ("aba-2022", "full thickness burn", 0.1, True),
        ("anzba", "full thickness over 5 %", 5.0, False),
        ("anzba", "full thickness over 5 %", 5.1, True),
        ("south-australia", "full thickness burn of any size", 0.1, True),
        ("aba-1990", "full thickness of 5 % or more", 4.9, False),
        ("aba-1990", "full thickness of 5 % or more", 5.0, True),
        ("dgv", "third degree over 10 %", 10.0, False),
        ("dgv", "third degree over 10 %", 10.1, True),
        ("belgium", "third degree over 5 %", 5.0, False),
        ("belgium", "third degree over 5 %", 5.1, True),
    ],
)
def test_full_thickness_lines(listed: str, says: str, pct: float, expected: bool) -> None:
    assert (says in met(judged(listed, str(pct), "full thickness"))) is expected


def test_epidermal_burn_meets_no_area_line() -> None:
    assert met(judged("uk-2012", "40", "epidermal")) == []


@pytest.mark.parametrize(("born", "expected"), [("2011-03-15", True), ("2011-03-14", False)])
def test_fourteen_years_is_inside_and_fifteen_outside(born: str, expected: bool) -> None:
    assert (
        "age 14 years or less or weight under 30 kg" in met(judged("aba-2022", "1", born=born))
    ) is expected


@pytest.mark.parametrize(("kg", "expected"), [("29.9", True), ("30", False)])
def test_a_weight_of_30_kg_is_outside(kg: str, expected: bool) -> None:
    light = {"weights": [{"value": f"{kg} kg", "kind": "before burn", "known": "measured"}]}
    assert (
        "age 14 years or less or weight under 30 kg" in met(judged("aba-2022", "1", patient=light))
    ) is expected


@pytest.mark.parametrize(("born", "expected"), [("2026-02-15", True), ("2026-02-14", False)])
def test_a_newborn_is_under_28_days(born: str, expected: bool) -> None:
    assert ("newborn under 28 days" in met(judged("uk-south-west", "0.5", born=born))) is expected


@pytest.mark.parametrize(("born", "expected"), [("1966-03-14", True), ("1966-03-15", False)])
def test_sixty_years_is_inside(born: str, expected: bool) -> None:
    assert ("age 60 or more" in met(judged("uk-south-west", "0.5", born=born))) is expected


@pytest.mark.parametrize(("volts", "high"), [("999 V", False), ("1000 V", True), ("11 kV", True)])
def test_voltage_lines_are_shown_and_marked_from_memory(volts: str, high: bool) -> None:
    findings = judged("aba-2022", "1", injury={"causes": [{"kind": "electrical", "voltage": volts}]})
    assert ("high-voltage electrical injury of 1000 V or more (from memory)" in met(findings)) is high
    assert ("low-voltage electrical injury under 1000 V (from memory)" in met(findings)) is not high


def test_exactly_1000_v_warns_that_sources_draw_the_line_elsewhere() -> None:
    findings = judged("aba-2022", "1", injury={"causes": [{"kind": "electrical", "voltage": "1000 V"}]})
    summary = findings.item("area.referral")
    assert summary is not None
    assert any("500, 600 or 1000 V" in caution for caution in summary.cautions)


def test_a_row_from_memory_decides_only_where_the_policy_chose_the_list() -> None:
    burn = [{"region": "trunk", "tbsa": "0 %", "depth": "epidermal"}]
    injury = {**QUIET, "causes": [{"kind": "lightning"}]}
    text = state_text(burn, method="direct", patient=NONE_ELSE, injury=injury)
    by_default = assessed(text).item("area.referral")
    by_policy = assessed(text, setup=setup_with(referral="aba-2022")).item("area.referral")
    assert by_default is not None
    assert by_policy is not None
    assert (by_default.flag, by_policy.flag) == (Flag.NONE, Flag.ACTION)


def test_an_inhalation_line_cannot_be_judged_without_airway_signs() -> None:
    assert "adult over 25 % with inhalation injury" not in met(judged("uk-adult-centre", "26"))
    unknown = judged("uk-adult-centre", "26").item("area.referral_unknown")
    assert unknown is not None
    assert "airway signs not recorded" in unknown.shown


def test_what_is_not_recorded_is_named_and_never_taken_as_absent() -> None:
    findings = found(state_text([{"region": "right forearm", "of_region": "50 %", "depth": "deep partial"}]))
    unknown = findings.item("area.referral_unknown")
    assert unknown is not None
    assert unknown.flag is Flag.NOT_RECORDED
    for missing in ("past illness", "other injuries", "airway signs", "crosses a joint"):
        assert missing in unknown.shown


def test_what_is_left_to_judgement_is_asked() -> None:
    asked = judged("aba-2022", "5").item("area.referral_to_ask")
    assert asked is not None
    assert asked.shown == "pain poorly controlled: is the pain controlled?"


@pytest.mark.parametrize(
    ("region", "face", "sites"),
    [
        ("head", "front", "face"),
        ("left hand", "", "hands"),
        ("right foot", "", "feet"),
        ("genitalia", "", "genitalia"),
    ],
)
def test_deep_special_sites_are_met_by_the_region_charted(region: str, face: str, sites: str) -> None:
    burn = {
        "region": region,
        "of_region": "10 %",
        "depth": "deep partial",
        **({"face": face} if face else {}),
    }
    findings = found(state_text([burn]))
    item = next(
        item for item in findings.items if "deep burn of face" in item.label and item.key != "area.referral"
    )
    assert f"{region}" in item.shown, sites


def test_a_head_without_a_face_may_be_the_face_and_cannot_be_judged() -> None:
    findings = found(state_text([{"region": "head", "of_region": "10 %", "depth": "deep partial"}]))
    unknown = findings.item("area.referral_unknown")
    assert unknown is not None
    assert "whether head holds face not recorded" in unknown.shown


def test_a_circumferential_burn_is_met_or_asked_about() -> None:
    burn = {"region": "right forearm", "of_region": "50 %", "depth": "superficial partial"}
    setup = setup_with(referral="uk-2012")
    for answer, label in (("yes", True), ("no", False)):
        findings = found(state_text([{**burn, "circumferential": answer}]), setup=setup)
        assert ("circumferential burn" in met(findings)) is label
    unknown = found(state_text([burn]), setup=setup).item("area.referral_unknown")
    assert unknown is not None
    assert "whether right forearm goes all round not recorded" in unknown.shown


def test_not_healed_at_two_weeks() -> None:
    wound = {
        "at": "2026-03-28 13:20",
        "by": "EM",
        "method": "lund-browder",
        "wounds": [{"region": "left thigh", "of_region": "5 %", "state": "open"}],
    }
    burn = {
        "at": "2026-03-14 14:20",
        "by": "EM",
        "method": "direct",
        "burns": [{"region": "left thigh", "tbsa": "1 %", "depth": "superficial partial"}],
    }
    text = state_text(area=[burn, wound], patient=NONE_ELSE, injury=QUIET)
    setup = setup_with(referral="uk-2012")
    assert "not healed at 2 weeks" in met(found(text, "2026-03-28 13:20", setup))
    earlier = state_text(area=[burn, {**wound, "at": "2026-03-28 13:19"}], patient=NONE_ELSE, injury=QUIET)
    assert "not healed at 2 weeks" not in met(found(earlier, "2026-03-28 13:19", setup))


def test_advice_from_the_burn_centre_is_shown_and_stops_the_prompt() -> None:
    event = [{"at": "2026-03-14 14:50", "what": "advice from burn centre", "said": "hourly hand checks"}]
    burns = [{"region": "left forearm", "of_region": "50 %", "depth": "full thickness"}]
    with_advice, without = found(state_text(burns, events=event)), found(state_text(burns))
    told, untold = with_advice.item("area.referral"), without.item("area.referral")
    assert told is not None
    assert untold is not None
    assert (told.flag, told.rank) == (Flag.NONE, None)
    assert "advice from burn centre recorded at 14:50" in told.shown
    assert (untold.flag, untold.rank) == (Flag.ACTION, 70)
    assert "area.refer" in [action.key for action in without.actions]
    assert "area.refer" not in [action.key for action in with_advice.actions]


def test_comfort_care_asks_for_no_referral_and_no_limb_checks() -> None:
    comfort = {"resuscitation": {"decision": "comfort care"}}
    burns = [
        {"region": "left forearm", "of_region": "100 %", "depth": "full thickness", "circumferential": "yes"}
    ]
    findings = found(state_text(burns, patient=comfort))
    assert findings.actions == ()
    assert not any(item.flag is Flag.ACTION for item in findings.items)


def test_a_whole_arm_holds_the_hand_and_half_an_arm_may() -> None:
    arm = {"region": "left arm", "depth": "deep partial"}
    whole = found(state_text([{**arm, "of_region": "100 %"}], method="rule of nines"))
    half = found(state_text([{**arm, "of_region": "50 %"}], method="rule of nines"))
    deep = "deep burn of face, hands, feet, genitalia, perineum or over a joint"
    assert deep in met(whole)
    assert deep not in met(half)
    unknown = half.item("area.referral_unknown")
    assert unknown is not None
    assert "whether left arm holds hands not recorded" in unknown.shown


def test_a_percentage_without_regions_leaves_sites_and_rings_open() -> None:
    burns = [{"region": "whole body", "tbsa": "25 %", "depth": "deep partial"}]
    findings = found(state_text(burns, method="direct"), setup=setup_with(referral="uk-2012"))
    unknown = findings.item("area.referral_unknown")
    assert unknown is not None
    for missing in ("holds hands not recorded", "goes all round not recorded"):
        assert missing in unknown.shown


@pytest.mark.parametrize(
    ("pct", "signs", "expected"), [(25.0, True, False), (25.1, True, True), (25.1, False, False)]
)
def test_a_burn_centre_line_is_over_25_with_airway_signs(pct: float, signs: bool, expected: bool) -> None:
    rows = setup_with().parameters["area"].table("referral.uk-adult-centre")["rows"]
    facts = {"age_years": Fact(41.0), "counted_pct": Fact(pct), "inhalation_signs": Fact(signs)}
    assert judge(rows[1]["when"], facts).met is expected


def test_a_fact_that_is_so_is_not_hidden_by_one_that_is_missing() -> None:
    known, missing = Fact(12.0, shown="burned 12 %TBSA"), Fact(missing="age not recorded")
    facts = {"counted_pct": known, "age_years": missing}
    assert judge([{"age_years": "< 2"}, {"counted_pct": "> 10"}], facts).met is True
    assert judge({"age_years": "< 2", "counted_pct": "> 20"}, facts).met is False
    assert judge({"age_years": "< 2", "counted_pct": "> 10"}, facts).missing == ("age not recorded",)


def test_ten_made_of_binary_fractions_is_ten() -> None:
    parts = 13 * 0.7 + 0.9
    assert meets(parts, ">= 10")
    assert not meets(parts, "> 10")
    assert meets(10.001, "> 10")
