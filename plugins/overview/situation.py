"""Why this patient is handed over now: who, how sick in the nurse's word, what happened and when."""

from __future__ import annotations

from handoff.bundled.overview.charted import charted

from handoff.plugin import (
    Case,
    Flag,
    Input,
    Item,
    Part,
    System,
    Working,
    child,
    entries,
    hours_text,
    line_of,
    words,
)


def situation_items(case: Case) -> tuple[Item, ...]:
    """Return the items of the situation: severity word, burn time, hours since, causes, story."""
    return (
        _severity(case),
        _burn_time(case),
        hours_since(case),
        _causes(case),
        _story(case),
        _consciousness_lost(case),
        _other_injuries(case),
        _resuscitation(case),
    )


def _severity(case: Case) -> Item:
    node = case.state.handover.get("severity")
    said = words(node)
    at = case.when(case.state.handover.get("at"))
    return charted(
        "handover.severity", "Severity, in the nurse's own word", said, Part.SITUATION, node=node, as_of=at
    )


def _burn_time(case: Case) -> Item:
    burn = case.state.burn_time
    clock = case.clock
    shown = ""
    if burn is not None:
        shown = clock.day_and_time(burn.earliest)
        if not burn.certain:
            shown = f"between {shown} and {clock.day_and_time(burn.latest)}"
    node = burn.node if burn else None
    return charted("injury.at", "Time of burn", shown, Part.SITUATION, node=node, lethal_rank=33)


def hours_since(case: Case) -> Item:
    """Return the hours since the burn, elapsed and not by the wall clock; a range where it is uncertain."""
    burn = case.state.burn_time
    if burn is None:
        return Item(
            key="injury.hours_since",
            label="Hours since burn",
            part=Part.SITUATION,
            system=System.GENERAL,
            unit="h",
            shown="not recorded",
            flag=Flag.NOT_RECORDED,
            repeats=True,
        )
    longest = case.hours_between(burn.earliest, case.now)
    shortest = case.hours_between(burn.latest, case.now)
    clock = case.clock
    shown = hours_text(longest) if burn.certain else f"{hours_text(shortest)} to {hours_text(longest)}"
    value = longest if burn.certain else None
    return Item(
        key="injury.hours_since",
        label="Hours since burn",
        part=Part.SITUATION,
        system=System.GENERAL,
        value=value,
        unit="h",
        shown=shown,
        as_of=case.now,
        repeats=True,
        line=line_of(burn.node),
        cautions=()
        if burn.certain
        else ("The time of the burn is uncertain: every figure from it is a range.",),
        working=Working(
            formula="hours since burn = moment of this document - time of burn, across any clock change",
            sum=f"{clock.day_and_time(case.now)} - {clock.day_and_time(burn.earliest)} = {hours_text(longest)}",
            inputs=(Input("time of burn", clock.day_and_time(burn.earliest), line_of(burn.node)),),
        ),
    )


def _causes(case: Case) -> Item:
    node = case.state.injury.get("causes")
    said = []
    for cause in entries(node):
        extra = [words(cause.get(key)) for key in ("agent", "setting", "voltage")]
        smoke = words(cause.get("smoke"))
        trapped = words(cause.get("trapped"))
        extra += [f"smoke breathed: {smoke}"] if smoke else []
        extra += [f"trapped: {trapped}"] if trapped else []
        contact = words(cause.get("contact_for"))
        extra += [f"contact for {contact}"] if contact else []
        extra += [words(cause.get("note"))]
        kept = [part for part in extra if part]
        said.append(words(cause.get("kind")) + (f" ({', '.join(kept)})" if kept else ""))
    return charted("injury.causes", "Cause", "; ".join(said), Part.SITUATION, node=node)


def _story(case: Case) -> Item:
    node = case.state.injury.get("what_happened")
    return charted("injury.what_happened", "What happened", words(node), Part.SITUATION, node=node)


def _consciousness_lost(case: Case) -> Item:
    node = case.state.injury.get("lost_consciousness")
    return charted(
        "injury.lost_consciousness",
        "Loss of consciousness",
        words(node),
        Part.SITUATION,
        System.DISABILITY,
        node=node,
    )


def _other_injuries(case: Case) -> Item:
    node = case.state.injury.get("other_injuries")
    return charted("injury.other_injuries", "Other injuries", words(node), Part.SITUATION, node=node)


def _resuscitation(case: Case) -> Item:
    node = case.state.patient.get("resuscitation")
    decision = words(child(node, "decision"))
    shown = decision
    if decision:
        parts = [words(child(node, "scope"))]
        by, at = words(child(node, "by")), case.when(child(node, "at"))
        parts += [f"decided by {by}"] if by else ["decider not recorded"]
        parts += [case.clock.day_and_time(at)] if at else ["date not recorded"]
        seen = words(child(node, "form_seen"))
        parts += [f"form seen: {seen}"] if seen else ["form seen: not recorded"]
        shown = f"{decision}; {', '.join(part for part in parts if part)}"
    return charted(
        "patient.resuscitation", "Resuscitation decision", shown, Part.SITUATION, node=node, lethal_rank=72
    )
