"""One charted assessment of the burn, measured: every burned region in % of body surface."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime
from typing import NamedTuple

from msgspec import Struct, field

from handoff.plugin import Case, List, Map, Row, amount, child, entries, number, number_text, words

from . import depth as depths
from . import formula
from .age import AgeAtBurn, age_at_burn
from .regions import full_name
from .tables import NoTableError, RegionTable, table_for

PLACES = 2
ENCIRCLING: dict[str, bool] = {"yes": True, "no": False}


class Burn(Struct, frozen=True):
    """One burned region: where, how deep, how much of the body, whether it counts, and its line."""

    region: str
    face: str
    depth: str
    tbsa_pct: float | None
    counted: bool | None
    encircling: str
    line: int
    deep: bool = False
    full: bool = False
    joint: str = ""
    sites: tuple[str, ...] = ()
    written_depth: str = ""
    extent: str = ""
    sum: str = ""
    whole: bool = False
    halved: bool = False

    def row(self) -> BurnRow:
        """Return the burn as a plain row for others."""
        around = ENCIRCLING.get(self.encircling, self.encircling or None)
        return BurnRow(self.region, self.face, self.depth, self.tbsa_pct, self.counted, around, self.line)

    @property
    def circumferential(self) -> bool:
        """Whether it is charted as going all the way round."""
        return self.encircling == "yes"

    @property
    def near_circumferential(self) -> bool:
        """Whether it is charted as going nearly all the way round."""
        return self.encircling == "near"

    @property
    def encircling_recorded(self) -> bool:
        """Whether anybody looked and charted if it goes all the way round."""
        return self.encircling in ("yes", "no", "near")

    @property
    def where(self) -> str:
        """The region with its face: ``trunk, back``."""
        return f"{self.region}, {self.face}" if self.face else self.region


class BurnRow(NamedTuple):
    """One burned region as other plugins and the document read it; the share in % of body surface.

    ``circumferential`` is yes or no, or the word charted (near, not assessed), or None where it is blank.
    """

    region: str
    face: str
    depth: str
    tbsa_pct: float | None
    counted: bool | None
    circumferential: bool | str | None
    line: int


class Assessment(Struct, frozen=True):
    """One assessment, measured by its method; ``missing`` says why an extent could not be worked out."""

    at: datetime
    by: str
    role: str
    place: str
    method: str
    burns: tuple[Burn, ...]
    entry: Map
    age: AgeAtBurn | None = None
    table: RegionTable | None = None
    missing: tuple[str, ...] = ()
    wounds: tuple[Burn, ...] = field(default=())

    @property
    def line(self) -> int:
        """The line of the file where the assessment begins."""
        return self.entry.line


def assessments(case: Case) -> tuple[Assessment, ...]:
    """Return every assessment of burns, measured, oldest first; struck-out ones left aside."""
    rows = case.state.dated(case.block)
    return tuple(
        measure(case, row) for row in rows if entries(row.entry.get("burns")) or found_none(row.entry)
    )


def found_none(entry: Map) -> bool:
    """Return whether an assessment says that no burn was found: an empty list that somebody confirmed."""
    node = entry.get("burns")
    return isinstance(node, List) and not node and words(entry.get("confirmed")) == "yes"


def measure(case: Case, row: Row) -> Assessment:
    """Return one row of the block as a measured assessment."""
    entry = row.entry
    method, age = words(entry.get("method")), age_at_burn(case)
    table, why = find_table(case, method, age)
    burns = tuple(read_burn(case, burn, table) for burn in entries(entry.get("burns")))
    missing = _missing(burns, why)
    return Assessment(
        at=row.at,
        by=words(entry.get("by")),
        role=words(entry.get("role")),
        place=words(entry.get("place")),
        method=method,
        burns=burns,
        entry=entry,
        age=age,
        table=table,
        missing=missing,
    )


def said_once(parts: Sequence[str]) -> list[str]:
    """Return the parts that are not blank and not already said within an earlier one."""
    said: list[str] = []
    for part in parts:
        if part and not any(part.lower() in earlier.lower() for earlier in said):
            said.append(part)
    return said


def find_table(case: Case, method: str, age: AgeAtBurn | None) -> tuple[RegionTable | None, str]:
    """Return the table of regions, or None and what is missing for it."""
    try:
        return table_for(case, method, age), ""
    except NoTableError as reason:
        return None, str(reason)


def read_burn(case: Case, entry: Map, table: RegionTable | None) -> Burn:
    """Return one burned region, measured with ``table`` where its extent is a share of the region."""
    region = full_name(words(entry.get("region")), words(entry.get("side")))
    face = words(entry.get("face"))
    written = words(entry.get("depth"))
    depth = depths.class_of(written, case.parameters)
    pct, extent, sum_text = _extent(case, entry, region, face, table)
    return Burn(
        region=region,
        face=face,
        depth=depth,
        tbsa_pct=pct,
        counted=depths.is_counted(depth, case.parameters),
        encircling=words(entry.get("circumferential")),
        line=entry.line,
        deep=depths.is_deep(depth, case.parameters),
        full=depths.is_full(depth, case.parameters),
        joint=words(entry.get("joint")),
        sites=case.state.texts(entry.get("sites")),
        written_depth=written,
        extent=extent,
        sum=sum_text,
        whole=amount(entry.get("of_region"), "%") == 100,
        halved=table is not None and "of_region" in entry and table.is_halved(region, face),
    )


def _extent(
    case: Case, entry: Map, region: str, face: str, table: RegionTable | None
) -> tuple[float | None, str, str]:
    tbsa = amount(entry.get("tbsa"), "%")
    if tbsa is not None:
        return tbsa, f"{words(entry.get('tbsa'))} of the body", f"{number_text(tbsa, PLACES)} (as charted)"
    palms = number(entry.get("palms"))
    if palms is not None:
        palm = case.parameters.number(f"palm.{case.chosen('palm_value').name}")
        said = f"{number_text(palms, PLACES)} palms"
        return formula.palms_pct(palms, palm), said, f"{said} x {number_text(palm, PLACES)}"
    share = amount(entry.get("of_region"), "%")
    size = table.size_pct(region, face) if table is not None else None
    written = words(child(entry, "of_region"))
    if share is None or size is None:
        return None, f"{written} of the region" if written else "", ""
    said = f"{number_text(size, PLACES)} x {number_text(share, PLACES)} %"
    return formula.region_pct(size, share), f"{written} of the region", said


def _missing(burns: tuple[Burn, ...], why: str) -> tuple[str, ...]:
    open_ended = [burn.where for burn in burns if burn.tbsa_pct is None]
    return (f"{why or 'region size'}, needed for {', '.join(open_ended)}",) if open_ended else ()
