"""The facts that referral criteria, classes and scores ask for, each with what it rests on or what is missing."""

from __future__ import annotations

from collections.abc import Callable

from handoff.plugin import Case, amount, child, entries, joined, number, number_text, words

from . import formula
from .assessment import Assessment, Burn
from .criteria import Fact, Facts
from .regions import LIMBS, limb_of
from .sites import may_go_round, site_names, sites_unsure
from .totals import pct_text
from .wounds import Wounds

HOURS_A_DAY = 24
MAJOR_JOINTS = ("shoulder", "elbow", "wrist", "hip", "knee", "ankle")
SITE_NAMES = {"genitalia and perineum": ("genitalia", "perineum"), "fingers": ("hands",), "toes": ("feet",)}
ROUND_PLACES = {"trunk": "chest", "head and neck": "neck"}
NO_CONDITION, NO_INJURY = "none of these", "none found"
PARTIAL = ("superficial partial", "mid partial", "deep partial", "partial thickness")


def facts_of(case: Case, assessment: Assessment | None, wounds: Wounds | None) -> Facts:
    """Return every fact that a criterion may ask for, by name; areas in % of body surface."""
    return {
        **_areas(assessment),
        **_person(case, assessment),
        **_places(assessment),
        **_injury(case),
        **_wound(case, assessment, wounds),
    }


def _areas(assessment: Assessment | None) -> dict[str, Fact]:
    return {
        "counted_pct": _area(assessment, lambda burn: burn.counted is not False, "burned"),
        "partial_pct": _area(assessment, lambda burn: burn.depth in PARTIAL, "partial thickness"),
        "superficial_pct": _area(
            assessment, lambda burn: burn.depth == "superficial partial", "superficial partial"
        ),
        "deep_partial_pct": _area(assessment, lambda burn: burn.depth == "deep partial", "deep partial"),
        "deep_pct": _area(assessment, lambda burn: burn.deep, "deep burn"),
        "full_pct": _area(assessment, lambda burn: burn.full, "full thickness"),
    }


def _area(assessment: Assessment | None, takes: Callable[[Burn], bool], name: str) -> Fact:
    if assessment is None:
        return Fact(missing="burned area not recorded")
    if any(burn.counted is None for burn in assessment.burns):
        return Fact(missing="depth not assessed everywhere")
    parts = [burn.tbsa_pct for burn in assessment.burns if takes(burn)]
    known = [part for part in parts if part is not None]
    if len(known) < len(parts):
        return Fact(missing=f"extent not computed ({'; '.join(assessment.missing)})")
    value = formula.total_pct(known)
    return Fact(value, shown=f"{name} {pct_text(value)}")


def _person(case: Case, assessment: Assessment | None) -> dict[str, Fact]:
    burn = case.state.burn_time
    moment = burn.earliest if burn else assessment.at if assessment else case.now
    age, weight = case.state.age_at(moment), case.state.weight("before burn", "today")
    adult_from = case.parameters.number(f"adult_from.{case.chosen('adult_from').name}")
    no_age = Fact(missing="age not recorded")
    days = Fact(missing="age in days not recorded")
    if age is not None:
        # An estimated age has no days; from one year on nobody is a newborn.
        found = age.days if age.days is not None else None if age.years < 1 else float("inf")
        days = Fact(found, shown=f"age {age.shown()}", missing="age in days not recorded")
    return {
        "age_years": no_age if age is None else Fact(float(age.years), shown=f"age {age.shown()}"),
        "age_days": days,
        "child": no_age if age is None else Fact(age.years < adult_from, shown=f"age {age.shown()}"),
        "weight_kg": Fact(missing="weight not recorded")
        if weight is None
        else Fact(weight.kg, shown=f"weight {number_text(weight.kg, 1)} kg"),
        "comorbidity": _comorbidity(case),
        "immunosuppressed": _immunity(case),
        "pregnant": _pregnant(case),
    }


