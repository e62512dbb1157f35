"""The early warning score: its parts, what they reach, and what the burn does to it."""

from __future__ import annotations

from typing import Any

from msgspec import Struct

from handoff.plugin import (
    NOT_RECORDED,
    Action,
    Case,
    Flag,
    Item,
    System,
    Urgency,
    Working,
    fact,
    joined,
    number_text,
)

from . import formula, patient
from .readings import SignSet, set_times, sign_set

LABEL = "Early warning score (NEWS2)"
RANKS = {"emergency threshold": 38, "urgent threshold": 39}
ANSWERS = ("review by doctor", "call for help")
COMFORT = "the goal of care is comfort, and the score asks for nothing"
EARLIER = 3
LOOK_BACK = 12
"""How many earlier moments are tried for the trend; a long stay is not read from its start."""

ASK = {
    "emergency threshold": "Start continuous monitoring and call now for emergency assessment by the team with "
    "critical-care and airway skills",
    "urgent threshold": "Tell the medical team at once and ask for an urgent assessment",
    "one sign scores 3": "Tell the medical team and ask them to review",
}
NEVER_LOWERS = "A low score never lowers another flag: it says nothing about airway, limbs or urine."
CAUTIONS = (
    "Not tested in large burns: pain and the fast metabolism of a burn raise pulse and temperature.",
    "Write where cuff and probe sat; lids swollen shut are not a lower level of consciousness.",
    NEVER_LOWERS,
)


class Scored(Struct, frozen=True):
    """The latest set with the step that it reaches; ``step`` is None where nothing can be said yet."""

    signs: SignSet
    step: str | None
    step_said: str


def scored(case: Case) -> Scored | None:
    """Return the latest set of signs, judged; None where there is none, or the method or the goal does not fit."""
    times = set_times(case)
    if (
        not times
        or case.comfort
        or patient.not_for(case, times[-1])
        or patient.age_at(case, times[-1]) is None
    ):
        return None
    signs = sign_set(case, times[-1])
    reached = _step(case, signs)
    if signs.missing and (reached["name"] not in ASK):
        return Scored(signs, None, "")
    return Scored(signs, str(reached["name"]), str(reached["said"]))


def _step(case: Case, signs: SignSet) -> dict[str, Any]:
    steps = case.parameters["news2.response"].value
    found: dict[str, Any] = steps[formula.step_of(signs.at_least, max(signs.points, default=0), steps)]
    return found


def items(case: Case, found: Scored | None) -> tuple[Item, ...]:
    """Return the score, or why there is none."""
    return (_score(case, found) if found else _no_score(case),)


def _no_score(case: Case) -> Item:
    times = set_times(case)
    moment = times[-1] if times else case.now
    reason = patient.not_for(case, moment) or (COMFORT if case.comfort else "")
    if reason:
        return fact(
            "early_warning.score",
            LABEL,
            f"not computed: {reason}",
            system=System.GENERAL,
            unit="points",
            detail=True,
        )
    shown = "not computed: age is not recorded" if times else NOT_RECORDED
    return fact(
        "early_warning.score", LABEL, shown, system=System.GENERAL, unit="points", flag=Flag.NOT_RECORDED
    )


def _score(case: Case, found: Scored) -> Item:
    signs = found.signs
    asks = found.step in ASK
    doubt = patient.saturation_doubt(case)
    gap = bool(signs.missing)
    flag = Flag.ACTION if asks else Flag.NOT_RECORDED if gap else Flag.NONE
    return fact(
        "early_warning.score",
        LABEL,
        _shown(case, found, doubt),
        system=System.GENERAL,
        value=signs.total,
        unit="points",
        as_of=signs.at,
        flag=flag,
        working=Working(
            formula="points of breaths, SpO2, air or oxygen, systolic pressure, pulse, consciousness and temperature",
            sum=" + ".join(str(point) for point in signs.points)
            + (
                f" = {signs.total}"
                if not gap
                else f", {joined([part.missing for part in signs.missing])} missing"
            ),
            inputs=tuple(part.input() for part in signs.parts if part.points is not None),
            rule=f"NEWS2, {signs.scale}",
        ),
        sources=[part.source for part in signs.parts],
        cautions=_cautions(case, doubt),
        rank=RANKS.get(found.step or "") if asks else None,
        line=max((part.node.line for part in signs.parts if part.node is not None), default=0),
    )


def _shown(case: Case, found: Scored, doubt: str) -> str:
    signs = found.signs
    parts = "; ".join(part.said() for part in signs.parts if part.points is not None)
    if signs.missing:
        what = joined([part.missing for part in signs.missing])
        head = f"incomplete, {what} not recorded; the other parts make at least {signs.at_least}"
    else:
        head = str(signs.total)
    if found.step in ASK:
        head += f", {found.step}" + (f" ({found.step_said})" if found.step_said else "")
    if doubt:
        head += f", may read falsely low: {doubt}"
    trend = _trend(case, signs)
    return f"{head}. {parts}{f'. Before: {trend}' if trend else ''}"


def _trend(case: Case, latest: SignSet) -> str:
    earlier = [moment for moment in set_times(case) if moment < latest.at][-LOOK_BACK:]
    said: list[str] = []
    for moment in reversed(earlier):
        signs = sign_set(case, moment)
        if signs.total is not None and len(said) < EARLIER:
            said.insert(0, f"{signs.total} at {case.clock.time(moment, case.now)}")
    return ", ".join(said)


def _cautions(case: Case, doubt: str) -> tuple[str, ...]:
    found = list(CAUTIONS)
    if doubt:
        found.insert(
            0, "A pulse oximeter reads carboxyhaemoglobin as oxygen, so that the score may be too low."
        )
    if patient.pregnancy_unknown(case):
        found.append("Pregnancy is not recorded; the score is not for pregnancy.")
    return tuple(found)


def actions(case: Case, found: Scored | None) -> tuple[Action, ...]:
    """Return the call that the score asks for, unless a call or a review after it is recorded."""
    if found is None or found.step not in ASK or answered(case, found):
        return ()
    signs = found.signs
    score = str(signs.total) if signs.total is not None else f"at least {signs.at_least}"
    high = [part.said() for part in signs.parts if part.points == max(signs.points)]
    within = f"news2.assess_within.{found.step}"
    sources = [case.parameters.source_of("news2.response")]
    text = ASK[found.step]
    if within in case.parameters:
        text += f", within {number_text(case.parameters.number(within))} min"
        sources.append(case.parameters.source_of(within))
    return (
        Action(
            key="early_warning.call",
            area="Early warning",
            text=text,
            why=f"early warning score {score} at {case.clock.time(signs.at, case.now)}: {', '.join(high)}",
            system=System.GENERAL,
            urgency=Urgency.NOW,
            sources=tuple(sources),
        ),
    )


def answered(case: Case, found: Scored) -> str:
    """Return what is recorded after the set that answers it; empty where nothing is."""
    rows = [row for what in ANSWERS for row in case.state.events(what) if row.at >= found.signs.at]
    if not rows:
        return ""
    last = max(rows, key=lambda row: row.at)
    return f"{last.entry['what']} recorded at {case.clock.time(last.at, case.now)}"
