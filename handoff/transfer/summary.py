"""The transfer summary: airway first, then the patient by four parts, medicines, pumps, oxygen, burn and fluid."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.appendix import Appendix, appendix
from handoff.document.brief import Brief, BriefSystem, brief, brief_systems
from handoff.document.charts import Burn, Hour, burns, hours, lost_tables
from handoff.document.figures import Figures, figures
from handoff.document.handover import BURN_LINE, ELSEWHERE, IN_THE_BAND, detail_blocks
from handoff.document.identity import Frame, Identity, frame, identity
from handoff.document.page_one import KeyRow, PageOne, page_one
from handoff.document.schedule import Shift
from handoff.document.sections import LEGEND, Band, Block, Mark, bands
from handoff.document.timeline import Moment, Pending, pending
from handoff.plugin import Flag, Part
from handoff.transfer import block
from handoff.transfer.law import Law
from handoff.transfer.medicines import Medicine, last_doses, not_given
from handoff.transfer.missing import answers, missing
from handoff.transfer.profile import Profile


class Summary(Struct, frozen=True):
    """Everything that the transfer summary prints."""

    frame: Frame
    bands: tuple[Band, ...]
    identity: Identity
    profile: str
    missing: tuple[str, ...]
    airway: str
    airway_plan: tuple[block.Line, ...]
    journey: tuple[block.Line, ...]
    actions: tuple[KeyRow, ...]
    more_actions: str
    situation: Brief
    background: Brief
    systems: tuple[BriefSystem, ...]
    assessment_missing: str
    legend: str
    recommendation: Brief
    scores: tuple[block.Line, ...]
    advice: tuple[block.Advice, ...]
    medicines: tuple[Medicine, ...]
    not_given: tuple[Medicine, ...]
    pumps: tuple[block.Pump, ...]
    oxygen: tuple[block.Line, ...]
    pending: tuple[Pending, ...]
    people: tuple[block.Line, ...]
    enclosed: tuple[block.Ticked, ...]
    records: tuple[block.Ticked, ...]
    files: tuple[str, ...]
    law: tuple[Law, ...]
    burns: tuple[Burn, ...]
    hours: tuple[Hour, ...]
    figures: Figures


class WorkingSheet(Struct, frozen=True):
    """Every value in full, how it was worked out, and its source."""

    frame: Frame
    identity: Identity
    detail: tuple[Block, ...]
    to_do: tuple[Moment, ...]
    appendix: Appendix


def working_sheet(assessment: Assessment) -> WorkingSheet:
    """Return the sheet that a reader checks the figures by."""
    return WorkingSheet(
        frame=frame("Working and sources", assessment),
        identity=identity(assessment),
        detail=detail_blocks(assessment),
        to_do=(),
        appendix=appendix(assessment),
    )


def summary(
    assessment: Assessment, profile: Profile, law: tuple[Law, ...], files: tuple[str, ...]
) -> Summary:
    """Return the transfer summary; ``files`` are the names of what the packet holds."""
    placed = ELSEWHERE | frozenset(
        item.key for item in assessment.items if item.key in IN_THE_BAND and item.flag is Flag.NONE
    )
    placed |= frozenset(item.key for item in assessment.items if item.key.startswith("transfer."))
    first = _first(assessment)
    answered = answers(assessment, profile)
    return Summary(
        frame=frame("Transfer summary", assessment),
        bands=bands(assessment, lost_tables(assessment)),
        identity=identity(assessment),
        profile=profile.name,
        missing=missing(answered),
        airway=block.airway(assessment)[0],
        airway_plan=block.airway(assessment)[1],
        journey=block.journey(assessment),
        actions=first.actions,
        more_actions=first.more_actions,
        situation=brief(Part.SITUATION, assessment, placed | set(BURN_LINE) - {"injury.causes"}),
        background=brief(Part.BACKGROUND, assessment, placed),
        assessment_missing="",
        legend=LEGEND.replace("Detail by system", "the working sheet"),
        systems=brief_systems(assessment, placed, frozenset()),
        recommendation=brief(Part.RECOMMENDATION, assessment, placed),
        scores=tuple(
            block.Line(item.label, f"{item.shown} ({'; '.join(item.cautions)})")
            for key in ("area.revised_baux", "area.absi")
            if (item := assessment.item(key))
        ),
        advice=block.advice(assessment),
        medicines=last_doses(assessment),
        not_given=not_given(assessment),
        pumps=block.pumps(assessment),
        oxygen=block.oxygen(assessment),
        pending=pending(assessment),
        people=block.people(assessment),
        enclosed=block.enclosed(assessment),
        records=tuple(
            block.Ticked(text, "", Mark(f"record:{number}")) for number, text in enumerate(profile.records, 1)
        ),
        files=files,
        law=law,
        burns=burns(assessment),
        hours=hours(assessment),
        figures=figures(assessment),
    )


def _first(assessment: Assessment) -> PageOne:
    now = assessment.now
    return page_one(assessment, Shift(now, now + assessment.policy.shift_length, assessment.state.clock))
