"""Last food, the feed by tube against its target, and whether the tube is known to lie in the stomach."""

from __future__ import annotations

from datetime import datetime, timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    System,
    Urgency,
    Working,
    amount,
    child,
    fact,
    gap,
    number_text,
    words,
)

from . import formula

RANK_TUBE = 28


def feed_now(case: Case) -> tuple[Map, datetime, bool] | None:
    """Return the latest entry of tube feed, its start, and whether it runs; None where none is charted."""
    rows = case.state.dated(child(case.block, "tube_feed"), "from")
    if not rows:
        return None
    return rows[-1].entry, rows[-1].at, "stopped" not in rows[-1].entry


def items(case: Case) -> tuple[Item, ...]:
    """Return what is charted of food, feed and tube; nothing where nothing is."""
    return (*_last_food(case), *_feed(case), *_tube(case), *_dietitian(case))


def _last_food(case: Case) -> tuple[Item, ...]:
    node = child(case.block, "last_food")
    at = case.when(child(node, "at"))
    if not isinstance(node, Map) or at is None or "struck" in node:
        return (gap("nutrition.last_food", "Last food", system=System.NUTRITION),) if _is_asked(case) else ()
    shown = words(node.get("what")) or "what is not recorded"
    return (
        fact(
            "nutrition.last_food",
            "Last food",
            shown,
            system=System.NUTRITION,
            value=shown,
            as_of=at,
            line=node.line,
        ),
    )


def _is_asked(case: Case) -> bool:
    """Return whether a blank is a gap: early after the burn, when an anaesthetic may come at any time."""
    burn, hours = case.state.burn_time, case.parameters.number("last_food.window")
    return not case.comfort and burn is not None and case.hours_between(burn.earliest, case.now) <= hours


def _feed(case: Case) -> tuple[Item, ...]:
    found = feed_now(case)
    if found is None:
        return ()
    entry, since, runs = found
    rate, target = amount(entry.get("rate"), "mL/h") or 0.0, amount(entry.get("target"), "mL/h")
    said = f"{words(entry.get('product')) or 'feed not named'} {words(entry.get('rate'))}"
    value = working = None
    if target:
        value = formula.of_target_pct(rate, target)
        said += f", {number_text(value)} % of the target of {words(entry.get('target'))}"
        working = Working(
            formula="rate / rate aimed at",
            sum=f"{words(entry.get('rate'))} / {words(entry.get('target'))} = {number_text(value, 1)} %",
            inputs=(case.input("rate", entry.get("rate")), case.input("target", entry.get("target"))),
        )
    stopped = case.when(entry.get("stopped"))
    if stopped is not None:
        why = words(entry.get("why")) or "reason not recorded"
        said += f"; stopped since {case.clock.time(stopped, case.now)} ({why})"
    return (
        fact(
            "nutrition.tube_feed",
            "Feed by tube",
            said,
            system=System.NUTRITION,
            value=value,
            unit="%" if value is not None else "",
            as_of=since,
            flag=Flag.NONE if runs or case.comfort else Flag.REVIEW,
            working=working,
            line=entry.line,
        ),
    )


def _tube(case: Case) -> tuple[Item, ...]:
    found = feed_now(case)
    rows = case.state.dated(child(case.block, "tube_checks"))
    if not rows and (found is None or not found[2]):
        return ()
    source = case.parameters.source_of("tube.every")
    label, runs = "Where the feeding tube lies", found is not None and found[2]
    if not rows:
        return (
            fact(
                "nutrition.tube_position",
                label,
                "no check charted while feed runs",
                system=System.NUTRITION,
                flag=Flag.REVIEW,
                sources=(source,),
            ),
        )
    last = rows[-1].entry
    confirmed = words(last.get("position")) == "confirmed"
    late = formula.is_longer(case.hours_between(rows[-1].at, case.now), case.parameters.number("tube.every"))
    parts = [words(last.get("position")), words(last.get("how"))]
    residual = words(last.get("residual"))
    parts += [f"drawn back {residual}"] if residual else []
    parts += ["not checked since"] if late and runs else []
    danger = not confirmed and runs
    return (
        fact(
            "nutrition.tube_position",
            label,
            "; ".join(part for part in parts if part),
            system=System.NUTRITION,
            as_of=rows[-1].at,
            flag=Flag.ACTION if danger else Flag.REVIEW if late and runs else Flag.NONE,
            sources=(source,),
            rank=RANK_TUBE if danger else None,
            line=last.line,
        ),
    )


def _dietitian(case: Case) -> tuple[Item, ...]:
    said = words(child(case.block, "dietitian"))
    node = child(case.block, "dietitian")
    if not said or node is None:
        return ()
    return (
        fact("nutrition.dietitian", "Dietitian", said, system=System.NUTRITION, value=said, line=node.line),
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the check of the tube while feed runs, and the restart of a feed that was stopped."""
    found = feed_now(case)
    if found is None:
        return ()
    _, _, runs = found
    rows = case.state.dated(child(case.block, "tube_checks"))
    every = timedelta(hours=case.parameters.number("tube.every"))
    source = case.parameters.source_of("tube.every")
    if not runs:
        if case.comfort:
            return ()
        return (
            Action(
                key="nutrition.restart",
                area="Nutrition and bowels",
                text="Ask whether the tube feed may start again, and when",
                why="stopped as charted; a burned patient cannot fast for long",
                system=System.NUTRITION,
            ),
        )
    doubtful = bool(rows) and words(rows[-1].entry.get("position")) != "confirmed"
    return (
        Action(
            key="nutrition.check_tube",
            area="Nutrition and bowels",
            text="Stop the feed; have the position of the tube confirmed before it runs again"
            if doubtful
            else "Tube: mark at the nostril, strip of what is drawn back, fixing; before each new bag too",
            why="position not confirmed"
            if doubtful
            else "feed into the lung kills, and swelling and turning move a tube",
            system=System.NUTRITION,
            first_due=None if doubtful else rows[-1].at + every if rows else case.now,
            every=None if doubtful else every,
            urgency=Urgency.NOW if doubtful else Urgency.TIMED,
            sources=(source,),
        ),
    )
