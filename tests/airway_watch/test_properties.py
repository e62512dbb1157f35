"""What must hold for every patient: time only lowers, ranges bracket, order and clock do not matter, age shows."""

from __future__ import annotations

import random
from datetime import UTC, datetime, timedelta
from typing import Any

from handoff.bundled.airway_watch import charted, decay, formula, schedule, timetable
from handoff.bundled.airway_watch.exposure import exposure
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from handoff.plugin import Flag

from .build import case_of, found, item, minute, said, state_data, state_text, written
from .test_exact import invented

quick = settings(max_examples=200, deadline=None, derandomize=True)
few = settings(max_examples=40, deadline=None, derandomize=True)
levels = st.floats(0, 100)
spans = st.lists(st.tuples(st.floats(0, 5000), st.floats(1, 2000)), max_size=4)


def split(parts: list[tuple[float, float]]) -> tuple[list[float], list[float]]:
    return [length for length, _ in parts], [life for _, life in parts]


@quick
@given(levels, spans, st.floats(0, 5000), st.floats(1, 2000))
def test_more_time_never_raises_the_level(
    level: float, parts: list[tuple[float, float]], longer: float, life: float
) -> None:
    before = formula.decayed_pct(level, *split(parts))
    assert formula.decayed_pct(level, *split([*parts, (longer, life)])) <= before <= level


@quick
@given(st.integers(0, 20_000), st.integers(0, 600), st.integers(0, 600))
def test_the_level_expected_later_is_never_higher(seed: int, first: int, more: int) -> None:
    block, *_ = invented(seed)
    case = case_of(state_data(block), minute(6000))
    last = charted.levels(case)[-1]
    early = decay.expected_at(case, last, last.at + timedelta(minutes=first))
    late = decay.expected_at(case, last, last.at + timedelta(minutes=first + more))
    assert late.low <= early.low
    assert late.central <= early.central
    assert late.high <= early.high


@quick
@given(st.integers(0, 20_000))
def test_the_range_brackets_the_central_value(seed: int) -> None:
    block, _, now, *_ = invented(seed)
    case = case_of(state_data(block), minute(now))
    gas = decay.monoxide(case, exposure(case)).expected
    assert gas is not None
    assert gas.low <= gas.central <= gas.high <= float(gas.level.pct) + 1e-9


@quick
@given(st.floats(0.01, 100), spans)
def test_working_back_undoes_the_fall_until_the_cap(level: float, parts: list[tuple[float, float]]) -> None:
    lower = formula.decayed_pct(level, *split(parts))
    assume(lower > 1e-9)
    back, capped = formula.backdated_pct(lower, *split(parts))
    assert abs(back - level) < 1e-6
    assert not capped or back == 100


@few
@given(st.integers(0, 20_000), st.integers(1, 20 * 24 * 60))
def test_shifting_every_time_changes_no_elapsed_figure(seed: int, by: int) -> None:
    block, _, now, *_ = invented(seed)
    first = found(state_text(block), at=written(minute(now)))
    start = datetime(2026, 3, 14, 10, 0, tzinfo=UTC) - timedelta(minutes=by)
    moved = _moved(block, by)
    second = found(
        state_text(moved, injury={"at": written(start)}), at=written(minute(now) - timedelta(minutes=by))
    )
    assert [one.key for one in first.items] == [one.key for one in second.items]
    for one, two in zip(first.items, second.items, strict=True):
        assert one.flag == two.flag, one.key
        if isinstance(one.value, datetime):
            assert isinstance(two.value, datetime)
            assert one.value - two.value == timedelta(minutes=by)
        else:
            assert one.value == two.value, one.key


def _moved(block: Any, by: int) -> Any:
    if isinstance(block, dict):
        return {key: _moved(value, by) for key, value in block.items()}
    if isinstance(block, list):
        return [_moved(value, by) for value in block]
    try:
        moment = datetime.strptime(block, "%Y-%m-%d %H:%M").replace(tzinfo=UTC)
    except ValueError:
        return block
    return written(moment - timedelta(minutes=by))


