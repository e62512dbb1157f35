"""The latest vital signs and results, each with its time and what came before it; old ones say so."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import datetime, timedelta

from handoff.bundled.overview.charted import charted

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Node,
    Part,
    Reading,
    System,
    Urgency,
    child,
    line_of,
    read_date,
    unit_of,
    words,
)

VITALS = (
    ("resp", "Breaths", System.BREATHING),
    ("spo2", "Oxygen saturation by pulse oximeter", System.BREATHING),
    ("pulse", "Pulse", System.CIRCULATION),
    ("bp", "Blood pressure", System.CIRCULATION),
    ("map", "Mean arterial pressure, measured", System.CIRCULATION),
    ("pupils", "Pupils", System.DISABILITY),
)
ASKED = ("resp", "spo2", "pulse", "bp")
"""Vital signs whose absence is said; the others are shown where they were charted.

Consciousness and temperature have plugins of their own (``early_warning``, ``infection``)."""

SAID = {
    "resp": "breaths",
    "spo2": "SpO2",
    "pulse": "pulse",
    "bp": "blood pressure",
    "consciousness": "consciousness",
    "temp": "temperature",
}
"""What the check of vital signs looks at; a row with more than half of it is a check."""

FULL_ROW = tuple(SAID)

SATURATION = "vital.spo2"
GASES = ("ph", "pao2", "paco2", "base_excess", "bicarbonate")
TREND_LENGTH = 4

RESULT_NAMES = {
    "ph": "pH",
    "pao2": "PaO2",
    "paco2": "PaCO2",
    "fio2": "FiO2 of the sample",
    "ecg": "ECG",
    "c_reactive_protein": "C-reactive protein",
}
"""Names that their key does not spell as they are written."""


def vital_items(case: Case) -> tuple[Item, ...]:
    """Return the latest of each vital sign and each laboratory result, with its trend and age."""
    items = []
    for name, label, system in VITALS:
        readings = case.state.series(name)
        if readings or (name in ASKED and not case.comfort):
            items.append(_latest(case, f"vital.{name}", label, system, readings))
    items += _results(case)
    return tuple(items)


def _interval_name(case: Case) -> str:
    """The interval that holds: a longer one shortly before the way home, while nothing new needs action."""
    planned = words(child(case.state.root.get("wellbeing"), "discharge", "planned"))
    days = timedelta(days=case.parameters.number("vital.before_home_days"))
    day = read_date(planned).earliest() if planned else None
    is_near = day is not None and day <= case.clock.local(case.now + days).date()
    burn = case.state.burn_time
    after = case.parameters.number("vital.before_home_after")
    settled = burn is not None and case.hours_between(burn.latest, case.now) > after
    acts = any(
        item.flag is Flag.ACTION
        for name in ("early_warning", "infection")
        for item in (case.findings[name].items if name in case.findings else ())
    )
    return "vital.check_interval_before_home" if is_near and settled and not acts else "vital.check_interval"


def _said(node: Node) -> str:
    said = words(node)
    site = words(child(node, "site"))
    return f"{said} ({site})" if site else said


def _latest(case: Case, key: str, label: str, system: System, readings: tuple[Reading, ...]) -> Item:
    if not readings:
        return charted(key, label, "", Part.ASSESSMENT, system)
    last = readings[-1]
    shown = _said(last.node)
    doubts = _doubts(case) if key == SATURATION else {}
    shown += f", {doubts[last.at]}" if last.at in doubts else ""
    earlier = [reading for reading in readings[-TREND_LENGTH:-1] if unit_of(reading.node)]
    if earlier and unit_of(last.node):
        trend = ", ".join(
            f"{words(r.node)} at {case.clock.time(r.at, case.now)}{' (in doubt)' if r.at in doubts else ''}"
            for r in earlier
        )
        shown += f"; before: {trend}"
    age = case.now - last.at
    interval = timedelta(minutes=case.parameters.number(_interval_name(case)))
    flag = Flag.NONE
    if age > interval and not case.comfort:
        flag = Flag.REVIEW
        shown += f"; not rechecked since {case.clock.time(last.at, case.now)}"
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=system,
        value=_said(last.node),
        shown=shown,
        as_of=last.at,
        flag=flag,
        repeats=True,
        line=line_of(last.node),
    )


def _doubts(case: Case) -> Mapping[datetime, str]:
    """Return why each saturation after smoke cannot be trusted, by its moment, as the airway watch found it."""
    airway = case.findings.get("airway_watch")
    found = airway.values.get("spo2_doubts") if airway else None
    return found if isinstance(found, Mapping) else {}


def _results(case: Case) -> list[Item]:
    names: list[str] = []
    for row in case.state.results:
        names += [str(name) for name in row.entry if str(name) not in names]
    skipped = (
        "at",
        "by",
        "written",
        "note",
        "confirmed",
        "corrects",
        "struck",
        "specimen",
        "carboxyhaemoglobin",
    )
    items = []
    for name in names:
        if name in skipped:
            continue
        readings = case.state.result_series(name)
        last = readings[-1]
        system = System.BREATHING if name in GASES else System.GENERAL
        shown = words(last.node)
        earlier = ", ".join(f"{words(r.node)} at {case.clock.time(r.at, case.now)}" for r in readings[-3:-1])
        items.append(
            Item(
                key=f"result.{name}",
                label=RESULT_NAMES.get(name, name.replace("_", " ").capitalize()),
                part=Part.ASSESSMENT,
                system=system,
                value=shown,
                shown=f"{shown}; before: {earlier}" if earlier else shown,
                as_of=last.at,
                repeats=True,
                line=line_of(last.node),
            )
        )
    return items or [charted("result.any", "Laboratory results", "", Part.ASSESSMENT)]


def vital_actions(case: Case) -> tuple[Action, ...]:
    """Return the check of vital signs, due from the last row with most of them by the check interval.

    Where the goal is comfort nothing is asked: looking at comfort has a line of its own.
    """
    if case.comfort:
        return ()
    interval = timedelta(minutes=case.parameters.number(_interval_name(case)))
    rows = [
        row.at for row in case.state.rows if sum(name in row.entry for name in FULL_ROW) > len(FULL_ROW) / 2
    ]
    never = not any(case.state.series(name) for name in FULL_ROW)
    old = [
        f"{said} last at {case.clock.time(readings[-1].at, case.now)}"
        for name, said in SAID.items()
        if (readings := case.state.series(name)) and case.now - readings[-1].at > interval
    ]
    return (
        Action(
            key="vital.check",
            area="Observations",
            text="Breaths, SpO2, pulse, blood pressure, consciousness, temperature",
            why="; ".join(old) if old else "none charted yet" if never else "early change shows in the trend",
            system=System.CIRCULATION,
            first_due=rows[-1] + interval if rows else case.now,
            every=interval,
            urgency=Urgency.NOW if never else Urgency.TIMED,
            sources=(case.parameters.source_of(_interval_name(case)),),
        ),
    )
