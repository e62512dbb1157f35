"""What must hold for any patient, whatever was ordered, given and measured."""

from __future__ import annotations

import copy
import random
from datetime import UTC, datetime, timedelta
from itertools import pairwise
from typing import Any
from zoneinfo import ZoneInfo

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from tests.small_patient import assessed as small_assessed
from tests.small_patient import state_text

from .build import burned, computed, item, order, run, value
from .exact import POUND
from .patients import patient

slow = settings(
    max_examples=50, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True
)
tenths = st.integers(1, 1000)
masses = st.integers(20, 2500)
seeds = st.integers(0, 100_000)
KEYS = (
    "total_24h",
    "first_8h",
    "rate_now",
    "due_by_now",
    "catch_up_rate",
    "given",
    "not_confirmed",
    "given_index",
    "projected_24h",
    "projected_per_kg",
    "urine_rate",
    "urine_last",
    "maintenance_rate",
    "balance",
    "against_plan",
    "balance_chart_day",
    "feeding_start",
    "formula_figure",
)
VOLUMES = ("total_24h", "first_8h", "rate_now", "due_by_now")


def every(state: dict[str, Any], at: str = "2026-03-14 12:00", **choices: str) -> list[object]:
    found = computed(state, at, **choices)
    return [item(found, key).value for key in KEYS]


def same(one: list[object], other: list[object]) -> bool:
    return all(
        a == pytest.approx(b, rel=1e-9, abs=1e-6) if isinstance(a, float) and isinstance(b, float) else a == b
        for a, b in zip(one, other, strict=True)
    )


def volumes(kg: float, pct: float, coefficient: float, at: str) -> list[float]:
    state = burned(f"{kg} kg", f"{pct} %", orders=[order(f"{coefficient} mL/kg/%")])
    return [float(value(computed(state, at), key) or 0) for key in VOLUMES]


@slow
@given(masses, tenths, st.integers(10, 60), st.integers(0, 23), st.sampled_from(("kg", "pct", "coefficient")))
def test_more_burn_weight_or_coefficient_never_lowers_a_volume(
    mass: int, tenth: int, coefficient: int, hour: int, more: str
) -> None:
    at = f"2026-03-{14 if hour < 16 else 15} {(8 + hour) % 24:02d}:00"
    kg, pct, ml = mass / 10, tenth / 10, coefficient / 10
    before = volumes(kg, pct, ml, at)
    grown = {
        "kg": (kg * 1.5, pct, ml),
        "pct": (kg, min(100, pct + 7.3), ml),
        "coefficient": (kg, pct, ml + 1.1),
    }
    more_kg, more_pct, more_ml = (round(part, 4) for part in grown[more])
    after = volumes(more_kg, more_pct, more_ml, at)
    assert all(new >= old for new, old in zip(after, before, strict=True))


@slow
@given(st.integers(20, 500), tenths)
def test_pounds_and_kilograms_agree(pounds: int, tenth: int) -> None:
    kg = float(POUND * pounds)
    by_pound = every(burned(f"{pounds} lb", f"{tenth / 10} %", orders=[order()]))
    by_kg = every(burned(f"{kg:.9f} kg", f"{tenth / 10} %", orders=[order()]))
    assert same(by_pound, by_kg)


@slow
@given(seeds)
def test_no_rate_is_ever_below_0(seed: int) -> None:
    state, at = patient(seed)
    found = computed(state, at)
    for one in found.items:
        if one.unit in ("mL/h", "mL/kg/h") and isinstance(one.value, (int, float)):
            assert one.value >= 0, one.key


@slow
@given(seeds, st.randoms(use_true_random=False))
def test_the_order_of_entries_changes_nothing(seed: int, shuffle: random.Random) -> None:
    state, at = patient(seed)
    other = copy.deepcopy(state)
    for name in ("orders", "given", "losses"):
        if name in other.get("fluid", {}):
            shuffle.shuffle(other["fluid"][name])
    assert every(other, at) == every(state, at)
    hours, others = (computed(one, at).values["hours"] for one in (state, other))
    assert hours == others


@slow
@given(st.integers(1, 1200), st.integers(1, 238), st.integers(1, 239))
def test_splitting_an_infusion_changes_no_total(rate: int, first: int, second: int) -> None:
    cuts = sorted({first, min(second + 1, 239)})
    at = [f"2026-03-14 {8 + minute // 60:02d}:{minute % 60:02d}" for minute in (0, *cuts, 240)]
    whole = burned(orders=[order()], given=[run(f"{rate} mL/h", at[0], stopped=at[-1])])
    parts = [run(f"{rate} mL/h", start, stopped=end) for start, end in pairwise(at)]
    assert same(every(burned(orders=[order()], given=parts)), every(whole))
    open_parts = [run(f"{rate} mL/h", start) for start in at[:-1]]
    open_parts.append({"line": "R1", "stopped": at[-1]})
    assert same(every(burned(orders=[order()], given=open_parts)), every(whole))