def _comorbidity(case: Case) -> Fact:
    """The conditions charted by name; a history in free text may say that there is none, and is only quoted."""
    patient = case.state.patient
    found = case.state.texts(patient.get("conditions"))
    real = [name for name in found if name != NO_CONDITION]
    if real:
        return Fact(True, shown=joined(real))
    if found:
        return Fact(False)
    history = case.state.texts(patient.get("history"))
    said = f"history charted as free text: {joined(history)}" if history else "past illness not recorded"
    return Fact(missing=f"conditions not recorded; {said}" if history else said)


def _immunity(case: Case) -> Fact:
    found = case.state.texts(case.state.patient.get("conditions"))
    if not found:
        return Fact(missing="conditions not recorded")
    return Fact("immunosuppressed" in found, shown="immunosuppressed")


def _pregnant(case: Case) -> Fact:
    said = words(case.state.patient.get("pregnant"))
    if said in ("", "not known"):
        return Fact(missing="pregnancy not recorded" if not said else "pregnancy not known")
    return Fact(said == "yes", shown="pregnant")


def _places(assessment: Assessment | None) -> dict[str, Fact]:
    missing = "burned area not recorded"
    if assessment is None:
        return {name: Fact(missing=missing) for name in ("sites", "deep_sites", "round")}
    counted = [burn for burn in assessment.burns if burn.counted is not False]
    return {
        "sites": _sites(counted),
        "deep_sites": _sites([burn for burn in counted if burn.deep or burn.counted is None]),
        "round": _round(counted),
    }


def _sites(burns: list[Burn]) -> Fact:
    names: dict[str, str] = {}
    unsure: dict[str, str] = {}
    for burn in burns:
        here = f"{burn.where} ({burn.depth})"
        for name in (*site_names(burn), burn.region):
            for plain in SITE_NAMES.get(name, (name,)):
                names.setdefault(plain, here)
        if burn.joint:
            names.setdefault("joint", f"{burn.joint}, {here}")
            if burn.joint in MAJOR_JOINTS:
                names.setdefault("major joint", f"{burn.joint}, {here}")
        elif burn.region in (*LIMBS, "whole body"):
            for joint in ("joint", "major joint"):
                unsure.setdefault(joint, f"whether {burn.where} crosses a joint not recorded")
        for name in sites_unsure(burn):
            for plain in SITE_NAMES.get(name, (name,)):
                unsure.setdefault(plain, f"whether {burn.where} holds {name} not recorded")
    return Fact(names=names, unsure=unsure)


def _round(burns: list[Burn]) -> Fact:
    names: dict[str, str] = {}
    unsure: dict[str, str] = {}
    for burn in burns:
        place = "limb" if limb_of(burn.region) else ROUND_PLACES.get(burn.region, burn.region)
        if burn.circumferential:
            names.setdefault(place, f"{burn.region} all round")
        elif may_go_round(burn, burns):
            unsure.setdefault(place, f"whether {burn.where} goes all round not recorded")
        elif burn.region == "whole body" and not burn.encircling_recorded:
            unsure |= dict.fromkeys(("limb", "chest", "neck"), "whether it goes all round not recorded")
    return Fact(names=names, unsure=unsure)


def _injury(case: Case) -> dict[str, Fact]:
    causes = entries(case.state.injury.get("causes"))
    missing = "" if causes else "cause not recorded"
    kinds = {words(cause.get("kind")): words(cause.get("kind")) for cause in causes}
    return {
        "causes": Fact(names=kinds, missing=missing),
        "voltage_v": _voltage(case, kinds),
        "smoke": _smoke(case),
        "trauma": _trauma(case),
        "inhalation_signs": _inhalation_signs(case),
        "bronchoscopy": _bronchoscopy(case),
    }


def _voltage(case: Case, kinds: dict[str, str]) -> Fact:
    volts = [
        amount(cause.get("voltage"), "V")
        for cause in entries(case.state.injury.get("causes"))
        if "voltage" in cause
    ]
    known = [volt for volt in volts if volt is not None]
    if known:
        return Fact(max(known), shown=f"{number_text(max(known))} V")
    return Fact(missing="voltage not recorded") if "electrical" in kinds or not kinds else Fact(False)


