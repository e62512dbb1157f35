"""The watch beyond circumferential burns: the last finding with its age, and the checks to come."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Part,
    Source,
    System,
    Urgency,
    hours_text,
    number_text,
)

from .assessment import Assessment
from .goal import is_comfort
from .limbs import LimbCheck, Place, checks_of, interval, places, warnings_of, watch_ends
from .sites import RANK_CIRCUMFERENTIAL

WHY_LIMB = "swelling can cut off the blood supply, and a lost pulse is a late sign"
WHY_TRUNK = "a tight burn can stop the chest from moving"
BEYOND = {
    "arm": "radial and ulnar pulse, palmar arch by Doppler",
    "leg": "dorsalis pedis and posterior tibial pulse, by Doppler where weak",
}
CAUTION = "a palpable pulse or a Doppler signal does not prove perfusion; look for low blood pressure first"


def items(case: Case, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return one item for each place burned all round: last finding, its age, what warns, what is overdue."""
    return tuple(_item(case, place) for place in places(assessment))


def _item(case: Case, place: Place) -> Item:
    checks = checks_of(case, place.name, breaths=not place.limb)
    latest = _latest_each(checks)
    warned = [text for check in latest for text in warnings_of(case, check, _before(checks, check))]
    ends = watch_ends(case)
    over = ends is not None and case.now > ends
    shown, flag = _state(case, place, latest, warned, over)
    if is_comfort(case):
        flag = Flag.NONE if latest else Flag.NOT_RECORDED
    return Item(
        key=f"area.perfusion.{place.key}",
        label=f"{'Beyond the burn' if place.limb else 'Movement'}: {place.name} ({place.regions})",
        part=Part.ASSESSMENT,
        system=System.LIMBS if place.limb else System.BREATHING,
        shown=shown,
        as_of=latest[-1].at if latest else None,
        flag=flag,
        sources=_sources(case),
        cautions=(CAUTION,) if place.limb else (),
        rank=_rank(flag, place, bool(warned)),
        line=latest[-1].entry.line if latest else place.burns[0].line,
    )


def _state(
    case: Case, place: Place, latest: list[LimbCheck], warned: list[str], over: bool
) -> tuple[str, Flag]:
    if not latest:
        shown = f"no check charted; due every {number_text(interval(case).total_seconds() / 60)} min"
        if over:
            return f"no check charted; the watch of {_watch(case)} is over", Flag.NOT_RECORDED
        return shown, Flag.ACTION if place.deep else Flag.NOT_RECORDED
    said = "; ".join(
        f"{_where(check, place)}{check.said()} at {case.clock.time(check.at, case.now)}" for check in latest
    )
    late = case.hours_between(latest[-1].at + interval(case), case.now)
    if warned:
        said = f"warning: {', '.join(warned)}. {said}"
    if late > 0 and not over:
        since = case.clock.time(latest[-1].at, case.now)
        said = f"not reassessed since {since}, overdue by {hours_text(late)}. {said}"
    if warned:
        return said, Flag.ACTION
    return said, Flag.REVIEW if late > 0 and not over else Flag.NONE


def _watch(case: Case) -> str:
    return f"{number_text(case.parameters.number('perfusion.watch_for'))} h after the burn"


def _where(check: LimbCheck, place: Place) -> str:
    named = ", ".join(
        part for part in (check.region if check.region != place.name else "", check.site) if part
    )
    return f"{named}: " if named else ""


def _latest_each(checks: tuple[LimbCheck, ...]) -> list[LimbCheck]:
    """The last check of each region and pulse site, oldest first: a hand may warn while the wrist does not."""
    last = {(check.region, check.site): check for check in checks}
    return sorted(last.values(), key=lambda check: check.at)


def _before(checks: tuple[LimbCheck, ...], check: LimbCheck) -> LimbCheck | None:
    same = [
        one for one in checks if (one.region, one.site) == (check.region, check.site) and one.at < check.at
    ]
    return same[-1] if same else None


def _rank(flag: Flag, place: Place, warned: bool) -> int | None:
    if flag is not Flag.ACTION:
        return None
    return RANK_CIRCUMFERENTIAL + (0 if warned else 1 if place.limb else 2)


def _sources(case: Case) -> tuple[Source, ...]:
    names = ["perfusion.every", "perfusion.watch_for", "perfusion.warning", "perfusion.spo2_below"]
    names.append(f"compartment_pressure.{case.chosen('compartment_pressure').name}")
    limit = f"refill_limit.{case.chosen('refill_limit').name}"
    names += [limit] if limit in case.parameters else []
    return tuple(case.parameters.source_of(name) for name in names)


def actions(case: Case, assessment: Assessment | None) -> tuple[Action, ...]:
    """Return the check of each place burned all round; none once the watch is over or comfort leads."""
    ends = watch_ends(case)
    if is_comfort(case) or (ends is not None and case.now > ends):
        return ()
    return tuple(_action(case, place) for place in places(assessment))


def _action(case: Case, place: Place) -> Action:
    return Action(
        key=f"area.watch.{place.key}",
        area="limb perfusion" if place.limb else "breathing",
        text=_text(place),
        why=f"burned all round ({place.regions}): {WHY_LIMB if place.limb else WHY_TRUNK}",
        system=System.LIMBS if place.limb else System.BREATHING,
        first_due=_first_due(case, place),
        every=interval(case),
        urgency=Urgency.NOW if place.deep else Urgency.TIMED,
        sources=tuple(case.parameters.source_of(name) for name in ("perfusion.every", "perfusion.signs")),
        cautions=(CAUTION,) if place.limb else (),
    )


def _first_due(case: Case, place: Place) -> datetime:
    checks = checks_of(case, place.name, breaths=not place.limb)
    return max(checks[-1].at + interval(case), case.now) if checks else case.now


def _text(place: Place) -> str:
    if not place.limb:
        return (
            f"Watch the breathing behind the tight burn ({place.name}): chest movement, effort, rate, SpO2, "
            "airway pressures if ventilated; sit up; call if tight or worse"
        )
    return (
        f"Check the {place.name} beyond the burn: {BEYOND[place.limb.rpartition(' ')[2]]}; refill, colour, "
        "warmth, feeling, movement, pain on stretch, tightness, SpO2; compare with the other side; keep raised; "
        "call the burn surgeon at any change"
    )
