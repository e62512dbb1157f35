"""How long the chemical was rinsed off, against the named duration, and the acidity before and after."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import (
    Action,
    Case,
    Flag,
    Input,
    Item,
    Map,
    System,
    Urgency,
    Working,
    amount,
    child,
    entries,
    fact,
    number_text,
    words,
)

from . import formula

RANK_HF = 36
SOONEST = ("chemical.rinse", "chemical.eye", "chemical.hydrofluoric", "chemical.poisons")
"""The tasks by what is lost soonest: water first, on the eye too; then the doctor, then advice by telephone."""
HF = "hydrofluoric acid"
LABEL = "Chemical rinsed off"


def cause_of(case: Case) -> Map | None:
    """Return the chemical cause, or None where there was none."""
    causes = entries(case.state.injury.get("causes"))
    return next((cause for cause in causes if words(cause.get("kind")) == "chemical"), None)


def is_hydrofluoric(case: Case, cause: Map) -> bool:
    """Return whether the chemical is charted as hydrofluoric acid."""
    return words(child(case.block, "group")) == HF or HF in words(cause.get("agent")).lower()


def running(case: Case) -> bool:
    """Return whether rinsing goes on as charted."""
    return any("until" not in entry for entry in entries(child(case.block, "rinsed")))


def minutes(case: Case, cause: Map) -> float | None:
    """Return the minutes of rinsing so far: those charted by time, else those told; None where neither is."""
    spans = []
    for entry in entries(child(case.block, "rinsed")):
        start, end = case.when(entry.get("from")), case.when(entry.get("until")) or case.now
        if start is not None:
            spans.append(
                tuple(-((case.now - moment) / timedelta(minutes=1)) for moment in (start, max(end, start)))
            )
    told = amount(cause.get("irrigated_for"), "min")
    if not spans:
        return told
    return max(formula.minutes_covered(spans), told or 0.0)


def is_early(case: Case) -> bool:
    """Return whether rinsing can still be asked about."""
    burn = case.state.burn_time
    return burn is None or case.hours_between(burn.earliest, case.now) <= case.parameters.number("window")


def wanted(case: Case) -> tuple[float, str, bool]:
    """Return the named duration in min, its parameter, and whether it may raise a flag."""
    chosen = case.chosen("rinse")
    name = f"rinse.{chosen.name}"
    return case.parameters.number(name), name, case.parameters[name].kind != "from memory" or chosen.by_policy


def items(case: Case, cause: Map) -> tuple[Item, ...]:
    """Return how long it was rinsed, and what the chemical is."""
    return (_rinsed(case, cause), *_acidity(case), _agent(case, cause))


def _rinsed(case: Case, cause: Map) -> Item:
    long, name, decides = wanted(case)
    had = minutes(case, cause)
    sources = (case.parameters.source_of(name), case.parameters.source_of("rinse.until"))
    asks = is_early(case) and not case.comfort
    if had is None:
        flag = Flag.ACTION if asks else Flag.NOT_RECORDED
        return fact(
            "chemical.rinsed",
            LABEL,
            "not recorded",
            system=System.ELECTRICAL,
            unit="min",
            flag=flag,
            sources=sources,
        )
    left = formula.minutes_left(had, long)
    said = [f"{number_text(had)} min{', still running' if running(case) else ''}"]
    said.append(
        f"{number_text(left)} min short of {number_text(long)} ({case.chosen('rinse').name})"
        if left
        else f"reached {number_text(long)} min ({case.chosen('rinse').name})"
    )
    short = left > 0 and decides and asks and not running(case)
    return fact(
        "chemical.rinsed",
        LABEL,
        "; ".join(said),
        system=System.ELECTRICAL,
        value=had,
        unit="min",
        as_of=case.now,
        flag=Flag.ACTION if short else Flag.NONE,
        working=Working(
            formula="minutes that the charted times cover, overlaps once; the longer of charted and told",
            sum=f"{number_text(had)} min against {number_text(long)} min",
            inputs=_inputs(case, cause),
            rule=case.chosen("rinse").name,
        ),
        sources=sources,
        cautions=(
            "Published durations differ widely; go on while pain lasts.",
            "Rinsing cools: watch temperature.",
        ),
        line=cause.line,
    )


def _inputs(case: Case, cause: Map) -> tuple[Input, ...]:
    found = [case.input("told", cause.get("irrigated_for"))] if "irrigated_for" in cause else []
    for entry in entries(child(case.block, "rinsed")):
        found.append(
            case.input("rinsed", entry, f"{words(entry.get('from'))} to {words(entry.get('until')) or 'now'}")
        )
    return tuple(found)


def _acidity(case: Case) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "ph"))
    if not rows:
        return ()
    said = []
    for row in rows:
        skin = words(row.entry.get("skin"))
        text = f"wound {words(row.entry.get('wound'))}" + (f", skin not hit {skin}" if skin else "")
        said.append(f"{text} at {case.clock.time(row.at, case.now)}")
    last = rows[-1].entry
    differs = words(last.get("skin")) not in ("", words(last.get("wound")))
    return (
        fact(
            "chemical.acidity",
            "Acidity by strip",
            "; ".join(said),
            system=System.ELECTRICAL,
            as_of=rows[-1].at,
            flag=Flag.REVIEW if differs and is_early(case) and not case.comfort else Flag.NONE,
            sources=(case.parameters.source_of("rinse.until"),),
            line=last.line,
        ),
    )


def _how_far(case: Case) -> tuple[str, ...]:
    whole, close = case.parameters["hf"].value[0], case.parameters.number("hf.close_watch")
    return (
        "A small patch can stop the heart through the blood: calcium falls, potassium rises.",
        f"Over {number_text(close)} cm2 a data sheet suggests a day or two of intensive care; "
        f"over {number_text(whole)} cm2 it warns of poisoning of the whole body.",
    )


def _agent(case: Case, cause: Map) -> Item:
    agent, group = words(cause.get("agent")), words(child(case.block, "group"))
    advice = child(case.block, "poisons_advice")
    said = [", ".join(part for part in (agent, group) if part) or "chemical not recorded"]
    said.append(
        f"poisons service: {words(child(advice, 'said'))}"
        if advice
        else "poisons service: no advice recorded"
    )
    clothes, eye = words(child(case.block, "clothes_off")), words(child(case.block, "in_eye"))
    said += [f"contaminated clothes off: {clothes}"] if clothes else []
    said += [f"in the eye: {eye}"] if eye else []
    hydrofluoric = is_hydrofluoric(case, cause) and not case.comfort
    flag = (
        Flag.ACTION
        if hydrofluoric
        else Flag.NONE
        if agent or group not in ("", "not known")
        else Flag.NOT_RECORDED
    )
    return fact(
        "chemical.agent",
        "Chemical",
        "; ".join(said),
        system=System.ELECTRICAL,
        flag=flag,
        sources=(case.parameters.source_of("hf" if hydrofluoric else "poisons"),),
        cautions=_how_far(case) if hydrofluoric else (),
        rank=RANK_HF if hydrofluoric else None,
        line=cause.line,
    )


def actions(case: Case, cause: Map) -> tuple[Action, ...]:
    """Return the rinsing that is missing, the call to the poisons service, and the watch for hydrofluoric acid."""
    if case.comfort or not is_early(case):
        return ()
    made = []
    long, name, decides = wanted(case)
    had = minutes(case, cause)
    if had is None or (decides and formula.minutes_left(had, long) > 0) or running(case):
        left = long if had is None else formula.minutes_left(had, long)
        made.append(
            Action(
                key="chemical.rinse",
                area="Chemical injury",
                text="Gloves, apron, eye cover. Dry powder brushed off first. "
                f"{'Rinse on' if running(case) else 'Rinse'} with running water"
                + (f" for {number_text(left)} min more" if left else "")
                + ", away from skin not hit, until pain is gone and the strip reads as on skin not hit; "
                "nothing to neutralise it",
                why=f"{number_text(had)} min charted" if had is not None else "no rinsing charted",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of(name), case.parameters.source_of("rinse.until")),
                cautions=("Rinsing cools: take the temperature, warm the room.",),
            )
        )
    if child(case.block, "poisons_advice") is None:
        made.append(
            Action(
                key="chemical.poisons",
                area="Chemical injury",
                text="Ask the poisons service; find the name of the chemical on its label or data sheet",
                why="no advice recorded",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW if is_hydrofluoric(case, cause) else Urgency.SHIFT,
                sources=(case.parameters.source_of("poisons"),),
            )
        )
    if is_hydrofluoric(case, cause):
        made.append(
            Action(
                key="chemical.hydrofluoric",
                area="Chemical injury",
                text="Tell the doctor now: hydrofluoric acid. Rhythm monitor on; ask for calcium and potassium now and "
                f"again, and after {number_text(case.parameters.number('hf.rinse_first'))} min of water or more "
                "for calcium gel as prescribed",
                why="it can poison the whole body, and pain is the guide to whether it still acts",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("hf"), case.parameters.source_of("hf.rinse_first")),
            )
        )
    if words(child(case.block, "in_eye")) == "yes":
        made.append(
            Action(
                key="chemical.eye",
                area="Chemical injury",
                text="Rinse the eye on with the lids held open, lens out; have the eye doctor called",
                why="the chemical got into an eye",
                system=System.ELECTRICAL,
                urgency=Urgency.NOW,
                sources=(case.parameters.source_of("rinse.until"),),
            )
        )
    return tuple(sorted(made, key=lambda action: SOONEST.index(action.key)))
