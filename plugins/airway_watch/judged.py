"""Whether the airway watch is asked for: by what, by nothing that is recorded, or not to be judged."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import Action, Case, Flag, Item, System, Urgency

from . import charted, say
from .exposure import REGIONS, Exposure

RANK = 10


def why(case: Case, seen: Exposure, start: datetime | None) -> Item:
    """Return the item that says what asks for the watch, what does not, or that it cannot be judged."""
    missing = f"; not recorded: {say.and_list(seen.missing)}" if seen.missing else ""
    if seen.comfort:
        shown = f"not asked for: comfort care is recorded{missing}"
    elif seen.reasons:
        shown = f"asked for by {say.and_list(seen.reasons)}{missing}"
    elif seen.cannot_be_judged:
        shown = unjudged(seen)
    else:
        shown = f"not asked for by what is recorded: {'; '.join(_known(case, seen))}{missing}"
    flag = Flag.NOT_RECORDED if seen.missing and not seen.reasons else Flag.NONE
    since = start if seen.watched else None
    rank = RANK if seen.cannot_be_judged else None
    return say.fact("airway_watch.watch", "Airway watch", shown, as_of=since, flag=flag, rank=rank)


def unjudged(seen: Exposure) -> str:
    """Return what would have to be recorded, as one phrase."""
    return f"cannot be judged: {say.and_list(seen.unknown)} not recorded"


def _known(case: Case, seen: Exposure) -> list[str]:
    """Return what was recorded and asks for nothing; a blank is never among it."""
    known = [] if seen.smoke_open else ["cause and setting as charted, without smoke"]
    if REGIONS not in seen.missing:
        known.append("burns as charted, none of them of the face or deep of the neck")
    looked = charted.check_times(case)
    if looked:
        known.append(f"airway signs last looked for {say.at(case, looked[-1])}")
    return known


def first_look(seen: Exposure) -> Action:
    """Return the first look at an airway about which too little is recorded."""
    return Action(
        key="airway_watch.first_look",
        area="Airway",
        text="Look at and listen to the airway now; chart each sign as present, absent or not assessed",
        why=unjudged(seen),
        system=System.AIRWAY,
        urgency=Urgency.NOW,
        cautions=("Any sign: call for senior airway help at once.",),
    )
