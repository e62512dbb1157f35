"""A side that contradicts its region, or that the region does not have; checks of a limb without their side."""

from __future__ import annotations

from collections.abc import Iterator

from handoff.plugin import Case, List, Map, Problem, words

from .regions import SIDES, needs_side

Path = tuple[str | int, ...]


def side_faults(entry: Map, path: Path) -> Iterator[Problem]:
    """Yield the fault of a side that the region contradicts or does not have; it would be lost otherwise."""
    region, side = words(entry.get("region")), words(entry.get("side"))
    if not side or needs_side(region):
        return
    named = next((name for name in SIDES if region.startswith(f"{name} ")), "")
    if named and named != side:
        what, cure = f"side: {side} contradicts '{region}'", "keep the one that is right"
    elif named:
        return
    else:
        what = f"'{region}' is charted as one, and has no side"
        cure = f"leave out side, and write {side} in note:; a part of it is an extent (of_region or tbsa)"
    yield Problem(entry["side"], (*path, "side"), what, cure)


def limb_faults(case: Case) -> Iterator[Problem]:
    """Yield the checks beyond a burn whose side is missing or contradicts the region."""
    observations = case.state.root.get("observations")
    for day, times in observations.items() if isinstance(observations, Map) else ():
        for time, written in times.items() if isinstance(times, Map) else ():
            several = isinstance(written, List)
            for index, row in enumerate(written if isinstance(written, List) else (written,)):
                if isinstance(row, Map) and "struck" not in row:
                    place = ("observations", str(day), str(time), *((index,) if several else ()), "limbs")
                    yield from _limbs(row, place)


def _limbs(row: Map, path: Path) -> Iterator[Problem]:
    limbs = row.get("limbs")
    for index, entry in enumerate(limbs) if isinstance(limbs, List) else ():
        if not isinstance(entry, Map) or "struck" in entry:
            continue
        region = words(entry.get("region"))
        if needs_side(region) and "side" not in entry:
            cure = f"write region: left {region} or region: right {region}"
            yield Problem(entry["region"], (*path, index, "region"), f"'{region}' has no side", cure)
        yield from side_faults(entry, (*path, index))
