"""Minutes of rinsing agree with a second reckoning, minute by minute, over made-up patients.

It counts the minutes that some rinsing covers, one after another, where the plugin joins spans.
"""

from __future__ import annotations

import random

from tests.long.patients import assessed, seeds, state, written
from tests.small_patient import item

WANTED = {"review-60": 60, "at-least-20": 20, "ems-15": 15, "alkali-120": 120}
FIRST_DAY = 24 * 60


def spans_of(chance: random.Random, now: int) -> list[tuple[int, int | None]]:
    spans: list[tuple[int, int | None]] = []
    for _ in range(chance.choice((0, 1, 1, 2, 3, 5))):
        start = chance.randrange(0, min(now, 200) + 1)
        running = chance.random() < 0.2
        spans.append((start, None if running else min(now, start + chance.choice((0, 1, 5, 15, 20, 40, 90)))))
    return spans


def minute_by_minute(spans: list[tuple[int, int | None]], now: int) -> int:
    ends = [(start, now if end is None else end) for start, end in spans]
    return sum(1 for minute in range(now) if any(start <= minute < end for start, end in ends))


def test_the_minutes_and_what_is_short_agree() -> None:
    for seed, chance in seeds(300):
        now = chance.choice(
            (chance.randrange(0, 300), chance.randrange(0, 300), FIRST_DAY, FIRST_DAY + 1, 3000)
        )
        spans, told = spans_of(chance, now), chance.choice((None, None, 0, 10, 15, 20, 60, 61, 150))
        cause = {
            "kind": "chemical",
            "agent": "lime",
            **({} if told is None else {"irrigated_for": f"{told} min"}),
        }
        rinsed = [
            {"from": written(start), **({} if end is None else {"until": written(end)})}
            for start, end in spans
        ]
        chosen = chance.choice(list(WANTED))
        block = {"rinsed": rinsed} if rinsed else None
        made = assessed(
            ("chemical",), state(injury={"causes": [cause]}, chemical=block), now, {"chemical.rinse": chosen}
        )
        found = item(made, "chemical.rinsed")
        if not spans and told is None:
            assert found.value is None, seed
            continue
        minutes = max(minute_by_minute(spans, now), told or 0)
        assert found.value == minutes, (seed, found.shown)
        short = minutes < WANTED[chosen]
        assert ("short of" in found.shown) == short, (seed, found.shown)
        running = any(end is None for _, end in spans)
        asked = short and not running and now <= FIRST_DAY
        assert (found.flag.value == "needs action") == asked, (seed, chosen, now, found)