SHIFTABLE = ("at", "from", "to", "running", "stopped", "placed", "before")


def shifted(state: Any, move: Any) -> Any:
    """The state with every written time moved."""
    if isinstance(state, dict):
        made = {}
        for key, part in state.items():
            if key == "observations":
                rows: dict[str, dict[str, Any]] = {}
                for day, times in part.items():
                    for time, row in times.items():
                        there, _, moment = move(f"{day} {time}").partition(" ")
                        rows.setdefault(there, {})[moment] = row
                made[key] = rows
            elif key in SHIFTABLE and isinstance(part, str):
                made[key] = move(part)
            else:
                made[key] = shifted(part, move)
        return made
    return [shifted(part, move) for part in state] if isinstance(state, list) else state


ELAPSED = [key for key in KEYS if key not in ("balance_chart_day", "feeding_start")]


def elapsed(state: dict[str, Any], at: str) -> list[object]:
    found = computed(state, at)
    return [item(found, key).value for key in ELAPSED]


@slow
@given(seeds, st.integers(-5000, 5000))
def test_moving_every_time_alike_changes_no_elapsed_figure(seed: int, minutes: int) -> None:
    state, at = patient(seed)
    state["patient"]["born"] = "1985-06-15"
    state["clock"] = "UTC"

    def move(text: str) -> str:
        return f"{datetime.fromisoformat(text) + timedelta(minutes=minutes):%Y-%m-%d %H:%M}"

    assert same(elapsed(shifted(state, move), move(at)), elapsed(state, at))


@slow
@given(
    seeds, st.sampled_from(("2026-03-28 15:00", "2026-03-28 23:30", "2026-10-24 12:00", "2026-10-25 00:10"))
)
def test_a_clock_change_changes_no_elapsed_figure(seed: int, burn: str) -> None:
    state, at = patient(seed)
    state["patient"]["born"] = "1985-06-15"
    zone = ZoneInfo("Europe/Dublin")
    start = datetime.fromisoformat(burn).replace(tzinfo=zone).astimezone(UTC)
    origin = datetime.fromisoformat(state["injury"]["at"])

    def move(text: str) -> str:
        there = (start + (datetime.fromisoformat(text) - origin)).astimezone(zone)
        offset = f"{there:%z}"
        return f"{there:%Y-%m-%d %H:%M}{offset[:3]}:{offset[3:]}"

    assert same(elapsed(shifted(state, move), move(at)), elapsed(state, at))


@slow
@given(tenths, st.integers(0, 100))
def test_epidermal_burn_changes_no_figure(tenth: int, red: int) -> None:
    state = burned("80 kg", f"{tenth / 20} %", orders=[order()])
    other = copy.deepcopy(state)
    other["area"][0]["burns"].append({"region": "trunk", "of_region": f"{red} %", "depth": "epidermal"})
    other["area"][0]["method"] = state["area"][0]["method"] = "rule of nines"
    assert same(every(other), every(state))


@slow
@given(seeds)
def test_nothing_is_called_behind_while_urine_is_in_its_target(seed: int) -> None:
    state, at = patient(seed)
    found = computed(state, at)
    if found.values["urine_in_target"] is not False:
        assert "ehind the plan" not in " ".join(one.shown for one in found.items)


MOLAR = {"glucose": 180.156, "lactate": 90.08}
"""g/mol: mmol/L x g/mol / 10 = mg/dL."""


@given(st.integers(5, 400), st.sampled_from(sorted(MOLAR)))
@slow
def test_si_and_conventional_results_agree(tenth: int, name: str) -> None:
    # half a hundredth off the tenths, so that no figure lies on a line of a table
    mmol = (tenth + 0.05) / 10
    both = (f"{mmol:.4f} mmol/L", f"{mmol * MOLAR[name] / 10:.6f} mg/dL")
    made = [computed(burned(results=[{"at": "2026-03-14 11:00", name: written}])) for written in both]
    first, second = ([(one.key, one.flag, one.shown) for one in found.items] for found in made)
    assert [one for one in first if name in one[0]] == [one for one in second if name in one[0]]
    assert first == second


@given(st.integers(3200, 4150))
@slow
def test_celsius_and_fahrenheit_agree(hundredth: int) -> None:
    # half a hundredth off, so that no figure lies on a line of a table
    celsius = (hundredth + 0.5) / 100
    flags = []
    for written in (f"{celsius:.3f} C", f"{celsius * 9 / 5 + 32:.4f} F"):
        made = small_assessed(("infection", "area"), state_text({"11:00": {"temp": written}}))
        flags.append([(one.key, one.flag) for one in made.items])
    assert flags[0] == flags[1]
