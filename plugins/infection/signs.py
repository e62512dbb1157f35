"""The signs that the lists of triggers ask for, each as last charted, in the unit of its line."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Case,
    Node,
    Reading,
    amount,
    child,
    entries,
    hours_text,
    number_text,
    pressure_pair,
    words,
)

from . import formula

OBSERVED = {"temp": "C", "pulse": "/min", "resp": "/min", "minute_ventilation": "L/min", "insulin": "units/h"}
TESTED = {
    "platelets": ("platelets", "x10^9/L"),
    "white_cells": ("white_cells", "x10^9/L"),
    "glucose": ("glucose", "mmol/L"),
    "glucose_mg_dl": ("glucose", "mg/dL"),
    "paco2": ("paco2", "mmHg"),
    "sodium": ("sodium", "mmol/L"),
    "procalcitonin": ("procalcitonin", "mcg/L"),
}
NAMES = {
    "temp": "temperature",
    "resp": "breaths",
    "minute_ventilation": "minute ventilation",
    "white_cells": "white cells",
    "glucose_mg_dl": "glucose",
    "paco2": "arterial carbon dioxide",
    "insulin_rise": "rise of insulin in the window",
    "systolic": "systolic pressure",
    "mind": "consciousness",
    "bowel": "bowel",
    "wound": "wound",
    "feeding_not_possible": "tube feeding",
}
CLEAR = ("alert", "soft and moving", "better", "same")
UNSAID = ("", "not measured", "not assessed", "sedated", "no trace")


class Sign(Struct, frozen=True):
    """One sign as last charted: a number in the unit of its line, or a finding that is there or not."""

    name: str
    value: float | None
    present: bool | None
    said: str
    at: datetime | None
    node: Node | None

    @property
    def known(self) -> bool:
        """Whether it was charted within the window."""
        return self.value is not None or self.present is not None


def label_of(name: str) -> str:
    """Return a sign as it is printed."""
    return NAMES.get(name, name.replace("_", " "))


def sign(case: Case, name: str) -> Sign:
    """Return the sign ``name`` as last charted within the window; unknown where it was not."""
    if name in OBSERVED:
        return _number(case, name, case.state.series(name), OBSERVED[name])
    if name in TESTED:
        key, unit = TESTED[name]
        return _number(
            case, name, case.state.result_series(key), unit, kind="glucose" if key == "glucose" else ""
        )
    if name == "systolic":
        return _systolic(case)
    if name == "mind":
        return _finding(case, name, case.state.series("consciousness"))
    if name == "insulin_rise":
        return _insulin_rise(case)
    if name == "feeding_not_possible":
        return _feeding(case)
    rows = case.state.dated(child(case.block, "looked"))
    readings = tuple(Reading(row.at, row.entry[name], row.entry) for row in rows if name in row.entry)
    return _finding(case, name, readings)


def _window(case: Case) -> timedelta:
    return timedelta(hours=case.parameters.number("sepsis.window"))


def _unknown(name: str) -> Sign:
    return Sign(name, None, None, "", None, None)


def _number(case: Case, name: str, readings: tuple[Reading, ...], unit: str, kind: str = "") -> Sign:
    found = [(one, amount(one.node, unit, kind)) for one in readings if one.at >= case.now - _window(case)]
    known = [(one, value) for one, value in found if value is not None]
    if not known:
        return _unknown(name)
    last, value = known[-1]
    said = f"{words(last.node)} at {case.clock.time(last.at, case.now)}"
    return Sign(name, value, None, said, last.at, last.node)


def _systolic(case: Case) -> Sign:
    found = [one for one in case.state.series("bp") if one.at >= case.now - _window(case)]
    pairs = [(one, pair) for one in found if (pair := pressure_pair(one.node)) is not None]
    if not pairs:
        return _unknown("systolic")
    last, pair = pairs[-1]
    said = f"{number_text(pair[0])} mmHg at {case.clock.time(last.at, case.now)}"
    return Sign("systolic", pair[0], None, said, last.at, last.node)


def _finding(case: Case, name: str, readings: tuple[Reading, ...]) -> Sign:
    found = [one for one in readings if one.at >= case.now - _window(case) and words(one.node) not in UNSAID]
    if not found:
        return _unknown(name)
    last = found[-1]
    said = f"{words(last.node)} at {case.clock.time(last.at, case.now)}"
    return Sign(name, None, words(last.node) not in CLEAR, said, last.at, last.node)


def _insulin_rise(case: Case) -> Sign:
    found = [one for one in case.state.series("insulin") if one.at >= case.now - _window(case)]
    rates = [(one, rate) for one in found if (rate := amount(one.node, "units/h")) is not None]
    if len(rates) < 2 or rates[0][1] == 0:
        return _unknown("insulin_rise")
    rise = formula.rise_pct(rates[-1][1], rates[0][1])
    last = rates[-1][0]
    said = f"insulin {words(rates[0][0].node)} to {words(last.node)}, {number_text(rise, 1)} %"
    return Sign("insulin_rise", rise, None, said, last.at, last.node)


def _feeding(case: Case) -> Sign:
    node = child(case.block, "feeding_not_possible")
    longest = None
    for entry in entries(node):
        start, end = case.when(entry.get("from")), case.when(entry.get("until")) or case.now
        if start is not None and end >= case.now - _window(case):
            hours = case.hours_between(start, end)
            if longest is None or hours > (longest.value or 0.0):
                said = f"not possible for {hours_text(hours)} ({words(entry.get('why'))})"
                longest = Sign("feeding_not_possible", hours, None, said, start, entry)
    return longest or _unknown("feeding_not_possible")
