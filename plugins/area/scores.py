"""Revised Baux and abbreviated burn severity index, as sums, only where the policy asks for them."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Part, Source, System, Working, joined, number_text, words

from . import formula
from .assessment import Assessment
from .criteria import Facts

CAUTION = "a sum of points, not a chance of death; accuracy falls at high scores and children differ"


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
    fact = facts["inhalation_signs"]
    if fact.value is False:
        return False, "no airway sign charted"
    return None, fact.shown or fact.missing


def _both(without: float, with_it: float, why: str) -> str:
    both = f"{number_text(without, 1)} without and {number_text(with_it, 1)} with inhalation injury"
    return f"{both} ({why}; signs are not a diagnosis)"


def _baux(case: Case, facts: Facts, assessment: Assessment | None) -> Item:
    label, key = "Revised Baux sum", "area.revised_baux"
    sources = (case.parameters.source_of("revised_baux.inhalation"),)
    missing = [facts[name].missing for name in ("age_years", "counted_pct") if facts[name].value is None]
    if missing:
        return _not_computed(key, label, joined(missing), assessment, sources)
    age, area = float(facts["age_years"].value or 0), float(facts["counted_pct"].value or 0)
    points = case.parameters.number("revised_baux.inhalation")
    without = formula.revised_baux_points(age, area, 0)
    with_it = formula.revised_baux_points(age, area, points)
    sum_text = f"age {number_text(age)} + area {number_text(area, 2)}"
    inhaled, why = _inhalation(facts)
    if inhaled is None:
        shown = _both(without, with_it, why)
        return _sum(
            key,
            label,
            None,
            shown,
            f"{sum_text}; + {number_text(points)} with inhalation injury",
            assessment,
            sources,
        )
    return _sum(
        key,
        label,
        without,
        f"{number_text(without, 1)} points ({why})",
        f"{sum_text} = {number_text(without, 2)}",
        assessment,
        sources,
    )


def _absi(case: Case, facts: Facts, assessment: Assessment | None) -> Item:
    label, key = "Abbreviated burn severity index", "area.absi"
    sources = tuple(case.parameters.source_of(name) for name in ("absi.bands", "absi.points"))
    sex = words(case.state.patient.get("sex"))
    missing = [
        facts[name].missing for name in ("age_years", "counted_pct", "full_pct") if facts[name].value is None
    ]
    missing += ["sex not recorded as male or female"] if sex not in ("male", "female") else []
    if missing:
        return _not_computed(key, label, joined(list(dict.fromkeys(missing))), assessment, sources)
    bands, points = case.parameters.table("absi.bands"), case.parameters.table("absi.points")
    age, area = float(facts["age_years"].value or 0), float(facts["counted_pct"].value or 0)
    # The youngest band begins at birth, so an age of 0 scores as the first begun band.
    age_points = max(formula.band_points(age, bands["years_a_point"], bands["age_points_at_most"]), 1)
    area_points = formula.band_points(area, bands["pct_a_point"], bands["area_points_at_most"])
    sex_points = points["female"] if sex == "female" else 0
    depth_points = points["full_thickness"] if facts["full_pct"].value else 0
    inhaled, why = _inhalation(facts)
    parts = f"age {number_text(age_points)} + area {number_text(area_points)} + sex {sex_points} + depth {depth_points}"
    without = formula.absi_points(age_points, area_points, sex_points, 0, depth_points)
    if inhaled is None:
        with_it = formula.absi_points(age_points, area_points, sex_points, points["inhalation"], depth_points)
        shown = _both(without, with_it, why)
        return _sum(
            key,
            label,
            None,
            shown,
            f"{parts}; + {points['inhalation']} with inhalation injury",
            assessment,
            sources,
        )
    return _sum(
        key,
        label,
        without,
        f"{number_text(without)} points ({why})",
        f"{parts} = {number_text(without)}",
        assessment,
        sources,
    )


def _sum(
    key: str,
    label: str,
    value: float | None,
    shown: str,
    sum_text: str,
    assessment: Assessment | None,
    sources: tuple[Source, ...],
) -> Item:
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


def _not_computed(
    key: str, label: str, why: str, assessment: Assessment | None, sources: tuple[Source, ...]
) -> Item:
    return _sum(key, label, None, f"not computed: {why}", f"not computed: {why}", assessment, sources)
