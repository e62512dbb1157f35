"""Oxygen over time as charted, and the oxygen that a device is estimated to give."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Map,
    Row,
    Source,
    System,
    Working,
    amount,
    line_of,
    number_text,
    with_unit,
    words,
)

from . import charted, formula, say

ROOM_AIR = "room air"
HYPERBARIC = "hyperbaric chamber"
VENTILATOR = "ventilator"
HIGH_FLOW = "high-flow nasal"
OPEN_DEVICE = "The inspired oxygen is an estimate, so the ratio is too."
SET_DEVICES = (HIGH_FLOW, "CPAP", "BiPAP", VENTILATOR)
FULL, AIR, PART, CHAMBER, UNCHARTED = "100 % oxygen", "room air", "part oxygen", "hyperbaric", "not recorded"


class Oxygen(Struct, frozen=True):
    """One charted stretch of oxygen; ``end`` is None for the one that holds now."""

    start: datetime
    end: datetime | None
    device: str
    entry: Map

    @property
    def set_pct(self) -> float | None:
        """The oxygen set or measured in %, where it is charted."""
        return amount(self.entry.get("fio2"), "%")

    @property
    def flow_l_min(self) -> float | None:
        """The flow in L/min, where it is charted."""
        return amount(self.entry.get("flow"), "L/min")

    @property
    def line(self) -> int:
        """The line of the file that it was read from."""
        return line_of(self.entry)

    def said(self) -> str:
        """Return the device with what was set: ``non-rebreather mask 15 L/min``."""
        valve = words(self.entry.get("valve"))
        parts = [self.device, f"{valve} valve" if valve else "", words(self.entry.get("flow"))]
        if self.set_pct is not None:
            parts.append(say.pct(self.set_pct))
        return " ".join(part for part in parts if part)


def timeline(case: Case) -> tuple[Oxygen, ...]:
    """Return the oxygen of the file in time order; after a stop room air holds until the next entry."""
    begun = [(row.at, 0, words(row.entry.get("device")), row.entry) for row in _rows(case)]
    begun += [
        (row.at, 1, VENTILATOR, row.entry)
        for row in charted.block_rows(case, "ventilator")
        if row.entry.get("fio2") is not None
    ]
    begun.sort(key=lambda part: part[:2])
    tube = charted.tube(case)
    changed = tube.since is not None and tube.since == tube.extubated
    extubated = None if changed else tube.extubated
    found: list[Oxygen] = []
    for index, (at, _, device, entry) in enumerate(begun):
        following = begun[index + 1][0] if index + 1 < len(begun) else None
        if device == VENTILATOR and extubated is not None and at <= extubated:
            # What the patient breathes after the tube is out is not what the ventilator gave.
            following = min(following or extubated, extubated)
        stopped = case.when(entry.get("stopped"))
        if stopped is not None and (following is None or stopped < following):
            found.append(Oxygen(at, stopped, device, entry))
            found.append(Oxygen(stopped, following, ROOM_AIR, Map.at(line=entry.line)))
        else:
            found.append(Oxygen(at, following, device, entry))
    return tuple(part for part in found if part.end is None or part.end > part.start)


def _rows(case: Case) -> tuple[Row, ...]:
    return charted.block_rows(case, "oxygen", "from")


def holding(case: Case, moment: datetime) -> Oxygen | None:
    """Return the oxygen charted for ``moment``, or None."""
    return next(
        (part for part in timeline(case) if part.start <= moment and (part.end is None or moment < part.end)),
        None,
    )


class Stretch(Struct, frozen=True):
    """Minutes under one kind of oxygen, for the fall of carboxyhaemoglobin."""

    kind: str
    minutes: float
    said: str
    line: int


def stretches(case: Case, start: datetime, end: datetime) -> tuple[Stretch, ...]:
    """Return how the time from ``start`` to ``end`` was spent; what is not charted is said as such."""
    found: list[Stretch] = []
    reached = start
    for part in timeline(case):
        begins, ends = max(part.start, start), min(part.end or end, end)
        if ends <= begins:
            continue
        if begins > reached:
            found.append(_uncharted(reached, begins))
        found.append(Stretch(kind_of(case, part), charted.minutes(ends - begins), part.said(), part.line))
        reached = ends
    if reached < end:
        found.append(_uncharted(reached, end))
    return tuple(found)


def _uncharted(start: datetime, end: datetime) -> Stretch:
    return Stretch(UNCHARTED, charted.minutes(end - start), "oxygen not recorded", 0)


def kind_of(case: Case, part: Oxygen) -> str:
    """Return the kind of oxygen for the half-life: 100 %, room air, hyperbaric, or part of 100 %."""
    table = case.parameters.table("full_oxygen")
    if part.device == HYPERBARIC:
        return CHAMBER
    if part.set_pct is not None:
        if part.set_pct >= table["least percent"]:
            return FULL
        return AIR if part.set_pct <= case.parameters.number("fio2.room_air") else PART
    if part.device == ROOM_AIR:
        return AIR
    if part.device in table["devices"] and (
        part.flow_l_min is None or part.flow_l_min >= table["least flow"]
    ):
        return FULL
    return PART


class Fraction(Struct, frozen=True):
    """Inspired oxygen in %: set or charted (``low == high``), or estimated; ``table`` names the table."""

    low: float
    high: float
    estimated: bool
    table: str
    source: Source | None
    said: str

    def shown(self) -> str:
        """Return it as printed: ``60 %``, ``about 60 to 100 % (estimated)``."""
        if not self.estimated:
            return say.pct(self.low)
        if self.low == self.high:
            return f"about {say.pct(self.low)} (estimated)"
        return f"about {number_text(self.low, say.PLACES)} to {say.pct(self.high)} (estimated)"


def fraction(case: Case, part: Oxygen) -> tuple[Fraction | None, str]:
    """Return the inspired oxygen under ``part``, or None and what is missing for it."""
    if part.set_pct is not None:
        return Fraction(part.set_pct, part.set_pct, False, "as charted", None, part.said()), ""
    if part.device == ROOM_AIR:
        return _from(case, "fio2.room_air", part, estimated=False)
    valve = words(part.entry.get("valve"))
    if part.device == "venturi mask":
        if valve == "orange":
            return _from(case, "fio2.venturi_orange", part, estimated=True)
        if valve:
            table = case.parameters["fio2.venturi"]
            pct = float(table.value[valve])
            return Fraction(pct, pct, True, "by colour of the valve", table.source, part.said()), ""
        return None, f"oxygen of the venturi mask since {say.at(case, part.start)}"
    if part.device in SET_DEVICES:
        return None, f"oxygen set on the {part.device} since {say.at(case, part.start)}"
    return _by_table(case, part)


def _from(case: Case, key: str, part: Oxygen, estimated: bool) -> tuple[Fraction, str]:
    parameter = case.parameters[key]
    pct = float(parameter.value)
    return Fraction(pct, pct, estimated, parameter.source.locator, parameter.source, part.said()), ""


def _by_table(case: Case, part: Oxygen) -> tuple[Fraction | None, str]:
    parameter = case.parameters[f"fio2.{case.chosen('fio2').name}"]
    title = str(parameter.value["title"])
    rows = parameter.value.get(part.device)
    if rows is None:
        return None, f"no {part.device} in the {title}; chart the oxygen in % where it is measured"
    if part.flow_l_min is None:
        return None, f"flow of the {part.device} since {say.at(case, part.start)}"
    pct = formula.fio2_range_pct(part.flow_l_min, rows)
    if pct is None:
        flow = with_unit(part.flow_l_min, "L/min", say.PLACES)
        return None, f"no {part.device} at {flow} in the {title}"
    return Fraction(pct[0], pct[1], True, title, parameter.source, part.said()), ""


def items(case: Case, watched: bool) -> tuple[Item, ...]:
    """Return the oxygen in use and the inspired oxygen that goes with it."""
    key, label = "airway_watch.oxygen", "Oxygen"
    now = holding(case, case.now)
    if now is None:
        return (say.gap(key, label, system=System.BREATHING),) if watched else ()
    shown = f"{now.said()} since {say.at(case, now.start)}"
    item = say.fact(key, label, shown, as_of=now.start, system=System.BREATHING, line=now.line)
    return (item, _fraction_item(case, now))


def _fraction_item(case: Case, now: Oxygen) -> Item:
    key, label = "airway_watch.fio2", "Inspired oxygen"
    given, missing = fraction(case, now)
    if given is None:
        return say.gap(key, label, missing, unit="%", system=System.BREATHING)
    cautions = ("An open device gives an estimate only; it changes with the patient's breathing.",)
    working = Working(
        formula="inspired oxygen by device and flow",
        sum=f"{given.said}: {given.shown()}",
        inputs=(case.input("Oxygen", now.entry, now.said()),),
        rule=given.table,
    )
    return say.fact(
        key,
        label,
        given.shown(),
        value=given.high,
        unit="%",
        as_of=now.start,
        flag=Flag.NONE,
        system=System.BREATHING,
        working=working,
        sources=(given.source,) if given.source else (),
        cautions=cautions if given.estimated else (),
    )
