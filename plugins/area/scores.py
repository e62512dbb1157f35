"""Revised Baux and abbreviated burn severity index, as sums, only where the policy asks for them."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Part, Source, System, Working, joined, number_text, words

from . import formula
from .assessment import PLACES, Assessment
from .criteria import Facts
from .totals import SHOWN_PLACES

CAUTION = "a sum of points, not a chance of death; accuracy falls at high scores and children differ"
BAUX = ("area.revised_baux", "Revised Baux sum")
ABSI = ("area.absi", "Abbreviated burn severity index")


def items(case: Case, facts: Facts, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return the sums that the policy asks for; none by default."""
    chosen = case.chosen("scores").name
    found = []
    if "baux" in chosen:
        found.append(_baux(case, facts, assessment))
    if "absi" in chosen:
        found.append(_absi(case, facts, assessment))
    return tuple(found)


def _inhalation(facts: Facts) -> tuple[bool | None, str]:
    """Signs are not a diagnosis: without them there is none to count, with them it is left open."""
    seen, signs = facts["bronchoscopy"], facts["inhalation_signs"]
    if isinstance(seen.value, bool):
        return seen.value, seen.shown
    if signs.value is False:
        return False, signs.shown
    return None, signs.shown or signs.missing


def _missing(facts: Facts, *names: str) -> list[str]:
    return [facts[name].missing for name in names if facts[name].value is None]


def _number(facts: Facts, name: str) -> float:
    return float(facts[name].value or 0)


def _baux(case: Case, facts: Facts, assessment: Assessment | None) -> Item:
    sources = (case.parameters.source_of("revised_baux.inhalation"),)
    missing = _missing(facts, "age_years", "counted_pct")
    if missing:
        return _not_computed(BAUX, missing, assessment, sources)
    age, area = _number(facts, "age_years"), _number(facts, "counted_pct")
    points = case.parameters.number("revised_baux.inhalation")
    sums = [formula.revised_baux_points(age, area, more) for more in (0, points)]
    parts = f"age {number_text(age)} + area {number_text(area, PLACES)}"
    return _scored(BAUX, parts, sums, points, facts, assessment, sources)


def _absi(case: Case, facts: Facts, assessment: Assessment | None) -> Item:
    sources = tuple(case.parameters.source_of(name) for name in ("absi.bands", "absi.points"))
    sex = words(case.state.patient.get("sex"))
    missing = _missing(facts, "age_years", "counted_pct", "full_pct")
    missing += ["sex not recorded as male or female"] if sex not in ("male", "female") else []
    if missing:
        return _not_computed(ABSI, missing, assessment, sources)
    bands, points = case.parameters.table("absi.bands"), case.parameters.table("absi.points")
    # The youngest band begins at birth, so an age of 0 scores as the first begun band.
    years = formula.band_points(
        _number(facts, "age_years"), bands["years_a_point"], bands["age_points_at_most"]
    )
    age = max(years, 1)
    area = formula.band_points(
        _number(facts, "counted_pct"), bands["pct_a_point"], bands["area_points_at_most"]
    )
    female = points["female"] if sex == "female" else 0
    depth = points["full_thickness"] if facts["full_pct"].value else 0
    sums = [formula.absi_points(age, area, female, more, depth) for more in (0, points["inhalation"])]
    parts = f"age {number_text(age)} + area {number_text(area)} + sex {female} + full thickness {depth}"
    return _scored(ABSI, parts, sums, points["inhalation"], facts, assessment, sources)


def _scored(
    named: tuple[str, str],
    parts: str,
    sums: list[float],
    inhalation_points: float,
    facts: Facts,
    assessment: Assessment | None,
    sources: tuple[Source, ...],
) -> Item:
    inhaled, why = _inhalation(facts)
    without, with_it = (number_text(value, SHOWN_PLACES) for value in sums)
    more = number_text(inhalation_points)
    if inhaled is None:
        shown = f"{without} without and {with_it} with inhalation injury ({why}; signs are not a diagnosis)"
        return _item(named, None, shown, f"{parts} = {without}; + {more} = {with_it}", assessment, sources)
    value = sums[1] if inhaled else sums[0]
    added = f"{parts} + inhalation {more if inhaled else 0} = {number_text(value, PLACES)}"
    return _item(
        named, value, f"{with_it if inhaled else without} points ({why})", added, assessment, sources
    )


def _not_computed(
    named: tuple[str, str], missing: list[str], assessment: Assessment | None, sources: tuple[Source, ...]
) -> Item:
    why = f"not computed: {joined(list(dict.fromkeys(missing)))}"
    return _item(named, None, why, why, assessment, sources)


def _item(
    named: tuple[str, str],
    value: float | None,
    shown: str,
    sum_text: str,
    assessment: Assessment | None,
    sources: tuple[Source, ...],
) -> Item:
    key, label = named
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.BURN,
        value=value,
        unit="points" if value is not None else "",
        shown=shown,
        as_of=assessment.at if assessment else None,
        flag=Flag.NONE if value is not None else Flag.NOT_RECORDED,
        working=Working(formula=label, sum=sum_text),
        sources=sources,
        cautions=(CAUTION,),
        line=assessment.line if assessment else 0,
    )
