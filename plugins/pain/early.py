"""The first day: doses from before this chart began, and routes that absorb poorly early in a large burn."""

from __future__ import annotations

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Item,
    Part,
    System,
    Urgency,
    child,
    joined,
    line_of,
    number_text,
    yes,
)

from .charted import Charted
from .given import DAY

HOME = "pain.home_doses_asked"
ABSORPTION = "pain.early_absorption"
TEXT = (
    "Ask patient, family and ambulance about doses before arrival and about combination products; chart them"
)


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return whether earlier doses were asked about, and the caution on early absorption where it applies."""
    return (*_home(case, charted), *_absorption(case, charted))


def home_doses_matter(case: Case) -> bool:
    """Return whether a dose from before the burn could still fall in the last 24 h."""
    burn = case.state.burn_time
    return burn is None or case.now - burn.latest <= DAY


def unasked(case: Case) -> bool:
    """Return whether earlier doses were not asked about while they still change a total."""
    return home_doses_matter(case) and not yes(child(case.block, "home_doses_asked"))


def _home(case: Case, charted: Charted) -> tuple[Item, ...]:
    node = child(case.block, "home_doses_asked")
    asked = yes(node)
    if asked is None and not home_doses_matter(case):
        return ()
    found = sorted({one.place for one in charted.given if one.place != "ward"})
    said = f"asked about; charted from {joined(found)}" if found else "asked about; none charted"
    if not asked:
        said = "not asked about" + (f"; charted from {joined(found)}" if found else "")
    return (
        Item(
            key=HOME,
            label="Doses from home, ambulance, combination products",
            part=Part.BACKGROUND,
            system=System.PAIN,
            value="yes" if asked else None,
            shown=said,
            flag=Flag.NONE if asked else Flag.NOT_RECORDED,
            repeats=True,
            line=line_of(node),
        ),
    )


def _absorption(case: Case, charted: Charted) -> tuple[Item, ...]:
    burn = case.state.burn_time
    hours = case.parameters.number("early_absorption.hours")
    routes = case.parameters["early_absorption.routes"].value
    if burn is None or case.hours_between(burn.latest, case.now) > hours:
        return ()
    slow = [
        one
        for one in charted.given
        if one.route in routes and one.latest >= burn.earliest and one.in_day_to(case.now)
    ]
    found = case.findings.get("area")
    area_pct = found.number("area.counted") if found else None
    limit, limit_id = _limit(case)
    if not slow or (area_pct is not None and area_pct <= limit):
        return ()
    drugs = joined(list(dict.fromkeys(f"{one.drug.name} {one.route}" for one in slow)))
    size = "area not computed" if area_pct is None else f"{number_text(area_pct, 1)} %TBSA"
    return (
        Item(
            key=ABSORPTION,
            label="Early absorption",
            part=Part.ASSESSMENT,
            system=System.PAIN,
            value=drugs,
            shown=f"{drugs} within {number_text(hours)} h of the burn ({size}): may be absorbed late or not at all",
            as_of=slow[-1].latest,
            flag=Flag.REVIEW if area_pct is not None else Flag.NONE,
            sources=tuple(
                case.parameters.source_of(name)
                for name in ("early_absorption.routes", limit_id, "early_absorption.hours")
            ),
            line=line_of(slow[-1].node),
        ),
    )


def _limit(case: Case) -> tuple[float, str]:
    age = case.state.age_at(case.now)
    child_age = age is not None and age.years < case.parameters.number("adult_from")
    name = "early_absorption.child_above" if child_age else "early_absorption.adult_above"
    return case.parameters.number(name), name


def actions(case: Case) -> tuple[Action, ...]:
    """Return the question about earlier doses while the answer still changes a total."""
    if not unasked(case):
        return ()
    return (
        Action(
            key="pain.ask_earlier_doses",
            area="pain",
            text=TEXT,
            why="paracetamol and opioid totals count every source",
            system=System.PAIN,
            first_due=case.now,
            urgency=Urgency.NOW,
        ),
    )
