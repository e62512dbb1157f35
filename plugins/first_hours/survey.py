"""The steps of the survey: done, left with a reason, or not recorded."""

from __future__ import annotations

from datetime import datetime

from msgspec import Struct

from handoff.plugin import (
    NOT_RECORDED,
    Action,
    Case,
    Flag,
    Item,
    Map,
    System,
    Urgency,
    child,
    fact,
    joined,
    plural,
    words,
)

BACK = "back"
LABEL = "First-hours survey"


class Step(Struct, frozen=True):
    """One step: when and by whom it was done, what was found; ``left`` says why it was not done."""

    name: str
    at: datetime | None
    by: str
    found: str
    left: str
    entry: Map | None

    @property
    def done(self) -> bool:
        """Whether it was done."""
        return self.at is not None and not self.left


def steps(case: Case) -> tuple[Step, ...]:
    """Return every step of the survey in its order."""
    return tuple(_step(case, str(name)) for name in case.parameters["steps"].value)


def _step(case: Case, name: str) -> Step:
    entry = child(case.block, name)
    if not isinstance(entry, Map) or "struck" in entry:
        return Step(name, None, "", "", "", None)
    at = case.when(entry.get("at"))
    return Step(
        name, at, words(entry.get("by")), words(entry.get("found")), words(entry.get("not_done")), entry
    )


def is_asked(case: Case, found: tuple[Step, ...]) -> bool:
    """Return whether missing steps are asked about: begun, or still in its window, and not for comfort."""
    if case.comfort:
        return False
    if any(step.entry is not None for step in found):
        return True
    burn = case.state.burn_time
    return burn is None or case.hours_between(burn.earliest, case.now) <= case.parameters.number("window")


def items(case: Case) -> tuple[Item, ...]:
    """Return how far the survey is, and each step that was charted."""
    found = steps(case)
    asked = is_asked(case, found)
    charted = [step for step in found if step.entry is not None]
    if not charted and not asked:
        return ()
    return (_summary(case, found, asked), *(_item(step) for step in charted))


def _summary(case: Case, found: tuple[Step, ...], asked: bool) -> Item:
    done = [step for step in found if step.done]
    missing = [step.name for step in found if step.entry is None]
    left = [step.name for step in found if step.left]
    source = case.parameters.source_of("steps")
    if len(missing) == len(found):
        return fact(
            "first_hours.survey",
            LABEL,
            f"{NOT_RECORDED} step by step",
            system=System.GENERAL,
            unit="steps",
            flag=Flag.NOT_RECORDED,
        )
    said = [f"{len(done)} of {plural(len(found), 'step')} done"]
    said += [f"not done: {joined(left)}"] if left else []
    said += [f"not recorded: {joined(missing)}"] if missing else []
    flag = Flag.NONE
    if asked:
        flag = Flag.REVIEW if left or BACK in missing else Flag.NOT_RECORDED if missing else Flag.NONE
    return fact(
        "first_hours.survey",
        LABEL,
        "; ".join(said),
        system=System.GENERAL,
        value=len(done),
        unit="steps",
        as_of=max(step.at for step in found if step.at is not None),
        flag=flag,
        sources=(source,),
        cautions=("What is not recorded was not looked at as far as this file knows.",) if missing else (),
    )


def _item(step: Step) -> Item:
    who = f"by {step.by}" if step.by else "by whom not recorded"
    shown = f"not done: {step.left}, {who}" if step.left else f"{step.found or 'no finding recorded'}, {who}"
    return fact(
        f"first_hours.{step.name.replace(' ', '_')}",
        f"Survey: {step.name}",
        shown,
        system=System.GENERAL,
        as_of=step.at,
        line=step.entry.line if step.entry is not None else 0,
    )


def _is_unknown(case: Case) -> bool:
    """Whether so little is charted that the patient may not have been looked at: no time of burn, or no reading."""
    return case.state.burn_time is None or not case.state.rows


def actions(case: Case) -> tuple[Action, ...]:
    """Return what is left of the survey, the back apart because it needs hands."""
    found = steps(case)
    if not is_asked(case, found):
        return ()
    missing = [step.name for step in found if not step.done]
    rest = [name for name in missing if name != BACK]
    source = case.parameters.source_of("steps")
    made = []
    if all(step.entry is None for step in found):
        return (
            Action(
                key="first_hours.finish",
                area="First-hours survey",
                text=f"Do and chart the survey: {', '.join(missing)} (log-roll with enough hands)",
                why="not charted step by step in first_hours",
                system=System.GENERAL,
                urgency=Urgency.NOW if _is_unknown(case) else Urgency.SHIFT,
                sources=(source,),
            ),
        )
    if rest:
        made.append(
            Action(
                key="first_hours.finish",
                area="First-hours survey",
                text=f"Finish and chart the survey: {', '.join(rest)}",
                why="what was not looked at is missed: an injury beside the burn above all",
                system=System.GENERAL,
                sources=(source,),
            )
        )
    if BACK in missing:
        made.append(
            Action(
                key="first_hours.inspect_back",
                area="First-hours survey",
                text="Log-roll with enough hands; look at back, buttocks and back of the head; chart it",
                why="the back is not charted as inspected",
                system=System.GENERAL,
                urgency=Urgency.SHIFT,
                sources=(source,),
            )
        )
    return tuple(made)
