"""Glucose while insulin runs, and a glucose that is too low."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Reading,
    System,
    Urgency,
    amount,
    fact,
    number_text,
    words,
)

from .feeding import feed_now

RANK_LOW = 35


def _latest(readings: tuple[Reading, ...]) -> Reading | None:
    return readings[-1] if readings else None


def insulin_runs(case: Case) -> bool:
    """Return whether the last charted insulin rate is above 0."""
    last = _latest(case.state.series("insulin"))
    return last is not None and (amount(last.node, "units/h") or 0.0) > 0


def _low(case: Case, reading: Reading | None) -> bool:
    value = amount(reading.node, "mmol/L", "glucose") if reading else None
    return value is not None and value < case.parameters.number("glucose.low")


def items(case: Case) -> tuple[Item, ...]:
    """Return glucose beside insulin, or a glucose that is low; the fluid watch shows the rest."""
    last = _latest(case.state.result_series("glucose"))
    low, runs = _low(case, last), insulin_runs(case)
    if not (low or runs):
        return ()
    rate = _latest(case.state.series("insulin"))
    floor = number_text(case.parameters.number("glucose.low"), 1)
    parts = [words(last.node) if last else "not recorded"]
    parts += [f"below {floor} mmol/L"] if low else []
    if rate is not None:
        parts.append(f"insulin {words(rate.node)} at {case.clock.time(rate.at, case.now)}")
    found = feed_now(case)
    if runs and found is not None and not found[2]:
        parts.append("insulin runs while the feed is stopped")
    comfort = case.comfort
    flag = Flag.ACTION if low or "stopped" in parts[-1] else Flag.NONE
    if last is None:
        flag = Flag.ACTION
    return (
        fact(
            "nutrition.glucose",
            "Glucose beside insulin" if runs else "Glucose, low",
            "; ".join(parts),
            system=System.NUTRITION,
            value=amount(last.node, "mmol/L", "glucose") if last else None,
            unit="mmol/L",
            as_of=last.at if last else None,
            flag=Flag.NONE if comfort else flag,
            sources=(case.parameters.source_of("glucose.low"),),
            rank=RANK_LOW if low and not comfort else None,
            line=last.node.line if last else 0,
        ),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the check of glucose while insulin runs, and what to do about a low one."""
    if case.comfort:
        return ()
    last = _latest(case.state.result_series("glucose"))
    made = []
    if _low(case, last) and last is not None:
        made.append(
            Action(
                key="nutrition.low_glucose",
                area="Nutrition and bowels",
                text="Treat the low glucose by the unit's plan now, tell the doctor, and measure again soon after",
                why=f"{words(last.node)} at {case.clock.time(last.at, case.now)}",
                system=System.NUTRITION,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("glucose.low"),),
            )
        )
    if insulin_runs(case):
        every = timedelta(hours=case.parameters.number("glucose.every"))
        made.append(
            Action(
                key="nutrition.check_glucose",
                area="Nutrition and bowels",
                text="Glucose; if the feed stops, ask at once about the insulin",
                why="insulin runs",
                system=System.NUTRITION,
                first_due=last.at + every if last else case.now,
                every=every,
                urgency=Urgency.TIMED,
                sources=(case.parameters.source_of("glucose.every"),),
            )
        )
    return tuple(made)
