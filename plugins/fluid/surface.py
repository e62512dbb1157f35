"""Body surface by the formula that the policy named."""

from __future__ import annotations

from msgspec import Struct

from handoff.plugin import Case, Source

from . import formula
from .weights import height_cm


class Surface(Struct, frozen=True):
    """Body surface in m2, the formula by name, and its source."""

    m2: float
    name: str
    sources: tuple[Source, ...]


def surface_m2(case: Case, mass_kg: float) -> Surface | None:
    """Return the body surface; None where the height is not recorded."""
    height = height_cm(case)
    if height is None:
        return None
    name = case.chosen("surface").name
    table = {key: float(value) for key, value in case.parameters.table(f"surface.{name}").items()}
    by_root = "divisor" in table
    m2 = (
        formula.mosteller_m2(height, mass_kg, **table)
        if by_root
        else formula.power_surface_m2(height, mass_kg, **table)
    )
    return Surface(m2, name, (case.parameters.source_of(f"surface.{name}"),))
