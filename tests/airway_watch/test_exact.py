"""The second reckoning agrees with the plugin on invented patients."""

from __future__ import annotations

import random
from datetime import timedelta
from decimal import Decimal
from typing import Any

import pytest
from handoff.bundled.airway_watch import decay, schedule
from handoff.bundled.airway_watch.exposure import exposure

from tests.long.patients import count

from .build import case_of, found, item, minute, state_data, state_text, written
from .exact import due, fall

PATIENTS = count(500)
WHOLE_FILES = 60
DEVICES: dict[str, dict[str, str]] = {
    "full": {"device": "non-rebreather mask", "flow": "15 L/min"},
    "air": {"device": "room air"},
    "part": {"device": "nasal cannula", "flow": "4 L/min"},
}


def invented(seed: int) -> tuple[dict[str, Any], list[int], int, Decimal, int, list[tuple[int, str]]]:
    """A block, the minutes of its checks, now, the measured level and the stretches of oxygen after it."""
    rng = random.Random(seed)  # noqa: S311  (patients, not secrets)
    now = rng.randrange(1, rng.choice((60, 300, 1000, 4000)))
    checks = sorted({rng.randrange(0, now + 1) for _ in range(rng.randrange(1, 14))})
    level = Decimal(rng.randrange(0, 601)) / 10
    measured = rng.randrange(0, now + 1)
    changes = sorted({rng.randrange(0, now + 1) for _ in range(rng.randrange(1, 5))})
    kinds = [rng.choice(tuple(DEVICES)) for _ in changes]
    ends = [*changes[1:], now]
    spent = [(measured, min(changes[0], now), "uncharted")] if measured < changes[0] else []
    spent += [
        (max(start, measured), end, kind) for start, end, kind in zip(changes, ends, kinds, strict=True)
    ]
    stretches = [(end - start, kind) for start, end, kind in spent if end > start]
    block = {
        "watch": {"start": written(minute(0))},
        "signs": [{"at": written(minute(check)), "stridor": "absent"} for check in checks],
        "oxygen": [
            {"from": written(minute(at)), **DEVICES[kind]} for at, kind in zip(changes, kinds, strict=True)
        ],
        "carboxyhaemoglobin": [{"at": written(minute(measured)), "value": f"{level} %"}],
    }
    return block, checks, now, level, measured, stretches


def test_the_timetable_and_the_fall_agree() -> None:
    for seed in range(PATIENTS):
        block, checks, now, level, _, stretches = invented(seed)
        case = case_of(state_data(block), minute(now))
        seen = exposure(case)
        run = schedule.watch(case, seen)
        expected = due(checks, now)
        assert run.next_due == minute(expected.next), seed
        assert run.missed == tuple(minute(slot) for slot in expected.missed), seed
        assert run.overdue == (expected.next < now), seed
        gas = decay.monoxide(case, seen).expected
        assert gas is not None
        levels = fall(level, stretches)
        assert (gas.low, gas.central, gas.high) == pytest.approx([float(one) for one in levels], rel=1e-9), (
            seed
        )


@pytest.mark.parametrize("seed", range(WHOLE_FILES))
def test_the_same_figures_come_out_of_the_whole_file(seed: int) -> None:
    block, checks, now, level, _, stretches = invented(seed)
    findings = found(state_text(block), at=written(minute(now)))
    assert item(findings, "next_check").value == minute(due(checks, now).next)
    shown = item(findings, "carboxyhaemoglobin_now")
    if stretches and all(kind == "uncharted" for _, kind in stretches):
        assert shown.value is None
    else:
        assert shown.value == pytest.approx(float(fall(level, stretches)[1]), rel=1e-9)


def test_an_overdue_check_is_one_whose_slot_lies_before_now() -> None:
    block = {
        "watch": {"start": written(minute(0))},
        "signs": [{"at": written(minute(0)), "stridor": "absent"}],
    }
    case = case_of(state_data(block), minute(15))
    run = schedule.watch(case, exposure(case))
    assert not run.overdue
    later = case_of(state_data(block), minute(15) + timedelta(minutes=1))
    assert schedule.watch(later, exposure(later)).overdue
