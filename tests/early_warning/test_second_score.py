"""A second reckoning of the early warning score, written apart, agrees on generated patients.

It is written as the chart is read aloud, in whole tenths of a degree, and shares no table and no
code with the plugin.
"""

from __future__ import annotations

import random
from datetime import UTC, datetime, timedelta
from fractions import Fraction
from typing import Any

from handoff.bundled.early_warning import formula, plugin

from handoff.registry import parameters_of
from tests.long.patients import count
from tests.small_patient import DAY, assessed, item, state_text

LEVELS = ("alert", "new confusion", "responds to voice", "responds to pain", "unresponsive")
SEED = 20260314


def half_up(value: Fraction) -> int:
    return int((value * 2 + 1) // 2)


def breaths(rate: int) -> int:
    if rate >= 25 or rate <= 8:
        return 3
    return 2 if rate >= 21 else 1 if rate <= 11 else 0


def saturation(pct: int, second: bool, on_oxygen: bool) -> int:
    if not second:
        return 0 if pct > 95 else 1 if pct > 93 else 2 if pct > 91 else 3
    if pct < 88:
        return 1 if pct > 85 else 2 if pct > 83 else 3
    if not on_oxygen or pct < 93:
        return 0
    return min((pct - 93) // 2 + 1, 3)


def systolic(mmhg: int) -> int:
    if mmhg > 219:
        return 3
    return sum(mmhg < line for line in (111, 101, 91))


def pulse(rate: int) -> int:
    if rate < 51:
        return 3 if rate < 41 else 1
    return sum(rate > line for line in (90, 110, 130))


def temperature(tenths: int) -> int:
    if tenths <= 350:
        return 3
    if tenths <= 360 or 380 < tenths <= 390:
        return 1
    return 2 if tenths > 390 else 0


def second_total(signs: dict[str, Any]) -> tuple[int, int]:
    parts = (
        breaths(signs["resp"]),
        saturation(signs["spo2"], signs["second"], signs["oxygen"]),
        2 if signs["oxygen"] else 0,
        systolic(signs["systolic"]),
        pulse(signs["pulse"]),
        0 if signs["level"] == "alert" else 3,
        temperature(signs["tenths"]),
    )
    return sum(parts), max(parts)


def second_hours(total: int, highest: int) -> int:
    """Return the longest interval in h; 0 for continuous."""
    if total >= 7:
        return 0
    if total >= 5 or highest == 3:
        return 1
    return 4 if total else 12


def generated(source: random.Random) -> dict[str, Any]:
    return {
        "resp": source.randint(4, 45),
        "spo2": source.randint(75, 100),
        "oxygen": source.random() < 0.5,
        "second": source.random() < 0.3,
        "systolic": source.randint(70, 240),
        "pulse": source.randint(30, 180),
        "level": source.choice(LEVELS) if source.random() < 0.3 else "alert",
        "tenths": source.randint(330, 415),
    }


def first_total(signs: dict[str, Any], tables: Any) -> tuple[int, int]:
    scale = f"2_on_{'oxygen' if signs['oxygen'] else 'air'}" if signs["second"] else "1"
    points = [
        formula.band_points(signs["resp"], tables["news2.resp"].value),
        formula.band_points(signs["spo2"], tables[f"news2.spo2_scale_{scale}"].value),
        int(tables.table("news2.oxygen")["yes" if signs["oxygen"] else "no"]),
        formula.band_points(signs["systolic"], tables["news2.systolic"].value),
        formula.band_points(signs["pulse"], tables["news2.pulse"].value),
        int(tables.table("news2.consciousness")[signs["level"]]),
        formula.band_points(formula.rounded(signs["tenths"] / 10, 1), tables["news2.temp"].value),
    ]
    return formula.total_points(points), max(points)


def test_generated_sets_have_the_same_total_and_the_same_step() -> None:
    source, tables = random.Random(SEED), parameters_of(plugin)  # noqa: S311  (a seeded test, no secret)
    steps = tables["news2.response"].value
    hours = (0, 1, 1, 4, 12)
    for _ in range(count(5_000)):
        signs = generated(source)
        total, highest = first_total(signs, tables)
        assert (total, highest) == second_total(signs), signs
        assert hours[formula.step_of(total, highest, steps)] == second_hours(total, highest), signs


def test_whole_patients_have_the_same_total_and_are_due_at_the_same_time() -> None:
    source = random.Random(SEED + 1)  # noqa: S311
    for _ in range(300):
        signs = generated(source)
        minute = source.randrange(0, 24 * 60)
        at = f"{minute // 60:02d}:{minute % 60:02d}"
        hundredths = signs["tenths"] * 10 + source.randint(-4, 4)
        signs["tenths"] = half_up(Fraction(hundredths, 10))
        row = {
            "resp": f"{signs['resp']} /min",
            "spo2": f"{signs['spo2']} %",
            "on_oxygen": "yes" if signs["oxygen"] else "no",
            "bp": f"{signs['systolic']}/{signs['systolic'] // 2} mmHg",
            "pulse": f"{signs['pulse']} /min",
            "consciousness": signs["level"],
            "temp": f"{hundredths / 100:.2f} C",
        }
        block = {"scale_2": {"at": f"{DAY} 00:00", "prescribed_by": "A", "hypercapnic_failure": "confirmed"}}
        text = state_text(
            {at: row}, injury={"at": None}, **({"early_warning": block} if signs["second"] else {})
        )
        made = assessed(["early_warning"], text, "2026-03-15 00:30")
        total, highest = second_total(signs)
        assert item(made, "early_warning.score").value == total, text
        hours = second_hours(total, highest)
        due = item(made, "early_warning.next_due")
        charted = datetime(2026, 3, 14, tzinfo=UTC) + timedelta(minutes=minute)
        assert due.value == (charted + timedelta(hours=hours) if hours else None), text
