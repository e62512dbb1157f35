"""Whether the patient was on oxygen at a moment: as charted in the row, or by the oxygen in force."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Node, words

AIR = "room air"


class Oxygen(Struct, frozen=True):
    """Air or oxygen at a moment: ``on`` is None where nothing says so; ``at`` is when a row said it.

    A device holds from its start, which ``said`` names, and so has no time of its own.
    """

    on: bool | None
    said: str
    node: Node | None
    at: datetime | None = None


def oxygen_at(case: Case, moment: datetime, window: timedelta) -> Oxygen:
    """Return whether oxygen was given at ``moment``.

    What was charted in a row within ``window`` before it goes first. Otherwise the oxygen in
    force by the airway block counts, if there is one: it holds until its stop or the next entry.
    """
    charted = [
        one
        for one in case.state.series("on_oxygen")
        if moment - window <= one.at <= moment and words(one.node)
    ]
    if charted:
        last = charted[-1]
        return Oxygen(words(last.node) == "yes", "", last.node, last.at)
    entries = case.state.dated(case.state.at_path("airway_watch", "oxygen"), "from")
    started = [row for row in entries if row.at <= moment]
    if not started:
        return Oxygen(None, "", None)
    entry = started[-1].entry
    device = words(entry.get("device"))
    stopped = case.when(entry.get("stopped"))
    if stopped is not None and stopped <= moment:
        return Oxygen(False, f"{device} stopped {case.clock.time(stopped, case.now)}", entry)
    since = f"since {case.clock.time(started[-1].at, case.now)}"
    return Oxygen(device != AIR, f"{device} {since}" if device != AIR else since, entry)
