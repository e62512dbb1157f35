"""Classes and sums appear only where the policy asks, with gaps named and no chance of death."""

from __future__ import annotations

from typing import Any

import pytest

from handoff.plugin import Flag, Item
from tests.area.build import assessed, found, setup_with, state_text

ADULT, CHILD = "1985-02-11", "2019-01-05"
ELSE = {"other_injuries": "none found", "causes": [{"kind": "scald"}]}


def classed(scheme: str, pct: str, depth: str = "superficial partial", born: str = ADULT) -> Item:
    burns = [{"region": "trunk", "tbsa": f"{pct} %", "depth": depth, "circumferential": "no"}]
    text = state_text(
        burns, method="direct", born=born, injury=ELSE, patient={"conditions": ["none of these"]}
    )
    item = found(text, setup=setup_with(severity_scheme=scheme)).item("area.severity_class")
    assert item is not None
    return item


def test_no_class_and_no_sum_unless_the_policy_asks() -> None:
    findings = found(state_text([{"region": "trunk", "of_region": "50 %", "depth": "full thickness"}]))
    keys = [item.key for item in findings.items]
    assert not {"area.severity_class", "area.revised_baux", "area.absi"} & set(keys)


@pytest.mark.parametrize(
    ("pct", "born", "expected"),
    [
        (14.9, ADULT, "minor"),
        (15, ADULT, "moderate"),
        (25, ADULT, "moderate"),
        (25.1, ADULT, "major"),
        (9.9, CHILD, "minor"),
        (10, CHILD, "moderate"),
        (20, CHILD, "moderate"),
        (20.1, CHILD, "major"),
    ],
)
def test_classic_classes_at_their_edges(pct: float, born: str, expected: str) -> None:
    assert classed("classic-1984", str(pct), born=born).value == expected


@pytest.mark.parametrize(
    ("pct", "expected"), [(1.9, "minor"), (2, "moderate"), (10, "moderate"), (10.1, "major")]
)
def test_classic_full_thickness_edges(pct: float, expected: str) -> None:
    assert classed("classic-1984", str(pct), "full thickness").value == expected


def signless(scheme: str, pct: str, depth: str = "superficial partial", born: str = ADULT) -> str:
    from handoff.bundled.area import plugin, severity
    from handoff.bundled.area.assessment import assessments
    from handoff.bundled.area.criteria import Fact
    from handoff.bundled.area.facts import facts_of

    from handoff.assess import case_of
    from handoff.work import open_text

    setup = setup_with(severity_scheme=scheme)
    burns = [{"region": "trunk", "tbsa": f"{pct} %", "depth": depth, "circumferential": "no"}]
    text = state_text(
        burns, method="direct", born=born, injury=ELSE, patient={"conditions": ["none of these"]}
    )
    loaded = open_text(text, "case.yaml", setup, "2026-03-14 19:30")
    case = case_of(plugin, loaded.state, setup, loaded.now, {})
    latest = assessments(case)[-1]
    facts = {**facts_of(case, latest, None), "inhalation_signs": Fact(False)}
    (item,) = severity.items(case, facts, latest)
    return item.shown.partition(":")[0]


@pytest.mark.parametrize(
    ("pct", "expected"),
    [
        (4.9, "minor"),
        (5, "no class"),
        (5.1, "moderate"),
        (9.9, "moderate"),
        (10, "no class"),
        (10.1, "major"),
    ],
)
def test_gaps_of_the_scheme_for_children_are_named(pct: float, expected: str) -> None:
    assert signless("uthealth-child", str(pct), born=CHILD) == expected


@pytest.mark.parametrize(
    ("pct", "expected"),
    [
        (9.9, "minor"),
        (10, "no class"),
        (10.5, "no class"),
        (11, "moderate"),
        (30, "moderate"),
        (30.5, "no class"),
        (31, "severe"),
        (50, "severe"),
        (50.5, "no class"),
        (51.1, "extreme"),
    ],
)
def test_gaps_of_the_chinese_classes_are_named(pct: float, expected: str) -> None:
    assert signless("china", str(pct)) == expected


@pytest.mark.parametrize(
    ("pct", "expected"), [(9.9, "minor"), (10, "moderate"), (20, "moderate"), (20.1, "major")]
)
def test_later_classes_at_their_edges(pct: float, expected: str) -> None:
    assert signless("later-reprints", str(pct)) == expected


@pytest.mark.parametrize(("pct", "expected"), [(25, "no class"), (25.1, "major")])
def test_the_textbook_names_major_only(pct: float, expected: str) -> None:
    assert signless("emergency-textbook", str(pct)) == expected


def test_a_scheme_for_children_is_not_used_for_an_adult() -> None:
    assert classed("uthealth-child", "5").shown == "not computed: the scheme is for 15 years or less"


def test_what_cannot_be_judged_gives_no_class() -> None:
    item = classed("uthealth-child", "3", born=CHILD)
    assert item.value is None
    assert item.flag is Flag.NOT_RECORDED
    assert item.shown == "not computed: whether it is major cannot be judged (airway signs not recorded)"


def scored(choice: str, **more: Any) -> Item:
    key = "area.revised_baux" if choice == "revised-baux" else "area.absi"
    item = found(state_text(**more), setup=setup_with(scores=choice)).item(key)
    assert item is not None
    return item


BURN_35 = [{"region": "whole body", "tbsa": "35 %", "depth": "full thickness"}]


def test_signs_are_not_a_diagnosis_so_both_sums_are_shown() -> None:
    item = scored("revised-baux", burns=BURN_35, method="direct")
    assert item.value is None
    assert item.shown.startswith("76 without and 93 with inhalation injury (airway signs not recorded")
    assert "chance of death" in item.cautions[0]


def test_severity_index_of_a_composed_patient() -> None:
    woman = {"sex": "female"}
    item = scored("absi", burns=BURN_35, method="direct", born="1980-05-05", patient=woman)
    assert item.shown.startswith("9 without and 10 with inhalation injury")
    assert "%" not in item.shown.partition("(")[0]


def test_a_sum_without_an_age_or_a_sex_is_not_computed() -> None:
    assert (
        scored("revised-baux", burns=BURN_35, method="direct", born="").shown
        == "not computed: age not recorded"
    )
    unknown = scored("absi", burns=BURN_35, method="direct", patient={"sex": "unknown"})
    assert "sex not recorded as male or female" in unknown.shown


def test_a_newborn_scores_the_first_band_and_no_burn_scores_nothing() -> None:
    epidermal = [{"region": "trunk", "tbsa": "3 %", "depth": "epidermal"}]
    item = scored("absi", burns=epidermal, method="direct", born="2026-03-01")
    assert item.shown.startswith("1 without and 2 with")


def test_a_sum_lowers_no_flag() -> None:
    burns = [
        {"region": "left forearm", "of_region": "100 %", "depth": "full thickness", "circumferential": "yes"}
    ]
    plain = {item.key: item.flag for item in assessed(state_text(burns)).items}
    scored_too = assessed(state_text(burns), setup=setup_with(scores="revised-baux-and-absi"))
    assert plain.items() <= {item.key: item.flag for item in scored_too.items}.items()
