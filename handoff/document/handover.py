"""The handover as finished strings: page one, the four parts, tables, appendix."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.appendix import Appendix, appendix
from handoff.document.brief import Brief, BriefSystem, brief, brief_systems, missing_names
from handoff.document.changes import Changes
from handoff.document.charts import Burn, Hour, burns, hours, lost_tables
from handoff.document.figures import Figures, figures
from handoff.document.identity import Frame, Identity, frame, identity, person
from handoff.document.page_one import PageOne, keys_on_page_one, page_one
from handoff.document.schedule import Shift
from handoff.document.sections import (
    LEGEND,
    NOT_RECORDED,
    Band,
    Block,
    Mark,
    bands,
    cautions_of,
    row,
    sentence,
    shown,
)
from handoff.document.timeline import Moment, Pending, in_brief, pending, timeline
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
    ("identity", "Identity band read together: name, birth date, number"),
    ("pumps", "Each pump: drug, strength, rate, volume left, prescription"),
    ("lines", "Lines followed from bag to patient; sites and fixing seen"),
    ("airway", "Airway, tube depth and ties, oxygen device and flow"),
    ("alarms", "Monitor and ventilator alarms on, limits set"),
    ("kit", "Emergency kit works: suction, bag and mask, airway kit"),
    ("limbs", "Burns all round: pulses, colour and warmth seen together"),
    ("dressings", "Dressings and urine bag looked at together"),
)


class Check(Struct, frozen=True):
    """One thing that giver and receiver look at together, with the tag of its tick box."""

    text: str
    tag: Mark


class Handover(Struct, frozen=True):
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
    situation: Brief
    background: Brief
    systems: tuple[BriefSystem, ...]
    assessment_missing: str
    recommendation: Brief
    requests: tuple[str, ...]
    timeline: tuple[Moment, ...]
    pending: tuple[Pending, ...]
    checks: tuple[Check, ...]
    burns: tuple[Burn, ...]
    hours: tuple[Hour, ...]
    figures: Figures
    detail: tuple[Block, ...]
    to_do: tuple[Moment, ...]
    appendix: Appendix


def handover(assessment: Assessment, changes: Changes | None = None) -> Handover:
    """Return the handover of an assessment as finished strings, with what changed since an earlier one."""
    state = assessment.state
    written = state.handover
    shift = Shift(assessment.now, assessment.now + assessment.policy.shift_length, state.clock)
    assessed = [item for item in assessment.items if item.part is Part.ASSESSMENT]
    severity, said = _severity(assessment)
    moments = timeline(assessment, shift)
    placed = ELSEWHERE | {
        item.key for item in assessment.items if item.key in IN_THE_BAND and item.flag is Flag.NONE
    }
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
        situation=brief(Part.SITUATION, assessment, placed | set(BURN_LINE)),
        background=brief(Part.BACKGROUND, assessment, placed),
        systems=brief_systems(assessment, placed, keys_on_page_one(assessment, shift)),
        assessment_missing=missing_names(assessed),
        recommendation=brief(Part.RECOMMENDATION, assessment, placed),
        requests=state.texts(written.get("requests")),
        timeline=in_brief(moments),
        pending=pending(assessment),
        checks=tuple(Check(text, Mark(f"check:{name}")) for name, text in BEDSIDE_CHECKS),
        burns=burns(assessment),
        hours=hours(assessment),
        figures=figures(assessment),
        detail=detail_blocks(assessment),
        to_do=moments,
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
    said = f"said by: {person(written.get('from'))}"
    said += f", {state.clock.day_and_time(at)}" if at else ""
    return words(written.get("severity")) or "severity not recorded by the nurse", said


def detail_blocks(assessment: Assessment) -> tuple[Block, ...]:
    """Return every item of the body in full: the parts as they are read, the assessment by system."""
    blocks = []
    for part in Part:
        items = [item for item in assessment.items if item.part is part and _is_printed(item)]
        if part is Part.ASSESSMENT:
            for system in System:
                own = [item for item in items if item.system is system]
                blocks.append(_block(system.value, own, assessment))
        else:
            blocks.append(_block(part.value, items, assessment))
    return tuple(block for block in blocks if block.rows)


def _block(title: str, items: list[Item], assessment: Assessment) -> Block:
    return Block(sentence(title), tuple(row(item, assessment) for item in items), cautions_of(items))


def _is_printed(item: Item) -> bool:
    return item.flag is not Flag.NOT_RECORDED and not item.detail and item.key not in ELSEWHERE
