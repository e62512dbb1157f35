"""A second implementation of totals, limits and due times, in fractions and whole minutes.

It shares nothing with the plugin: the tables were typed in again from their sources, quantities
are read by its own rules, and the infusions are counted minute by minute.
"""

from __future__ import annotations

from datetime import date, datetime, timedelta
from fractions import Fraction
from typing import Any

from .build import NOW

F = Fraction
MORPHINE_IV = F(3)
FACTORS: dict[str, dict[tuple[str, str], Fraction]] = {
    "fpm_anzca_2021": {
        ("morphine", "swallowed"): F(1), ("oxycodone", "swallowed"): F("1.5"), ("hydromorphone", "swallowed"): F(5),
        ("codeine", "swallowed"): F("0.13"), ("tramadol", "swallowed"): F("0.2"), ("oxycodone", "rectal"): F("1.5"),
        ("morphine", "injected"): MORPHINE_IV, ("oxycodone", "injected"): F(3), ("hydromorphone", "injected"): F(15),
        ("fentanyl", "injected"): F(200),
    },
    "fpm_anzca_2014": {
        ("morphine", "swallowed"): F(1), ("oxycodone", "swallowed"): F("1.5"), ("hydromorphone", "swallowed"): F(5),
        ("codeine", "swallowed"): F("0.13"), ("tramadol", "swallowed"): F("0.2"),
        ("morphine", "injected"): MORPHINE_IV, ("oxycodone", "injected"): F(3), ("hydromorphone", "injected"): F(15),
        ("fentanyl", "injected"): F(200),
    },
    "cdc_2022": {
        ("morphine", "swallowed"): F(1), ("oxycodone", "swallowed"): F("1.5"), ("hydromorphone", "swallowed"): F(5),
        ("codeine", "swallowed"): F("0.15"), ("tramadol", "swallowed"): F("0.2"), ("methadone", "swallowed"): F("4.7"),
    },
    "von_korff_2008": {
        ("morphine", "swallowed"): F(1), ("oxycodone", "swallowed"): F("1.5"), ("hydromorphone", "swallowed"): F(4),
        ("codeine", "swallowed"): F("0.15"), ("tramadol", "swallowed"): F("0.1"), ("methadone", "swallowed"): F(3),
    },
}  # fmt: skip
WAYS = {
    "IV": "injected", "subcutaneous": "injected", "oral": "swallowed", "enteral tube": "swallowed",
    "rectal": "rectal", "intranasal": "nose",
}  # fmt: skip
MASS = {"mg": F(1), "mcg": F(1, 1000), "g": F(1000)}
DAY = 24 * 60


def minutes_ago(text: str) -> int:
    """Whole minutes from a local time of a day without a clock change to now."""
    return int((NOW.replace(tzinfo=None) - datetime.strptime(text, "%Y-%m-%d %H:%M")) / timedelta(minutes=1))


def milligrams(entry: dict[str, Any]) -> Fraction:
    amount, unit = entry["dose"].split()
    return F(amount) * (F(10) if unit == "mL" else MASS[unit])


def mg_an_hour(rate: str) -> Fraction:
    amount, unit = rate.split()
    return (
        F(amount)
        * {"mg/h": F(1), "mcg/h": F(1, 1000), "mL/h": F(50, 1000), "mcg/kg/min": F(60 * 82, 1000)}[unit]
    )


def infused(entries: list[dict[str, Any]]) -> list[tuple[str, Fraction]]:
    """Drug and mg of each line in the last 24 h: each minute asks what ran in it and whether it is confirmed."""
    found = []
    for line in sorted({entry["line"] for entry in entries}):
        of_line = [entry for entry in entries if entry["line"] == line]
        drug = next(entry["drug"] for entry in of_line if "drug" in entry)
        starts = sorted((-minutes_ago(entry["from"]), entry["rate"]) for entry in of_line if "from" in entry)
        stops = [-minutes_ago(entry["stopped"]) for entry in of_line if "stopped" in entry]
        seen = [-minutes_ago(entry["running"]) for entry in of_line if "running" in entry]
        total, touched = F(0), False
        for index, (start, rate) in enumerate(starts):
            ends = [moment for moment in stops if moment >= start] + [
                later for later, _ in starts[index + 1 :]
            ]
            confirmed = [moment for moment in seen if moment >= start]
            end = min(ends) if ends else max(confirmed, default=start)
            inside = max(0, min(end, 0) - max(start, -DAY))
            touched = touched or inside > 0
            total += mg_an_hour(rate) * inside / 60
        if touched:
            found.append((drug, total))
    return found


