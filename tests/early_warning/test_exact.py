"""Whole patients: the set that is scored, the next score, children's signs and the coma scale.

The points are those of ``test_second_score``; a set is put together here from the rows, and the children's
lines are written from the printed table (PALS 2006; below 70 + 2 x age from 1 to 10 years).
"""

from __future__ import annotations

import random
from datetime import date
from typing import Any

from tests.early_warning import test_second_score as second
from tests.long.patients import assessed, at, rows, seeds, state
from tests.small_patient import item

SIGNS = ("resp", "spo2", "oxygen", "systolic", "pulse", "level", "tenths")
HOURS = {"four-hourly": 4, "six-hourly": 6}


def row_of(signs: dict[str, Any]) -> dict[str, str]:
    printed = {
        "resp": lambda v: ("resp", f"{v} /min"),
        "spo2": lambda v: ("spo2", f"{v} %"),
        "oxygen": lambda v: ("on_oxygen", "yes" if v else "no"),
        "systolic": lambda v: ("bp", f"{v}/{v // 2} mmHg"),
        "pulse": lambda v: ("pulse", f"{v} /min"),
        "level": lambda v: ("consciousness", v),
        "tenths": lambda v: ("temp", f"{v / 10:.1f} C"),
    }
    return dict(printed[name](value) for name, value in signs.items() if name in printed)


def charted(chance: random.Random, now: int) -> tuple[dict[int, dict[str, str]], dict[str, Any], int]:
    """Return rows, the set of the latest of them with the hour before it, and when the latest is."""
    latest = now - chance.randrange(0, 60)
    times = sorted({latest, *(max(0, latest - chance.choice((1, 30, 59, 60, 61, 90))) for _ in range(3))})
    found: dict[int, dict[str, str]] = {}
    scored: dict[str, Any] = {}
    for when in times:
        signs = second.generated(chance)
        kept = {name: signs[name] for name in SIGNS if chance.random() < 0.85}
        if not kept:
            kept = {"pulse": signs["pulse"]}
        found[when] = row_of(kept)
        if latest - when <= 60:
            scored |= kept
    return found, scored, latest


def test_the_set_of_the_last_hour_is_scored_and_due_from_its_latest_row() -> None:
    for seed, chance in seeds(300):
        now = chance.randrange(200, 4000)
        found, scored, latest = charted(chance, now)
        every = chance.choice(list(HOURS))
        made = assessed(
            ("early_warning",),
            state(injury={"at": None}, observations=rows(found)),
            now,
            {"early_warning.low_score_interval": every},
        )
        score = item(made, "early_warning.score")
        if set(SIGNS) - set(scored):
            assert score.value is None, (seed, score.shown)
            continue
        total, highest = second.second_total({**scored, "second": False})
        assert score.value == total, (seed, scored, score.shown)
        hours = second.second_hours(total, highest)
        hours = HOURS[every] if hours == 4 else hours
        due = item(made, "early_warning.next_due")
        assert due.value == (at(latest + hours * 60) if hours else None), (seed, total, due.shown)


def months_between(born: date, on: date) -> int:
    return (on.year - born.year) * 12 + on.month - born.month - (on.day < born.day)


def resp_range(months: int) -> tuple[int, int] | None:
    for under, low, high in ((12, 30, 60), (48, 24, 40), (72, 22, 34), (156, 18, 30), (228, 12, 16)):
        if months < under:
            return low, high
    return None


def pulse_range(months: int) -> tuple[int, int] | None:
    for under, low, high in ((3, 85, 205), (24, 100, 190), (121, 60, 140), (228, 60, 100)):
        if months < under:
            return low, high
    return None


def low_pressure(born: date, on: date) -> int:
    months, days = months_between(born, on), (on - born).days
    if days <= 28:
        return 60
    if months < 12:
        return 70
    years = months // 12
    return 70 + 2 * years if years <= 10 else 90


def test_a_childs_signs_against_the_printed_table() -> None:
    for seed, chance in seeds(300):
        on = at(0).date()
        born = date.fromordinal(
            on.toordinal() - chance.choice((chance.randrange(1, 5800), 28, 29, 27, 365, 366))
        )
        if months_between(born, on) >= 16 * 12:
            continue
        resp, pulse, systolic = chance.randrange(8, 75), chance.randrange(40, 220), chance.randrange(45, 130)
        for name, band in (
            ("resp", resp_range(months_between(born, on))),
            ("p", pulse_range(months_between(born, on))),
        ):
            if band and chance.random() < 0.3:
                edge = chance.choice((band[0], band[0] - 1, band[1], band[1] + 1))
                resp, pulse = (edge, pulse) if name == "resp" else (resp, edge)
        if chance.random() < 0.3:
            systolic = low_pressure(born, on) - chance.choice((0, 1))
        row = {"resp": f"{resp} /min", "pulse": f"{pulse} /min", "bp": f"{systolic}/30 mmHg"}
        made = assessed(
            ("early_warning",), state(patient={"born": f"{born}"}, observations=rows({0: row})), 10
        )
        months = months_between(born, on)
        for name, value, band in (("resp", resp, resp_range(months)), ("pulse", pulse, pulse_range(months))):
            found = item(made, f"early_warning.child_{name}")
            assert band is not None
            word = "below " if value < band[0] else "above " if value > band[1] else "within "
            assert found.value == value, seed
            assert f"{word}{band[0]} to {band[1]}" in found.shown, (seed, months, found.shown)
        pressure = item(made, "early_warning.child_systolic")
        low = systolic < low_pressure(born, on)
        assert (pressure.flag.value == "needs action") == low, (seed, born, pressure.shown)
        assert f"{low_pressure(born, on)} mmHg" in pressure.shown, (seed, born, pressure.shown)


def test_the_coma_scale_adds_up_only_when_every_part_was_tested() -> None:
    for seed, chance in seeds(300):
        parts: dict[str, int | str] = {
            "eye": chance.choice((1, 2, 3, 4, 4, "not testable")),
            "verbal": chance.choice((1, 2, 3, 4, 5, 5, "tube", "not testable")),
            "motor": chance.choice((1, 2, 3, 4, 5, 6, 6)),
        }
        pupils = chance.choice((None, 0, 1, 2, "not visible"))
        row: dict[str, Any] = {"gcs": parts, **({} if pupils is None else {"pupils_unreactive": pupils})}
        made = assessed(("early_warning",), state(observations=rows({5: row})), 10)
        tested = [part for part in parts.values() if isinstance(part, int)]
        total = sum(tested) if len(tested) == 3 else None
        assert item(made, "early_warning.coma_scale").value == total, seed
        found = made.item("early_warning.coma_pupils")
        less = None if total is None or not isinstance(pupils, int) else total - pupils
        assert (None if found is None else found.value) == less, (seed, parts, pupils, found)