@few
@given(st.integers(0, 20_000), st.integers(0, 1000))
def test_the_order_of_entries_changes_nothing(seed: int, order: int) -> None:
    block, _, now, *_ = invented(seed)
    # Entries of one minute, whatever they say, must not depend on their place either.
    block["signs"] += [{"at": block["signs"][0]["at"], "stridor": "present", "hoarse voice": "absent"}]
    block["carboxyhaemoglobin"] += [{"at": block["carboxyhaemoglobin"][0]["at"], "value": "7 %"}]
    mixed = {
        key: random.Random(order).sample(value, len(value)) if isinstance(value, list) else value  # noqa: S311
        for key, value in block.items()
    }
    at = written(minute(now))
    before, after = found(state_text(block), at=at), found(state_text(mixed), at=at)
    assert [(one.key, one.value, one.shown, one.flag) for one in before.items] == [
        (one.key, one.value, one.shown, one.flag) for one in after.items
    ]
    assert [(one.key, one.first_due, one.every) for one in before.actions] == [
        (one.key, one.first_due, one.every) for one in after.actions
    ]


@quick
@given(
    st.lists(st.tuples(st.integers(0, 700), st.sampled_from(charted.SIGNS)), min_size=1, max_size=8),
    st.integers(0, 900),
)
def test_an_old_absence_never_prints_as_absent(looked: list[tuple[int, str]], later: int) -> None:
    now = minute(max(at for at, _ in looked) + later)
    block = {
        "watch": {"start": written(minute(0))},
        "signs": [{"at": written(minute(at)), name: "absent"} for at, name in looked],
    }
    case = case_of(state_data(block), now)
    run = schedule.watch(case, exposure(case))
    text = said(found(state_text(block), at=written(now)))
    for sign in charted.signs(case):
        if run.is_old(sign.at):
            assert f"{sign.name} absent" not in text
            assert f"{sign.name}: not reassessed since" in text
        else:
            assert f"{sign.name} absent" in text


@few
@given(st.integers(0, 20_000))
def test_an_absence_is_old_exactly_when_its_next_check_is_past(seed: int) -> None:
    block, checks, now, *_ = invented(seed)
    case = case_of(state_data(block), minute(now))
    run = schedule.watch(case, exposure(case))
    assert run.is_old(minute(checks[-1])) == run.overdue


phases = st.lists(st.tuples(st.integers(1, 300), st.integers(1, 2000)), min_size=1, max_size=4)


@quick
@given(
    phases,
    st.booleans(),
    st.lists(st.integers(-50, 9000), max_size=12),
    st.integers(0, 9000),
    st.integers(0, 20),
)
def test_a_next_check_never_waits_longer_than_the_interval_and_its_allowance(
    parts: list[tuple[int, int]], open_end: bool, checks: list[int], now: int, early: int
) -> None:
    ends, table = 0, []
    for every, length in parts:
        ends += length
        table.append((float(every), float(ends)))
    if open_end:
        table[-1] = (table[-1][0], None)  # type: ignore[assignment]
    longest = max(every for every, _ in table)
    for check in checks:
        slot = timetable.next_slot_min(check, table, early)
        if slot is not None:
            assert slot > check + early or check + early < 0
            assert slot - max(check, 0) <= 2 * longest + early
    missed = timetable.missed_slots_min(checks, now, table, early)
    assert list(missed) == sorted(missed)
    assert all(slot <= now + early for slot in missed)


@few
@given(st.integers(0, 20_000))
def test_contract_keys_are_always_there_with_their_units(seed: int) -> None:
    block, _, now, *_ = invented(seed)
    rng = random.Random(seed)  # noqa: S311
    kept = {key: value for key, value in block.items() if rng.random() < 0.5}
    findings = found(state_text(kept), at=written(minute(now)))
    for key, unit in (
        ("signs_present", "count"),
        ("next_check", "time"),
        ("carboxyhaemoglobin_now", "%"),
        ("pf_ratio", "mmHg"),
    ):
        one = item(findings, key)
        assert one.unit == unit
        assert one.shown
        assert one.value is not None or one.flag in (Flag.NOT_RECORDED, Flag.REVIEW, Flag.NONE)
