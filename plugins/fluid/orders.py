"""The orders on the file: which one is in force, and when each was ended."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime

from msgspec import Struct

from handoff.plugin import Case, Map, Row, child

SETS_FLUID = ("formula", "coefficient", "rate")
SETS_URINE = ("urine_target", "urine_target_per_kg")


class Ended(Struct, frozen=True):
    """The last fluid order where it was ended, and the latest earlier one that nobody ended."""

    row: Row
    at: datetime
    earlier: Row | None

    def said(self, case: Case) -> str:
        """Return it in words: ``order of 16:30 ended 17:00; no order in force since``."""
        said = f"order of {case.clock.time(self.row.at, case.now)} ended {case.clock.time(self.at, case.now)}"
        if self.earlier is None:
            return f"{said}; no order in force since"
        return f"{said}; earlier order of {case.clock.time(self.earlier.at, case.now)} not ended: ask which holds"


def orders(case: Case) -> tuple[Row, ...]:
    """Return the orders on the file in time order."""
    return case.state.dated(child(case.block, "orders"))


def sets(entry: Map, names: Iterable[str]) -> bool:
    """Return whether an order sets one of the names."""
    return any(name in entry for name in names)


def only_ends(entry: Map) -> bool:
    """Return whether an order sets nothing and only ends the one in force."""
    return "ended" in entry and not sets(entry, (*SETS_FLUID, *SETS_URINE))


def ended_by(case: Case, entry: Map) -> tuple[Row, ...]:
    """Return the orders that an entry holding only ``ended`` may end: it ends one where there is one alone."""
    return next((found for bare, found in _read(case)[1] if bare.entry is entry), ())


def ended_at(case: Case, row: Row) -> datetime | None:
    """Return when an order was ended, by itself or by an entry that only ends; None where it was not."""
    return next((at for one, at in _read(case)[0] if one.entry is row.entry), None)


def order_in_force(case: Case) -> Row | None:
    """Return the latest order that sets fluid; None where there is none or it was ended."""
    setting = [row for row in orders(case) if sets(row.entry, SETS_FLUID)]
    return setting[-1] if setting and ended_at(case, setting[-1]) is None else None


def ended_order(case: Case) -> Ended | None:
    """Return the last fluid order where it was ended; None where one is in force or none was written."""
    setting = [row for row in orders(case) if sets(row.entry, SETS_FLUID)]
    at = ended_at(case, setting[-1]) if setting else None
    if at is None:
        return None
    earlier = [row for row in setting[:-1] if ended_at(case, row) is None]
    return Ended(setting[-1], at, earlier[-1] if earlier else None)


def _read(case: Case) -> tuple[list[tuple[Row, datetime | None]], list[tuple[Row, tuple[Row, ...]]]]:
    """Each order with when it was ended, and each entry that only ends with what it may end."""
    rows = orders(case)
    ends = [
        at if at and at <= case.now else None for row in rows for at in [case.when(row.entry.get("ended"))]
    ]
    bare = sorted(
        ((at, row) for row, at in zip(rows, ends, strict=True) if at is not None and only_ends(row.entry)),
        key=lambda pair: pair[0],
    )
    found = []
    for moment, row in bare:
        hit = []
        for names in (SETS_FLUID, SETS_URINE):
            standing = [
                index
                for index, (one, end) in enumerate(zip(rows, ends, strict=True))
                if sets(one.entry, names) and one.at < moment and (end is None or end > moment)
            ]
            hit += [index for index in standing[-1:] if index not in hit]
        if len(hit) == 1:
            ends[hit[0]] = moment
        found.append((row, tuple(rows[index] for index in hit)))
    return list(zip(rows, ends, strict=True)), found