def speaks_of_the_last_day(state: dict[str, Any]) -> bool:
    """Whether anything was charted in the last 24 h: a dose, a line begun or seen, an observation."""
    pain = state["pain"]
    lines = pain.get("infusions", [])
    if not pain["doses"] and not lines:
        return False
    moments = [entry["at"] for entry in pain["doses"]] + [line["from"] for line in lines if "from" in line]
    moments += [f"{day} {time}" for day, times in state.get("observations", {}).items() for time in times]
    return bool(infused(lines)) or any(0 <= minutes_ago(moment) < DAY for moment in moments)


def opioid_mg(state: dict[str, Any], table: str) -> Fraction | None:
    if not speaks_of_the_last_day(state):
        return None
    pain = state["pain"]
    portions = [
        (entry["drug"], WAYS[entry["route"]], milligrams(entry))
        for entry in pain["doses"]
        if entry["drug"] not in ("paracetamol", "acetaminophen") and 0 <= minutes_ago(entry["at"]) < DAY
    ]
    portions += [(drug, "injected", mg) for drug, mg in infused(pain.get("infusions", []))]
    total = F(0)
    for drug, way, mg in portions:
        factor = FACTORS[table].get((drug, way))
        if factor is None:
            return None
        total += mg * factor
    return total


def paracetamol_mg(state: dict[str, Any]) -> Fraction | None:
    if not speaks_of_the_last_day(state):
        return None
    return sum(
        (
            milligrams(entry)
            for entry in state["pain"]["doses"]
            if entry["drug"] in ("paracetamol", "acetaminophen") and 0 <= minutes_ago(entry["at"]) < DAY
        ),
        F(0),
    )


def paracetamol_limit_mg(state: dict[str, Any], rule: str) -> Fraction | None:
    weights = state["patient"].get("weights")
    kg = F(weights[0]["value"].split()[0]) if weights else None
    born = date.fromisoformat(state["patient"]["born"])
    today = NOW.date()
    years = today.year - born.year - ((today.month, today.day) < (born.month, born.day))
    days = (today - born).days
    if kg is None:
        return None
    if rule == "eu_label":
        if kg > 50:
            return F(3000) if state["pain"].get("liver_risk") == "yes" else F(4000)
        return 30 * kg if kg <= 10 else min(60 * kg, F(2000) if kg <= 33 else F(3000))
    if rule == "us_label":
        if days <= 28:
            return 50 * kg
        if years < 2:
            return 60 * kg
        return F(4000) if years >= 13 and kg >= 50 else min(75 * kg, F(3750))
    if rule == "perth_child":
        return min(60 * kg, F(4000)) if days >= 28 and years <= 18 else None
    return min((75 if rule == "canadian_child" else 60) * kg, F(4000)) if years < 18 else None


def reassess_minutes(state: dict[str, Any]) -> int | None:
    """Minutes from now (negative: past) at which pain is due; None when neither dose nor score is charted."""
    first = {
        "IV": (15, 5),
        "oral": (60, 30),
        "enteral tube": (60, 30),
        "intranasal": (10, 5),
        "subcutaneous": (30, 30),
        "rectal": (60, 60),
    }
    scores = [
        -minutes_ago(f"{day} {time}")
        for day, times in state.get("observations", {}).items()
        for time in times
    ]
    due = []
    for entry in state["pain"]["doses"]:
        at = -minutes_ago(entry["at"])
        after, counts = first[entry["route"]]
        if not any(score >= at + counts for score in scores):
            due.append(at + after)
    if due:
        return min(due)
    return max(scores) + 240 if scores else None
