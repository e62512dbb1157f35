"""Escharotomy and fasciotomy: requests that wait, and bleeding checks after a release."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import Action, Case, Flag, Item, Part, Row, Source, System, Urgency, hours_text, words

from .goal import is_comfort
from .limbs import LimbCheck, checks_of
from .regions import limb_of, named_in, touches
from .sites import RANK_CIRCUMFERENTIAL

DONE = ("escharotomy", "fasciotomy")
REQUESTED = "escharotomy requested"
NAMES = (
    "bleeding_first_every",
    "bleeding_first_for",
    "bleeding_then_every",
    "bleeding_watch_for",
)


def items(case: Case) -> tuple[Item, ...]:
    """Return the requests that wait for an answer, and each release with its last bleeding check."""
    requests = [row for row in case.state.events(REQUESTED) if _waits(case, row)]
    done = _released(case)
    return (
        *(_request(case, row, index) for index, row in enumerate(requests, start=1)),
        *(_release(case, row, index) for index, row in enumerate(done, start=1)),
    )


def _released(case: Case) -> list[Row]:
    return sorted((row for what in DONE for row in case.state.events(what)), key=lambda row: row.at)


def _waits(case: Case, request: Row) -> bool:
    """Whether its outcome is not charted, and no release of that site followed."""
    if "outcome" in request.entry:
        return False
    site = words(request.entry.get("site"))
    return not any(
        row.at >= request.at and _same(site, words(row.entry.get("site"))) for row in _released(case)
    )


def _same(site: str, other: str) -> bool:
    """Whether two sites in the nurse's words may be one: equal, unnamed, or naming regions that touch."""
    if not site or not other or site.lower() == other.lower():
        return True
    return any(touches(one, two) for one in named_in(site) for two in named_in(other))


def _request(case: Case, row: Row, index: int) -> Item:
    waited = hours_text(case.hours_between(row.at, case.now))
    site = words(row.entry.get("site"))
    answered = case.when(row.entry.get("answered"))
    asked = f"; charted as: {words(row.entry.get('who'))}" if words(row.entry.get("who")) else ""
    return Item(
        key=f"area.release_requested.{index}",
        label=f"Release of a tight burn requested{f', {site}' if site else ''}",
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        shown=f"requested at {case.clock.time(row.at, case.now)}{asked}; "
        + (
            f"no answer charted for {waited}"
            if answered is None
            else f"answered at {case.clock.time(answered, case.now)}, what was decided is not recorded"
        ),
        as_of=answered or row.at,
        flag=Flag.NONE if is_comfort(case) else Flag.ACTION if answered is None else Flag.REVIEW,
        repeats=True,
        rank=None if is_comfort(case) else RANK_CIRCUMFERENTIAL,
        line=row.line,
    )


def _one_limb(region: str, other: str) -> bool:
    """Whether two regions belong to one limb: blood from a forearm may be found at the hand."""
    return touches(limb_of(region) or region, limb_of(other) or other)


def _checks(case: Case, row: Row) -> list[LimbCheck]:
    """The bleeding checks after a release; a site that names no region of the body takes every check."""
    named = named_in(words(row.entry.get("site")))
    return [
        check
        for check in checks_of(case, "whole body")
        if check.at >= row.at
        and words(check.entry.get("bleeding")) not in ("", "not assessed")
        and (not named or any(_one_limb(check.region, name) for name in named))
    ]


def _number(case: Case, name: str) -> float:
    return case.parameters.number(f"escharotomy.{name}")


def _next_check(case: Case, row: Row, last: datetime | None) -> datetime | None:
    """Return when bleeding is next due to be looked at; None once the watch is over."""
    if case.now > row.at + timedelta(hours=_number(case, "bleeding_watch_for")):
        return None
    since = last or row.at
    first = since < row.at + timedelta(minutes=_number(case, "bleeding_first_for"))
    every = _number(case, "bleeding_first_every" if first else "bleeding_then_every")
    return since + timedelta(minutes=every)


def _sources(case: Case) -> tuple[Source, ...]:
    return tuple(case.parameters.source_of(f"escharotomy.{name}") for name in NAMES)


def _release(case: Case, row: Row, index: int) -> Item:
    checks = _checks(case, row)
    last = checks[-1] if checks else None
    due = _next_check(case, row, last.at if last else None)
    site, what = words(row.entry.get("site")), words(row.entry.get("what"))
    said = f"{what} at {case.clock.time(row.at, case.now)}"
    if last is None:
        said += "; bleeding check not recorded"
    else:
        said += f"; bleeding {words(last.entry.get('bleeding'))} at {case.clock.time(last.at, case.now)}"
    flag = Flag.NONE if due is None else Flag.NOT_RECORDED if last is None else Flag.NONE
    if due is not None and due < case.now:
        said += f"; next check was due at {case.clock.time(due, case.now)}"
        flag = Flag.REVIEW
    if last is not None and words(last.entry.get("bleeding")) == "active":
        flag = Flag.ACTION
    return Item(
        key=f"area.release.{index}",
        label=f"After release of a tight burn{f', {site}' if site else ''}",
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        shown=said,
        as_of=last.at if last else row.at,
        flag=flag,
        sources=_sources(case),
        cautions=("perfusion beyond a release is still checked: one release may not be enough",),
        rank=RANK_CIRCUMFERENTIAL if flag is Flag.ACTION else None,
        line=row.line,
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the bleeding checks that each release still asks for."""
    found = []
    for index, row in enumerate(_released(case), start=1):
        checks = _checks(case, row)
        due = _next_check(case, row, checks[-1].at if checks else None)
        if due is None or is_comfort(case):
            continue
        first = case.now < row.at + timedelta(minutes=_number(case, "bleeding_first_for"))
        every = _number(case, "bleeding_first_every" if first else "bleeding_then_every")
        site = words(row.entry.get("site")) or "the released area"
        found.append(
            Action(
                key=f"area.bleeding_check.{index}",
                area="limb perfusion",
                text=f"Look for bleeding from {site}: through the dressing, under the limb; pulse, blood pressure; "
                "press and raise and call if active",
                why="a release bleeds more as blood flow and pressure return",
                system=System.LIMBS,
                first_due=due,
                every=timedelta(minutes=every),
                urgency=Urgency.TIMED,
                sources=_sources(case),
            )
        )
    return tuple(found)