def _smoke(case: Case) -> Fact:
    causes = entries(case.state.injury.get("causes"))
    for key, said in (("smoke", "smoke breathed"), ("trapped", "trapped")):
        if any(words(cause.get(key)) == "yes" for cause in causes):
            return Fact(True, shown=said)
    if any(words(cause.get("setting")) == "enclosed space" for cause in causes):
        return Fact(missing="whether smoke was breathed not recorded (enclosed space)")
    if causes and all(
        words(cause.get("smoke")) == "no" or _without_smoke(words(cause.get("kind"))) for cause in causes
    ):
        return Fact(False)
    return Fact(missing="whether smoke was breathed not recorded")


def _without_smoke(kind: str) -> bool:
    return kind in (
        "scald",
        "contact",
        "friction",
        "cold",
        "radiation",
        "electrical",
        "lightning",
        "chemical",
    )


def _trauma(case: Case) -> Fact:
    """Free text may name an injury or clear one: only the words ``none found`` settle it, the rest is quoted."""
    said = words(case.state.injury.get("other_injuries"))
    if said == NO_INJURY:
        return Fact(False)
    return Fact(missing=f"other injuries charted as: {said}" if said else "other injuries not recorded")


def _inhalation_signs(case: Case) -> Fact:
    """Signs that raise the suspicion of inhalation, or what a bronchoscopy found."""
    seen = _bronchoscopy(case)
    if seen.value is not None:
        return seen
    looked_for = case.parameters["inhalation.signs"].value
    present: dict[str, str] = {}
    looked = False
    for row in case.state.dated(child(case.state.root.get("airway_watch"), "signs")):
        for sign in looked_for:
            said = words(row.entry.get(sign))
            looked = looked or said in ("present", "absent")
            if said == "present":
                present[sign] = f"{sign} at {case.clock.time(row.at, case.now)}"
    if present:
        return Fact(True, shown=f"airway signs charted: {joined(list(present.values()))}")
    return (
        Fact(False, shown="no airway sign charted as present")
        if looked
        else Fact(missing="airway signs not recorded")
    )


def _bronchoscopy(case: Case) -> Fact:
    """The grade that the endoscopist recorded: above 0 is inhalation injury seen; 0 is none seen."""
    rows = case.state.dated(child(case.state.root.get("airway_watch"), "bronchoscopy"))
    graded = [(row, grade) for row in rows if (grade := number(row.entry.get("grade"))) is not None]
    if not graded:
        return Fact(missing="bronchoscopy not recorded")
    row, grade = graded[-1]
    at = case.clock.time(row.at, case.now)
    return Fact(
        grade > 0, shown=f"bronchoscopy at {at}, grade {number_text(grade)} as recorded by the endoscopist"
    )


def _wound(case: Case, assessment: Assessment | None, wounds: Wounds | None) -> dict[str, Fact]:
    burn = case.state.burn_time
    days = Fact(missing="time of the burn not recorded")
    if burn is not None:
        since = case.hours_between(burn.earliest, case.now) / HOURS_A_DAY
        days = Fact(since, shown=f"{number_text(since, 0)} days since the burn")
    return {
        "days_since_burn": days,
        "open_wound": Fact(missing="open wound not recorded")
        if wounds is None
        else Fact(bool(wounds.open_regions), shown=f"open: {joined(wounds.open_regions)}"),
        "infected": _infected(assessment),
    }


def _infected(assessment: Assessment | None) -> Fact:
    burns = entries(assessment.entry.get("burns")) if assessment else ()
    said = [(words(burn.get("infected")), words(burn.get("region"))) for burn in burns]
    found = [region for answer, region in said if answer == "yes"]
    if found:
        return Fact(True, shown=f"infected: {joined(found)}")
    return (
        Fact(False)
        if said and all(answer == "no" for answer, _ in said)
        else Fact(missing="infection not recorded")
    )
