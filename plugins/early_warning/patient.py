"""What decides which method fits this patient: age, pregnancy, goal of care, smoke and carbon monoxide."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import Age, Case, amount, entries, words

FIRE = ("flame", "flash", "explosion")
CLOSED = ("enclosed space", "vehicle")


def age_at(case: Case, moment: datetime) -> Age | None:
    """Return the age at ``moment``, or None."""
    return case.state.age_at(moment)


def is_child(case: Case, moment: datetime) -> bool:
    """Return whether the patient is known to be under the age from which the score is used."""
    age = age_at(case, moment)
    return age is not None and age.years < case.parameters.number("news2.age_from")


def not_for(case: Case, moment: datetime) -> str:
    """Return why the score does not apply to this patient; empty where nothing says so."""
    if is_child(case, moment):
        return "the method is for 16 years and over"
    if words(case.state.patient.get("pregnant")) == "yes":
        return "the method is not for pregnancy"
    return ""


def pregnancy_unknown(case: Case) -> bool:
    """Return whether pregnancy is possible and not recorded."""
    said = words(case.state.patient.get("pregnant"))
    return said in ("", "not known") and words(case.state.patient.get("sex")) != "male"


def smoke(case: Case) -> bool:
    """Return whether smoke exposure is recorded: breathed, or fire where it could not escape."""
    for cause in entries(case.state.injury.get("causes")):
        if words(cause.get("smoke")) == "yes":
            return True
        closed = words(cause.get("setting")) in CLOSED or words(cause.get("trapped")) == "yes"
        if words(cause.get("kind")) in FIRE and closed:
            return True
    return False


def saturation_doubt(case: Case) -> str:
    """Return why the saturation cannot be trusted after smoke; empty where nothing says so."""
    if not smoke(case):
        return ""
    levels = []
    for reading in case.state.result_series("carboxyhaemoglobin"):
        levels.append((reading.at, amount(reading.node, "%")))
    for row in case.state.dated(case.state.at_path("airway_watch", "carboxyhaemoglobin")):
        levels.append((row.at, amount(row.entry.get("value"), "%")))
    known = sorted((at, pct) for at, pct in levels if pct is not None)
    if not known:
        return "carboxyhaemoglobin is unknown after smoke"
    at, pct = known[-1]
    if pct > case.parameters.number("co.raised"):
        return f"carboxyhaemoglobin was raised when last measured at {case.clock.time(at, case.now)}"
    return ""
