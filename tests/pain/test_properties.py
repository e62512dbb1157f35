"""What must hold for every patient, whatever was charted."""

from __future__ import annotations

import copy
import random
from datetime import datetime, timedelta
from typing import Any

import pytest

from handoff.plugin import Findings, Flag

from .build import NOW, computed, item, patient_state
from .patients import clock, dose, patient

TOTALS = ("pain.opioid_equivalent_24h", "pain.paracetamol_24h")
SEEDS = range(60)


def total(findings: Findings, key: str) -> float | None:
    value = item(findings, key).value
    assert value is None or isinstance(value, float)
    return value


def close(one: float | None, other: float | None) -> bool:
    return one is other is None or (one is not None and other == pytest.approx(one, rel=1e-9, abs=1e-9))


@pytest.mark.parametrize("seed", SEEDS)
def test_adding_a_dose_never_lowers_a_total(seed: int) -> None:
    state, choices = patient(seed)
    more = copy.deepcopy(state)
    more["pain"]["doses"].append(dose(random.Random(seed + 10_000)))  # noqa: S311
    for key in TOTALS:
        before, after = total(computed(state, **choices), key), total(computed(more, **choices), key)
        assert before is None or after is None or after >= before - 1e-9
        assert not (before is None and after is not None), "a total that could not be computed stays so"


@pytest.mark.parametrize("seed", SEEDS)
def test_splitting_a_dose_changes_no_total(seed: int) -> None:
    state, choices = patient(seed)
    split = copy.deepcopy(state)
    halves = []
    for entry in split["pain"]["doses"]:
        amount, unit = entry["dose"].split()
        halves += [{**entry, "dose": f"{float(amount) / 2:.6f} {unit}"}] * 2
    split["pain"]["doses"] = halves
    for key in TOTALS:
        assert close(total(computed(state, **choices), key), total(computed(split, **choices), key))


@pytest.mark.parametrize("seed", SEEDS)
def test_writing_the_same_rate_again_changes_no_total(seed: int) -> None:
    state, choices = patient(seed)
    split = copy.deepcopy(state)
    for line in "AB":
        of_line = [entry for entry in split["pain"].get("infusions", []) if entry["line"] == line]
        events = [entry for entry in of_line if "running" in entry]
        starts = sorted((entry["from"], entry["rate"]) for entry in of_line if "from" in entry)
        stops = [entry["stopped"] for entry in of_line if "stopped" in entry]
        for seen in events:
            begun = [start for start in starts if start[0] < seen["running"]]
            if begun and not any(begun[-1][0] <= stop <= seen["running"] for stop in stops):
                again = {
                    "line": line,
                    "from": seen["running"],
                    "rate": begun[-1][1],
                    "running": seen["running"],
                }
                if all(start != seen["running"] for start, _ in starts):
                    split["pain"]["infusions"].append(again)
    for key in TOTALS:
        assert close(total(computed(state, **choices), key), total(computed(split, **choices), key))


def printed(findings: Findings) -> list[tuple[object, ...]]:
    items: list[tuple[object, ...]] = [(one.key, one.value, one.shown, one.flag) for one in findings.items]
    return items + [(one.key, one.first_due, one.text, one.why) for one in findings.actions]


@pytest.mark.parametrize("seed", SEEDS)
def test_the_order_of_entries_changes_nothing(seed: int) -> None:
    state, choices = patient(seed)
    mixed = copy.deepcopy(state)
    rng = random.Random(seed)  # noqa: S311
    rng.shuffle(mixed["pain"]["doses"])
    rng.shuffle(mixed["pain"].get("infusions", []))
    days = list(mixed["observations"].items())
    rng.shuffle(days)
    mixed["observations"] = dict(days)
    assert printed(computed(state, **choices)) == printed(computed(mixed, **choices))


