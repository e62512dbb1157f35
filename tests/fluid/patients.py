"""Burned patients made up from a seed: order, lines, single volumes, urine, losses."""

from __future__ import annotations

import random
from datetime import datetime, timedelta
from typing import Any

from .build import burned

START = datetime(2026, 3, 14, 8, 0)
FORMULAS = ("parkland", "modified brooke", "abls 2010", "muir-barclay", "mass casualty")
PURPOSES = ("resuscitation", "resuscitation", "maintenance", "colloid", "drug carrier", "feed")


def text(minute: int) -> str:
    return f"{START + timedelta(minutes=minute):%Y-%m-%d %H:%M}"


def patient(seed: int) -> tuple[dict[str, Any], str]:
    """Return a state and the moment it is read for."""
    dice = random.Random(seed)  # noqa: S311  (made-up patients, not secrets)
    now = dice.choice((dice.randint(1, 470), dice.randint(480, 1430), dice.randint(1440, 2800)))
    is_child = dice.random() < 0.4
    kg = dice.choice((f"{dice.randint(30, 450) / 10} kg", f"{dice.randint(20, 95)} lb"))
    if not is_child:
        kg = dice.choice((f"{dice.randint(350, 1500) / 10} kg", f"{dice.randint(90, 320)} lb"))
    born = f"{dice.randint(2010, 2025) if is_child else dice.randint(1940, 2011)}-0{dice.randint(1, 9)}-15"
    cause = {"kind": "scald"}
    if dice.random() < 0.2:
        cause = {"kind": "electrical", "voltage": dice.choice(("230 V", "999 V", "1000 V", "11000 V"))}
    state = burned(
        kg,
        f"{dice.randint(1, 1000) / 10} %",
        born=born,
        burn=text(0),
        cause=cause,
        orders=orders(dice, now),
        given=given(dice, now),
        fluid={"losses": losses(dice, now)} if dice.random() < 0.3 else {},
    )
    add_urine(dice, state, now)
    return state, text(now)


def orders(dice: random.Random, now: int) -> list[dict[str, Any]]:
    made: list[dict[str, Any]] = []
    times = sorted(dice.sample(range(now + 1), min(now + 1, dice.randint(1, 3))))
    for index, at in enumerate(times):
        if index and dice.random() < 0.5:
            own = {"formula": "local"} if dice.random() < 0.3 else {}
            made.append({"at": text(at), **own, "rate": f"{dice.randint(0, 1500)} mL/h"})
        elif dice.random() < 0.5:
            made.append({"at": text(at), "formula": dice.choice(FORMULAS)})
        else:
            coefficient = dice.choice(("1.5", "2", "3", "3.5", "4"))
            made.append({"at": text(at), "formula": "local", "coefficient": f"{coefficient} mL/kg/%"})
    dice.shuffle(made)
    return made


def given(dice: random.Random, now: int) -> list[dict[str, Any]]:
    made: list[dict[str, Any]] = []
    for name in ("R1", "R2", "P1")[: dice.randint(0, 3)]:
        made += line(dice, name, now)
    for _ in range(dice.randint(0, 3)):
        made.append(single(dice, now))
    dice.shuffle(made)
    return made


def line(dice: random.Random, name: str, now: int) -> list[dict[str, Any]]:
    made: list[dict[str, Any]] = []
    at = dice.randint(0, now)
    while True:
        entry: dict[str, Any] = {"line": name, "from": text(at)}
        if dice.random() < 0.2:
            entry.update(
                drops=f"{dice.randint(0, 120)} drops/min", drop_factor=f"{dice.choice((15, 20, 60))} drops/mL"
            )
        else:
            entry["rate"] = f"{dice.randint(0, 12000) / 10} mL/h"
        if not made or dice.random() < 0.2:
            entry["purpose"] = dice.choice(PURPOSES)
        made.append(entry)
        end = dice.randint(at + 1, max(at + 1, now + 60))
        seen = [dice.randint(at, min(end, now)) for _ in range(dice.randint(0, 2))]
        made += [{"line": name, "running": text(moment)} for moment in seen]
        if end > now or dice.random() < 0.3:
            return made
        if dice.random() < 0.4:
            made.append({"line": name, "stopped": text(end), "reason": "changed"})
            end += dice.randint(1, 30)  # begun again in the minute of its stop, the stop would end it
            if end > now or dice.random() < 0.3:
                return made
        at = end


def single(dice: random.Random, now: int) -> dict[str, Any]:
    purpose = dice.choice((*PURPOSES, "oral", "blood product", "flush"))
    kind = dice.random()
    if kind < 0.2:
        return {"before_arrival": f"{dice.randint(0, 2000)} mL", "purpose": purpose, "at": text(0)}
    if kind < 0.3:
        return {"at": text(dice.randint(0, now)), "ice": f"{dice.randint(1, 300)} mL", "purpose": "oral"}
    volume = dice.choice((f"{dice.randint(0, 1000)} mL", f"{dice.randint(1, 20) / 10} L"))
    if kind < 0.5 and now > 1:
        start = dice.randint(0, now - 1)
        span = {"from": text(start), "to": text(dice.randint(start + 1, now))}
        return {**span, "volume": volume, "purpose": purpose}
    return {
        "at": text(dice.randint(0, now)),
        "volume": volume,
        "purpose": purpose,
        "bolus": dice.choice(("yes", "no")),
    }


def losses(dice: random.Random, now: int) -> list[dict[str, Any]]:
    return [
        {
            "at": text(dice.randint(0, now)),
            "what": dice.choice(("vomit", "drain")),
            "volume": f"{dice.randint(1, 400)} mL",
        }
        for _ in range(dice.randint(1, 3))
    ]


def add_urine(dice: random.Random, state: dict[str, Any], now: int) -> None:
    if dice.random() < 0.5:
        state["lines"] = [
            {
                "what": "urinary catheter",
                "placed": text(dice.randint(0, now)),
                "drained_at_insertion": f"{dice.randint(0, 400)} mL",
            }
        ]
    rows: dict[str, dict[str, Any]] = {}
    for minute in sorted(dice.sample(range(now + 1), min(now + 1, dice.randint(0, 4)))):
        day, _, time = text(minute).partition(" ")
        kind = dice.random()
        entry: Any = f"{dice.randint(0, 200)} mL"
        if kind < 0.2:
            entry = "not measured"
        elif kind < 0.4:
            entry = {"volume": entry, "over": f"{dice.randint(15, 180)} min"}
        elif kind < 0.5:
            entry = {"pad": f"{dice.randint(0, 90)} g"}
        rows.setdefault(day, {})[time] = {"urine": entry}
    if rows:
        state["observations"] = rows
