"""A last day without an entry is not a day without a dose."""

from __future__ import annotations

import pytest

from handoff.plugin import Flag
from handoff.work import assess_loaded, make_setup, open_text

TEXT = """\
handoff: 1
clock: Europe/Dublin
patient: {name: Case, born: 1985-02-11, weights: [{value: 82 kg, kind: before burn, known: measured}]}
injury: {at: 2026-03-14 13:20}
pain:
  doses:
    - {at: 2026-03-14 14:12, drug: morphine, dose: 4 mg, route: IV}
    - {at: 2026-03-14 14:30, drug: paracetamol, dose: 1 g, route: IV}
"""
KEYS = ("pain.opioid_equivalent_24h", "pain.paracetamol_24h")


def flags(text: str, at: str) -> list[tuple[object, Flag]]:
    setup = make_setup()
    assessment = assess_loaded(open_text(text, "f", setup, at), setup)
    found = [assessment.item(key) for key in KEYS]
    return [(one.value, one.flag) for one in found if one]


def test_with_no_entry_of_the_last_day_nothing_is_added_up() -> None:
    assert flags(TEXT, "2026-03-17 14:00") == [(None, Flag.NOT_RECORDED)] * 2


def test_with_a_chart_of_the_last_day_and_no_dose_in_it_the_total_is_nought() -> None:
    text = TEXT + "observations: {2026-03-17: {12:00: {pulse: 90 /min}}}\n"
    assert [value for value, _ in flags(text, "2026-03-17 14:00")] == [0, 0]


@pytest.mark.parametrize("at", ["2026-03-14 19:30"])
def test_a_list_of_struck_out_doses_is_no_chart(at: str) -> None:
    struck = "struck: {by: EM, at: 2026-03-14 15:00, why: wrong patient}"
    text = TEXT.replace("route: IV}", f"route: IV, {struck}}}")
    assert flags(text, at) == [(None, Flag.NOT_RECORDED)] * 2
