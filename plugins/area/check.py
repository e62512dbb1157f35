"""Faults of the area block that a schema cannot see: extents that do not fit their region or each other."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import groupby

from msgspec import Struct

from handoff.plugin import Case, List, Map, Node, Problem, Severity, number_text, words

from . import depth as depths
from . import formula
from .age import age_at_burn
from .assessment import PLACES, Burn, find_table, read_burn
from .regions import FACES, full_name, lies_within, needs_side
from .side_check import limb_faults, side_faults
from .tables import BUILD_VARIANTS, METHODS, WITHOUT_REGIONS, RegionTable, lund_browder

EXTENTS = ("of_region", "tbsa", "palms")
LISTS = ("burns", "wounds")
ROUNDING_PCT = 1e-9
"""Binary fractions: a third of a region entered three times is not more than the region."""

Path = tuple[str | int, ...]


class _Charted(Struct, frozen=True):
    burn: Burn
    entry: Map
    path: Path

    @property
    def pct(self) -> float:
        return self.burn.tbsa_pct or 0.0


def check(case: Case) -> tuple[Problem, ...]:
    """Return the faults of the area block, in the order of the file.

    An extent is written exactly once, as a share of the region, of the body or in palms; the
    region exists in the named method; the parts of a region add to no more than the region.
    """
    block = case.block if isinstance(case.block, List) else ()
    return (
        *(
            problem
            for index, entry in enumerate(block)
            if isinstance(entry, Map) and "struck" not in entry
            for problem in _assessment(case, entry, ("area", index))
        ),
        *limb_faults(case),
    )


def _assessment(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    if not any(isinstance(entry.get(name), List) for name in LISTS):
        yield Problem(
            entry, path, "the assessment has no burns", "add burns: with a region, its extent and its depth"
        )
    burns = entry.get("burns")
    if isinstance(burns, List) and not burns and words(entry.get("confirmed")) != "yes":
        yield Problem(
            burns,
            (*path, "burns"),
            "the list of burns is empty, and an earlier assessment would no longer count",
            "add the burns, delete the key, or add confirmed: yes to the assessment if no burn was found",
        )
    method = words(entry.get("method"))
    if method == "direct" and not words(entry.get("by")):
        yield Problem(
            entry,
            path,
            "a direct percentage has no assessor",
            "add by: with the name or the service that gave it",
        )
    table, _ = find_table(case, method, age_at_burn(case))
    yield from _build(case, entry, method, path)
    for name in LISTS:
        yield from _list(case, entry.get(name), method, table, (*path, name))


def _list(
    case: Case, node: Node | None, method: str, table: RegionTable | None, path: Path
) -> Iterator[Problem]:
    if not isinstance(node, List):
        return
    charted = []
    for index, entry in enumerate(node):
        if not isinstance(entry, Map) or "struck" in entry:
            continue
        place = (*path, index)
        faults = list(_entry(entry, method, table, place))
        yield from faults
        if not any(fault.severity is Severity.FAULT for fault in faults):
            charted.append(_Charted(read_burn(case, entry, table), entry, place))
    yield from _too_much(charted, table)
    if method in WITHOUT_REGIONS:
        yield from _larger_than_life(case, charted)


def _entry(entry: Map, method: str, table: RegionTable | None, path: Path) -> Iterator[Problem]:
    written = [name for name in EXTENTS if name in entry]
    region, side = words(entry.get("region")), words(entry.get("side"))
    if len(written) != 1:
        what = "two extents for one burn" if written else "the extent is missing"
        cure = (
            "write one of of_region: 40 % (share of that region), tbsa: 2 % (share of the body) or palms: 2"
        )
        yield Problem(entry, path, what, cure)
    if needs_side(region) and not side:
        cure = f"write region: left {region} or region: right {region}"
        yield Problem(entry["region"], (*path, "region"), f"'{region}' has no side", cure)
    yield from side_faults(entry, path)
    if words(entry.get("depth")) == depths.AMBIGUOUS:
        yield Problem(
            entry["depth"],
            (*path, "depth"),
            "'superficial' is read in two ways: epidermal (not counted) and superficial dermal (counted)",
            "write epidermal or superficial partial",
        )
    yield from _encircling(entry, path)
    if "of_region" in entry and (side or not needs_side(region)):
        yield from _region(entry, full_name(region, side), method, table, path)


def _encircling(entry: Map, path: Path) -> Iterator[Problem]:
    if (
        words(entry.get("circumferential")) == "yes"
        and "face" in entry
        and words(entry.get("confirmed")) != "yes"
    ):
        yield Problem(
            entry["circumferential"],
            (*path, "circumferential"),
            "circumferential, but on one face only",
            "leave out face, or add confirmed: yes",
            Severity.UNUSUAL,
        )


def _region(entry: Map, region: str, method: str, table: RegionTable | None, path: Path) -> Iterator[Problem]:
    if method in WITHOUT_REGIONS:
        what = f"the method '{method}' has no region sizes to take a share of"
        cure = "write palms: 2 or tbsa: 2 %" if method == "palm" else "write tbsa: 2 %"
        yield Problem(entry["of_region"], (*path, "of_region"), what, cure)
        return
    if table is None:
        return
    size = table.size_pct(region)
    if size is None:
        cure = f"its regions: {', '.join(table.regions)}; or write the extent as tbsa"
        yield Problem(entry["region"], (*path, "region"), f"{table.name} has no region '{region}'", cure)
    elif table.size_pct(region, words(entry.get("face"))) == 0:
        only = table.only_face(region)
        what = f"{table.name} counts '{region}' on the {only} only"
        yield Problem(entry["face"], (*path, "face"), what, f"leave out face, or write face: {only}")


def _too_much(charted: list[_Charted], table: RegionTable | None) -> Iterator[Problem]:
    if table is not None:
        yield from _over_regions(charted, table)
        return
    yield from _over_shares(charted)
    total = formula.total_pct(item.pct for item in charted)
    if charted and total > 100 + ROUNDING_PCT:
        last = charted[-1]
        what = f"the burns add to {number_text(total, PLACES)} % of the body"
        yield Problem(last.entry, last.path, what, "check each extent; together at most 100 %")


def _over_regions(charted: list[_Charted], table: RegionTable) -> Iterator[Problem]:
    reported: list[set[int]] = []
    for region, face, size in _areas(table):
        inside = {index for index, item in enumerate(charted) if _inside(item.burn, region, face, table)}
        if any(known <= inside for known in reported):
            continue
        total = formula.total_pct(charted[index].pct for index in sorted(inside))
        if total > size + ROUNDING_PCT:
            reported.append(inside)
            yield _too_large([charted[index] for index in sorted(inside)], region, face, size, total)


def _areas(table: RegionTable) -> list[tuple[str, str, float]]:
    """Every region and face of the table with its size, smallest first, so that the closest one is named."""
    names = [*table.regions, "whole body"]
    sized = [
        (name, face, size)
        for name in names
        for face in (*FACES, "")
        if (size := table.size_pct(name, face)) is not None and (size or not face)
    ]
    return sorted(sized, key=lambda area: area[2])


def _inside(burn: Burn, region: str, face: str, table: RegionTable) -> bool:
    own = burn.face or table.only_face(burn.region)
    return lies_within(burn.region, region, table.trunk_holds_buttocks) and face in ("", own)


def _too_large(items: list[_Charted], region: str, face: str, size: float, total: float) -> Problem:
    last = items[-1]
    name = next(name for name in EXTENTS if name in last.entry)
    where = f"{region}, {face}" if face else region
    figures = f"{number_text(total, PLACES)} % of the body, and the region is {number_text(size, PLACES)} %"
    if len(items) == 1:
        what, cure = f"'{where}' is given {figures}", "check the extent and its kind (of_region or tbsa)"
    else:
        lines = ", ".join(str(item.entry.line) for item in items)
        what = f"the burns of '{where}' add to {figures}"
        cure = f"check the extents of the region (lines {lines})"
    return Problem(last.entry[name], (*last.path, name), what, cure)


def _over_shares(charted: list[_Charted]) -> Iterator[Problem]:
    shares = [item for item in charted if "of_region" in item.entry]
    shares.sort(key=lambda item: (item.burn.region, item.burn.face))
    for (region, face), group in groupby(shares, key=lambda item: (item.burn.region, item.burn.face)):
        items = list(group)
        total = formula.total_pct(_share(item) for item in items)
        if total > 100 + ROUNDING_PCT:
            last = max(items, key=lambda item: item.entry.line)
            where = f"{region}, {face}" if face else region
            what = f"the burns of '{where}' add to {number_text(total, PLACES)} % of the region"
            yield Problem(
                last.entry["of_region"],
                (*last.path, "of_region"),
                what,
                "check each extent; together at most 100 %",
            )


def _share(item: _Charted) -> float:
    return float(words(item.entry["of_region"]).rstrip(" %"))


def _larger_than_life(case: Case, charted: list[_Charted]) -> Iterator[Problem]:
    """A palm count or a stated percentage is held against the Lund-Browder chart: unusual, not refused."""
    age = age_at_burn(case)
    if age is None:
        return
    table = lund_browder(case, age)
    for item in charted:
        size = table.size_pct(item.burn.region, item.burn.face)
        if size and item.pct > size + ROUNDING_PCT and words(item.entry.get("confirmed")) != "yes":
            name = next(name for name in EXTENTS if name in item.entry)
            yield Problem(
                item.entry[name],
                (*item.path, name),
                f"{number_text(item.pct, PLACES)} % of the body is more than '{item.burn.where}' holds "
                f"({number_text(size, PLACES)} %, {table.name})",
                "check it; if it is right, add confirmed: yes beside it",
                Severity.UNUSUAL,
            )


def _build(case: Case, entry: Map, method: str, path: Path) -> Iterator[Problem]:
    """A table for a heavy adult or a small infant is unusual for another build."""
    if method not in BUILD_VARIANTS or words(entry.get("confirmed")) == "yes":
        return
    weight, variant = case.state.weight("before burn", "today"), BUILD_VARIANTS[method]
    if weight is None:
        return
    above, below = f"nines.{variant}.above_mass", f"nines.{variant}.below_mass"
    fits = ""
    if above in case.parameters and weight.kg <= case.parameters.number(above):
        fits = f"above {number_text(case.parameters.number(above))} kg"
    if below in case.parameters and weight.kg >= case.parameters.number(below):
        fits = f"below {number_text(case.parameters.number(below))} kg"
    if fits:
        yield Problem(
            entry["method"],
            (*path, "method"),
            f"the {method} is published for a weight {fits}, and {number_text(weight.kg, 1)} kg is recorded",
            f"use another of: {', '.join(METHODS)}; or add confirmed: yes",
            Severity.UNUSUAL,
        )
