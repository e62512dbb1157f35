"""What care plans that came back say was done: a ticked task is due later, and never forgotten.

A tick changes no figure and takes no task away. It moves the time at which a task is due, and
says by whom and when it was ticked, because what was done may still not be charted.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from datetime import datetime

from msgspec import Struct
from msgspec.structs import replace

from handoff.findings import Action, Urgency
from handoff.state.access import entries, words
from handoff.state.patient import PatientState


class Tick(Struct, frozen=True):
    """The latest tick of a task: when it was due and done, as far as it was written, and by whom."""

    due: datetime | None
    done: datetime | None
    by: str

    @property
    def at(self) -> datetime | None:
        """When it was done, or was due where no time stands beside the tick."""
        return self.done or self.due

    def said(self, state: PatientState, now: datetime) -> str:
        """Return ``ticked done 20:05 by JO``."""
        time = f" {state.clock.time(self.done, now)}" if self.done else ", time not written"
        return f"ticked done{time}" + (f" by {self.by}" if self.by else "")


def ticks(state: PatientState, now: datetime) -> Mapping[str, Tick]:
    """Return the latest tick of each task by the key of the task, as of ``now``."""
    found: dict[str, tuple[datetime, Tick]] = {}
    for entry in entries(state.root.get("collected")):
        task, plan = words(entry.get("task")), state.when(entry.get("plan"))
        tick = Tick(state.when(entry.get("due")), state.when(entry.get("done")), words(entry.get("by")))
        moment = tick.at or plan
        if not task or moment is None or moment > now:
            continue
        if task not in found or found[task][0] <= moment:
            found[task] = (moment, tick)
    return {task: tick for task, (_, tick) in found.items()}


def known_done(actions: Sequence[Action], state: PatientState, now: datetime) -> tuple[Action, ...]:
    """Return ``actions`` with what was ticked done: due later, and with the tick in words among the cautions."""
    known = ticks(state, now)
    return tuple(
        _after(action, known[action.key], state, now) if action.key in known else action for action in actions
    )


def _after(action: Action, tick: Tick, state: PatientState, now: datetime) -> Action:
    said = tick.said(state, now)
    told = f"{said[0].upper()}{said[1:]} in a care plan; chart what was found."
    action = replace(action, cautions=(*action.cautions, told))
    at, first = tick.at, action.first_due
    if at is None:
        return action
    if action.every is not None:
        following = at + action.every
        is_later = following > first if first is not None else following > now
        return replace(action, first_due=following) if is_later else action
    if first is not None and (first <= at or first == tick.due):
        urgency = Urgency.NOW if action.urgency is Urgency.NOW else Urgency.SHIFT
        return replace(action, first_due=None, urgency=urgency)
    return action
