"""What is recorded of the electrical injury: source, path, rhythm, and what is not known."""

from __future__ import annotations

from msgspec import Struct

from handoff.plugin import Case, Map, Row, amount, child, entries, words

from . import formula

KINDS = ("electrical", "lightning")
KNOWN = {"yes": True, "no": False, "present": True, "absent": False}
UNKNOWN_VOLTAGE = "voltage not recorded"


class Injury(Struct, frozen=True):
    """The electrical injury as charted; ``facts`` is None for what nothing says."""

    cause: Map
    voltage: str
    high: bool | None
    facts: dict[str, bool | None]
    rhythms: tuple[Row, ...]
    comfort: bool


def injury(case: Case) -> Injury | None:
    """Return what is charted of an electrical injury or lightning; None where there was none."""
    causes = [
        cause for cause in entries(case.state.injury.get("causes")) if words(cause.get("kind")) in KINDS
    ]
    if not causes:
        return None
    cause = max(causes, key=lambda one: amount(one.get("voltage"), "V") or 0.0)
    voltage, high = _voltage(case, cause)
    rhythms = tuple(
        sorted(
            (*case.state.events("arrhythmia"), *case.state.events("cardiac arrest")), key=lambda row: row.at
        )
    )
    facts = {
        "loss of consciousness": KNOWN.get(words(case.state.injury.get("lost_consciousness"))),
        "arrhythmia": True if rhythms else KNOWN.get(words(child(case.block, "arrhythmia_before_arrival"))),
        "abnormal electrocardiogram": _abnormal(case),
        "chest pain": KNOWN.get(words(child(case.block, "chest_pain"))),
        "path across the chest": KNOWN.get(words(child(case.block, "path_across_chest"))),
        "heart disease": _heart(case),
        "high voltage": high,
        "wet skin": KNOWN.get(words(child(case.block, "wet"))),
        "held to the source": KNOWN.get(words(child(case.block, "held_on"))),
    }
    return Injury(cause, voltage, high, facts, rhythms, case.comfort)


def voltage_line(case: Case) -> str:
    """Return the parameter that holds the chosen line between low and high voltage."""
    return f"voltage_line.{case.chosen('voltage_line').name}"


def _voltage(case: Case, cause: Map) -> tuple[str, bool | None]:
    if words(cause.get("kind")) == "lightning":
        return "lightning", True
    volts = amount(cause.get("voltage"), "V")
    if volts is None:
        return UNKNOWN_VOLTAGE, None
    found = formula.voltage_class(volts, case.parameters.number(voltage_line(case)))
    said = f"{words(cause.get('voltage'))}, {found} voltage"
    if found == formula.AT_THE_LINE:
        said = f"{words(cause.get('voltage'))}, at the line between low and high: taken as high"
    return said, found != formula.LOW


def _abnormal(case: Case) -> bool | None:
    read = [KNOWN.get(words(row.entry.get("abnormal"))) for row in case.state.dated(child(case.block, "ecg"))]
    if True in read:
        return True
    return False if False in read else None


def _heart(case: Case) -> bool | None:
    conditions = case.state.texts(case.state.patient.get("conditions"))
    return "heart disease" in conditions if conditions else None


def ecgs(case: Case) -> tuple[Row, ...]:
    """Return every electrocardiogram: of the block, and as reported among the results."""
    reported = [row for row in case.state.results if words(row.entry.get("ecg"))]
    return tuple(sorted((*case.state.dated(child(case.block, "ecg")), *reported), key=lambda row: row.at))
