"""Due times of dressings and grafts, days of donor sites, tetanus and turning agree with a second reckoning.

Written from the printed days (Gee Kee 2015, Lohana 2006, the label of silver sulfadiazine) and the wound
table of the ACIP as two services print it: at 5 years or more, and over 5 years.
"""

from __future__ import annotations

from typing import Any

from tests.long.patients import assessed, at, seeds, state, written
from tests.small_patient import action, item

DAY = 24 * 60
DAYS = {
    "silver sulfadiazine cream": 1,
    "nanocrystalline silver": 5,
    "silver foam": 5,
    "silver nylon": 5,
    "silver hydrofibre": 14,
    "paraffin gauze": 2,
    "cling film": 1,
    "film": None,
}
FROM_MEMORY = ("paraffin gauze",)


def test_when_each_dressing_is_due() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 20 * DAY)
        latest: dict[str, tuple[int, str, int | None]] = {}
        entries: list[dict[str, Any]] = []
        for when in sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(1, 6))}):
            place, product = chance.choice(("right arm", "left leg", "chest")), chance.choice(list(DAYS))
            following = chance.choice((None, None, when + chance.randrange(1, 6 * DAY)))
            entry = {"where": place, "product": product, "done": written(when)}
            entries.append(entry if following is None else {**entry, "next": written(following)})
            latest[place] = (when, product, following)
        chance.shuffle(entries)
        made = assessed(("wounds",), state(wounds={"dressings": entries}), now)
        found = {one.label: one for one in made.items if one.key.startswith("wounds.dressing.")}
        assert len(found) == len(latest), (seed, list(found))
        for place, (when, product, following) in latest.items():
            one = next(found[label] for label in found if place in label.lower())
            days = DAYS[product]
            due = following if following is not None else None if days is None else when + days * DAY
            assert one.value == (None if due is None else at(due)), (seed, place, one.shown)
            counts = following is not None or product not in FROM_MEMORY
            late = due is not None and due < now and counts
            assert (one.flag.value == "due for review") == late, (seed, place, one)


def test_when_a_graft_is_looked_at_first_and_how_old_a_donor_site_is() -> None:
    for seed, chance in seeds(300):
        now, when = sorted(chance.randrange(0, 20 * DAY) for _ in range(2))[::-1]
        first = chance.choice((None, when + chance.randrange(1, 8 * DAY)))
        looked = chance.choice((None, None, chance.randrange(when, now + 1)))
        graft = {"where": "chest", "at": written(when)}
        graft |= {} if first is None else {"first_look": written(first)}
        graft |= {} if looked is None else {"looked": written(looked)}
        block = {"grafts": [graft], "donors": [{"where": "left thigh", "at": written(when)}]}
        made = assessed(("wounds",), state(wounds=block), now)
        due = first if first is not None else when + 5 * DAY
        found = item(made, "wounds.graft.1")
        if looked is None:
            assert found.value == at(due), (seed, found.shown)
            assert (found.flag.value == "due for review") == (due < now), (seed, found)
        assert item(made, "wounds.donor.1").value == (now - when) // DAY, seed


def test_what_the_wound_table_says_about_tetanus() -> None:
    for seed, chance in seeds(300):
        doses = chance.choice(("unknown", "fewer than 3", "3 or more", "3 or more", "3 or more"))
        year, month, day = (
            chance.choice((2019, 2020, 2021, 2022)),
            chance.randrange(1, 13),
            chance.randrange(1, 29),
        )
        if chance.random() < 0.3:
            year, month, day = 2021, 1, chance.choice((13, 14, 15))
        printed = chance.choice((f"{year}-{month:02d}-{day:02d}", f"{year}-{month:02d}", f"{year}"))
        table = chance.choice(("acip-at-least-5", "acip-over-5"))
        injury = {"tetanus": {"doses": doses, "last": printed}}
        made = assessed(("wounds",), state(injury=injury), 60, {"wounds.tetanus_table": table})
        shown = item(made, "wounds.tetanus").shown
        if doses != "3 or more":
            assert "vaccine: yes" in shown and "immunoglobulin: yes" in shown, (seed, shown)
            continue
        first = (year, month if printed.count("-") > 0 else 1, day if printed.count("-") > 1 else 1)
        last = (year, month if printed.count("-") > 0 else 12, day if printed.count("-") > 1 else 31)
        today, over = (2026, 1, 14), table == "acip-over-5"
        due = {
            (end[0] + 5, *end[1:]) < today if over else (end[0] + 5, *end[1:]) <= today
            for end in (first, last)
        }
        word = "yes" if due == {True} else "no" if due == {False} else None
        assert word is None or f"vaccine: {word}" in shown, (seed, printed, table, shown)
        assert word is not None or ("vaccine: yes" not in shown and "vaccine: no" not in shown), (
            seed,
            printed,
            shown,
        )


def test_when_the_patient_is_turned_next() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(0, 3000)
        turns = sorted({chance.randrange(0, now + 1) for _ in range(chance.randrange(1, 5))})
        order = chance.sample(turns, len(turns))
        block = {"pressure_areas": [{"at": written(when), "turned_to": f"side {when}"} for when in order]}
        table = chance.choice(("nice-2015", "two-hourly"))
        made = assessed(("wounds",), state(wounds=block), now, {"wounds.turning": table})
        hours = 4 if table == "nice-2015" else 2
        turn = action(made, "wounds.turn")
        assert turn.every is not None
        assert turn.every.total_seconds() == hours * 3600, seed
        assert turn.first_due == at(turns[-1] + hours * 60), seed
        assert f"side {turns[-1]}" in item(made, "wounds.pressure_areas").shown, seed
