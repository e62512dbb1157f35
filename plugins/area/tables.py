"""The table of regions that a method uses for one patient: which column, which variant, and its sources."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from msgspec import Struct

from handoff.plugin import Case, Chosen, Source, number_text

from . import formula
from .age import AgeAtBurn
from .regions import FACES, PARTS, SIDES, parts_of

LUND_BROWDER = "lund-browder"
NINES = "rule of nines"
BUILD_VARIANTS = {
    "rule of fives": "rule-of-fives",
    "rule of eights": "rule-of-eights",
    "obesity shares": "obesity-shares",
}
WITHOUT_REGIONS = ("palm", "direct")
METHODS = (LUND_BROWDER, NINES, *BUILD_VARIANTS, *WITHOUT_REGIONS)


class NoTableError(Exception):
    """A method has no table for this patient; the message says what is missing."""


class RegionTable(Struct, frozen=True):
    """Regions of the body in % of body surface, front and back, for one patient."""

    name: str
    cells: Mapping[str, tuple[float, float]]
    trunk_holds_buttocks: bool
    halved: tuple[str, ...] = ()
    sources: tuple[Source, ...] = ()
    halves_source: Source | None = None
    cautions: tuple[str, ...] = ()

    def size_pct(self, region: str, face: str = "") -> float | None:
        """Return the size of ``region``, one face or both, in % of body surface; None if not in the table."""
        if region == "whole body":
            return formula.total_pct(self._of(cell, face) for cell in self.cells.values())
        if region in self.cells:
            return self._of(self.cells[region], face)
        parts = parts_of(region, trunk_holds_buttocks=False)
        sizes = [self.size_pct(part, face) for part in parts]
        known = [size for size in sizes if size is not None]
        return formula.total_pct(known) if parts and len(known) == len(sizes) else None

    @property
    def regions(self) -> tuple[str, ...]:
        """Every region that the table can size, its own and those made of them."""
        made = [name for name in PARTS if name not in self.cells and self.size_pct(name) is not None]
        return (*self.cells, *made)

    def is_halved(self, region: str, face: str) -> bool:
        """Return whether the size of that face rests on halving a region that was printed whole."""
        parts = parts_of(region, trunk_holds_buttocks=False)
        return bool(face) and (region in self.halved or any(self.is_halved(part, face) for part in parts))

    def only_face(self, region: str) -> str:
        """Return the face that a one-faced region (buttock, genitalia, chest) has; empty for two faces."""
        sizes = [self.size_pct(region, face) for face in FACES]
        return FACES[1] if sizes[0] == 0 and sizes[1] else FACES[0] if sizes[1] == 0 and sizes[0] else ""

    @staticmethod
    def _of(cell: tuple[float, float], face: str) -> float:
        return formula.total_pct(cell) if not face else cell[FACES.index(face)]


def _sided(name: str) -> tuple[str, ...]:
    part = name.removeprefix("each ")
    return tuple(f"{side} {part}" for side in SIDES) if part != name else (name,)


def _cells(case: Case, written: Mapping[str, Any]) -> tuple[dict[str, tuple[float, float]], tuple[str, ...]]:
    share = case.parameters.number("front_share")
    cells: dict[str, tuple[float, float]] = {}
    halved: list[str] = []
    for name, value in written.items():
        if isinstance(value, (int, float)):
            if value == 0:
                continue
            front = formula.face_pct(value, share)
            cell = (front, formula.difference_points(front, value))
            halved += _sided(name)
        else:
            cell = (float(value[0]), float(value[1]))
        cells |= dict.fromkeys(_sided(name), cell)
    return cells, tuple(halved)


def table_for(case: Case, method: str, age: AgeAtBurn | None) -> RegionTable:
    """Return the table of regions of ``method`` for this patient.

    Raises:
        NoTableError: The method works without regions, is not recorded, or needs something that is
            not recorded (the age, the weight).
    """
    if not method:
        raise NoTableError("method not recorded")
    if method in WITHOUT_REGIONS:
        raise NoTableError(f"the method '{method}' has no regions of its own")
    if method in BUILD_VARIANTS:
        return _plain(case, BUILD_VARIANTS[method], method)
    if age is None:
        raise NoTableError("age not recorded")
    return lund_browder(case, age) if method == LUND_BROWDER else _nines(case, age)


def _plain(case: Case, variant: str, name: str, cautions: tuple[str, ...] = ()) -> RegionTable:
    identifier = f"nines.{variant}"
    cells, halved = _cells(case, case.parameters.table(identifier))
    total = formula.total_pct(formula.total_pct(cell) for cell in cells.values())
    if not _is_whole(total):
        cautions += (f"the printed figures of this table add to {number_text(total, 1)} %, not to 100 %",)
    return RegionTable(
        name=name,
        cells=cells,
        trunk_holds_buttocks="left buttock" not in cells,
        halved=halved,
        sources=(case.parameters.source_of(identifier),),
        halves_source=case.parameters.source_of("front_share"),
        cautions=cautions,
    )


def _is_whole(total: float) -> bool:
    return abs(total - 100) * 100 < 1


def _nines(case: Case, age: AgeAtBurn) -> RegionTable:
    variant = case.chosen("child_nines").name
    if f"nines.{variant}.steps" in case.parameters:
        return _stepped_nines(case, variant, age)
    adult_from = case.parameters.number(f"adult_from.{case.chosen('adult_from').name}")
    if variant == "rule-of-eights":
        return _nines_by_weight(case, variant, age, adult_from)
    limit = case.parameters.number(f"nines.{variant}.below_age")
    if age.years < limit:
        return _plain(case, variant, f"{NINES}, child table {variant}")
    if age.years < adult_from and variant == "young-child-handout":
        raise NoTableError(f"the child table {variant} is for ages under {number_text(limit)} years")
    return _plain(case, "adult", f"{NINES}, adult")


def _nines_by_weight(case: Case, variant: str, age: AgeAtBurn, adult_from: float) -> RegionTable:
    if age.years >= adult_from:
        return _plain(case, "adult", f"{NINES}, adult")
    weight = case.state.weight("before burn", "today")
    if weight is None:
        raise NoTableError(f"weight not recorded (the child table {variant} goes by weight)")
    if weight.kg < case.parameters.number(f"nines.{variant}.below_mass"):
        return _plain(case, variant, f"{NINES}, child table {variant}")
    return _plain(case, "adult", f"{NINES}, adult")


def _stepped_nines(case: Case, variant: str, age: AgeAtBurn) -> RegionTable:
    steps = case.parameters.table(f"nines.{variant}.steps")
    if age.years >= steps["adult_from_age_years"]:
        return _plain(case, "adult", f"{NINES}, adult")
    written = dict(case.parameters.table(f"nines.{variant}"))
    from_age = steps["from_age_years"]
    written["head and neck"] = formula.head_at_age_pct(
        written["head and neck"], age.years, from_age, steps["head_per_year"]
    )
    written["each leg"] = formula.leg_at_age_pct(
        written["each leg"], age.years, from_age, steps["each_leg_per_year"]
    )
    cells, halved = _cells(case, written)
    return RegionTable(
        name=f"{NINES}, child table {variant} at {age.shown}",
        cells=cells,
        trunk_holds_buttocks=True,
        halved=halved,
        sources=tuple(case.parameters.source_of(f"nines.{variant}{part}") for part in ("", ".steps")),
        halves_source=case.parameters.source_of("front_share"),
        cautions=("child versions of the rule of nines disagree; this one is named",),
    )


def lund_browder(case: Case, age: AgeAtBurn) -> RegionTable:
    """Return the Lund-Browder table for that age, by the age bands that the policy chose."""
    chosen = case.chosen("lund_browder_age")
    adult_from = case.parameters.number(f"adult_from.{case.chosen('adult_from').name}")
    cautions: tuple[str, ...] = ()
    sources = ["lund_browder.by_age", "lund_browder.fixed", "lund_browder.genitalia"]
    if chosen.name == "linear-interpolation" and age.years < adult_from:
        halves, column = _interpolated(case, age)
        cautions = ("a straight line between the age columns is a calculation, not a published method",)
    else:
        halves, column = _banded(case, chosen, age, adult_from, sources)
    written = {**case.parameters.table("lund_browder.fixed"), "genitalia": _genitalia(case)}
    cells, halved = _cells(case, written)
    for name, half in halves.items():
        cells |= dict.fromkeys(_sided(name if name == "head" else f"each {name}"), (half, half))
    return RegionTable(
        name=f"Lund-Browder, {column}",
        cells=cells,
        trunk_holds_buttocks=False,
        halved=halved,
        sources=tuple(case.parameters.source_of(source) for source in sources),
        halves_source=case.parameters.source_of("front_share"),
        cautions=cautions,
    )


def _genitalia(case: Case) -> Any:
    return case.parameters["lund_browder.genitalia"].value


def _banded(
    case: Case, chosen: Chosen, age: AgeAtBurn, adult_from: float, sources: list[str]
) -> tuple[Mapping[str, float], str]:
    bands = "completed-years" if chosen.name == "linear-interpolation" else chosen.name
    column = formula.column_for_age(
        age.years, case.parameters.table(f"lund_browder.columns.{bands}"), adult_from
    )
    sources.append(f"lund_browder.columns.{bands}")
    if column == "adult":
        sources.append(f"adult_from.{case.chosen('adult_from').name}")
        return _column(case, column), f"adult column (adult from {number_text(adult_from)} years)"
    return _column(case, column), f"age column {column} (bands: {bands.replace('-', ' ')})"


def _column(case: Case, column: str) -> Mapping[str, float]:
    found: Mapping[str, float] = case.parameters.table("lund_browder.by_age")[column]
    return found


def _interpolated(case: Case, age: AgeAtBurn) -> tuple[Mapping[str, float], str]:
    columns = case.parameters.table("lund_browder.by_age")
    ages = sorted(float(name) for name in columns if name != "adult")
    below = max(start for start in ages if start <= age.exact_years)
    above = min((start for start in ages if start > age.exact_years), default=None)
    low = _column(case, number_text(below))
    if above is None:
        return low, f"age column {number_text(below)}"
    high = _column(case, number_text(above))
    halves = {
        name: formula.between_columns_pct(age.exact_years, below, low[name], above, high[name])
        for name in low
    }
    between = f"columns {number_text(below)} and {number_text(above)}"
    return halves, f"straight line between {between} at {number_text(age.exact_years, 2)} years"
