"""Days to going home, what is still to be taught and when mood is due agree with a second reckoning."""

from __future__ import annotations

from datetime import timedelta

from tests.long.patients import assessed, at, seeds, state, written
from tests.small_patient import action, item

DAY = 24 * 60
NEEDED = ("wound care", "moving and splints", "scar and sun", "medicines", "danger signs")


def test_the_days_before_going_home_and_what_is_not_shown_back() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 9000)
        days = chance.choice((0, 1, 2, 3, 4, 5, 20))
        home = at(now).date() + timedelta(days=days)
        shown = {topic: chance.random() < 0.7 for topic in (*NEEDED, "itch") if chance.random() < 0.6}
        teaching = [{"topic": topic, "shown_back": "yes" if was else "no"} for topic, was in shown.items()]
        block = {"teaching": teaching, "discharge": {"planned": f"{home}"}}
        made = assessed(("wellbeing",), state(wellbeing=block), now)
        assert item(made, "wellbeing.discharge").value == days, seed
        missing = [topic for topic in NEEDED if not shown.get(topic)]
        found = made.item("wellbeing.teaching")
        asked = days <= 3 and bool(missing)
        assert (found is not None and found.flag.value == "due for review") == asked, (seed, days, found)
        if asked and found is not None:
            left = found.shown.rpartition("not shown back: ")[2]
            assert all((topic in left) == (topic in missing) for topic in NEEDED), (seed, found.shown)


def test_mood_is_due_a_day_after_it_was_last_charted_and_asked_about_from_the_second_day() -> None:
    for seed, chance in seeds(300):
        now = chance.choice((chance.randrange(0, 9000), DAY, DAY + 1, DAY - 1))
        moods = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(0, 4))})
        order = chance.sample(moods, len(moods))
        block = {"mood": [{"at": written(when), "found": f"words {when}"} for when in order]}
        made = assessed(("wellbeing",), state(wellbeing=block if moods else None), now)
        found = made.item("wellbeing.mood")
        if moods:
            assert found is not None and f"words {moods[-1]}" in found.shown, (seed, found)
            assert action(made, "wellbeing.ask").first_due == at(moods[-1] + DAY), seed
        else:
            assert (found is not None and found.flag.value == "not recorded") == (now > DAY), (
                seed,
                now,
                found,
            )
