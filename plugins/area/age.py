"""The age at the time of the burn, which every table of regions goes by."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Input, plural

MONTHS_A_YEAR = 12


class AgeAtBurn(Struct, frozen=True):
    """Age in completed years at the burn; ``exact_years`` counts completed months where they are known."""

    years: int
    exact_years: float
    shown: str
    inputs: tuple[Input, ...]
    caution: str = ""


def age_at_burn(case: Case) -> AgeAtBurn | None:
    """Return the age at the time of the burn; at the first assessment where that time is not recorded.

    None where neither a birth date nor an estimated age is recorded.
    """
    moment, caution = _moment(case)
    age = case.state.age_at(moment) if moment is not None else None
    if age is None or age.years < 0:
        return None
    node = case.state.patient.get("born") or case.state.patient.get("estimated_age")
    inputs = [case.input("born" if case.state.patient.get("born") else "estimated age", node)]
    burn = case.state.burn_time
    if burn is not None:
        inputs.append(case.input("time of the burn", burn.node, case.clock.day_and_time(burn.earliest)))
    exact = age.years if age.months is None else age.months / MONTHS_A_YEAR
    return AgeAtBurn(age.years, exact, plural(age.years, "year"), tuple(inputs), caution)


def _moment(case: Case) -> tuple[datetime | None, str]:
    burn = case.state.burn_time
    if burn is not None:
        first, last = case.state.age_at(burn.earliest), case.state.age_at(burn.latest)
        birthday = first is not None and last is not None and first.years != last.years
        return burn.earliest, "a birthday falls within the uncertain time of the burn" if birthday else ""
    rows = case.state.dated(case.block)
    if rows:
        return rows[0].at, "time of the burn not recorded: age taken at the first assessment"
    return None, ""
