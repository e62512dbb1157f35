"""A second reckoning of the timetable and of the fall of carboxyhaemoglobin, written apart from the plugin.

The timetable is laid out slot by slot in whole minutes (Royal Adelaide Hospital 2009: every
15 min for 4 h, hourly to 12 h, then 4-hourly); the fall is taken minute by minute in decimals
of twenty digits from the printed half-lives (Weaver 2000; Peterson and Stewart 1970 as quoted).
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from decimal import Decimal, localcontext

EARLY = 5
HORIZON = 40 * 24 * 60
FULL = (Decimal(26), Decimal(74), Decimal(148))
AIR = (Decimal(128), Decimal(320), Decimal(409))
BETWEEN = (Decimal(26), Decimal(320), Decimal(409))


def slots() -> list[int]:
    """Every minute at which a check is due, to the end of the horizon."""
    quarter_hours = list(range(15, 241, 15))
    hours = list(range(300, 721, 60))
    return quarter_hours + hours + list(range(960, HORIZON, 240))


SLOTS = slots()


@dataclass(frozen=True)
class Due:
    next: int
    missed: list[int]


def covers(check: int, index: int) -> bool:
    return SLOTS[index] - EARLY <= check < SLOTS[index + 1] - EARLY


def due(checks: Iterable[int], now: int) -> Due:
    """The slot after the one that the last check covers, and the closed slots without a check."""
    made = sorted(check for check in checks if check >= -EARLY)
    upcoming = SLOTS[0]
    for index, slot in enumerate(SLOTS[:-1]):
        if made and (covers(made[-1], index) or made[-1] >= SLOTS[index + 1] - EARLY):
            upcoming = SLOTS[index + 1]
        elif slot > (made[-1] if made else 0) + EARLY:
            break
    missed = []
    for index in range(len(SLOTS) - 1):
        if SLOTS[index + 1] - EARLY > now:
            break
        if not any(covers(check, index) for check in made):
            missed.append(SLOTS[index])
    return Due(upcoming, missed)


def fall(start: Decimal, minutes: Iterable[tuple[int, str]]) -> tuple[Decimal, Decimal, Decimal]:
    """The low, central and high level after (length in min, kind of oxygen) stretches."""
    with localcontext() as context:
        context.prec = 20
        levels = [start, start, start]
        for length, kind in minutes:
            lives = {"full": FULL, "air": AIR}.get(kind, BETWEEN)
            for index, life in enumerate(lives):
                levels[index] *= Decimal("0.5") ** (Decimal(length) / life)
        return levels[0], levels[1], levels[2]
