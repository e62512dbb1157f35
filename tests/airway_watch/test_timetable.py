"""The timetable of checks at its edges: slots, the allowance for early checks, what is missed, where it ends."""

from __future__ import annotations

import pytest
from handoff.bundled.airway_watch.timetable import interval_min, missed_slots_min, next_slot_min

from handoff.plugin import FormulaInputError

RAH: list[list[float | None]] = [[15, 240], [60, 720], [240, None]]
ENDING: list[list[float | None]] = [[60, 2880]]


@pytest.mark.parametrize(
    ("check", "due"),
    [
        (None, 15),
        (-30, 15),
        (-5, 15),
        (0, 15),
        (9, 15),
        (10, 30),
        (15, 30),
        (234, 240),
        (235, 300),
        (240, 300),
        (714, 720),
        (715, 960),
        (720, 960),
        (960, 1200),
        (43_200, 43_440),
    ],
)
def test_the_slot_that_follows_a_check(check: float | None, due: float) -> None:
    assert next_slot_min(check, RAH, 5) == due


@pytest.mark.parametrize(("check", "due"), [(2814, 2820), (2815, 2880), (2875, None), (2880, None)])
def test_a_schedule_that_ends_has_no_slot_after_its_end(check: float, due: float | None) -> None:
    assert next_slot_min(check, ENDING, 5) == due


def test_a_phase_that_its_interval_does_not_fill_ends_with_its_last_slot() -> None:
    assert next_slot_min(30, [[30, 50], [60, None]], 0) == 110


@pytest.mark.parametrize(
    ("minute", "every"),
    [(-3, 15), (0, 15), (239, 15), (240, 60), (719, 60), (720, 240), (1_000_000, 240)],
)
def test_the_interval_in_force(minute: float, every: float) -> None:
    assert interval_min(minute, RAH) == every


def test_after_its_end_a_schedule_has_no_interval() -> None:
    assert interval_min(2879, ENDING) == 60
    assert interval_min(2880, ENDING) is None


@pytest.mark.parametrize(
    ("checks", "now", "missed"),
    [
        ([], 24, ()),
        ([], 25, (15,)),
        ([9], 25, (15,)),
        ([10], 25, ()),
        ([24], 25, ()),
        ([25], 40, (15,)),
        ([15, 45], 61, (30,)),
    ],
)
def test_a_slot_is_missed_when_the_next_opens_without_a_check(
    checks: list[float], now: float, missed: tuple[float, ...]
) -> None:
    assert missed_slots_min(checks, now, RAH, 5) == missed


def test_the_last_slot_of_a_schedule_closes_one_interval_later() -> None:
    assert missed_slots_min([], 174, [[60, 120]], 5) == (60,)
    assert missed_slots_min([], 175, [[60, 120]], 5) == (60, 120)
    assert missed_slots_min([], 10_000, [[60, 120]], 5) == (60, 120)


def test_a_wide_allowance_skips_no_slot() -> None:
    assert missed_slots_min([], 60, [[15, None]], 8) == (15, 30, 45)


def test_one_minute_is_an_interval() -> None:
    assert next_slot_min(0, [[1, None]], 0) == 1


@pytest.mark.parametrize(
    "phases", [[[0, 10]], [[-1, 5]], [[None, 5]], [[15, 0]], [[15, 10], [5, 10]], [[15, 10], [5, 4]]]
)
def test_a_schedule_that_cannot_be_kept_is_refused(phases: list[list[float | None]]) -> None:
    with pytest.raises(FormulaInputError):
        interval_min(1_000_000, phases)
