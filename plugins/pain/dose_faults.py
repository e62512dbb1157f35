"""Faults of doses, infusions and pump readings that would make a total wrong without a word."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from handoff.plugin import Case, Map, Problem, unit_of

from .dose_lines import unusual_dose, unusual_rates
from .given import moment_of
from .infusions import RATE, happenings, line_name
from .living import BLOCK, Path, living
from .names import PATCH, route_of


def faults(case: Case) -> Iterator[Problem]:
    """Yield the faults of single doses, of infusions line by line, and of pump readings."""
    yield from _doses(case)
    yield from _infusions(case)
    yield from _pumps(case)
    yield from unusual_rates(case)


def _doses(case: Case) -> Iterator[Problem]:
    block = case.block
    for entry, path in living(block.get("doses") if isinstance(block, Map) else None, (*BLOCK, "doses")):
        at = entry.get("at")
        moment = moment_of(case, at) if isinstance(at, Map) else None
        if at is not None and moment is not None and moment[0] > moment[1]:
            yield Problem(
                at, (*path, "at"), "earliest lies after latest", "write the earlier time as earliest"
            )
        has_contents = entry.get("contains") is not None
        if has_contents and (entry.get("drug") is not None or entry.get("dose") is not None):
            yield Problem(
                entry,
                path,
                "a dose has both contains and drug or dose",
                "keep contains for a combination product",
            )
        yield from _route(case, entry, path)
        yield from unusual_dose(case, entry, path)
        for name in () if has_contents else ("drug", "dose"):
            if entry.get(name) is None:
                yield Problem(
                    entry, path, f"the dose has no {name}", f"add {name}:, or: not known for the dose"
                )


def _route(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    node = entry.get("route")
    if node is not None and route_of(case, node) == PATCH:
        cure = "write it under infusions: with from: and rate: in mcg/h"
        yield Problem(node, (*path, "route"), "a patch has a rate and no single dose", cure)


def _infusions(case: Case) -> Iterator[Problem]:
    block = case.block
    lines: dict[str, list[Map]] = {}
    paths: dict[int, Path] = {}
    written = block.get("infusions") if isinstance(block, Map) else None
    for entry, path in living(written, (*BLOCK, "infusions")):
        lines.setdefault(line_name(case, entry), []).append(entry)
        paths[id(entry)] = path
        yield from _infusion(entry, path)
    for name, entries_of_line in lines.items():
        yield from _line(case, name, entries_of_line, paths)


def _infusion(entry: Map, path: Path) -> Iterator[Problem]:
    if not any(entry.get(name) is not None for name in ("from", "running", "stopped", "rate")):
        yield Problem(entry, path, "the infusion has no time", "add from:, running: or stopped: with a time")
    if entry.get("rate") is not None and entry.get("from") is None:
        yield Problem(
            entry, path, "the rate has no start", "add from: with the time at which this rate began"
        )
    if entry.get("from") is not None and entry.get("rate") is None:
        yield Problem(entry, path, "the infusion has no rate", "add rate: with its unit")
    if entry.get("line") is None and entry.get("drug") is None:
        yield Problem(entry, path, "the infusion has neither line nor drug", "add line: or drug:")


def _line(case: Case, name: str, written: list[Map], paths: dict[int, Path]) -> Iterator[Problem]:
    events = happenings(case, written)
    starts = [(moment, entry) for moment, order, entry in events if order == RATE]
    first = starts[0] if starts else None
    rate_alone = any(entry.get("rate") is not None and entry.get("from") is None for entry in written)
    if not rate_alone and (first is None or first[1].get("drug") is None):
        entry = first[1] if first else written[0]
        what = "has no drug" if first else "has no start"
        cure = "add drug:" if first else "add an entry with drug:, from: and rate:"
        yield Problem(entry, paths[id(entry)], f"the infusion on line {name} {what}", cure)
    for earlier, later in pairwise(starts):
        if earlier[0] == later[0]:
            yield Problem(
                later[1],
                paths[id(later[1])],
                f"line {name} has two rates from the same minute",
                "give each infusion its own line:, or strike out the one that is wrong",
            )
    for entry in written:
        start, stop = case.when(entry.get("from")), case.when(entry.get("stopped"))
        if start is not None and stop is not None and stop < start:
            yield Problem(
                entry, (*paths[id(entry)], "stopped"), "it stopped before it began", "check both times"
            )


def _pumps(case: Case) -> Iterator[Problem]:
    block = case.block
    written = block.get("patient_controlled") if isinstance(block, Map) else None
    for entry, path in living(written, (*BLOCK, "patient_controlled")):
        counted = []
        for reading, place in living(entry.get("delivered"), (*path, "delivered")):
            start, end = case.when(reading.get("from")), case.when(reading.get("to"))
            if start is None or end is None:
                continue
            if end <= start:
                yield Problem(reading, place, "the reading ends before it begins", "check from: and to:")
                continue
            if unit_of(reading.get("total")) == "mL" and entry.get("concentration") is None:
                yield Problem(
                    reading, place, "a volume without a concentration", "add concentration: to the pump"
                )
            counted.append((start, end, reading, place))
        counted.sort(key=lambda one: (one[0], one[1]))
        for before, after in pairwise(counted):
            if after[0] < before[1]:
                yield Problem(
                    after[2],
                    after[3],
                    "this reading begins before the one before ends",
                    "write each from the last",
                )
