"""Open, grafted, donor and healed areas over the weeks, apart from the size of the burn."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Input,
    Item,
    Part,
    Row,
    System,
    Working,
    amount,
    entries,
    number_text,
    words,
)

from . import formula
from .age import age_at_burn
from .assessment import PLACES, Burn, find_table, read_burn
from .tables import RegionTable
from .totals import pct_text

STATES = {
    "open": ("area.open_wound", "Open wound"),
    "excised and covered": ("area.excised", "Excised and covered"),
    "grafted": ("area.grafted", "Grafted"),
    "donor site open": ("area.donor_open", "Donor site, open"),
    "donor site healed": ("area.donor_healed", "Donor site, healed"),
    "healed": ("area.healed", "Healed"),
}


class Wounds(Struct, frozen=True):
    """The wound areas of one assessment: each with its state."""

    at: datetime
    by: str
    table: RegionTable | None
    areas: tuple[tuple[str, Burn, float | None], ...]
    line: int

    @property
    def open_regions(self) -> tuple[str, ...]:
        """The regions that are open, burn or donor site."""
        return tuple(area.where for state, area, _ in self.areas if state in ("open", "donor site open"))

    def of(self, state: str) -> tuple[Burn, ...]:
        """The areas in that state."""
        return tuple(area for own, area, _ in self.areas if own == state)

    def total_pct(self, state: str) -> float | None:
        """Return the areas in that state in % of body surface; None where an extent is missing."""
        parts = [area.tbsa_pct for area in self.of(state)]
        known = [part for part in parts if part is not None]
        return formula.total_pct(known) if len(known) == len(parts) else None


def wounds_of(case: Case) -> tuple[Wounds, ...]:
    """Return the wound areas of every assessment that charts them, oldest first."""
    rows = case.state.dated(case.block)
    return tuple(_read(case, row) for row in rows if entries(row.entry.get("wounds")))


def _read(case: Case, row: Row) -> Wounds:
    table, _ = find_table(case, words(row.entry.get("method")), age_at_burn(case))
    areas = tuple(
        (words(entry.get("state")), read_burn(case, entry, table), amount(entry.get("graft_taken"), "%"))
        for entry in entries(row.entry.get("wounds"))
    )
    return Wounds(row.at, words(row.entry.get("by")), table, areas, row.line)


def items(case: Case, charted: tuple[Wounds, ...]) -> tuple[Item, ...]:
    """Return the open, grafted, donor and healed areas now charted, each against its first charting."""
    if not charted:
        return ()
    latest = charted[-1]
    used = [state for state in STATES if any(wounds.of(state) for wounds in charted)]
    return tuple(_item(case, charted, latest, state) for state in used)


def _item(case: Case, charted: tuple[Wounds, ...], latest: Wounds, state: str) -> Item:
    key, label = STATES[state]
    value = latest.total_pct(state)
    areas = latest.of(state)
    where = f": {', '.join(area.where for area in areas)}" if areas else ""
    shown = f"{pct_text(value)}{where}" if value is not None else "not computed: method or age not recorded"
    shown += _taken(latest, state) + _before(case, charted, state)
    working = None
    if value is not None:
        parts = [f"{area.where} {area.sum} = {number_text(area.tbsa_pct or 0.0, PLACES)}" for area in areas]
        working = Working(
            formula="size of the region x share, added region by region",
            sum=f"{'; '.join(parts) or 'none charted'}; total {number_text(value, PLACES)} %",
            inputs=tuple(Input(area.where, area.extent, area.line) for area in areas),
            rule=latest.table.name if latest.table else "as charted",
        )
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.WOUND,
        value=value,
        unit="%" if value is not None else "",
        shown=shown,
        as_of=latest.at,
        flag=Flag.NONE if value is not None else Flag.NOT_RECORDED,
        working=working,
        sources=latest.table.sources if latest.table else (),
        repeats=latest.table is None,
        line=latest.line,
    )


def _taken(latest: Wounds, state: str) -> str:
    taken = [(area.where, share) for own, area, share in latest.areas if own == state and share is not None]
    said = ", ".join(f"{where} {number_text(share, 0)} %" for where, share in taken)
    return f"; graft taken: {said}" if said else ""


def _before(case: Case, charted: tuple[Wounds, ...], state: str) -> str:
    earlier = [(wounds.at, wounds.total_pct(state)) for wounds in charted[:-1]]
    said = [f"{pct_text(value)} on {case.clock.day(at)}" for at, value in earlier if value is not None]
    return f"; before: {', '.join(said)}" if said else ""
