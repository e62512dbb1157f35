"""A weight against the growth tables: far outside it must be confirmed, with what slip it would fit."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from msgspec import Struct

from handoff.plugin import (
    Age,
    Case,
    List,
    Map,
    Problem,
    Severity,
    amount,
    joined,
    number_text,
    words,
)

from . import formula
from .weights import differing, height_cm, kg_text

KG_A_POUND = 0.45359237
TEN = 10
MONTHS_A_YEAR = 12
KINDS_OF_WEIGHT = ("before burn", "today", "ideal")
SEXES = ("female", "male")
EDITIONS = ("who-2006", "who-2007")
CURE = "check it; if it is right, add confirmed: yes beside it"


class Range(Struct, frozen=True):
    """The weights that a table holds for this patient, in kg, and how the table is called."""

    low_kg: float
    high_kg: float
    table: str

    def holds(self, kg: float) -> bool:
        """Return whether ``kg`` lies inside."""
        return self.low_kg <= kg <= self.high_kg


def check_weights(case: Case) -> Iterator[Problem]:
    """Yield a warning for each weight that is not confirmed and lies far outside the tables or differs."""
    yield from _differing(case)
    node = case.state.patient.get("weights")
    if not isinstance(node, List):
        return
    for index, entry in enumerate(node):
        if not isinstance(entry, Map) or "struck" in entry or words(entry.get("confirmed")) == "yes":
            continue
        kg = amount(entry.get("value"), "kg")
        burn = case.state.burn_time
        expected = expected_kg(case, case.when(entry.get("at")) or (burn.earliest if burn else case.now))
        if kg is None or expected is None or expected.holds(kg):
            continue
        yield Problem(
            entry["value"],
            ("patient", "weights", index, "value"),
            f"{words(entry.get('value'))} is far outside {expected.table} "
            f"({number_text(expected.low_kg, 1)} to {kg_text(expected.high_kg)}){_fits(kg, expected)}",
            CURE if height_cm(case) is not None else f"{CURE}, and add the height",
            Severity.UNUSUAL,
        )


def _differing(case: Case) -> Iterator[Problem]:
    """Two weights of one kind that differ: one of them is used in every figure, so which is said and asked."""
    node = case.state.patient.get("weights")
    for kind in KINDS_OF_WEIGHT:
        used = case.state.weight(kind)
        for other in differing(case, used) if used is not None else ():
            if used is None or not isinstance(node, List) or words(other.node.get("confirmed")) == "yes":
                continue
            index = next(place for place, entry in enumerate(node) if entry is other.node)
            yield Problem(
                other.node["value"],
                ("patient", "weights", index, "value"),
                f"{words(other.node['value'])} differs from the other weight {kind} on line {used.node.line}: "
                f"{words(used.node['value'])} ({used.known}), which is used",
                "strike out the one that is wrong; if both were recorded so, add confirmed: yes beside this one",
                Severity.UNUSUAL,
            )


def _fits(kg: float, expected: Range) -> str:
    """What slip the figure would fit: pounds taken for kilograms, or ten times off."""
    fits = []
    if expected.holds(kg * KG_A_POUND):
        fits.append(f"pounds taken for kilograms ({number_text(kg)} lb is {kg_text(kg * KG_A_POUND)})")
    if expected.holds(kg / KG_A_POUND):
        fits.append(f"a weight turned from pounds twice (before that {kg_text(kg / KG_A_POUND)})")
    if expected.holds(kg / TEN):
        fits.append(f"a figure ten times too high ({kg_text(kg / TEN)})")
    if expected.holds(kg * TEN):
        fits.append(f"a figure ten times too low ({kg_text(kg * TEN)})")
    return f"; it would fit {joined(fits, 'or')}" if fits else ""


def expected_kg(case: Case, moment: datetime) -> Range | None:
    """Return the weights that the tables hold at ``moment``; None without an age.

    The sex that is not known takes both tables, the estimated age its whole year.
    """
    age = case.state.age_at(moment)
    if age is None or age.years < 0:
        return None
    found = [_range(case, sex, months) for sex in _sexes(case) for months in _months(age)]
    low, high = min(one.low_kg for one in found), max(one.high_kg for one in found)
    return Range(low, high, found[0].table)


def _sexes(case: Case) -> tuple[str, ...]:
    sex = words(case.state.patient.get("sex"))
    return (sex,) if sex in SEXES else SEXES


def _months(age: Age) -> tuple[float, ...]:
    if age.months is not None:
        return (float(age.months),)
    return (float(age.years * MONTHS_A_YEAR), float((age.years + 1) * MONTHS_A_YEAR))


def _range(case: Case, sex: str, months: float) -> Range:
    height = height_cm(case)
    if months >= case.parameters.number("growth.adult_from"):
        return _adult(case, height)
    if height is not None and _reaches(case, "bmi_for_age", sex, months):
        low, high = _limits(case, "bmi_for_age", sex, months)
        square = 1 / formula.body_mass_index(1, height)
        return Range(
            low * square, high * square, f"BMI for age at {_said(height)} ({_edition(case, months)})"
        )
    if _reaches(case, "weight_for_age", sex, months):
        low, high = _limits(case, "weight_for_age", sex, months)
        return Range(low, high, f"weight for age ({_edition(case, months)})")
    low, high = _limits(case, "bmi_for_age", sex, months)
    _, median, _ = _lms(case, "height_for_age", sex, months)
    square = 1 / formula.body_mass_index(1, median)
    return Range(low * square, high * square, f"BMI and height for age ({_edition(case, months)})")


def _edition(case: Case, months: float) -> str:
    """The published table by name and edition."""
    if months <= case.parameters.number("growth.first_table_to"):
        return "WHO Child Growth Standards, 2006"
    return "WHO growth reference, 2007"


def _said(height: float) -> str:
    return f"{number_text(height)} cm"


def _adult(case: Case, height: float | None) -> Range:
    if height is None:
        table = case.parameters.table("adult_weight.kg")
        return Range(float(table["low"]), float(table["high"]), "what is usual in an adult")
    table = case.parameters.table("adult_weight.index")
    square = 1 / formula.body_mass_index(1, height)
    low, high = float(table["low"]) * square, float(table["high"]) * square
    return Range(low, high, f"what is usual in an adult of {_said(height)}")


def _reaches(case: Case, name: str, sex: str, months: float) -> bool:
    ages = [float(age) for edition in EDITIONS for age in _ages(case, name, edition, sex)]
    return bool(ages) and min(ages) <= months <= max(ages)


def _ages(case: Case, name: str, edition: str, sex: str) -> list[float]:
    identifier = f"growth.{name}.{edition}.{sex}"
    return list(case.parameters.table(identifier)["age_months"]) if identifier in case.parameters else []


def _limits(case: Case, name: str, sex: str, months: float) -> tuple[float, float]:
    """The measures at the outermost lines of the table."""
    edges = case.parameters.table("growth.limits")
    lms = _lms(case, name, sex, months)
    return formula.at_z_score(float(edges["low"]), *lms), formula.at_z_score(float(edges["high"]), *lms)


def _lms(case: Case, name: str, sex: str, months: float) -> tuple[float, float, float]:
    """L, M and S at an age, on a straight line between the ages that are kept."""
    nodes: list[tuple[float, tuple[float, float, float]]] = []
    for edition in EDITIONS:
        identifier = f"growth.{name}.{edition}.{sex}"
        if identifier in case.parameters:
            table = case.parameters.table(identifier)
            rows = zip(table["l"], table["m"], table["s"], strict=True)
            nodes += list(zip(map(float, table["age_months"]), rows, strict=True))
    nodes.sort()
    before = [node for node in nodes if node[0] <= months] or nodes[:1]
    after = [node for node in nodes if node[0] >= months] or nodes[-1:]
    (low, first), (high, second) = before[-1], after[0]
    part = (months - low) / (high - low) if high > low else 0.0
    mixed = [a + (b - a) * part for a, b in zip(first, second, strict=True)]
    return mixed[0], mixed[1], mixed[2]
