"""The watch beyond circumferential burns: the last finding with its age, and the checks to come."""

from __future__ import annotations

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
from .limbs import LimbCheck, Place, checks_at, interval, warnings_of, watch_ends, watched
from .sites import RANK_CIRCUMFERENTIAL

WHY_LIMB = "swelling can cut off the blood supply, and a lost pulse is a late sign"
WHY_TRUNK = "a tight burn can stop the chest from moving"
BEYOND = {
    "arm": "radial and ulnar pulse, palmar arch by Doppler",
    "leg": "dorsalis pedis and posterior tibial pulse, by Doppler where weak",
}
CAUTION = "a palpable pulse or a Doppler signal does not prove perfusion; look for low blood pressure first"


def items(case: Case, assessment: Assessment | None) -> tuple[Item, ...]:
    """Return one item for each place burned all round or checked: last finding, its age, warnings, what is late."""
    return tuple(_item(case, place) for place in watched(case, assessment))


def _item(case: Case, place: Place) -> Item:
    latest, warned = _latest(case, place)
    ends = watch_ends(case)
    over = ends is not None and case.now > ends
    shown, flag = _state(case, place, latest, warned, over)
    if is_comfort(case):
        flag = Flag.NONE if latest else Flag.NOT_RECORDED
    return Item(
        key=f"area.perfusion.{place.key}",
        label=f"{'Movement' if place.breathes else 'Beyond the burn'}: {place.name} ({place.regions})",
        part=Part.ASSESSMENT,
        system=System.BREATHING if place.breathes else System.LIMBS,
        shown=shown,
        as_of=latest[-1].at if latest else None,
        flag=flag,
        sources=_sources(case),
        cautions=() if place.breathes else (CAUTION,),
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


def _latest(case: Case, place: Place) -> tuple[list[LimbCheck], list[str]]:
    """The last check of each region and site of the place, and what in them warns."""
    checks = checks_at(case, place)
    latest = _latest_each(checks)
    return latest, [text for check in latest for text in warnings_of(case, check, _before(checks, check))]


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
    return RANK_CIRCUMFERENTIAL + (0 if warned else 2 if place.breathes else 1)


def _sources(case: Case) -> tuple[Source, ...]:
    names = ["perfusion.every", "perfusion.watch_for", "perfusion.warning", "perfusion.spo2_below"]
    names.append(f"compartment_pressure.{case.chosen('compartment_pressure').name}")
    limit = f"refill_limit.{case.chosen('refill_limit').name}"
    names += [limit] if limit in case.parameters else []
    return tuple(case.parameters.source_of(name) for name in names)


def actions(case: Case, assessment: Assessment | None) -> tuple[Action, ...]:
    """Return the check of each place burned all round or checked; none once the watch is over or comfort leads."""
    ends = watch_ends(case)
    if is_comfort(case) or (ends is not None and case.now > ends):
        return ()
    return tuple(_action(case, place) for place in watched(case, assessment))


def _action(case: Case, place: Place) -> Action:
    latest, warned = _latest(case, place)
    danger = WHY_TRUNK if place.breathes else WHY_LIMB
    return Action(
        key=f"area.watch.{place.key}",
        area="breathing" if place.breathes else "limb perfusion",
        text=_text(place),
        why=f"{_reason(case, place, latest, warned)}: {danger}",
        system=System.BREATHING if place.breathes else System.LIMBS,
        first_due=latest[-1].at + interval(case) if latest else case.now,
        every=interval(case),
        urgency=Urgency.NOW if warned or (place.all_round and place.deep) else Urgency.TIMED,
        sources=tuple(case.parameters.source_of(name) for name in ("perfusion.every", "perfusion.signs")),
        cautions=() if place.breathes else (CAUTION,),
    )


def _reason(case: Case, place: Place, latest: list[LimbCheck], warned: list[str]) -> str:
    if place.all_round:
        return f"burned all round ({place.regions})"
    last = f"checked at {case.clock.time(latest[-1].at, case.now)}"
    return f"{last}, {', '.join(warned)}" if warned else last


def _text(place: Place) -> str:
    if place.breathes:
        return (
            f"Watch the breathing behind the tight burn ({place.name}): chest movement, effort, rate, SpO2, "
            "airway pressures if ventilated; sit up; call if tight or worse"
        )
    pulses = f"{BEYOND[place.limb.rpartition(' ')[2]]}; " if place.limb else ""
    return (
        f"Check the {place.name} beyond the burn: {pulses}refill, colour, "
        "warmth, feeling, movement, pain on stretch, tightness, SpO2; compare with the other side; keep raised; "
        "call the burn surgeon at any change"
    )
