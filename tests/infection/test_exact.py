"""Days of lines, rows met and lines of temperature agree with a second reckoning over made-up patients.

The rows are written as the lists print them (ABA 2007 as quoted in Crit Care 2013;17; Chinese criteria
2013; Singer 2016; Bone 1992), in whole tenths so that no line is blurred by binary rounding.
"""

from __future__ import annotations

import random
from datetime import timedelta
from typing import Any

from tests.long.patients import assessed, at, results, rows, seeds, state, written
from tests.small_patient import item

DAY = 24 * 60
SIGNS = {"temp": "C", "pulse": "/min", "resp": "/min"}
LABS = {"platelets": "x10^9/L", "white_cells": "x10^9/L", "sodium": "mmol/L", "procalcitonin": "mcg/L"}
EDGES = {
    "temp": (360, 361, 359, 364, 365, 366, 380, 381, 390, 391, 387, 388, 389),
    "pulse": (900, 910, 1100, 1110, 1300, 1310),
    "resp": (200, 210, 220, 250, 260, 280, 290),
    "platelets": (490, 500, 510, 990, 1000, 1010),
    "white_cells": (39, 40, 41, 49, 50, 51, 120, 121, 150, 151),
    "sodium": (1550, 1560),
    "procalcitonin": (5, 6, 4),
    "systolic": (990, 1000, 1010),
}
JUDGED = {
    "china-2013": {"temp", "pulse", "resp", *LABS, "mind"},
    "qsofa-2016": {"resp", "systolic", "mind"},
    "sirs-1992": {"temp", "pulse", "resp", "white_cells"},
    "aba-2007": {"temp", "pulse", "resp", "platelets"},
}
NEEDED = {"china-2013": 6, "qsofa-2016": 2, "sirs-1992": 2, "aba-2007": 3}


def rows_met(name: str, seen: dict[str, int], minutes: int) -> int:
    """Return how many rows of a list are met by what was charted last, all in tenths."""

    def above(sign: str, line: int) -> bool:
        return sign in seen and seen[sign] > line

    def below(sign: str, line: int) -> bool:
        return sign in seen and seen[sign] < line

    if name == "qsofa-2016":
        return (above("resp", 219)) + ("systolic" in seen and seen["systolic"] <= 1000) + ("mind" in seen)
    if name == "sirs-1992":
        cells = above("white_cells", 120) or below("white_cells", 40)
        return (above("temp", 380) or below("temp", 360)) + above("pulse", 900) + above("resp", 200) + cells
    hot_or_cold = above("temp", 390) or below("temp", 365)
    if name == "aba-2007":
        plates = minutes >= 3 * DAY and below("platelets", 1000)
        return hot_or_cold + above("pulse", 1100) + above("resp", 250) + plates
    return (
        hot_or_cold
        + above("pulse", 1300)
        + above("resp", 280)
        + below("platelets", 500)
        + (above("white_cells", 150) or below("white_cells", 50))
        + above("procalcitonin", 5)
        + above("sodium", 1550)
        + ("mind" in seen)
    )


def charted(
    chance: random.Random, now: int
) -> tuple[dict[int, dict[str, str]], dict[int, dict[str, str]], Any]:
    """Return rows of signs, rows of results, and what of them was charted last within a day, in tenths."""
    signs: dict[int, dict[str, str]] = {}
    labs: dict[int, dict[str, str]] = {}
    last: dict[str, int] = {}
    for when in sorted({max(0, now - chance.randrange(0, 2 * DAY)) for _ in range(chance.randrange(1, 5))}):
        fresh = now - when <= DAY
        for name in ("temp", "pulse", "resp", "systolic", "mind", *LABS):
            if chance.random() < 0.4:
                continue
            if name == "mind":
                level = chance.choice(("alert", "new confusion"))
                signs.setdefault(when, {})["consciousness"] = level
                last.pop("mind", None)
                if fresh and level != "alert":
                    last["mind"] = 1
                continue
            tenths = chance.choice(EDGES[name])
            if name == "systolic":
                signs.setdefault(when, {})["bp"] = f"{tenths // 10}/50 mmHg"
            else:
                unit = {**SIGNS, **LABS}[name]
                (labs if name in LABS else signs).setdefault(when, {})[name] = f"{tenths / 10:g} {unit}"
            last.pop(name, None)
            if fresh:
                last[name] = tenths
    return signs, labs, last


def test_as_many_rows_are_met_as_the_printed_list_says() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(60, 9 * DAY), 3 * DAY, 3 * DAY - 1, 3 * DAY + 1))
        signs, labs, last = charted(chance, now)
        name = chance.choice(list(NEEDED))
        data = state(observations=rows(signs), results=results(labs))
        found = assessed(("infection",), data, now, {"infection.sepsis_list": name}).item("infection.sepsis")
        met = rows_met(name, last, now)
        if found is None or found.value is None:
            assert found is not None or now <= DAY, seed
            assert not JUDGED[name] & set(last) - (set() if now >= 3 * DAY else {"platelets"}), (
                seed,
                name,
                last,
            )
            continue
        assert found.value == met, (seed, name, last, found.shown)
        flag = "no flag" if met < NEEDED[name] else "due for review" if now <= DAY else "needs action"
        assert found.flag.value == flag, (seed, name, now, found.shown)


def test_the_temperature_against_the_line_of_cold_and_of_suspicion() -> None:
    cold = {"below-36": 359, "35-or-below": 350, "36.5-or-below": 365, "below-34.5": 344}
    for seed, chance in seeds(300):
        tenths = chance.choice(
            (chance.randrange(330, 410), 359, 360, 350, 351, 365, 366, 344, 345, 387, 388, 389)
        )
        name, now = chance.choice(list(cold)), chance.randrange(0, 3000)
        data = state(observations=rows({now: {"temp": f"{tenths / 10:.1f} C"}}))
        made = assessed(("infection",), data, now, {"infection.hypothermia": name})
        found = item(made, "infection.temperature")
        assert found.value == tenths / 10, seed
        beyond = tenths <= cold[name] or tenths > 388
        assert (found.flag.value == "no flag") != beyond, (seed, name, tenths, found.flag)


def test_which_day_the_oldest_line_is_in() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 12 * DAY)
        placed = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(1, 5))})
        removed = [chance.choice((None, None, chance.randrange(when, now + 1))) for when in placed]
        lines = [
            {
                "what": "central line",
                "site": f"site {place}",
                "placed": written(when),
                **({} if out is None else {"removed": written(out)}),
            }
            for place, (when, out) in enumerate(zip(placed, removed, strict=True))
        ]
        chance.shuffle(lines)
        made = assessed(("infection",), state(lines=lines), now)
        found = made.item("infection.line_days")
        left = [when for when, out in zip(placed, removed, strict=True) if out is None]
        if not left:
            assert found is None or found.value is None, (seed, found)
            continue
        assert found is not None, seed
        days = (at(now).date() - at(min(left)).date()) // timedelta(days=1) + 1
        assert found.value == days, (seed, found.shown)
