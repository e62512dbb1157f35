"""Whether prevention of clots and of stress ulcers was decided; not to give anything is a decision too."""

from __future__ import annotations

from datetime import timedelta

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
    number_text,
    words,
)

BLEEDING = "Bleeding, surgery to come and kidneys are for the prescriber to weigh."


class Matter(Struct, frozen=True):
    """One matter to decide: its key, its label, and what asks for it in this patient (empty: nothing does)."""

    key: str
    label: str
    because: str
    hours: str
    sources: tuple[str, ...]


def _ventilated(case: Case) -> bool:
    placed = [row.at for row in case.state.events("intubation")]
    out = [row.at for row in case.state.events("extubation")]
    return bool(placed) and (not out or max(placed) > max(out))


def matters(case: Case) -> tuple[Matter, ...]:
    """Return both matters with what asks for them in this patient."""
    age, pct = case.state.age_at(case.now), case.findings["area"].values.get("counted_pct")
    adult = age is not None and age.years >= case.parameters.number("clots.age_from")
    line = case.parameters.number("ulcers.area_above")
    reasons = []
    if isinstance(pct, (int, float)) and pct > line:
        reasons.append(f"{number_text(pct, 1)} %TBSA is burned, over {number_text(line)}")
    if _ventilated(case):
        reasons.append("ventilated")
    clots = ("clots.decided_by", "clots.reported")
    ulcers = ("ulcers.area_above", "ulcers.decided_by")
    return (
        Matter(
            "clots", "Clot prevention", "an adult in hospital" if adult else "", "clots.decided_by", clots
        ),
        Matter("ulcers", "Stress-ulcer prevention", " and ".join(reasons), "ulcers.decided_by", ulcers),
    )


def decision(case: Case, matter: Matter) -> Map | None:
    """Return the charted decision, or None."""
    node = child(case.block, matter.key)
    return node if isinstance(node, Map) and "struck" not in node else None


def is_late(case: Case, matter: Matter) -> bool:
    """Return whether the time in which it should be decided is over."""
    burn = case.state.burn_time
    limit = case.parameters.number(matter.hours)
    return burn is not None and case.hours_between(burn.earliest, case.now) > limit


def items(case: Case) -> tuple[Item, ...]:
    """Return each matter that concerns this patient, or that was decided."""
    found = (_item(case, matter) for matter in matters(case))
    return tuple(one for one in found if one is not None)


def _item(case: Case, matter: Matter) -> Item | None:
    entry = decision(case, matter)
    sources = tuple(case.parameters.source_of(name) for name in matter.sources)
    if entry is None:
        if not matter.because or case.comfort:
            return None
        late = is_late(case, matter)
        return fact(
            f"prevention.{matter.key}",
            matter.label,
            f"no decision recorded; {matter.because}" if late else NOT_RECORDED,
            system=System.CIRCULATION if matter.key == "clots" else System.NUTRITION,
            flag=Flag.REVIEW if late else Flag.NOT_RECORDED,
            sources=sources,
        )
    at, review = case.when(entry.get("at")), case.when(entry.get("review"))
    late = review is not None and review < case.now and not case.comfort
    parts = [words(entry.get("decided")), words(entry.get("what")), words(entry.get("why"))]
    by = words(entry.get("by_doctor"))
    parts.append(f"decided by {by}" if by else "by whom not recorded")
    parts += [f"review {case.clock.day_and_time(review)}{', overdue' if late else ''}"] if review else []
    return fact(
        f"prevention.{matter.key}",
        matter.label,
        "; ".join(part for part in parts if part),
        system=System.CIRCULATION if matter.key == "clots" else System.NUTRITION,
        value=words(entry.get("decided")),
        as_of=at,
        flag=Flag.REVIEW if late else Flag.NONE,
        sources=sources,
        cautions=(BLEEDING,) if matter.key == "clots" else (),
        line=entry.line,
    )


def actions(case: Case) -> tuple[Action, ...]:
    """Return the question where nothing is decided or its review is overdue, and the look at pumped legs."""
    if case.comfort:
        return ()
    made = []
    for matter in matters(case):
        entry = decision(case, matter)
        review = case.when(entry.get("review")) if entry is not None else None
        overdue = review is not None and review < case.now
        if (entry is None and matter.because) or overdue:
            made.append(
                Action(
                    key=f"prevention.ask_{matter.key}",
                    area="Clots and ulcers",
                    text=f"Ask the prescriber: {matter.label.lower()} decided? Chart the decision, also where it is no",
                    why="review overdue" if overdue else matter.because,
                    system=System.CIRCULATION if matter.key == "clots" else System.NUTRITION,
                    urgency=Urgency.SHIFT,
                    sources=tuple(case.parameters.source_of(name) for name in matter.sources),
                    cautions=(BLEEDING,) if matter.key == "clots" else (),
                )
            )
    clots = child(case.block, "clots", "decided")
    if "pumps" in words(clots):
        made.append(
            Action(
                key="prevention.legs",
                area="Clots and ulcers",
                text="Legs: pumps or stockings on unburned skin only, skin under them, swelling, pain in the calf",
                why="pumps or stockings are in use",
                system=System.CIRCULATION,
                every=timedelta(hours=case.parameters.number("clots.decided_by")),
                first_due=case.now,
                urgency=Urgency.SHIFT,
                sources=(case.parameters.source_of("clots.decided_by"),),
            )
        )
    return tuple(made)
