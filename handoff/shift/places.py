"""Under which system an entry stands in the note, and what its keys are called there."""

from __future__ import annotations

from collections.abc import Mapping

from handoff.plugin import System

RESULTS = "results"
UNDATED = "without a time in the file; may be of another shift"

PLACES: Mapping[str, str] = {
    "observations.resp": System.BREATHING,
    "observations.spo2": System.BREATHING,
    "observations.minute_ventilation": System.BREATHING,
    "observations.pulse": System.CIRCULATION,
    "observations.bp": System.CIRCULATION,
    "observations.map": System.CIRCULATION,
    "observations.consciousness": System.DISABILITY,
    "observations.gcs": System.DISABILITY,
    "observations.pupils": System.DISABILITY,
    "observations.temp": System.EXPOSURE,
    "observations.room": System.EXPOSURE,
    "observations.urine": System.FLUID,
    "observations.bladder_pressure": System.FLUID,
    "observations.insulin": System.NUTRITION,
    "observations.limbs": System.LIMBS,
    "observations.pain": System.PAIN,
    "observations.itch": System.PAIN,
    "observations.anxiety": System.PAIN,
    "observations.sedation": System.PAIN,
    "observations": System.GENERAL,
    "airway_watch.oxygen": System.BREATHING,
    "airway_watch.carboxyhaemoglobin": System.BREATHING,
    "airway_watch.ventilator": System.BREATHING,
    "airway_watch": System.AIRWAY,
    "area": System.BURN,
    "fluid": System.FLUID,
    "pain": System.PAIN,
    "wounds.pressure_areas": System.SKIN,
    "wounds.splints": System.SKIN,
    "wounds": System.WOUND,
    "infection": System.INFECTION,
    "electrical": System.ELECTRICAL,
    "chemical": System.ELECTRICAL,
    "lines": System.LINES,
    "results": RESULTS,
    "patient.family": System.PEOPLE,
    "patient": System.GENERAL,
    "injury": System.GENERAL,
    "events": System.GENERAL,
    "handovers": System.GENERAL,
}
"""The longest beginning of a path decides; a block that is not here stands under its plugin's title."""

ORDER = tuple(dict.fromkeys((*System, RESULTS)))

ASKED_FOR = (
    System.AIRWAY,
    System.BREATHING,
    System.CIRCULATION,
    System.DISABILITY,
    System.EXPOSURE,
    System.LIMBS,
    System.FLUID,
    System.PAIN,
    System.WOUND,
    System.LINES,
)
"""Systems of which the note says so when nothing was charted."""

LEADS: Mapping[str, str] = {
    "airway_watch.signs": "airway checked",
    "airway_watch.reviews": "airway reviewed",
    "airway_watch.tube_checks": "tube checked",
    "area": "burned area assessed",
    "events": "",
    "fluid.given": "fluid",
    "fluid.losses": "loss",
    "fluid.orders": "fluid order",
    "handovers": "handover",
    "lines": "",
    "airway_watch.watch": "airway watch",
    "pain.doses": "given",
    "pain.goal": "pain goal",
    "pain.procedures": "procedure",
    "pain.self_report": "own report of pain",
    "patient.resuscitation": "resuscitation decision",
    "patient.weights": "weight",
    "results": "",
}
"""What an entry begins with; otherwise the name of its list."""

LABELS: Mapping[str, str] = {
    "bp": "blood pressure",
    "c_reactive_protein": "C-reactive protein",
    "fio2": "FiO2",
    "gcs": "coma scale",
    "map": "mean arterial pressure",
    "paco2": "PaCO2",
    "pao2": "PaO2",
    "ph": "pH",
    "resp": "breaths",
    "running": "seen running",
    "spo2": "SpO2",
    "temp": "temperature",
    "who": "by",
}

FOLLOWED: Mapping[str, str] = {"of_region": "of the region", "tbsa": "of the body surface", "scale": "scale"}
"""Keys whose words follow the value."""

BARE = frozenset(
    (
        "coefficient",
        "decision",
        "depth",
        "device",
        "dose",
        "drug",
        "face",
        "flow",
        "fluid",
        "formula",
        "kind",
        "known",
        "method",
        "name",
        "other",
        "phone",
        "purpose",
        "rate",
        "region",
        "role",
        "route",
        "side",
        "severity",
        "value",
        "volume",
        "what",
    )
)
"""Keys whose value speaks for itself and is printed without its label."""

QUOTED = frozenset(("said", "outcome", "summary", "what_happened"))
"""Keys that hold somebody's own words."""

HEADS = ("value", "score", "volume")
"""Keys of a small group that hold the figure; the others explain it in brackets."""


def system_of(path: str, titles: Mapping[str, str]) -> str:
    """Return the system under which ``path`` (``airway_watch.signs``) stands; ``titles`` are the plugins'."""
    block = path.partition(".")[0]
    return longest(path, PLACES) or titles.get(block, block.replace("_", " ")).lower()


def lead_of(path: str) -> str:
    """Return what an entry of the list at ``path`` begins with."""
    if path in LEADS:
        return LEADS[path]
    return path.rpartition(".")[2].replace("_", " ")


def label_of(key: str) -> str:
    """Return what a key is called in the note."""
    return LABELS.get(key, key.replace("_", " "))


def longest(path: str, among: Mapping[str, str]) -> str:
    """Return the value of the longest beginning of ``path`` that is in ``among``; empty for none."""
    while path:
        if path in among:
            return among[path]
        path = path.rpartition(".")[0]
    return ""
