"""Frostbite: the rewarming bath, the time since thaw and the checks of the thawed part."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import (
    Action,
    Case,
    Findings,
    Flag,
    Item,
    Part,
    Plugin,
    System,
    Urgency,
    Working,
    amount,
    child,
    entries,
    hours_text,
    joined,
    line_of,
    with_unit,
    words,
)

from .formula import degrees_outside, hours_left


def compute(case: Case) -> Findings:
    """Return what to know of a frozen part; nothing where neither block nor cause speaks of cold."""
    causes = entries(case.state.injury.get("causes"))
    if case.block is None and not any(words(cause.get("kind")) == "cold" for cause in causes):
        return Findings()
    return Findings((_bath(case), _since_thaw(case), _parts(case)), _actions(case))


def _bath(case: Case) -> Item:
    key, label = "frostbite.bath", "Rewarming bath"
    baths = case.state.dated(child(case.block, "baths"))
    if not baths:
        return _missing(key, label)
    last = baths[-1]
    range_id = f"bath_range.{case.chosen('bath_range').name}"
    lowest, highest = case.parameters[range_id].value
    water_c = amount(last.entry.get("water"), "C") or 0.0
    outside = degrees_outside(water_c, lowest, highest)
    side = "above" if outside > 0 else "below"
    found = f"{with_unit(abs(outside), 'C', 1)} {side} the range" if outside else "within the range"
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        value=water_c,
        unit="C",
        shown=f"water {with_unit(water_c, 'C', 1)}, {found} {lowest} to {highest} C",
        as_of=last.at,
        flag=Flag.REVIEW if outside else Flag.NONE,
        working=Working(
            formula="distance from a range",
            sum=f"{with_unit(water_c, 'C', 1)} against {lowest} to {highest} C",
            inputs=(case.input("water", last.entry.get("water")),),
            rule=case.chosen("bath_range").name,
        ),
        sources=(case.parameters.source_of(range_id),),
        cautions=("Never rewarm a part that may freeze again.",),
        line=line_of(last.entry),
    )


def _since_thaw(case: Case) -> Item:
    key, label = "frostbite.hours_since_thaw", "Time since thaw"
    thawed = child(case.block, "thawed")
    at = case.when(thawed)
    if at is None:
        return _missing(key, label)
    elapsed_h = case.hours_between(at, case.now)
    window_h = case.parameters.number("thrombolysis_window")
    left_h = hours_left(window_h, elapsed_h)
    window = f"window of {with_unit(window_h, 'h')} for thrombolysis"
    left = f"open for {hours_text(left_h)} more" if left_h else "passed"
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        value=elapsed_h,
        unit="h",
        shown=f"{hours_text(elapsed_h)}; {window} {left}, ask the receiving centre",
        as_of=at,
        working=Working(
            formula="time left in a window",
            sum=f"{with_unit(window_h, 'h')} - {with_unit(elapsed_h, 'h', 2)} = {with_unit(left_h, 'h', 2)}",
            inputs=(case.input("thawed", thawed),),
        ),
        sources=(case.parameters.source_of("thrombolysis_window"),),
        cautions=("The length of the window is from memory: confirm it before use.",),
        line=line_of(thawed),
    )


def _parts(case: Case) -> Item:
    key, label = "frostbite.parts", "Frozen parts"
    rows = case.state.dated(child(case.block, "parts"))
    if not rows:
        return _missing(key, label)
    said = []
    for name in dict.fromkeys(words(row.entry.get("part")) for row in rows):
        last = [row for row in rows if words(row.entry.get("part")) == name][-1]
        signs = [
            f"{sign} {words(last.entry.get(sign)) or 'not recorded'}" for sign in ("feeling", "blisters")
        ]
        said.append(f"{name}: {joined(signs)} at {case.clock.time(last.at, case.now)}")
    shown = "; ".join(said)
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        value=shown,
        shown=shown,
        as_of=rows[-1].at,
        repeats=True,
        line=line_of(rows[-1].entry),
    )


def _missing(key: str, label: str) -> Item:
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.LIMBS,
        shown="not recorded",
        flag=Flag.NOT_RECORDED,
    )


def _actions(case: Case) -> tuple[Action, ...]:
    rows = case.state.dated(child(case.block, "parts"))
    names = joined(tuple(dict.fromkeys(words(row.entry.get("part")) for row in rows)))
    every = timedelta(hours=case.parameters.number("check_interval"))
    return (
        Action(
            key="frostbite.check",
            area="Frozen parts",
            text=f"Colour, feeling and blisters of {names or 'the frozen part'}; keep it dry, raised and off pressure",
            why="the line of loss shows in the first day",
            system=System.LIMBS,
            first_due=rows[-1].at + every if rows else case.now,
            every=every,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of("check_interval"),),
        ),
    )


plugin = Plugin(name="frostbite", title="Frostbite", package="handoff_frostbite", compute=compute)
