"""What a receiving centre can ask for, by name: the label read aloud and the items that answer it."""

from __future__ import annotations

from collections.abc import Mapping

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.brief import BEFORE
from handoff.document.sections import NOT_RECORDED, sentence, shown
from handoff.plugin import Flag, Item

FACTS: Mapping[str, tuple[str, tuple[str, ...]]] = {
    "weight": ("Weight", ("patient.weight",)),
    "time of injury": ("Time of injury", ("injury.at", "injury.hours_since")),
    "cause": ("Cause", ("injury.causes", "injury.what_happened")),
    "first aid": ("First aid", ("injury.first_aid",)),
    "area": (
        "Burned area",
        (
            "area.counted",
            "area.full_thickness",
            "area.deep_partial",
            "area.superficial_partial",
            "area.method",
        ),
    ),
    "earlier areas": ("Area against earlier assessments", ("area.differences",)),
    "sites": ("Sites", ("area.special_sites", "area.circumferential")),
    "limbs": ("Limb perfusion", ("area.perfusion.*", "area.release_requested.*")),
    "airway": ("Airway plan for the journey", ("transfer.airway", "transfer.can_intubate")),
    "inhalation": (
        "Inhalation",
        ("airway_watch.signs_present", "airway_watch.carboxyhaemoglobin_measured"),
    ),
    "oxygen": ("Oxygen", ("airway_watch.oxygen", "transfer.oxygen_endurance")),
    "vital signs": ("Vital signs", ("vital.*", "early_warning.score")),
    "consciousness": ("Consciousness", ("early_warning.consciousness", "early_warning.coma_scale")),
    "temperature": ("Temperature", ("infection.temperature", "vital.temp")),
    "lines": ("Lines and tubes", ("line.*",)),
    "fluid": ("Fluid since the burn", ("fluid.given", "fluid.total_24h", "fluid.rate_now")),
    "urine": ("Urine", ("fluid.urine_last", "fluid.urine_rate")),
    "pain": ("Pain and drugs given", ("pain.latest", "pain.given.*")),
    "tetanus": ("Tetanus", ("injury.tetanus",)),
    "allergies": ("Allergies", ("patient.allergies",)),
    "medicines": ("Medicines before the burn", ("patient.medicines",)),
    "history": ("Past illness", ("patient.history", "patient.conditions")),
    "other injuries": ("Other injuries", ("injury.other_injuries", "injury.lost_consciousness")),
    "pregnancy": ("Pregnancy", ("patient.pregnant",)),
    "results": ("Results", ("result.*",)),
    "infection": ("Isolation and infection", ("patient.isolation",)),
    "family": ("Family", ("patient.family",)),
    "resuscitation decision": ("Resuscitation decision", ("patient.resuscitation",)),
    "referral": ("Why a burn centre", ("area.referral",)),
    "journey": ("Journey", ("transfer.leaves", "transfer.arrives")),
    "receiver": ("Receiver", ("transfer.receiver",)),
    "pumps": ("Pumps", ("transfer.pump.*",)),
    "scores": ("Scores asked for", ("area.revised_baux", "area.absi")),
    "pending": ("Results awaited", ("handover.pending",)),
    "caller": ("Caller and direct number", ("handover.from",)),
}
"""Label and item keys of each fact; a key that ends in ``.*`` stands for every item that begins so."""

OPTIONAL = frozenset(("earlier areas", "limbs", "pumps", "scores", "lines"))
"""Facts of which there may be none: what is not there is not missing."""


class Answer(Struct, frozen=True):
    """One fact as it is read aloud: its label, what is known with its time, and what is not recorded of it."""

    label: str
    text: str
    missing: tuple[str, ...]


def answer(assessment: Assessment, fact: str) -> Answer:
    """Return what is known of ``fact``; nothing known reads ``not recorded``."""
    label, keys = FACTS[fact]
    return answer_of(assessment, label, keys, optional=fact in OPTIONAL)


def answer_of(assessment: Assessment, label: str, keys: tuple[str, ...], *, optional: bool = False) -> Answer:
    """Return what is known of the items ``keys`` under ``label``."""
    items = [item for key in keys for item in _items(assessment, key)]
    known = [item for item in items if item.flag is not Flag.NOT_RECORDED]
    lacking = tuple(dict.fromkeys(sentence(item.label) for item in items if item.flag is Flag.NOT_RECORDED))
    if not known:
        partly = "; ".join(f"{item.label}: {shown(item)}" for item in items if shown(item) != NOT_RECORDED)
        missing = () if optional and not items else (label,)
        return Answer(label, partly or NOT_RECORDED, missing)
    alone = len(items) == 1 and not keys[0].endswith(".*")
    said = [_said(item, assessment, alone or _repeats(item, label)) for item in known]
    said += [f"{name}: {NOT_RECORDED}" for name in lacking]
    return Answer(label, ". ".join(part.rstrip(".") for part in said) + ".", lacking)


def _items(assessment: Assessment, key: str) -> list[Item]:
    if key.endswith(".*"):
        return [item for item in assessment.items if item.key.startswith(key[:-1])]
    item = assessment.item(key)
    return [item] if item else []


def _said(item: Item, assessment: Assessment, unnamed: bool) -> str:
    text = " ".join(shown(item).partition(BEFORE)[0].split())
    time = assessment.state.clock.time(item.as_of, assessment.now) if item.as_of else ""
    timed = f"{text} ({time})" if time and time not in text else text
    return sentence(timed) if unnamed else f"{sentence(item.label)}: {timed}"


def _repeats(item: Item, label: str) -> bool:
    return item.label.casefold() == label.casefold()
