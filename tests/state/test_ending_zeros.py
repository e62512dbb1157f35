"""A zero at the end of the decimals is soon read without its point, so it is named."""

from __future__ import annotations

import pytest

from handoff.work import open_text
from tests.chart.charts import HEAD, NOW, setup


def warned(row: str) -> list[str]:
    text = f"{HEAD}pain:\n  doses:\n    - {{at: 2026-03-14 15:00, drug: ketamine, route: IV, {row}}}\n"
    read = open_text(text, "patient.yaml", setup(), NOW)
    return [fault.cure.partition(",")[0] for fault in read.unusual if "zero" in fault.what]


@pytest.mark.parametrize(
    ("written", "kept"),
    [("2.0 mg", "2 mg"), ("10.0 mg", "10 mg"), ("1.50 mg", "1.5 mg"), ("30.00 mg", "30 mg")],
)
def test_a_zero_at_the_end_is_named(written: str, kept: str) -> None:
    assert warned(f"dose: {written}") == [f"write {kept}"]
    assert warned(f"dose: {written}, confirmed: yes") == []


@pytest.mark.parametrize("written", ["2 mg", "20 mg", "10.05 mg", "0.5 mg", "10000 mcg"])
def test_other_figures_are_not(written: str) -> None:
    assert warned(f"dose: {written}") == []


def test_a_temperature_may_end_in_a_zero() -> None:
    row = "observations:\n  2026-03-14:\n    15:00: {temp: {value: 36.0 C, site: tympanic}}\n"
    assert open_text(HEAD + row, "patient.yaml", setup(), NOW).unusual == ()
