"""The handover as finished strings: page one, the four parts, tables, appendix."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from handoff.assess import Assessment
from handoff.document.appendix import Appendix, appendix
from handoff.document.changes import Changes
from handoff.document.charts import Burn, Hour, burns, hours, lost_tables
from handoff.document.figures import Figures, figures
from handoff.document.identity import Frame, Identity, frame, identity, person
from handoff.document.page_one import PageOne, page_one
from handoff.document.schedule import Shift
from handoff.document.sections import (
    LEGEND,
    NOT_RECORDED,
    Band,
    Block,
    Mark,
    Section,
    bands,
    cautions_of,
    missing_line,
    row,
    sentence,
    shown,
)
from handoff.document.timeline import Moment, Pending, pending, timeline
from handoff.plugin import Flag, Item, Part, System, words

ELSEWHERE = frozenset(
    f"handover.{name}" for name in ("if_then", "requests", "pending", "to_do", "from", "to")
)
"""Items that have a table of their own and are not repeated as rows."""

BURN_LINE = ("injury.causes", "area.counted", "area.full_thickness")
"""Items that tell the burn in one line of page one."""

IN_THE_BAND = frozenset(
    (
        "handover.concerns",
        "handover.severity",
        "injury.at",
        "injury.hours_since",
        "patient.allergies",
        "patient.isolation",
        "patient.resuscitation",
        "patient.weight",
    )
)
"""Items that stand in the identity band; they are repeated as rows only where they carry a flag."""

BEDSIDE_CHECKS = (
    ("identity", "Identity band read together: name, birth date, record number"),
    ("pumps", "Each pump: drug, concentration, rate and volume left, against the prescription"),
    ("lines", "Lines followed from bag to patient; sites and fixing seen"),
    ("airway", "Airway, tube depth and ties, oxygen device and flow"),
    ("alarms", "Monitor and ventilator alarms: on, limits set for this patient"),
    ("kit", "Emergency kit at the bed: suction, bag and mask, airway kit, working"),
    ("limbs", "Circumferential burns: pulses, colour and warmth looked at together"),
    ("dressings", "Dressings and urine bag looked at together"),
)


@dataclass(frozen=True, slots=True)
class Check:
    """One thing that giver and receiver look at together, with the tag of its tick box."""

    text: str
    tag: Mark


@dataclass(frozen=True, slots=True)
class Handover:
    """Everything that the handover prints."""

    frame: Frame
    bands: tuple[Band, ...]
    identity: Identity
    severity: str
    severity_said: str
    concerns: str
    burn: str
    given_by: str
    received_by: str
    page_one: PageOne
    changes: Changes
    legend: str
    situation: Section
    background: Section
    systems: tuple[Block, ...]
    assessment_missing: str
    recommendation: Section
    requests: tuple[str, ...]
    timeline: tuple[Moment, ...]
    pending: tuple[Pending, ...]
    checks: tuple[Check, ...]
    burns: tuple[Burn, ...]
    hours: tuple[Hour, ...]
    figures: Figures
    appendix: Appendix


def handover(assessment: Assessment, changes: Changes | None = None) -> Handover:
    """Return the handover of an assessment as finished strings, with what changed since an earlier one."""
    state = assessment.state
    written = state.handover
    shift = Shift(assessment.now, assessment.now + assessment.policy.shift_length, state.clock)
    assessed = [item for item in assessment.items if item.part is Part.ASSESSMENT]
    severity, said = _severity(assessment)
    return Handover(
        frame=frame("Burn handover", assessment),
        bands=bands(assessment, lost_tables(assessment)),
        identity=identity(assessment),
        severity=severity,
        severity_said=said,
        concerns="; ".join(state.texts(written.get("concerns"))) or NOT_RECORDED,
        burn="; ".join(_shown(assessment, key) for key in BURN_LINE),
        given_by=person(written.get("from")),
        received_by=person(written.get("to")),
        page_one=page_one(assessment, shift),
        changes=changes or Changes(),
        legend=LEGEND,
        situation=_section(assessment, Part.SITUATION),
        background=_section(assessment, Part.BACKGROUND),
        systems=_systems(assessed, assessment),
        assessment_missing=missing_line(assessed),
        recommendation=_section(assessment, Part.RECOMMENDATION),
        requests=state.texts(written.get("requests")),
        timeline=timeline(assessment, shift),
        pending=pending(assessment),
        checks=tuple(Check(text, Mark(f"check:{name}")) for name, text in BEDSIDE_CHECKS),
        burns=burns(assessment),
        hours=hours(assessment),
        figures=figures(assessment),
        appendix=appendix(assessment),
    )


def _shown(assessment: Assessment, key: str) -> str:
    item = assessment.item(key)
    if item is None:
        return f"{key.replace('.', ' ').replace('_', ' ')}: could not be computed"
    return f"{item.label[:1].lower()}{item.label[1:]}: {shown(item)}"


def _severity(assessment: Assessment) -> tuple[str, str]:
    state = assessment.state
    written = state.handover
    at = state.when(written.get("at"))
    said = f"given by {person(written.get('from'))}, received by {person(written.get('to'))}"
    said += f", {state.clock.day_and_time(at)}" if at else ""
    return words(written.get("severity")) or "severity not recorded by the nurse", said


def _section(assessment: Assessment, part: Part) -> Section:
    items = [item for item in assessment.items if item.part is part]
    printed = list(_printed(items))
    return Section(
        rows=tuple(row(item, assessment) for item in printed),
        cautions=cautions_of(printed),
        missing=missing_line(items),
    )


def _printed(items: Iterable[Item]) -> Iterable[Item]:
    for item in items:
        placed = item.key in ELSEWHERE or (item.key in IN_THE_BAND and item.flag is Flag.NONE)
        if item.flag is not Flag.NOT_RECORDED and not item.detail and not placed:
            yield item


def _systems(assessed: list[Item], assessment: Assessment) -> tuple[Block, ...]:
    blocks = []
    for system in System:
        printed = list(_printed(item for item in assessed if item.system is system))
        if printed:
            rows = tuple(row(item, assessment) for item in printed)
            blocks.append(Block(sentence(system.value), rows, cautions_of(printed)))
    return tuple(blocks)
