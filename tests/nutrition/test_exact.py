"""Feed, bowels, tube and glucose agree with a second reckoning in fractions over made-up patients."""

from __future__ import annotations

from fractions import Fraction

import pytest

from tests.long.patients import assessed, at, results, rows, seeds, state, written
from tests.small_patient import action, action_keys, item

DAY = 24 * 60


def test_the_feed_in_percent_of_its_target_and_when_its_tube_is_due() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 3000)
        starts = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(1, 4))})
        tenths = [chance.randrange(0, 1500) for _ in starts]
        target = chance.choice((None, chance.randrange(1, 120)))
        feeds = [
            {
                "from": written(start),
                "rate": f"{rate / 10:g} mL/h",
                **({} if target is None else {"target": f"{target} mL/h"}),
            }
            for start, rate in zip(starts, tenths, strict=True)
        ]
        stopped = chance.choice((None, None, chance.randrange(starts[-1], now + 1)))
        if stopped is not None:
            feeds[-1]["stopped"] = written(stopped)
        checks = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(0, 3))})
        block = {
            "tube_feed": feeds,
            "tube_checks": [{"at": written(check), "position": "confirmed"} for check in checks],
        }
        made = assessed(("nutrition",), state(nutrition=block), now)
        found = item(made, "nutrition.tube_feed")
        if target is not None:
            assert found.value == pytest.approx(float(Fraction(tenths[-1], 10) / target * 100), rel=1e-12), (
                seed
            )
        else:
            assert found.value is None, (seed, found.shown)
        assert (found.flag.value == "due for review") == (stopped is not None), (seed, found.shown)
        if stopped is None and checks:
            assert action(made, "nutrition.check_tube").first_due == at(checks[-1] + 4 * 60), seed


def test_when_the_bowels_were_last_open_and_whether_that_is_long_ago() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(0, 9000), 72 * 60, 72 * 60 + 1, DAY, DAY + 1))
        seen = {chance.randrange(0, now + 1): chance.random() < 0.6 for _ in range(chance.randrange(0, 4))}
        if chance.random() < 0.3:
            seen = {max(0, now - 72 * 60): True}
        rows_of = [{"at": written(when), "opened": "yes" if seen[when] else "no"} for when in seen]
        made = assessed(("nutrition",), state(nutrition={"bowels": rows_of} if rows_of else None), now)
        found = made.item("nutrition.bowels")
        opened = [when for when, was in seen.items() if was]
        if not opened:
            assert found is None or found.value is None, seed
            continue
        assert found is not None, seed
        assert found.value == at(max(opened)), seed
        assert (found.flag.value == "due for review") == (now - max(opened) > 72 * 60), (seed, found.shown)


def test_glucose_is_asked_for_each_hour_while_insulin_runs() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 1000)
        units = {
            chance.randrange(0, now + 1): chance.choice((0, 0, 2, 5)) for _ in range(chance.randrange(0, 4))
        }
        sugars = {
            chance.randrange(0, now + 1): chance.randrange(20, 150) for _ in range(chance.randrange(0, 4))
        }
        made = assessed(
            ("nutrition",),
            state(
                observations=rows({when: {"insulin": f"{rate} units/h"} for when, rate in units.items()}),
                results=results(
                    {when: {"glucose": f"{tenths / 10:g} mmol/L"} for when, tenths in sugars.items()}
                ),
            ),
            now,
        )
        running = bool(units) and units[max(units)] > 0
        last = max(sugars) if sugars else None
        low = last is not None and sugars[last] < 40
        found = made.item("nutrition.glucose")
        assert (found is not None) == (running or low), (seed, found)
        if last is not None and running:
            assert item(made, "nutrition.glucose").value == pytest.approx(
                float(Fraction(sugars[last], 10))
            ), seed
            assert action(made, "nutrition.check_glucose").first_due == at(last + 60), seed
        if not running and not low:
            assert "nutrition.check_glucose" not in action_keys(made), seed
