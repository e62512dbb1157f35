"""Patient-controlled pumps: settings, what was delivered, and until when they were read."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import (
    Case,
    Flag,
    Item,
    Map,
    Part,
    System,
    child,
    entries,
    hours_text,
    line_of,
    number,
    number_text,
    plural,
    words,
)

from .names import Drug, drug_of, route_of, unique_keys

SETTINGS = (
    ("concentration", "of"),
    ("bolus", "bolus"),
    ("lockout", "lockout"),
    ("background", "background"),
    ("hourly_limit", "hourly limit"),
)


class Pump(Struct, frozen=True):
    """One pump with one group of settings; ``stopped`` is None while nothing ends it."""

    line: str
    drug: Drug
    route: str
    start: datetime
    stopped: datetime | None
    readings: tuple[tuple[datetime, Map], ...]
    node: Map

    @property
    def read_at(self) -> datetime | None:
        """When it was last read, or None."""
        return self.readings[-1][0] if self.readings else None

    def unread_since(self, now: datetime) -> datetime | None:
        """Return since when nothing says what it gave, up to its stop or ``now``; None when read to the end."""
        read, end = self.read_at or self.start, self.stopped or now
        return read if read < end else None


def pumps(case: Case) -> tuple[Pump, ...]:
    """Return every pump, oldest settings first; later settings on the same line end the earlier ones."""
    found: list[Pump] = []
    for entry in entries(child(case.block, "patient_controlled")):
        drug, start = drug_of(case, entry.get("drug")), case.when(entry.get("from"))
        if drug is not None and start is not None:
            route = route_of(case, entry.get("route")) or "IV"
            line = words(entry.get("line"))
            ended = _ended(case, line, start, entry)
            found.append(Pump(line, drug, route, start, ended, _readings(case, entry), entry))
    return tuple(sorted(found, key=lambda pump: (pump.start, pump.line, pump.drug.name)))


def _readings(case: Case, entry: Map) -> tuple[tuple[datetime, Map], ...]:
    found = [
        (end, reading)
        for reading in entries(entry.get("delivered"))
        if (end := case.when(reading.get("to"))) is not None
    ]
    return tuple(sorted(found, key=lambda pair: pair[0]))


def _ended(case: Case, line: str, start: datetime, entry: Map) -> datetime | None:
    stopped = case.when(entry.get("stopped"))
    later = [
        begun
        for other in entries(child(case.block, "patient_controlled"))
        if line
        and words(other.get("line")) == line
        and (begun := case.when(other.get("from"))) is not None
        and begun > start
    ]
    return min([*later, *([stopped] if stopped is not None else [])], default=None)


def items(case: Case) -> tuple[Item, ...]:
    """Return each pump with its settings and its last reading."""
    found = pumps(case)
    keys = unique_keys(pump.line or str(index) for index, pump in enumerate(found, start=1))
    return tuple(_item(case, key, pump) for key, pump in zip(keys, found, strict=True))


def _item(case: Case, key: str, pump: Pump) -> Item:
    until = pump.read_at or pump.start
    return Item(
        key=f"pain.patient_controlled.{key}",
        label=f"Patient-controlled analgesia {pump.line}".strip(),
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=words(pump.readings[-1][1].get("total")) if pump.readings else None,
        shown=f"{_settings(case, pump)}; {_delivered(case, pump)}{_until(case, pump, until)}",
        as_of=until,
        flag=Flag.NONE if pump.readings else Flag.NOT_RECORDED,
        repeats=True,
        line=line_of(pump.node),
    )


def _settings(case: Case, pump: Pump) -> str:
    settings = [
        f"{said} {words(pump.node.get(key))}" for key, said in SETTINGS if pump.node.get(key) is not None
    ]
    start = case.clock.time(pump.start, case.now)
    return ", ".join([f"{pump.drug.name} {pump.route}", *settings, f"from {start}"])


def _delivered(case: Case, pump: Pump) -> str:
    if not pump.readings:
        return "delivered not recorded"
    end, reading = pump.readings[-1]
    said = f"{words(reading.get('total'))} delivered"
    start = case.when(reading.get("from"))
    if start is not None:
        said += f" from {case.clock.time(start, case.now)} to {case.clock.time(end, case.now)}"
    presses, served = number(reading.get("presses")), number(reading.get("given"))
    if presses is not None:
        said += f", {plural(int(presses), 'press', 'presses')}"
    if served is not None:
        said += f", {number_text(served)} gave a dose"
    return said


def _until(case: Case, pump: Pump, until: datetime) -> str:
    said = f"; ended {case.clock.time(pump.stopped, case.now)}" if pump.stopped is not None else ""
    if pump.unread_since(case.now):
        said += f"; not read for {hours_text(case.hours_between(until, pump.stopped or case.now))}"
    return said
