"""Running plugins: in order, each alone, and a failing one costs only itself and what needs it."""

from __future__ import annotations

import math
from datetime import datetime, timedelta

import pytest

from handoff.plugin import Case, Findings, Flag
from tests.core.helpers import action, assessment_of, item, plugin_of


def failing(case: Case) -> Findings:
    raise KeyError(f"the patient {case.state.name}")


def test_a_plugin_sees_the_findings_of_those_it_requires_and_no_others() -> None:
    seen: dict[str, list[str]] = {}

    def look(case: Case) -> Findings:
        seen["b"] = sorted(case.findings)
        return Findings()

    assessment_of(plugin_of("a"), plugin_of("b", look, requires=("a",)), plugin_of("c"))
    assert seen == {"b": ["a"]}


def test_a_failing_plugin_costs_neither_the_others_nor_their_figures() -> None:
    assessment = assessment_of(plugin_of("a"), plugin_of("b", failing))
    assert [found.key for found in assessment.items] == ["a.one"]
    assert [failure.plugin for failure in assessment.failures] == ["b"]


def test_what_a_failure_says_holds_no_patient_data() -> None:
    (failure,) = assessment_of(plugin_of("b", failing)).failures
    assert "Ferrandel" not in failure.what
    assert "KeyError" in failure.what
    assert "test_assess.py" in failure.what


def test_what_depends_on_a_failed_plugin_is_not_computed() -> None:
    assessment = assessment_of(
        plugin_of("a", failing), plugin_of("b", requires=("a",)), plugin_of("c", requires=("b",))
    )
    assert not assessment.items
    assert [(failure.plugin, "not computed" in failure.what) for failure in assessment.failures] == [
        ("a", False),
        ("b", True),
        ("c", True),
    ]


@pytest.mark.parametrize(
    ("found", "said"),
    [
        (Findings((item("other.one"),)), "not its own"),
        (Findings((item("a.one"), item("a.one"))), "twice"),
        (Findings((item("a.one", repeats=False),)), "without a source"),
        (Findings((item("a.one", value=math.nan),)), "not finite"),
        (Findings((item("a.one", value=math.inf),)), "not finite"),
        (Findings((item("a.one", value=None, shown=""),)), "nothing to show"),
        (Findings((), (action("a.do", every=timedelta(seconds=1)),)), "more often"),
        ("text", "instead of Findings"),
        (Findings((item("a.one", flag="needs action"),)), "where a Flag is due"),
        (Findings((item("a.one", system="airway"),)), "where a System is due"),
        (Findings((item("a.one", shown=3),)), "where a text is due"),
        (Findings((item("a.one", as_of=datetime(2026, 3, 14, 12)),)), "no time zone"),
        (Findings((item("a.one", cautions="one"),)), "not a tuple of texts"),
        (Findings((item("a.one", sources=("x",)),)), "not a tuple of Source"),
        (Findings((item("a.one", value=[1]),)), "of the kind list"),
        (Findings((), (action("a.do", urgency="now"),)), "where a Urgency is due"),
        (Findings((), (action("a.do", first_due=datetime(2026, 3, 14, 12)),)), "no time zone"),
        (Findings(("text",)), "returned str among its findings"),
    ],
)
def test_findings_that_break_the_contract_are_refused(found: object, said: str) -> None:
    assessment = assessment_of(plugin_of("a", lambda case: found))  # type: ignore[arg-type,return-value]
    assert not assessment.items
    assert said in assessment.failures[0].what


def test_a_plugin_cannot_change_the_state_it_is_given() -> None:
    def change(case: Case) -> Findings:
        case.state.patient["name"] = "X"  # type: ignore[assignment]
        return Findings()

    assessment = assessment_of(plugin_of("a", change))
    assert "TypeError" in assessment.failures[0].what
    assert assessment.state.name == "Tomas Ferrandel"


def test_what_is_not_recorded_is_gathered() -> None:
    blank = item("a.two", value=None, flag=Flag.NOT_RECORDED, shown="not recorded")
    assessment = assessment_of(plugin_of("a", lambda case: Findings((item("a.one"), blank))))
    assert [found.key for found in assessment.not_recorded] == ["a.two"]
