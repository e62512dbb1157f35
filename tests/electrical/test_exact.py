"""How long the rhythm is watched and the limbs are felt agrees with a second reckoning over made-up patients.

Written from the practice guideline (Arnoldo 2006: an electrocardiogram for all; 24 h of monitoring) and
from the line of 1,000 V between low and high voltage.
"""

from __future__ import annotations

from datetime import timedelta

from tests.long.patients import assessed, at, seeds, state, written
from tests.small_patient import item

HOUR, DAY = 60, 24 * 60


def test_the_end_of_monitoring_the_tracing_and_the_checks_of_the_limbs() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(0, 5000), 2 * DAY, 2 * DAY + 1, 2 * DAY - 1))
        volts = chance.choice((None, 230, 400, 999, 1000, 1001, 11000))
        begun = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(0, 3))})
        ended = [chance.choice((None, chance.randrange(start, now + 1))) for start in begun]
        taken = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(0, 3))})
        said = [chance.choice(("yes", "no", "not read yet")) for _ in taken]
        block = {
            "monitoring": [
                {"from": written(start), **({} if end is None else {"until": written(end)})}
                for start, end in zip(begun, ended, strict=True)
            ],
            "ecg": [{"at": written(when), "abnormal": was} for when, was in zip(taken, said, strict=True)],
        }
        cause = {"kind": "electrical", **({} if volts is None else {"voltage": f"{volts} V"})}
        made = assessed(("electrical",), state(injury={"causes": [cause]}, electrical=block), now)
        monitoring, tracing = item(made, "electrical.monitoring"), item(made, "electrical.ecg")
        running = [start for start, end in zip(begun, ended, strict=True) if end is None]
        if begun and ended[-1] is None:
            assert monitoring.value == at(begun[-1] + DAY), (seed, monitoring.shown)
        if begun and not running:
            assert "running" not in monitoring.shown.replace("not running", ""), (seed, monitoring.shown)
        assert tracing.value == (len(taken) or None), (seed, tracing.shown)
        assert (tracing.flag.value == "needs action") == (not taken), (seed, tracing.shown)
        high = volts is None or volts >= 1000
        limbs = [one for one in made.actions if one.key == "electrical.limbs"]
        assert bool(limbs) == (high and now <= 2 * DAY), (seed, volts, now)
        assert all(one.every == timedelta(hours=1) for one in limbs)
        contact = item(made, "electrical.contact").shown
        if volts is not None:
            word = "low voltage" if volts < 1000 else "high voltage" if volts > 1000 else "taken as high"
            assert word in contact, (seed, contact)
