"""A second, independent reckoning in exact fractions agrees on invented patients.

Written from the printed tables (Lund and Browder 1944; Prasad, Pocket Pediatrics; Hettiaratchy
and Papini, BMJ 2004;329:101; the stepped child version as quoted from the EMSB course), whole
regions as the sources print them, and not from the code.
"""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
from handoff.bundled.area.age import AgeAtBurn
from handoff.bundled.area.assessment import Assessment, read_burn
from handoff.bundled.area.tables import table_for
from handoff.bundled.area.totals import TOTALS, total_of

from handoff.plugin import Map, Text
from tests.area.test_tables import case_with
from tests.long.patients import count

PATIENTS = count(500)
HEAD = {0: 19, 1: 17, 5: 13, 10: 11, 15: 9, 99: 7}
THIGH = {0: Fraction(11, 2), 1: Fraction(13, 2), 5: 8, 10: Fraction(17, 2), 15: 9, 99: Fraction(19, 2)}
LOWER_LEG = {0: 5, 1: 5, 5: Fraction(11, 2), 10: 6, 15: Fraction(13, 2), 99: 7}
FIXED = {"neck": 2, "trunk": 26, "upper arm": 4, "forearm": 3, "hand": Fraction(5, 2), "foot": Fraction(7, 2)}
PARTS = ("upper arm", "forearm", "hand", "thigh", "lower leg", "foot")
DEPTHS = {
    "erythema": "none",
    "superficial dermal": "superficial",
    "deep dermal": "deep",
    "third degree": "full",
    "fourth degree": "full",
    "mid dermal": "mid",
}


def printed_column(age: int) -> int:
    if age >= 16:
        return 99
    return 0 if age < 1 else 1 if age < 5 else 5 if age < 10 else 10


def by_chart(region: str, age: int) -> Fraction:
    column = printed_column(age)
    name = region.removeprefix("left ").removeprefix("right ")
    if name == "head":
        return Fraction(HEAD[column])
    if name == "thigh":
        return Fraction(THIGH[column])
    return Fraction(LOWER_LEG[column]) if name == "lower leg" else Fraction(FIXED[name])


def by_nines(region: str, age: int) -> Fraction:
    if age >= 10:
        head, leg = Fraction(9), Fraction(18)
    elif age < 1:
        head, leg = Fraction(18), Fraction(14)
    else:
        head, leg = Fraction(19 - age), Fraction(27, 2) + Fraction(age, 2)
    return {"head and neck": head, "trunk": Fraction(36)}.get(
        region, leg if region.endswith("leg") else Fraction(9)
    )


def invented(chance: random.Random) -> tuple[str, int, list[tuple[str, str, int, str]]]:
    method = chance.choice(("lund-browder", "rule of nines"))
    limbs = ("arm", "leg") if method == "rule of nines" else PARTS
    middle = ("head and neck", "trunk") if method == "rule of nines" else ("head", "neck", "trunk")
    regions = [*middle, *(f"{side} {part}" for side in ("left", "right") for part in limbs)]
    burned = chance.sample(regions, chance.randint(1, 4))
    burns = [
        (region, chance.choice(("", "front", "back")), chance.randint(0, 100), chance.choice(list(DEPTHS)))
        for region in burned
    ]
    return method, chance.randint(0, 30), burns


def expected(method: str, age: int, burns: list[tuple[str, str, int, str]]) -> dict[str, Fraction]:
    sums = dict.fromkeys(("none", "superficial", "deep", "full", "mid"), Fraction(0))
    for region, face, share, depth in burns:
        size = by_nines(region, age) if method == "rule of nines" else by_chart(region, age)
        sums[DEPTHS[depth]] += size * Fraction(share, 100) * (Fraction(1, 2) if face else 1)
    return {
        "counted": sums["superficial"] + sums["deep"] + sums["full"] + sums["mid"],
        "full_thickness": sums["full"],
        "deep_partial": sums["deep"],
        "superficial_partial": sums["superficial"],
        "not_counted": sums["none"],
    }


def node(region: str, face: str, share: int, depth: str) -> Map:
    pairs = {"region": region, "face": face, "of_region": f"{share} %", "depth": depth}
    return Map.at((Text.at(key), Text.at(value)) for key, value in pairs.items() if value)


def test_every_patient_agrees_with_exact_fractions() -> None:
    case, chance = case_with(), random.Random(1951)  # noqa: S311  (the same patients every time)
    wanted = [total for total in TOTALS if not total.only_if_present]
    tables = {
        (method, age): table_for(case, method, AgeAtBurn(age, age, "", ()))
        for method in ("lund-browder", "rule of nines")
        for age in range(31)
    }
    for _ in range(PATIENTS):
        method, age, burns = invented(chance)
        measured = Assessment(
            at=case.now,
            by="",
            role="",
            place="",
            method=method,
            burns=tuple(read_burn(case, node(*burn), tables[method, age]) for burn in burns),
            entry=Map.at(),
            table=tables[method, age],
        )
        second = expected(method, age, burns)
        for total in wanted:
            assert total_of(measured, total) == pytest.approx(float(second[total.key]), abs=1e-9), (
                method,
                age,
                burns,
            )
