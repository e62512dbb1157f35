"""The temperature with its site and the room, against the named line of cold and the line of fever."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import timedelta
from typing import Any

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Reading,
    Source,
    System,
    Urgency,
    Working,
    amount,
    child,
    fact,
    joined,
    number_text,
    with_unit,
    words,
)

from . import formula, patient

RANK_COLD = 50
LABEL = "Temperature, site and room"
COLD_WHY = "a burned patient loses heat through the wound, and cold stops blood from clotting"


def latest(case: Case) -> Reading | None:
    """Return the last measured temperature, or None."""
    found = [one for one in case.state.series("temp") if amount(one.node, "C") is not None]
    return found[-1] if found else None


def is_cold(case: Case, celsius: float) -> bool:
    """Return whether a temperature in C is beyond the chosen line of cold."""
    line = _line(case)
    return formula.is_beyond(
        celsius, str(line["how"]), float(line["child" if patient.is_child(case) else "adult"])
    )


def _line(case: Case) -> Mapping[str, Any]:
    return case.parameters.table(f"hypothermia.{case.chosen('hypothermia').name}")


def _who(case: Case) -> str:
    return "child" if patient.is_child(case) else "adult"


def items(case: Case) -> tuple[Item, ...]:
    """Return the last temperature, judged; nothing where none was measured."""
    reading = latest(case)
    if reading is None:
        return ()  # the vital signs already say that no temperature is recorded
    celsius = amount(reading.node, "C") or 0.0
    name = f"hypothermia.{case.chosen('hypothermia').name}"
    line, who = _line(case), _who(case)
    cold = is_cold(case, celsius)
    hot = _is_hot(case, celsius)
    sources = [case.parameters.source_of(name)]
    said = _measured(case, reading)
    if cold:
        said += f"; cold ({line['how']} {number_text(line[who], 1)} C)"
    if hot:
        fever = case.parameters.table("fever")
        sources += [case.parameters.source_of("fever"), case.parameters.source_of("set_point")]
        said += f"; above {number_text(fever[who], 1)} C, at which burn centres suspect infection"
    flag = Flag.ACTION if cold else Flag.REVIEW if hot else Flag.NONE
    comfort = case.comfort
    return (
        fact(
            "infection.temperature",
            LABEL,
            said + _before(case, reading),
            system=System.EXPOSURE,
            value=celsius,
            unit="C",
            as_of=reading.at,
            flag=Flag.NONE if comfort else flag,
            working=Working(
                formula="measured temperature against the chosen line of cold and the line of fever",
                sum=f"{number_text(celsius, 2)} C, cold: {line['how']} {line[who]} C",
                inputs=(case.input("temperature", reading.node),),
                rule=case.chosen("hypothermia").name,
            ),
            sources=sources,
            cautions=_cautions(case, reading, hot),
            rank=RANK_COLD if cold and not comfort else None,
            detail=flag is Flag.NONE,
            line=reading.node.line,
        ),
    )


def _is_hot(case: Case, celsius: float) -> bool:
    fever = case.parameters.table("fever")
    return formula.is_beyond(celsius, str(fever["how"]), float(fever[_who(case)]))


def _measured(case: Case, reading: Reading) -> str:
    site = words(child(reading.node, "site"))
    room = case.state.series("room")
    said = f"{words(reading.node)}, {site or 'site not recorded'}"
    if room:
        return f"{said}; room {words(room[-1].node)} at {case.clock.time(room[-1].at, case.now)}"
    return f"{said}; room not recorded"


def _before(case: Case, reading: Reading) -> str:
    earlier = [
        one for one in case.state.series("temp") if one.at < reading.at and amount(one.node, "C") is not None
    ]
    if not earlier:
        return ""
    return f"; before: {words(earlier[-1].node)} at {case.clock.time(earlier[-1].at, case.now)}"


def _cautions(case: Case, reading: Reading, hot: bool) -> tuple[str, ...]:
    found = []
    site = words(child(reading.node, "site"))
    if site in case.parameters["not_core"].value:
        found.append(f"{site[:1].upper()}{site[1:]} is not a core temperature.")
    if hot:
        usual = number_text(case.parameters.number("set_point"), 1)
        found.append(f"After the first days a large burn sets its own level around {usual} C.")
    room = case.state.series("room")
    low = float(case.parameters["room.range"].value[0])
    degrees = amount(room[-1].node, "C") if room else None
    if degrees is not None and degrees < low:
        found.append(f"The room is below {number_text(low)} C (from memory: confirm).")
    return tuple(found)


def actions(case: Case) -> tuple[Action, ...]:
    """Return how to warm: now where the patient is cold, through the shift where the burn is large."""
    reading = latest(case)
    celsius = amount(reading.node, "C") if reading else None
    cold = celsius is not None and is_cold(case, celsius)
    pct = patient.counted_pct(case)
    area = f"warming.area.{_who(case)}"
    large = pct is not None and pct > case.parameters.number(area)
    if case.comfort or not (cold or large):
        return ()
    sources: list[Source] = []
    reasons = []
    if cold and reading is not None:
        reasons.append(f"{words(reading.node)} at {case.clock.time(reading.at, case.now)} is cold")
        sources.append(case.parameters.source_of(f"hypothermia.{case.chosen('hypothermia').name}"))
    if large and pct is not None:
        reasons.append(f"{with_unit(pct, '%TBSA', 1)} is burned")
        sources.append(case.parameters.source_of(area))
    sources += [case.parameters.source_of("room.cooling"), case.parameters.source_of("room.range")]
    low, high = case.parameters["room.range"].value
    every = timedelta(minutes=case.parameters.number("warming.every"))
    return (
        Action(
            key="infection.warm",
            area="Temperature",
            text=f"Warm: room {number_text(low)} to {number_text(high)} C, warmed fluids, cover all that is not being "
            "worked on, head too; no wet dressings left on" + ("; measure again" if cold else ""),
            why=f"{joined(reasons)}; {COLD_WHY}",
            system=System.EXPOSURE,
            first_due=case.now if cold else None,
            every=every if cold else None,
            urgency=Urgency.NOW if cold else Urgency.ONGOING,
            sources=tuple(dict.fromkeys(sources)),
            cautions=("The range of the room is from memory: use your unit's.",),
        ),
    )
