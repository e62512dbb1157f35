"""Dressings by area: what lies on the wound since when, and when it is due."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Map,
    Source,
    System,
    Urgency,
    Working,
    child,
    fact,
    gap,
    hours_text,
    number_text,
    words,
)

from . import formula
from .burned import Burned

WORSE = ("smell", "spreading redness")


class Dressing(Struct, frozen=True):
    """The latest dressing of one place; ``due`` is None where neither chart nor table says when."""

    where: str
    product: str
    done: datetime
    due: datetime | None
    how: str
    decides: bool
    source: Source | None
    entry: Map

    @property
    def worse(self) -> tuple[str, ...]:
        """What speaks for infection of the wound."""
        return tuple(name for name in WORSE if words(self.entry.get(name)) == "present")

    @property
    def soaked(self) -> bool:
        """Whether it is soaked through."""
        return words(self.entry.get("soaked")) == "yes"


def dressings(case: Case) -> tuple[Dressing, ...]:
    """Return the latest dressing of each place, those due first in front."""
    latest: dict[str, Map] = {}
    for row in case.state.dated(child(case.block, "dressings"), "done"):
        latest[words(row.entry.get("where")).lower()] = row.entry
    found = [_dressing(case, entry) for entry in latest.values()]
    return tuple(sorted(found, key=lambda one: (one.due is None, one.due or one.done, one.where)))


def _dressing(case: Case, entry: Map) -> Dressing:
    product, done = words(entry.get("product")), case.when(entry.get("done")) or case.now
    where, called = words(entry.get("where")), words(entry.get("called")) or product
    charted = case.when(entry.get("next"))
    if charted is not None:
        return Dressing(where, called, done, charted, "as charted", True, None, entry)
    name = f"dressing.{product}"
    if name not in case.parameters:
        return Dressing(where, called, done, None, "", False, None, entry)
    parameter = case.parameters[name]
    days = case.parameters.number(name)
    due = done + timedelta(hours=formula.interval_hours(days))
    how = f"at the latest {number_text(days)} d after it was put on"
    return Dressing(where, called, done, due, how, parameter.kind != "from memory", parameter.source, entry)


def items(case: Case, skin: Burned) -> tuple[Item, ...]:
    """Return one item for each dressed place, or that no dressing is charted for a burn."""
    found = dressings(case)
    if not found:
        if not skin.burns:
            return ()
        return (gap("wounds.dressings", "Dressings", system=System.WOUND),)
    return tuple(_item(case, index, one) for index, one in enumerate(found, start=1))


def _item(case: Case, index: int, one: Dressing) -> Item:
    late = one.due is not None and one.due < case.now and one.decides
    flag = Flag.ACTION if one.worse else Flag.REVIEW if late or one.soaked else Flag.NONE
    working = None
    if one.source is not None and one.due is not None:
        working = Working(
            formula="time of the dressing + how long it stays at the latest",
            sum=f"{case.clock.day_and_time(one.done)}, {one.how} = {case.clock.day_and_time(one.due)}",
            inputs=(case.input(f"dressing of {one.where}", one.entry.get("done")),),
            rule=one.product,
        )
    return fact(
        f"wounds.dressing.{index}",
        f"Dressing: {one.where}",
        _said(case, one, late),
        system=System.WOUND,
        value=one.due,
        unit="time" if one.due else "",
        as_of=one.done,
        flag=Flag.NONE if case.comfort else flag,
        working=working,
        sources=(one.source,) if one.source else (),
        cautions=(
            "How long a dressing stays is for the wound and its team; soaked or smelling, it is changed.",
        ),
        line=one.entry.line,
    )


def _said(case: Case, one: Dressing, late: bool) -> str:
    by = words(one.entry.get("by"))
    parts = [f"{one.product}, put on {case.clock.day_and_time(one.done)}{f' by {by}' if by else ''}"]
    if one.due is None:
        parts.append("next change not recorded")
    else:
        memory = ", from memory" if one.source is not None and one.source.kind == "from memory" else ""
        parts.append(f"next due {case.clock.day_and_time(one.due)} ({one.how}{memory})")
    if late and one.due is not None:
        parts.append(f"overdue by {hours_text(case.hours_between(one.due, case.now))}")
    parts += ["soaked through"] if one.soaked else []
    parts += [f"{name} present" for name in one.worse]
    exudate = words(one.entry.get("exudate"))
    parts += [f"exudate {exudate}"] if exudate else []
    look = words(one.entry.get("look"))
    return "; ".join([*parts, look] if look else parts)


def actions(case: Case, skin: Burned) -> tuple[Action, ...]:
    """Return each change of dressing that is due, and the first one where none is charted."""
    found = dressings(case)
    if case.comfort:
        return _for_comfort(found)
    if not found and skin.burns:
        return (
            Action(
                key="wounds.first_dressing",
                area="Wounds",
                text="Plan the first dressing with its analgesia; chart place, product and when it is due again",
                why="burned and no dressing charted",
                system=System.WOUND,
            ),
        )
    return tuple(_action(case, index, one) for index, one in enumerate(found, start=1))


def _action(case: Case, index: int, one: Dressing) -> Action:
    why = f"{one.product} since {case.clock.day_and_time(one.done)}"
    text = f"Change the dressing of {one.where}; chart look, exudate, smell, redness"
    urgency = Urgency.TIMED if one.due else Urgency.SHIFT
    if one.worse:
        text = f"Have the wound looked at now: {one.where}. Ask whether a swab is wanted"
        why, urgency = f"{' and '.join(one.worse)} present", Urgency.NOW
    elif one.soaked:
        text, why, urgency = f"Change the soaked dressing of {one.where}", "soaked through", Urgency.NOW
    elif one.due is None:
        text = f"Find out when the dressing of {one.where} is to be changed"
    return Action(
        key=f"wounds.change.{index}",
        area="Wounds",
        text=text,
        why=why,
        system=System.WOUND,
        first_due=one.due if urgency is Urgency.TIMED else None,
        urgency=urgency,
        sources=(one.source,) if one.source else (),
    )


def _for_comfort(found: tuple[Dressing, ...]) -> tuple[Action, ...]:
    if not found:
        return ()
    return (
        Action(
            key="wounds.dressing_comfort",
            area="Comfort",
            text="Change a dressing only where it is soaked, smells or hurts; analgesia first",
            why="the goal of care is comfort",
            system=System.WOUND,
            urgency=Urgency.ONGOING,
        ),
    )
