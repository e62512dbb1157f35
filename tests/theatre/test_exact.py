"""Fasting times and what will be short agree with a second reckoning over made-up patients.

Written from the printed hours: solids and other milk 6 h, breast milk 4 h, clear drinks 2 h (Smith 2011)
or, in children, 1 h (Lerman 2013).
"""

from __future__ import annotations

from tests.long.patients import assessed, at, seeds, state, written
from tests.small_patient import item

CLEAR_H = {"esa-2011": 2, "lerman-2013": 1}
HOURS = {"food": 6, "other milk": 6, "other": 6, "breast milk": 4}


def test_the_latest_times_and_what_is_short_agree() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 3000)
        starts = sorted({now + chance.randrange(1, 2000) for _ in range(chance.randrange(1, 4))})
        done = [chance.random() < 0.2 for _ in starts]
        planned = [
            {"at": written(start), "what": f"operation {place}", **({"done": "yes"} if over else {})}
            for place, (start, over) in enumerate(zip(starts, done, strict=True))
        ]
        chance.shuffle(planned)
        fed = chance.choice((None, max(0, now - chance.randrange(0, 600))))
        drunk = chance.choice((None, max(0, now - chance.randrange(0, 300))))
        kind = chance.choice(("clear", "breast milk", "other milk", "other"))
        sample = chance.choice((None, chance.randrange(0, now + 1)))
        valid = now + chance.randrange(0, 2500)
        theatre = {
            "planned": planned,
            **({} if drunk is None else {"last_drink": {"at": written(drunk), "kind": kind}}),
            **({} if sample is None else {"blood": [{"at": written(sample), "valid_until": written(valid)}]}),
        }
        fasting = chance.choice(list(CLEAR_H))
        food = {} if fed is None else {"nutrition": {"last_food": {"at": written(fed)}}}
        made = assessed(
            ("theatre", "nutrition"), state(theatre=theatre, **food), now, {"theatre.fasting": fasting}
        )
        left = [start for start, over in zip(starts, done, strict=True) if not over]
        if not left:
            assert made.item("theatre.fasting") is None, seed
            continue
        start = left[0]
        found = item(made, "theatre.fasting")
        assert found.value == at(start - 6 * 60), (seed, found.shown)
        assert item(made, "theatre.operation").value == at(start), seed
        hours = {**HOURS, "clear": CLEAR_H[fasting]}
        short = [
            fed is not None and start - fed < 6 * 60,
            drunk is not None and start - drunk < hours[kind] * 60,
        ]
        assert found.shown.count(" short at the planned start") == sum(short), (seed, found.shown)
        assert (found.flag.value == "due for review") == any(short), (seed, found.shown)
        if sample is not None:
            assert ("not valid at the planned start" in item(made, "theatre.blood").shown) == (
                valid < start
            ), seed
