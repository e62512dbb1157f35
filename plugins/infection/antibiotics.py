"""Antibiotics as charted, and the prompt that none is given as routine prophylaxis."""

from __future__ import annotations

from handoff.plugin import Action, Case, Flag, Item, Map, System, Urgency, child, entries, fact, words

LABEL = "Antibiotics"
PROMPT = "no routine systemic prophylaxis is advised for a fresh burn"
ASKED = ("prophylaxis", "not known")


def running(case: Case) -> tuple[Map, ...]:
    """Return the antibiotics that are not stopped."""
    return tuple(entry for entry in entries(child(case.block, "antibiotics")) if "stopped" not in entry)


def _overdue(case: Case, entry: Map) -> bool:
    review = case.when(entry.get("review"))
    return review is not None and review < case.now


def items(case: Case) -> tuple[Item, ...]:
    """Return the antibiotics with the prompt."""
    found = running(case)
    sources = (case.parameters.source_of("prophylaxis"), case.parameters.source_of("prophylaxis.review"))
    if not found:
        shown = f"none charted; {PROMPT}"
        return (
            fact(
                "infection.antibiotics", LABEL, shown, system=System.INFECTION, sources=sources, detail=True
            ),
        )
    asked = any(words(entry.get("why")) in ASKED or _overdue(case, entry) for entry in found)
    said = "; ".join(_said(case, entry) for entry in found)
    if any(words(entry.get("why")) in ASKED for entry in found):
        said += f"; {PROMPT}: ask the prescriber what it is for"
    return (
        fact(
            "infection.antibiotics",
            LABEL,
            said,
            system=System.INFECTION,
            flag=Flag.REVIEW if asked and not case.comfort else Flag.NONE,
            sources=sources,
            cautions=("Prophylaxis around surgery is another matter.",),
            line=found[0].line,
        ),
    )


def _said(case: Case, entry: Map) -> str:
    started, review = case.when(entry.get("started")), case.when(entry.get("review"))
    parts = [words(entry.get("why"))]
    parts += [f"since {case.clock.day_and_time(started)}"] if started else []
    if review is None:
        parts.append("review not recorded")
    else:
        late = ", overdue" if review < case.now else ""
        parts.append(f"review {case.clock.day_and_time(review)}{late}")
    return f"{words(entry.get('drug'))} ({', '.join(parts)})"


def actions(case: Case) -> tuple[Action, ...]:
    """Return the question to the prescriber where an antibiotic has no reason, or its review is overdue."""
    asked = [entry for entry in running(case) if words(entry.get("why")) in ASKED or _overdue(case, entry)]
    if not asked or case.comfort:
        return ()
    names = ", ".join(words(entry.get("drug")) for entry in asked)
    return (
        Action(
            key="infection.ask_antibiotic",
            area="Infection",
            text=f"Ask the prescriber why and until when: {names}",
            why="given without a recorded infection, or its review is overdue",
            system=System.INFECTION,
            urgency=Urgency.SHIFT,
            sources=(case.parameters.source_of("prophylaxis"),),
        ),
    )
