"""The crew's sheet: pre-departure checklist, blank observations for the road, signatures."""

from __future__ import annotations

from datetime import timedelta

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.identity import Frame, Identity, frame, identity
from handoff.document.sections import Mark
from handoff.plugin import amount
from handoff.transfer.block import Line, airway, at, journey
from handoff.transfer.profile import Profile

ROWS_LEAST, ROWS_MOST = 12, 28
"""Lines of the observation sheet: for a journey that takes longer than planned, and no more than fit."""

CHECKS = (
    ("Airway", "Looked at again just before leaving; decision and decider written on the summary"),
    ("Airway", "Tube: size, depth, position confirmed; tied, not taped to burned skin"),
    ("Airway", "Head up; suction, bag and mask, airway kit on board and tried"),
    ("Breathing", "Oxygen for the journey and the reserve on board; gauge read"),
    ("Breathing", "Chest moves freely; release of a tight chest burn asked about"),
    ("Circulation", "Two working lines, fixed and reachable; through burn only if there is no other place"),
    ("Circulation", "Fluid: plan, start, total given and rate now written; bags for the road on board"),
    ("Circulation", "Urine of the last hour measured; bag emptied and time written"),
    ("Disability", "Coma scale, pupils and glucose written"),
    ("Exposure", "Clothing off the burn; rings, watches, piercings and lenses out; who holds them"),
    ("Exposure", "Clothing and evidence kept in a labelled bag, if asked for"),
    ("Exposure", "Temperature measured; warm covers, warm cabin, warm fluids"),
    ("Wounds", "Covered clean and dry; no cream unless the receiver asked for it"),
    ("Wounds", "Burned limbs raised; pulses beyond circumferential burns felt and written"),
    ("Tubes", "Gastric tube and urinary catheter if asked for; nil by mouth said to patient and crew"),
    ("Drugs", "Last analgesia and time written; drugs for the journey drawn up and labelled"),
    ("Drugs", "Pumps: drug, strength, rate, volume left and battery checked by two"),
    ("People", "Wrist band read aloud against these papers: name, birth date, number"),
    ("People", "Patient and family told where to; telephone number given; consent asked"),
    ("People", "Receiver rung with the time of leaving"),
)


class Check(Struct, frozen=True):
    """One line to tick before leaving."""

    area: str
    text: str
    tag: Mark


class Blank(Struct, frozen=True):
    """One blank line of the observation sheet, with the time planned for it."""

    due: str
    key: Mark


class Journey(Struct, frozen=True):
    """Everything that the crew's sheet prints."""

    frame: Frame
    identity: Identity
    airway: str
    airway_plan: tuple[Line, ...]
    way: tuple[Line, ...]
    checks: tuple[Check, ...]
    every: str
    rows: tuple[Blank, ...]


def crew_sheet(assessment: Assessment, profile: Profile) -> Journey:
    """Return the sheet that the crew writes on."""
    head, plan = airway(assessment)
    checks = (*CHECKS, *(("This receiver", text) for text in profile.checklist))
    return Journey(
        frame=frame("Journey sheet", assessment),
        identity=identity(assessment),
        airway=head,
        airway_plan=plan,
        way=journey(assessment),
        checks=tuple(
            Check(area, text, Mark(f"leave:{number}")) for number, (area, text) in enumerate(checks, start=1)
        ),
        every=f"every {profile.observe_every_min:g} min, and at every change",
        rows=_rows(assessment, profile),
    )


def _rows(assessment: Assessment, profile: Profile) -> tuple[Blank, ...]:
    leaves = assessment.state.when(at(assessment, "journey", "leaves"))
    lasts = amount(at(assessment, "journey", "lasts"), "min", "duration") or 0
    wanted = int(lasts // profile.observe_every_min) + 4
    count = min(max(wanted, ROWS_LEAST), ROWS_MOST)
    rows = []
    for number in range(count):
        due = leaves + timedelta(minutes=number * profile.observe_every_min) if leaves else None
        rows.append(
            Blank(
                assessment.state.clock.time(due, leaves) if due and leaves else "", Mark(f"road:{number + 1}")
            )
        )
    return tuple(rows)
