"""When a decision about clots and ulcers is due agrees with a second reckoning over made-up patients.

Adults are asked about clots from 16 years; stress ulcers are asked about over 20 % of the body surface.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any

from tests.long.patients import assessed, seeds, state, written

DAY = 24 * 60


def decided(chance: Any, now: int) -> tuple[dict[str, str], int | None]:
    review = chance.choice((None, chance.randrange(0, 3 * now + 2)))
    entry = {
        "decided": chance.choice(("drug", "nothing for now")),
        "at": written(chance.randrange(0, now + 1)),
    }
    return entry | ({} if review is None else {"review": written(review)}), review


def expected(asked: bool, entry: bool, review: int | None, now: int) -> str | None:
    if entry:
        return "due for review" if review is not None and review < now else "no flag"
    if not asked:
        return None
    return "due for review" if now > DAY else "not recorded"


def test_what_is_asked_for_and_when_it_is_due() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(1, 5000), DAY, DAY + 1, DAY - 1))
        tenths = chance.choice((chance.randrange(1, 800), 200, 201, 199))
        years = chance.choice((2, 15, 16, 17, 40))
        entries, reviews = {}, {}
        for what in ("clots", "ulcers"):
            if chance.random() < 0.5:
                entries[what], reviews[what] = decided(chance, now)
        whole = {
            "region": "whole body",
            "tbsa": f"{float(Fraction(tenths, 10)):g} %",
            "depth": "deep partial",
        }
        area = [{"at": written(0), "by": "E. Marsh", "method": "direct", "burns": [whole]}]
        made = assessed(
            ("prevention",),
            state(patient={"born": f"{2026 - years}-01-14"}, area=area, prevention=entries),
            now,
        )
        for what, asked in (("clots", years >= 16), ("ulcers", tenths > 200)):
            found = made.item(f"prevention.{what}")
            flag = None if found is None else found.flag.value
            assert flag == expected(asked, what in entries, reviews.get(what), now), (seed, what, found)
