"""Arithmetic of a timetable of checks, in minutes after its start."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from typing import TypeAlias

from handoff.plugin import FormulaInputError

Phase: TypeAlias = Sequence[float | None]
"""One stretch of a schedule: minutes between checks, and the minute after the start at which it ends (or None)."""


def _stretches(phases: Sequence[Phase]) -> Iterator[tuple[float, float, float]]:
    begins = 0.0
    for phase in phases:
        every, until = phase
        ends = math.inf if until is None else until
        if every is None or every <= 0 or ends <= begins:
            raise FormulaInputError("each phase needs an interval above 0 and an end after the phase before")
        yield begins, ends, every
        begins = ends


def next_slot_min(last_check_min: float | None, phases: Sequence[Phase], early_min: float) -> float | None:
    """Return the minute after the start at which the next check is due; None when the schedule has ended.

    A check counts for the slot that follows it when it comes at most ``early_min`` before it.

    Args:
        last_check_min: Minute of the last check, negative before the start; None for no check.
        phases: The schedule: (minutes between checks, minute of the end or None) in order.
        early_min: Minutes by which a check may come early and still count.

    Raises:
        FormulaInputError: The schedule runs backwards or has no interval.
    """
    after = -math.inf if last_check_min is None else last_check_min + early_min
    for begins, ends, every in _stretches(phases):
        steps = 1 if after < begins else math.floor((after - begins) / every) + 1
        slot = begins + steps * every
        if slot <= ends:
            return slot
    return None


def interval_min(minute: float, phases: Sequence[Phase]) -> float | None:
    """Return the minutes between checks in force at a minute after the start; None when the schedule has ended.

    Args:
        minute: Minute after the start; before the start the first interval holds.
        phases: The schedule.

    Raises:
        FormulaInputError: The schedule runs backwards or has no interval.
    """
    return next((every for _, ends, every in _stretches(phases) if minute < ends), None)


def missed_slots_min(
    checks_min: Sequence[float], now_min: float, phases: Sequence[Phase], early_min: float
) -> tuple[float, ...]:
    """Return the minutes of the slots that passed without a check before the next slot opened.

    Args:
        checks_min: Minutes of the checks that were made, in any order.
        now_min: The present minute.
        phases: The schedule.
        early_min: Minutes by which a check may come early and still count.

    Raises:
        FormulaInputError: The schedule runs backwards or has no interval.
    """
    missed = []
    slot = next_slot_min(None, phases, early_min)
    while slot is not None:
        following = next_slot_min(slot - early_min, phases, early_min)
        closes = (slot + _last_interval(phases) if following is None else following) - early_min
        if closes > now_min:
            break
        if not any(slot - early_min <= check < closes for check in checks_min):
            missed.append(slot)
        slot = following
    return tuple(missed)


def _last_interval(phases: Sequence[Phase]) -> float:
    return [every for _, _, every in _stretches(phases)][-1]
