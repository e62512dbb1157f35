"""Starting rules: what a named formula gives for this patient, with the sum, or why it gives nothing."""

from __future__ import annotations

from collections.abc import Sequence

from msgspec import Struct

from handoff.plugin import Case, Source, number_text

from . import formula
from .bands import Band, Facts, pick
from .person import Person
from .say import ml, ml_h
from .surface import surface_m2
from .weights import kg_text

COEFFICIENT_PLACES = 2
PCT_PLACES = 2
SURFACE_PLACES = 3
HALVES = "halves"
SIMPLE = ("crystalloid", "who")

RANGE_RULES = (
    "aba-2023",
    "abls-2010",
    "modified-brooke",
    "emergency-teaching",
    "uthealth-2021",
    "michigan-2018",
    "bristol",
    "perth",
    "parkland",
)
"""Rules by weight and area whose coefficients make the range that stands where nothing is ordered."""


class Schedule(Struct, frozen=True):
    """How a volume is spread: the end of each period in hours since the burn, and its share."""

    name: str
    ends_h: tuple[float, ...]
    shares: tuple[float, ...]


class Volume(Struct, frozen=True):
    """What a rule gives: volumes in mL over its schedule, or a starting rate in mL/h alone."""

    rule: str
    who: str
    formula: str
    sum: str
    schedule: Schedule
    sources: tuple[Source, ...]
    crystalloid_ml: float = 0.0
    colloid_ml: float = 0.0
    water_ml: float = 0.0
    rate_ml_h: float | None = None
    coefficient: float | None = None
    holds_maintenance: bool = False
    cautions: tuple[str, ...] = ()

    @property
    def total_ml(self) -> float | None:
        """Crystalloid and colloid over the whole schedule, in mL; None for a starting rate."""
        return None if self.rate_ml_h is not None else self.crystalloid_ml + self.colloid_ml

    def due_ml(self, hours: float) -> float:
        """Return what is due by ``hours`` since the burn, in mL."""
        return formula.due_ml(self.total_ml or 0.0, self.schedule.ends_h, self.schedule.shares, hours)

    def rate_at(self, hours: float) -> float:
        """Return the rate of the schedule at ``hours`` since the burn, in mL/h; 0 when it has ended."""
        if self.rate_ml_h is not None:
            return self.rate_ml_h
        return formula.plan_rate_ml_h(self.total_ml or 0.0, self.schedule.ends_h, self.schedule.shares, hours)

    @property
    def said(self) -> str:
        """The rule with its coefficient and band: ``abls-2010 (2 mL/kg/%, 15 years and over ...)``."""
        parts = []
        if self.coefficient is not None:
            parts.append(f"{number_text(self.coefficient, COEFFICIENT_PLACES)} mL/kg/%")
        if self.who:
            parts.append(self.who)
        return f"{self.rule} ({', '.join(parts)})" if parts else self.rule


class NoVolume(Struct, frozen=True):
    """Why a rule gives nothing: what is missing, or that the patient falls between its bands."""

    rule: str
    missing: tuple[str, ...] = ()
    between: bool = False
    bands: tuple[str, ...] = ()

    @property
    def shown(self) -> str:
        """How it is printed."""
        if self.missing:
            return f"{self.rule}: not computed, missing {', '.join(self.missing)}"
        return f"the patient falls between the rules of {self.rule} ({'; '.join(self.bands)})"


def schedule_of(case: Case, name: str) -> Schedule:
    """Return the schedule ``name`` of parameters.yaml."""
    table = case.parameters.table(f"schedule.{name}")
    return Schedule(name, tuple(map(float, table["ends_h"])), tuple(map(float, table["shares"])))


def by_rule(case: Case, person: Person, name: str, facts: Facts) -> Volume | NoVolume:
    """Return what the starting rule ``name`` gives for the patient."""
    bands: Sequence[Band] = case.parameters[f"starting_rate.{name}"].value
    picked = pick(bands, facts)
    if picked.band is None:
        said = tuple(_band_said(band) for band in bands)
        return NoVolume(name, picked.missing, picked.between, said)
    return _volume(case, person, name, picked.band)


def _band_said(band: Band) -> str:
    if "crystalloid" in band:
        return f"{band['who']}: {number_text(float(band['crystalloid']), COEFFICIENT_PLACES)} mL/kg/%"
    return str(band["who"])


def by_coefficient(case: Case, person: Person, name: str, coefficient: float) -> Volume | NoVolume:
    """Return the volume of a coefficient that stands in an order, in halves from the burn."""
    lacking = lacking_of(person)
    if lacking:
        return NoVolume(name, lacking)
    band: Band = {"who": "", "crystalloid": coefficient}
    return _volume(case, person, name, band)


def lacking_of(person: Person) -> tuple[str, ...]:
    """Return what a rule by weight and area lacks."""
    lacking = () if person.weight else ("weight",)
    return lacking if person.pct is not None else (*lacking, person.pct_missing)


