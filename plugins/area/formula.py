"""Arithmetic of burned area: plain numbers in, plain numbers out, nothing rounded."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping

from handoff.plugin import FormulaInputError


def _finite(name: str, value: float, low: float = 0, high: float = math.inf) -> float:
    if not math.isfinite(value) or not low <= value <= high:
        raise FormulaInputError(f"{name} is {value}, outside {low} to {high}")
    return value


def region_pct(region_size_pct: float, of_region_pct: float) -> float:
    """Return the burned part of a region in % of body surface.

    Args:
        region_size_pct: The whole region, in % of body surface.
        of_region_pct: The burned share of that region, 0 to 100 %.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: definition.
    """
    size = _finite("region_size_pct", region_size_pct)
    return size * _finite("of_region_pct", of_region_pct, 0, 100) / 100


def palms_pct(palms: float, palm_pct: float) -> float:
    """Return an area counted in the patient's own palms in % of body surface.

    Args:
        palms: Count of palms with fingers closed; parts of a palm are allowed.
        palm_pct: One palm with fingers, in % of body surface.

    Raises:
        FormulaInputError: An argument is not finite or below 0.

    Source: ``palm.*`` in parameters.yaml.
    """
    return _finite("palms", palms) * _finite("palm_pct", palm_pct)


def total_pct(parts_pct: Iterable[float]) -> float:
    """Return the sum of areas, each in % of body surface, without the error of repeated rounding.

    Raises:
        FormulaInputError: A part is not finite or below 0.

    Source: definition.
    """
    return math.fsum(_finite("a part", part) for part in parts_pct)


def at_most_whole_body_pct(total: float) -> float:
    """Return ``total`` in % of body surface, held at 100 for tables whose printed regions exceed it.

    Raises:
        FormulaInputError: ``total`` is not finite or below 0.

    Source: definition.
    """
    return min(_finite("total", total), 100)


def face_pct(whole_pct: float, face_share_pct: float) -> float:
    """Return one face (front or back) of a region in % of body surface.

    Args:
        whole_pct: The whole region, in % of body surface.
        face_share_pct: The share of that face, 0 to 100 %.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``front_share`` in parameters.yaml.
    """
    return _finite("whole_pct", whole_pct) * _finite("face_share_pct", face_share_pct, 0, 100) / 100


def both_faces_pct(face: float) -> float:
    """Return a region from one of its two equal faces, both in % of body surface.

    Raises:
        FormulaInputError: ``face`` is not finite or below 0.

    Source: definition; the Lund-Browder chart prints its age rows as one face.
    """
    return _finite("face", face) + face


def head_at_age_pct(head_pct: float, age_years: float, from_age_years: float, head_per_year: float) -> float:
    """Return head and neck of the stepped rule of nines for a child, in % of body surface.

    Args:
        head_pct: Head and neck before the first step, in % of body surface.
        age_years: Age in completed years.
        from_age_years: Completed years at which the first step has not yet been taken.
        head_per_year: Taken off for every further year, in % of body surface.

    Raises:
        FormulaInputError: An argument is not finite or below 0.

    Source: ``nines.*.steps`` in parameters.yaml.
    """
    steps = max(_finite("age_years", age_years) - _finite("from_age_years", from_age_years), 0)
    return _finite("head at this age", head_pct - steps * _finite("head_per_year", head_per_year))


def leg_at_age_pct(
    each_leg_pct: float, age_years: float, from_age_years: float, each_leg_per_year: float
) -> float:
    """Return one leg of the stepped rule of nines for a child, in % of body surface.

    Args:
        each_leg_pct: One leg before the first step, in % of body surface.
        age_years: Age in completed years.
        from_age_years: Completed years at which the first step has not yet been taken.
        each_leg_per_year: Added to each leg for every further year, in % of body surface.

    Raises:
        FormulaInputError: An argument is not finite or below 0.

    Source: ``nines.*.steps`` in parameters.yaml.
    """
    steps = max(_finite("age_years", age_years) - _finite("from_age_years", from_age_years), 0)
    return _finite("each_leg_pct", each_leg_pct) + steps * _finite("each_leg_per_year", each_leg_per_year)


def column_for_age(age_years: float, starts_years: Mapping[str, float], adult_from_years: float) -> str:
    """Return the name of the age column that holds for ``age_years`` (completed years).

    Args:
        age_years: Age in completed years.
        starts_years: The age in years at which each column begins.
        adult_from_years: The age in years from which the column ``adult`` holds.

    Raises:
        FormulaInputError: The age is not finite, below 0, or before every column.

    Source: ``lund_browder.columns.*`` and ``adult_from.*`` in parameters.yaml.
    """
    age = _finite("age_years", age_years)
    if age >= adult_from_years:
        return "adult"
    begun = [(start, column) for column, start in starts_years.items() if start <= age]
    if not begun:
        raise FormulaInputError(f"no column begins at or before {age} years")
    return max(begun)[1]


def between_columns_pct(
    age_years: float, younger_years: float, younger_pct: float, older_years: float, older_pct: float
) -> float:
    """Return a region between two age columns by a straight line, in % of body surface.

    A calculated convenience, not a published method: the chart is a table of steps.

    Args:
        age_years: Age in years, between the two columns.
        younger_years: Age of the younger column in years.
        younger_pct: Its value in % of body surface.
        older_years: Age of the older column in years, above the younger.
        older_pct: Its value in % of body surface.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: none; the values are those of ``lund_browder.by_age``.
    """
    span = _finite("older_years", older_years) - _finite("younger_years", younger_years)
    if span <= 0:
        raise FormulaInputError("the older column must lie above the younger")
    along = _finite("age_years", age_years, younger_years, older_years) - younger_years
    low, high = _finite("younger_pct", younger_pct), _finite("older_pct", older_pct)
    return low + (high - low) * along / span


def difference_points(first_pct: float, second_pct: float) -> float:
    """Return the second area less the first, in points of % of body surface; may be negative.

    Raises:
        FormulaInputError: An argument is not finite or below 0.

    Source: definition.
    """
    return _finite("second_pct", second_pct) - _finite("first_pct", first_pct)


def by_other_table_pct(area_pct: float, own_region_pct: float, other_region_pct: float) -> float:
    """Return an area as another table would size it, in % of body surface.

    The burned share of the smallest region that both tables hold is kept.

    Args:
        area_pct: The area by its own table, in % of body surface.
        own_region_pct: That region in the table it was charted by, above 0.
        other_region_pct: The same region in the other table.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: definition.
    """
    if _finite("own_region_pct", own_region_pct) == 0:
        raise FormulaInputError("the region has no size in its own table")
    return _finite("area_pct", area_pct) * _finite("other_region_pct", other_region_pct) / own_region_pct


def revised_baux_points(age_years: float, burned_area_pct: float, inhalation_points: float) -> float:
    """Return the revised Baux sum in points: age, burned area and the points for inhalation injury.

    Args:
        age_years: Age in completed years.
        burned_area_pct: Counted burn in % of body surface, 0 to 100.
        inhalation_points: Points for inhalation injury, 0 where there is none.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``revised_baux.inhalation`` in parameters.yaml.
    """
    area = _finite("burned_area_pct", burned_area_pct, 0, 100)
    return _finite("age_years", age_years) + area + _finite("inhalation_points", inhalation_points)


def band_points(value: float, width: float, at_most: float) -> float:
    """Return one point for each begun band of ``width``, none for 0, at most ``at_most`` points.

    Args:
        value: Burned area in % of body surface, or another measure from 0.
        width: Width of one band, above 0.
        at_most: The most points that the bands give.

    Raises:
        FormulaInputError: An argument is not finite or outside its range.

    Source: ``absi.bands`` in parameters.yaml; a fraction counts in the band that it has begun.
    """
    if _finite("width", width) == 0:
        raise FormulaInputError("a band has no width")
    return min(math.ceil(_finite("value", value) / width), _finite("at_most", at_most))


def absi_points(
    age_points: float, area_points: float, sex_points: float, inhalation_points: float, depth_points: float
) -> float:
    """Return the abbreviated burn severity index in points, as the sum of its five parts.

    Args:
        age_points: Points for age.
        area_points: Points for burned area.
        sex_points: Points for sex.
        inhalation_points: Points for inhalation injury.
        depth_points: Points for any full thickness burn.

    Raises:
        FormulaInputError: A part is not finite or below 0.

    Source: ``absi.*`` in parameters.yaml.
    """
    return total_pct((age_points, area_points, sex_points, inhalation_points, depth_points))
