"""One line for each patient of a ward, the one who needs action first on top. Nothing confidential is read."""

from __future__ import annotations

import hashlib
import math
from collections.abc import Iterable, Sequence
from datetime import datetime
from typing import TypeAlias

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.page_one import page_one
from handoff.document.schedule import Shift
from handoff.document.sections import CAUTION, Band
from handoff.document.ward import Ward, WardFrame, WardRow
from handoff.plugin import Action, Flag, Urgency, plural, words
from handoff.shift.due import overdue_count

EVENTS_SHOWN = 3
"""Coming events of one patient that have room in the line."""

AWAITED = "handover.pending."
"""Results that are awaited are no events of the shift."""

NO_FLAG = "no entry is flagged ACTION"

Place: TypeAlias = tuple[int, float]
"""Where a patient stands in the table: by the kind of mark, then by its rank; the lowest on top."""

ACTS, HAS_GAPS, NO_MARK = 0, 1, 2
LAST = math.inf


class Standing(Struct, frozen=True):
    """One patient of the ward: what the line prints, and what it is sorted by."""

    row: WardRow
    place: Place
    overdue: int
    name: str
    moment: str
    now: datetime
    digest: str


def standing(assessment: Assessment, who: str) -> Standing:
    """Return the line of one patient; ``who`` names them in it."""
    state, clock = assessment.state, assessment.state.clock
    first, place = _first(assessment)
    overdue = overdue_count(assessment)
    return Standing(
        row=WardRow(
            patient=who,
            place=words(state.patient.get("location")) or "location not recorded",
            severity=words(state.handover.get("severity")) or "not recorded by the nurse",
            first=first,
            overdue=str(overdue),
            next="; ".join(_events(assessment)) or "none planned in the shift",
        ),
        place=place,
        overdue=overdue,
        name=state.name.casefold(),
        moment=f"{clock.day_and_time(assessment.now)} ({clock.zone})",
        now=assessment.now,
        digest=state.digest,
    )


def in_order(patients: Iterable[Standing]) -> list[Standing]:
    """Return patients by what can kill first, then by how much is overdue, then by name."""
    return sorted(patients, key=lambda one: (one.place, -one.overdue, one.name, one.row.patient))


def ward_page(
    patients: Sequence[Standing],
    unit: str,
    mixed_up: Sequence[str],
    unread: Sequence[str],
    lost: Sequence[str],
) -> Ward:
    """Return the page of a ward.

    Args:
        patients: The patients, in any order.
        unit: The name of the unit; may be empty.
        mixed_up: Who could be taken for whom, a line each.
        unread: What could not be read, a line each.
        lost: What could not be computed, a line each.
    """
    bands = [
        Band("Could not be read and is not in the table", tuple(unread)),
        Band("Could not be computed; work it out by hand", tuple(lost)),
        Band("Look twice: who could be taken for whom", tuple(mixed_up)),
    ]
    moments = dict.fromkeys(one.moment for one in patients)
    return Ward(
        frame=WardFrame("Burn ward", unit, "; ".join(moments) or "no time", CAUTION),
        count=plural(len(patients), "patient"),
        bands=tuple(band for band in bands if band.lines),
        rows=tuple(one.row for one in in_order(patients)),
    )


def digest_of(patients: Sequence[Standing]) -> str:
    """Return the SHA-256 of the clinical content of all patients."""
    return hashlib.sha256("".join(sorted(one.digest for one in patients)).encode()).hexdigest()


def _first(assessment: Assessment) -> tuple[str, Place]:
    """Return what needs action first and its place; a gap that can kill where nothing else is flagged."""
    page = page_one(assessment, Shift(assessment.now, assessment.now, assessment.state.clock))
    acting = [item for item in assessment.items if item.flag is Flag.ACTION]
    gaps = [item for item in assessment.not_recorded if item.rank is not None]
    if page.actions:
        row = page.actions[0]
        value = row.value.removesuffix(" (more further on)")
        more = f" (and {len(acting) - 1} more)" if len(acting) > 1 else ""
        said = f"{row.what}: {value}{f', {row.time}' if row.time else ''}{more}"
    else:
        said = page.more_actions or (f"not recorded and needed first: {page.gaps}" if page.gaps else NO_FLAG)
    if assessment.failures:
        said += "; NOT ALL COMPUTED"
    group = ACTS if acting else HAS_GAPS if gaps else NO_MARK
    return said, (group, min((item.rank for item in acting or gaps if item.rank is not None), default=LAST))


def _events(assessment: Assessment) -> list[str]:
    """Return the coming events of the shift that happen once, each with its time."""
    start, clock = assessment.now, assessment.state.clock
    end = start + assessment.policy.shift_length
    coming: list[tuple[datetime, Action]] = []
    for action in assessment.actions:
        once = action.urgency is Urgency.TIMED and action.every is None and not action.key.startswith(AWAITED)
        if once and action.first_due is not None and start <= action.first_due < end:
            coming.append((action.first_due, action))
    coming.sort(key=lambda event: (event[0], event[1].key))
    said = [f"{clock.time(at, start)} {action.text}" for at, action in coming[:EVENTS_SHOWN]]
    return said + ([f"and {len(coming) - EVENTS_SHOWN} more"] if len(coming) > EVENTS_SHOWN else [])
