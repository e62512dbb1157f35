"""Random patients, the same ones for the same seed."""

from __future__ import annotations

import random
from datetime import datetime, timedelta
from typing import Any

from .build import NOW, patient_state

OPIOIDS = {
    "morphine": ("IV", "oral", "subcutaneous", "enteral tube"),
    "oxycodone": ("IV", "oral", "rectal"),
    "hydromorphone": ("oral", "IV"),
    "fentanyl": ("IV", "intranasal"),
    "codeine": ("oral",),
    "tramadol": ("oral", "IV"),
    "methadone": ("oral",),
}
PARACETAMOL_NAMES = ("paracetamol", "acetaminophen")
WEIGHTS = ("4.2", "9.9", "10", "10.1", "20", "32.9", "33", "33.1", "45", "49.9", "50", "50.1", "82", "140.5")
BIRTHS = (
    "1940-06-01",
    "1985-02-11",
    "2010-03-15",
    "2013-03-14",
    "2013-03-15",
    "2024-03-14",
    "2024-03-15",
    "2026-02-13",
    "2026-02-14",
)
CHOICES = {
    "opioid_factors": ("fpm_anzca_2021", "cdc_2022", "von_korff_2008", "fpm_anzca_2014"),
    "paracetamol_limit": ("eu_label", "us_label", "perth_child", "canadian_child", "who_2012"),
    "reassess": ("nccn_2019", "window_15_to_30"),
}


def clock(moment: datetime) -> str:
    return f"{moment:%Y-%m-%d %H:%M}"


def before_now(random_: random.Random, minutes: int = 40 * 60) -> datetime:
    return NOW - timedelta(minutes=random_.randrange(minutes))


def patient(seed: int) -> tuple[dict[str, Any], dict[str, str]]:
    """A state of one patient and the rule sets that its policy chose."""
    rng = random.Random(seed)  # noqa: S311  (patients, not secrets)
    pain: dict[str, Any] = {"doses": [dose(rng) for _ in range(rng.randrange(12))]}
    if rng.random() < 0.6:
        pain["infusions"] = [entry for name in "AB" for entry in infusion(rng, name)]
    if rng.random() < 0.3:
        pain["liver_risk"] = rng.choice(("yes", "no"))
    weights = [{"value": f"{rng.choice(WEIGHTS)} kg", "kind": "before burn", "known": "measured"}]
    state = patient_state(pain, observations(rng), born=rng.choice(BIRTHS), weights=weights)
    if rng.random() < 0.1:
        del state["patient"]["weights"]
    return state, {name: rng.choice(sets) for name, sets in CHOICES.items()}


def dose(rng: random.Random) -> dict[str, Any]:
    at = clock(before_now(rng))
    if rng.random() < 0.4:
        amount = rng.choice(("1 g", "0.5 g", "650 mg", "1000 mg", "67.5 mL", "15.25 mg"))
        entry = {
            "at": at,
            "drug": rng.choice(PARACETAMOL_NAMES),
            "dose": amount,
            "route": rng.choice(("IV", "oral", "rectal")),
        }
        return entry | ({"concentration": "10 mg/mL"} if amount.endswith("mL") else {})
    drug = rng.choice(tuple(OPIOIDS))
    amount = (
        rng.choice(("50 mcg", "37.5 mcg", "100 mcg"))
        if drug == "fentanyl"
        else f"{rng.choice((1, 2.5, 4, 10, 12.75))} mg"
    )
    return {"at": at, "drug": drug, "dose": amount, "route": rng.choice(OPIOIDS[drug])}


def infusion(rng: random.Random, line: str) -> list[dict[str, Any]]:
    drug, rates = rng.choice(
        (("morphine", ("2 mg/h", "1.5 mg/h")), ("fentanyl", ("50 mcg/h", "2 mL/h", "0.02 mcg/kg/min")))
    )
    moments = sorted({before_now(rng) for _ in range(rng.randrange(1, 5))})
    found: list[dict[str, Any]] = []
    for index, moment in enumerate(moments):
        if index == 0 or rng.random() < 0.5:
            first = {"drug": drug, "concentration": "50 mcg/mL", "weight": "82 kg"} if index == 0 else {}
            found.append({"line": line, **first, "from": clock(moment), "rate": rng.choice(rates)})
        else:
            found.append({"line": line, rng.choice(("running", "stopped")): clock(moment)})
    rng.shuffle(found)
    return found


def observations(rng: random.Random) -> dict[str, Any]:
    days: dict[str, Any] = {}
    for moment in sorted({before_now(rng, 30 * 60) for _ in range(rng.randrange(4))}):
        score = {
            "scale": "numeric",
            "score": str(rng.randrange(11)),
            "during": rng.choice(("rest", "movement")),
        }
        days.setdefault(f"{moment:%Y-%m-%d}", {})[f"{moment:%H:%M}"] = {"pain": score}
    return days
