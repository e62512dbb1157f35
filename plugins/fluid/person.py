"""What a rule may ask about this patient: age, weight, burn, cause, inhalation, other disease."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import Age, Case, Input, Map, amount, child, entries, joined, number, words

from .bands import Facts
from .weights import Used, volume_weight

MONTHS_A_YEAR = 12
WITHOUT_SMOKE = ("scald", "contact", "friction", "cold", "radiation", "chemical", "electrical", "lightning")
OVERLOAD = ("heart disease", "kidney disease", "frailty")


class Person(Struct, frozen=True):
    """The patient as the rules see them; what is not known is None."""

    age: Age | None
    age_input: Input | None
    is_child: bool | None
    weight: Used | None
    pct: float | None
    pct_missing: str
    pct_input: Input | None
    high_voltage: bool | None
    is_electrical: bool
    causes: tuple[str, ...]
    inhalation: bool | None
    overload: tuple[str, ...]
    overload_known: bool
    is_pregnant: bool
    comfort: bool

    def facts(self, pigmented: bool | None = None) -> Facts:
        """Return the facts by the names that the conditions of a band use."""
        years = self.age.years if self.age else None
        risk = bool(self.overload) if self.overload or self.overload_known else None
        return {
            "years": years,
            "months": _months(self.age),
            "kg": self.weight.kg if self.weight else None,
            "pct": self.pct,
            "child": self.is_child,
            "high_voltage": self.high_voltage,
            "electrical": self.is_electrical,
            "inhalation": self.inhalation,
            "overload_risk": risk,
            "scald": "scald" in self.causes,
            "pigment_after_high_voltage": _both(self.high_voltage, pigmented),
        }


def read_person(case: Case) -> Person:
    """Return the patient as the rules see them, aged at the burn (at this moment where it is not recorded)."""
    age = _age(case)
    adult_from = case.parameters.number(f"adult_from.{case.chosen('adult_from').name}")
    causes = entries(case.state.injury.get("causes"))
    kinds = tuple(dict.fromkeys(words(cause.get("kind")) for cause in causes))
    conditions = case.state.texts(case.state.patient.get("conditions"))
    area = case.findings["area"]
    counted = area.item("area.counted")
    pct = area.number("area.counted")
    return Person(
        age=age,
        age_input=_age_input(case, age),
        is_child=None if age is None else age.years < adult_from,
        weight=volume_weight(case),
        pct=pct,
        pct_missing=_why_no_area(counted.shown if counted else ""),
        pct_input=Input("counted burn", counted.shown, counted.line) if counted and pct is not None else None,
        high_voltage=_high_voltage(case, causes, kinds),
        is_electrical="electrical" in kinds or "lightning" in kinds,
        causes=kinds,
        inhalation=_inhalation(case, causes),
        overload=tuple(name for name in OVERLOAD if name in conditions),
        overload_known=bool(conditions),
        is_pregnant=words(case.state.patient.get("pregnant")) == "yes",
        comfort=words(child(case.state.patient, "resuscitation", "decision")) == "comfort care",
    )


def standing_cautions(person: Person, hours_to_first: float | None, late_after: float) -> tuple[str, ...]:
    """Return what stands beside every rate: who may need more, and who may be harmed by it.

    Args:
        person: The patient.
        hours_to_first: Hours from the burn to the first resuscitation fluid; None when not known.
        late_after: Hours after which a start is late.
    """
    low = ["inhalation injury"] if person.inhalation else []
    low += ["electrical injury"] if person.is_electrical else []
    low += ["late start"] if hours_to_first is not None and hours_to_first > late_after else []
    found = ["Formula estimate: a starting point to check, not an order; urine and perfusion lead."]
    if low:
        found.append(f"{joined(low).capitalize()}: the formula may be low.")
    if person.inhalation is None:
        found.append("Inhalation injury is neither recorded nor ruled out; with it the formula may be low.")
    beside = [*person.overload, *(["pregnancy"] if person.is_pregnant else [])]
    if beside:
        found.append(f"{joined(beside).capitalize()}: the formula was not made for it; ask the prescriber.")
    elif not person.overload_known:
        found.append("Heart disease, kidney disease and frailty are not recorded; each changes the figure.")
    if person.weight is not None:
        found += person.weight.cautions
    return tuple(found)


def _age(case: Case) -> Age | None:
    burn = case.state.burn_time
    age = case.state.age_at(burn.earliest if burn else case.now)
    return age if age is not None and age.years >= 0 else None


def _age_input(case: Case, age: Age | None) -> Input | None:
    if age is None:
        return None
    patient = case.state.patient
    node = patient.get("born") or patient.get("estimated_age")
    return case.input("age at the burn", node, age.shown())


def _months(age: Age | None) -> float | None:
    if age is None:
        return None
    if age.months is not None:
        return age.months
    return age.years * MONTHS_A_YEAR if age.years > 1 else None


def _why_no_area(shown: str) -> str:
    reason = shown.removeprefix("not computed: ")
    return f"burned area ({reason})" if reason and reason != shown else "burned area"


def _high_voltage(case: Case, causes: tuple[Map, ...], kinds: tuple[str, ...]) -> bool | None:
    if "lightning" in kinds:
        return True
    if "electrical" not in kinds:
        return False
    volts = [volt for cause in causes if (volt := amount(cause.get("voltage"), "V")) is not None]
    return max(volts) >= case.parameters.number("high_voltage.from") if volts else None


def _inhalation(case: Case, causes: tuple[Map, ...]) -> bool | None:
    rows = case.state.dated(child(case.state.root.get("airway_watch"), "bronchoscopy"))
    graded = [grade for row in rows if (grade := number(row.entry.get("grade"))) is not None]
    if graded:
        return graded[-1] > 0
    if any(words(cause.get(key)) == "yes" for cause in causes for key in ("smoke", "trapped")):
        return True
    ruled_out = [
        words(cause.get("smoke")) == "no" or words(cause.get("kind")) in WITHOUT_SMOKE for cause in causes
    ]
    return False if ruled_out and all(ruled_out) else None


def _both(first: bool | None, second: bool | None) -> bool | None:
    if first is False or second is False:
        return False
    return None if first is None or second is None else True


def first_hours(case: Case, first: datetime | None) -> float | None:
    """Return the hours from the (earliest) burn to ``first``, or None."""
    burn = case.state.burn_time
    return case.hours_between(burn.earliest, first) if burn and first else None
