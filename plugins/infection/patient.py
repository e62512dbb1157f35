"""What decides which list fits this patient: age, goal of care, diabetes, ventilation, burned area."""

from __future__ import annotations

from handoff.plugin import Case


def is_child(case: Case) -> bool:
    """Return whether the patient is known to be under the age of the adult lists."""
    age = case.state.age_at(case.now)
    return age is not None and age.years < case.parameters.number("child_under")


def has_diabetes(case: Case) -> bool | None:
    """Return whether diabetes is recorded; None where the conditions are not recorded."""
    conditions = case.state.texts(case.state.patient.get("conditions"))
    return "diabetes" in conditions if conditions else None


def is_ventilated(case: Case) -> bool:
    """Return whether the events say that a tube was placed and not removed since."""
    placed = [row.at for row in case.state.events("intubation")]
    out = [row.at for row in case.state.events("extubation")]
    return bool(placed) and (not out or max(placed) > max(out))


def counted_pct(case: Case) -> float | None:
    """Return the counted burn in %TBSA, or None."""
    pct = case.findings["area"].values.get("counted_pct")
    return float(pct) if isinstance(pct, (int, float)) else None


def hours_since_burn(case: Case) -> float | None:
    """Return the longest time that can have passed since the burn, in h; None where it is not recorded."""
    burn = case.state.burn_time
    return None if burn is None else case.hours_between(burn.earliest, case.now)
