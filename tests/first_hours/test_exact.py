"""The count of the steps agrees with a second reckoning over made-up surveys."""

from __future__ import annotations

from tests.long.patients import assessed, seeds, state, written
from tests.small_patient import item

STEPS = (
    "airway and neck",
    "breathing",
    "circulation and bleeding",
    "consciousness",
    "undressed and kept warm",
    "signs in full",
    "comfort",
    "history",
    "head to toe",
    "back",
)
DAY = 24 * 60


def test_how_many_steps_are_done_left_or_missing() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(0, 4000), DAY, DAY + 1))
        share = chance.choice((0.0, 0.3, 0.9, 1.0))
        done = {step: chance.random() < 0.8 for step in STEPS if chance.random() < share}
        block = {
            step: {"at": written(chance.randrange(0, now + 1)), "found" if was else "not_done": "as said"}
            for step, was in done.items()
        }
        made = assessed(("first_hours",), state(first_hours=block), now)
        found = made.item("first_hours.survey")
        if not done:
            assert (found is not None) == (now <= DAY), (seed, now)
            continue
        found = item(made, "first_hours.survey")
        assert found.value == sum(done.values()), (seed, found.shown)
        assert f"{sum(done.values())} of 10 steps done" in found.shown, (seed, found.shown)
        missing = [step for step in STEPS if step not in done]
        after = found.shown.partition("not recorded: ")[2]
        named = [part for part in after.replace(" and ", ", ").split(", ") if part]
        said = [part for step in missing for part in step.replace(" and ", ", ").split(", ")]
        assert named == said, (seed, found.shown)
        whole = all(done.get(step, False) for step in STEPS)
        assert (found.flag.value == "no flag") == whole, (seed, found.shown)
