"""Faults of the block that a schema cannot see: entries that contradict themselves or each other."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping

from handoff.plugin import (
    Case,
    List,
    Map,
    Node,
    Problem,
    Severity,
    amount,
    child,
    line_of,
    number_text,
    words,
)

from . import charted
from .charted import SIGNS
from .oxygen import ROOM_AIR

Path = tuple[str | int, ...]


def check(case: Case) -> tuple[Problem, ...]:
    """Return the faults of the airway block, in the order of the file."""
    return (*_signs(case), *_oxygen(case), *_levels(case), *_gases(case), *_spans(case))


def _listed(case: Case, name: str) -> Iterator[tuple[Path, Map]]:
    node = child(case.block, name)
    if isinstance(node, List):
        for index, entry in enumerate(node):
            if isinstance(entry, Map) and "struck" not in entry:
                yield ("airway_watch", name, index), entry


def _signs(case: Case) -> Iterator[Problem]:
    for path, entry in _listed(case, "signs"):
        if not any(name in entry for name in SIGNS):
            yield Problem(
                entry, path, "the check names no sign", "add the signs looked for, as stridor: absent"
            )


def _oxygen(case: Case) -> Iterator[Problem]:
    begun: dict[str, int] = {}
    for path, entry in _listed(case, "oxygen"):
        start = words(entry.get("from"))
        if start in begun:
            what = f"two oxygen entries begin at {start} (also line {begun[start]})"
            yield Problem(entry, path, what, "keep the one that was in use, or correct a time")
        begun.setdefault(start, entry.line)
        yield from _flow(case, path, entry)
        if words(entry.get("device")) == ROOM_AIR and (
            "flow" in entry or "fio2" in entry or "valve" in entry
        ):
            yield Problem(
                entry, path, "room air with a flow or an oxygen setting", "name the device, or take them out"
            )
        if "valve" in entry and words(entry.get("device")) not in (ROOM_AIR, "venturi mask"):
            yield Problem(
                entry["valve"], (*path, "valve"), "only a venturi mask has a valve", "check the device"
            )


def _flow(case: Case, path: Path, entry: Map) -> Iterator[Problem]:
    device, flow = words(entry.get("device")), amount(entry.get("flow"), "L/min")
    limits = {
        "non-rebreather mask": ("flow.non_rebreather_least", "the bag may not stay full"),
        "simple mask": ("flow.simple_mask_least", "breathed-out air collects in the mask"),
    }
    if flow is None or device not in limits or words(entry.get("confirmed")) == "yes":
        return
    key, why = limits[device]
    least = case.parameters.number(key)
    if flow < least:
        what = f"a {device} at {words(entry.get('flow'))}: below {number_text(least)} L/min {why}"
        cure = "check the flow at the bedside; if it is right, add confirmed: yes beside it"
        yield Problem(entry["flow"], (*path, "flow"), what, cure, Severity.UNUSUAL)


def _levels(case: Case) -> Iterator[Problem]:
    """One blood sample, charted twice with different levels."""
    beside = {reading.at: reading.node for reading in case.state.result_series(charted.CO)}
    for path, entry in _listed(case, charted.CO):
        at = case.when(entry.get("at"))
        other = beside.get(at) if at is not None else None
        if other is not None and amount(other, "%") != amount(entry.get("value"), "%"):
            what = f"{words(entry.get('value'))} here and {words(other)} in results at the same time"
            yield Problem(entry["value"], (*path, "value"), what, "keep the one on the laboratory's slip")


def _gases(case: Case) -> Iterator[Problem]:
    """Arterial oxygen against the saturation charted near it: the one hardly goes with the other."""
    node = case.state.root.get("results")
    within = case.parameters.number("plausible.gas_within")
    saturations = [
        (reading.at, reading.node, pct)
        for reading in case.state.series("spo2")
        if (pct := amount(reading.node, "%")) is not None
    ]
    for index, entry in enumerate(node) if isinstance(node, List) else ():
        if not isinstance(entry, Map) or "struck" in entry or words(entry.get("confirmed")) == "yes":
            continue
        at, pressure = case.when(entry.get("at")), amount(entry.get("pao2"), "mmHg")
        if at is None or pressure is None or words(entry.get("specimen")) not in ("", "arterial"):
            continue
        near = [one for one in saturations if abs(case.hours_between(one[0], at)) * 60 <= within]
        if not near:
            continue
        _, saturation, pct = min(near, key=lambda one: abs(case.hours_between(one[0], at)))
        if any(_odd(pressure, pct, pair) for pair in case.parameters["plausible.gas_pairs"].value):
            yield Problem(
                entry["pao2"],
                ("results", index, "pao2"),
                f"{words(entry['pao2'])} seldom goes with the saturation of {words(saturation)} charted near it "
                f"(line {line_of(saturation)})",
                "check the unit (kPa or mmHg), the specimen and the probe; if both are right, add confirmed: yes",
                Severity.UNUSUAL,
            )


def _odd(pressure_mmhg: float, saturation_pct: float, pair: Mapping[str, float]) -> bool:
    low = pressure_mmhg < pair.get("pao2_below", math.inf) and pressure_mmhg >= pair.get("pao2_from", 0)
    return (
        low
        and pair.get("spo2_from", 0) <= saturation_pct
        and saturation_pct < pair.get("spo2_below", math.inf)
    )


def _spans(case: Case) -> Iterator[Problem]:
    for name, first, last in (("oxygen", "from", "stopped"), ("tube", "placed", "removed")):
        for path, entry in _listed(case, name):
            yield from _span(case, path, entry, first, last)
    watch: Node | None = child(case.block, "watch")
    if isinstance(watch, Map):
        yield from _span(case, ("airway_watch", "watch"), watch, "start", "ended")


def _span(case: Case, path: Path, entry: Map, first: str, last: str) -> Iterator[Problem]:
    begins, ends = case.when(entry.get(first)), case.when(entry.get(last))
    if begins is not None and ends is not None and ends < begins:
        yield Problem(entry[last], (*path, last), f"{last} is before {first}", "check both times")