def _volume(case: Case, person: Person, name: str, band: Band) -> Volume | NoVolume:
    lacking = lacking_of(person)
    if person.weight is None or person.pct is None:
        return NoVolume(name, lacking)
    if band.get("rule_of_ten"):
        return _rule_of_ten(case, person, name, band)
    kg, pct = person.weight.kg, person.pct
    size = f"{kg_text(kg)} x {number_text(pct, PCT_PLACES)} %"
    crystalloid, colloid, sums, formulas = 0.0, 0.0, [], []
    sources = _sources(case, name)
    for kind in ("crystalloid", "colloid"):
        if kind in band:
            made = formula.crystalloid_24h_ml(kg, pct, float(band[kind]))
            crystalloid, colloid = (made, colloid) if kind == "crystalloid" else (crystalloid, made)
            sums.append(
                f"{kind} {number_text(float(band[kind]), COEFFICIENT_PLACES)} mL x {size} = {ml(made)}"
            )
            formulas.append(f"{kind} mL/kg/% x weight x burned area")
    if "per_kg_ml" in band:
        made = formula.by_mass_24h_ml(kg, float(band["per_kg_ml"]))
        crystalloid += made
        sums.append(f"{number_text(float(band['per_kg_ml']))} mL x {kg_text(kg)} = {ml(made)}")
        formulas.append("mL/kg x weight")
    if "per_body_m2_ml" in band:
        body = surface_m2(case, kg)
        if body is None:
            return NoVolume(name, ("height",))
        burned = formula.burned_surface_m2(body.m2, pct)
        per_burned = float(band.get("per_burned_m2_ml", 0))
        made = formula.area_based_24h_ml(burned, body.m2, per_burned, float(band["per_body_m2_ml"]))
        crystalloid += made
        sums.append(
            f"{number_text(per_burned)} mL x {number_text(burned, SURFACE_PLACES)} m2 burned + "
            f"{number_text(float(band['per_body_m2_ml']))} mL x {number_text(body.m2, SURFACE_PLACES)} m2 = {ml(made)}"
        )
        formulas.append("mL/m2 burned + mL/m2 of body surface")
        sources = (*sources, *body.sources)
    water = float(band.get("water_ml", 0))
    cautions = [f"The formula adds {ml(water)} of glucose water in 24 h."] if water else []
    if band.get("holds_maintenance"):
        cautions.append("The formula holds maintenance already; none is added.")
    return Volume(
        rule=name,
        who=str(band["who"]),
        formula=f"{name}: {' + '.join(formulas)}",
        sum="; ".join(sums),
        schedule=schedule_of(case, str(band.get("schedule", HALVES))),
        sources=(*sources, case.parameters.source_of(f"schedule.{band.get('schedule', HALVES)}")),
        crystalloid_ml=crystalloid,
        colloid_ml=colloid,
        water_ml=water,
        coefficient=float(band["crystalloid"]) if set(band) - _conditions(band) == set(SIMPLE) else None,
        holds_maintenance=bool(band.get("holds_maintenance")),
        cautions=tuple(cautions),
    )


VOLUME_KEYS = ("crystalloid", "colloid", "water_ml", "per_kg_ml", "per_body_m2_ml", "per_burned_m2_ml")


def _conditions(band: Band) -> set[str]:
    return {key for key in band if key not in (*VOLUME_KEYS, "who", "schedule", "holds_maintenance")}


def _sources(case: Case, name: str) -> tuple[Source, ...]:
    identifier = f"starting_rate.{name}"
    return (case.parameters.source_of(identifier),) if identifier in case.parameters else ()


def _rule_of_ten(case: Case, person: Person, name: str, band: Band) -> Volume | NoVolume:
    if person.weight is None or person.pct is None:
        return NoVolume(name, lacking_of(person))
    table = {key: float(value) for key, value in case.parameters.table("rule_of_ten").items()}
    rounding = case.chosen("rule_of_ten_rounding").name
    step = case.parameters.number(f"rule_of_ten_rounding.{rounding}")
    rate = formula.rule_of_ten_ml_h(person.weight.kg, person.pct, round_to_pct=step, **table)
    cautions = [f"The Rule of Ten gives a starting rate, not a total; burn rounding: {rounding}."]
    if (person.weight.kg - table["to_kg"]) % table["step_kg"] and person.weight.kg > table["to_kg"]:
        cautions.append("A part of a weight step is not defined by the source; whole steps are counted.")
    return Volume(
        rule=name,
        who=str(band["who"]),
        formula="Rule of Ten: burned area x mL/h for each % + mL/h for each whole step of weight",
        sum=(
            f"{number_text(person.pct, PCT_PLACES)} % ({rounding}), {kg_text(person.weight.kg)}: {ml_h(rate)}"
        ),
        schedule=schedule_of(case, HALVES),
        sources=(
            *_sources(case, name),
            case.parameters.source_of("rule_of_ten"),
            case.parameters.source_of(f"rule_of_ten_rounding.{rounding}"),
        ),
        rate_ml_h=rate,
        cautions=tuple(cautions),
    )


def published(case: Case, person: Person, facts: Facts) -> tuple[Volume, ...]:
    """Return what the published coefficients give for this patient, lowest first; rules that do not apply left out."""
    found = [by_rule(case, person, name, facts) for name in RANGE_RULES]
    volumes = [one for one in found if isinstance(one, Volume) and one.total_ml is not None]
    return tuple(sorted(volumes, key=lambda one: (one.total_ml or 0.0, RANGE_RULES.index(one.rule))))