def moved(data: Any, by: timedelta) -> Any:
    """The state with every time moved; dates of birth stay."""
    if isinstance(data, dict):
        found = {}
        for key, value in data.items():
            if key == "observations":
                found[key] = _rows(value, by)
            else:
                found[key] = value if key == "born" else moved(value, by)
        return found
    if isinstance(data, list):
        return [moved(value, by) for value in data]
    try:
        return clock(datetime.strptime(data, "%Y-%m-%d %H:%M") + by)
    except (TypeError, ValueError):
        return data


def _rows(days: dict[str, dict[str, Any]], by: timedelta) -> dict[str, dict[str, Any]]:
    found: dict[str, dict[str, Any]] = {}
    for day, times in days.items():
        for time, row in times.items():
            at = clock(datetime.strptime(f"{day} {time}", "%Y-%m-%d %H:%M") + by)
            found.setdefault(at[:10], {})[at[11:]] = row
    return found


@pytest.mark.parametrize("seed", SEEDS)
def test_moving_all_times_changes_nothing_elapsed(seed: int) -> None:
    state, choices = patient(seed)
    state["patient"]["born"] = "1985-02-11"
    by = timedelta(hours=-31, minutes=-7)
    before, after = computed(state, **choices), computed(moved(state, by), NOW + by, **choices)
    for key in (*TOTALS, "pain.paracetamol_limit_24h", "pain.latest"):
        assert item(before, key).value == pytest.approx(item(after, key).value)
    due, later = item(before, "pain.reassess_due").value, item(after, "pain.reassess_due").value
    assert (due is None and later is None) or (isinstance(due, datetime) and due + by == later)
    assert [found.flag for found in before.items] == [found.flag for found in after.items]


@pytest.mark.parametrize("seed", SEEDS)
def test_keys_are_unique_and_a_missing_value_is_said(seed: int) -> None:
    state, choices = patient(seed)
    found = computed(state, **choices)
    keys = [one.key for one in found.items] + [one.key for one in found.actions]
    assert len(keys) == len(set(keys))
    for one in found.items:
        assert one.shown
        assert one.value is None or one.sources or one.repeats
        if one.value is None and one.flag is Flag.NONE:
            assert not one.shown.startswith("not recorded")


def test_names_that_would_share_a_key_are_told_apart() -> None:
    lines = [
        {"line": name, "drug": "morphine", "from": "2026-03-14 15:00", "rate": "1 mg/h"}
        for name in ("S-1", "S 1", "#", "?")
    ]
    pumps = [{"line": "P1", "drug": "morphine", "from": f"2026-03-14 1{hour}:00"} for hour in (4, 5)]
    others = [
        {"at": "2026-03-14 15:00", "drug": {"other": name, "group": "adjunct"}, "dose": "1 mg", "route": "IV"}
        for name in ("x-1", "x 1")
    ]
    scales = [
        {"scale": {"name": "own", "lowest": "0", "highest": high}, "score": "3"} for high in ("8", "10")
    ]
    rows = {"2026-03-14": {"15:00": {"pain": scales}, "16:00": {"pain": scales}}}
    found = computed(patient_state({"infusions": lines, "patient_controlled": pumps, "doses": others}, rows))
    keys = [one.key for one in found.items]
    assert len(keys) == len(set(keys))


@pytest.mark.parametrize("during", ["rest", "movement", ""])
def test_scores_of_unlike_scales_are_never_merged(during: str) -> None:
    def row(scale: object, points: str) -> dict[str, Any]:
        return {"pain": {"scale": scale, "score": points, **({"during": during} if during else {})}}

    eight, ten = ({"name": "own", "lowest": "0", "highest": high} for high in ("8", "10"))
    rows = {
        "14:00": row("numeric", "9"),
        "15:00": row("cpot", "5"),
        "16:00": row(eight, "5"),
        "17:00": row(ten, "4"),
    }
    found = computed(patient_state({"goal": {"scale": "faces revised", "score": "4"}}, {"2026-03-14": rows}))
    assert not [one for one in found.items if one.key.startswith("pain.trend")]
    assert item(found, "pain.goal").value is None
    assert "own, 0 to 10" in item(found, "pain.latest").shown
