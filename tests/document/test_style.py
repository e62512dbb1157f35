"""A unit's way of writing changes what is printed and nothing that was worked out."""

from __future__ import annotations

import re
from functools import lru_cache

import pytest
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document import draft
from handoff.document.read_back import text_of
from handoff.document.style import styled
from handoff.policy import Policy, PolicyError, read_policy
from tests.shift.helpers import EXAMPLES, assessed, text_of_example


@lru_cache(maxsize=1)
def patient() -> Assessment:
    return assessed(text_of_example("house-fire"), EXAMPLES["house-fire"])


@lru_cache(maxsize=8)
def page(**policy: str) -> str:
    made = draft(replace(patient(), policy=Policy(**policy)), "x")  # type: ignore[arg-type]
    return text_of(made["x-handover.docx"])


def test_without_a_word_in_the_policy_nothing_changes() -> None:
    assert "Made at Sat 14 Mar 2026 19:30" in page()
    assert "10.4 mmol/L" in page()
    assert "mg/dL" not in page()


def test_conventional_units_stand_beside_what_was_charted() -> None:
    # 10.4 mmol/L x 18.0156 and 168 g/L / 10, by the molar mass of glucose and by a litre's ten decilitres
    assert "10.4 mmol/L (187.4 mg/dL)" in page(units="conventional")
    assert "168 g/L (16.8 g/dL)" in page(units="conventional")
    assert "kPa)" not in page(units="conventional")


def test_si_units_stand_beside_what_was_charted() -> None:
    assert "190 mmHg (25.3 kPa)" in page(units="SI")
    assert "10.4 mmol/L (" not in page(units="SI")


@pytest.mark.parametrize(
    ("order", "shown"),
    [
        ("month day year", "Made at Sat Mar 14, 2026 19:30"),
        ("year month day", "Made at Sat 2026 Mar 14 19:30"),
    ],
)
def test_dates_stand_in_the_order_of_the_unit_with_the_month_spelled(order: str, shown: str) -> None:
    assert shown in page(dates=order)
    # The axis of a chart has room for the day and the month alone.
    drawn = ("14 Mar", "this program does not show drawings")
    lines = [line for line in page(dates=order).splitlines() if "14 Mar" in line]
    assert [line for line in lines if line != drawn[0] and drawn[1] not in line] == []


def test_american_spelling_reaches_labels_and_drugs() -> None:
    made = page(spelling="american")
    assert "Hemoglobin" in made
    assert "Haemoglobin" not in made
    assert "arboxyhemoglobin" in made


def test_titles_of_sources_keep_their_letters() -> None:
    titles = [line for line in page().splitlines() if re.search(r"doi:", line)]
    assert titles
    assert [title for title in titles if title not in page(spelling="american", dates="month day year")] == []


@pytest.mark.parametrize(
    ("which", "before", "after"),
    [
        ("american", "Paracetamol 1 g, noradrenaline, OEDEMA", "Acetaminophen 1 g, norepinephrine, EDEMA"),
        ("british", "acetaminophen, edema, oedema, esophageal", "paracetamol, oedema, oedema, oesophageal"),
        ("as written", "acetaminophen and haemoglobin", "acetaminophen and haemoglobin"),
    ],
)
def test_spelling_goes_both_ways_and_keeps_capitals(which: str, before: str, after: str) -> None:
    assert styled(before, Policy(spelling=which)) == after


def test_what_was_worked_out_is_the_same() -> None:
    values = [item.value for item in patient().items]
    draft(replace(patient(), policy=Policy(units="conventional", spelling="american")), "x")
    assert [item.value for item in patient().items] == values


def test_the_policy_reads_them_and_names_the_nearest_word() -> None:
    policy = read_policy("policy: 1\nunits: conventional\ndates: month day year\nspelling: american\n", "p")
    assert (policy.units, policy.dates, policy.spelling) == ("conventional", "month day year", "american")
    with pytest.raises(PolicyError, match="american"):
        read_policy("policy: 1\nspelling: americn\n", "p")
