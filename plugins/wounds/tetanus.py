"""What the published wound table says about tetanus for this patient, as a prompt; never a dose."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date
from typing import Any

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
    fact,
    read_date,
    words,
)

from . import formula

LABEL = "Tetanus by the wound table"
PROMPT = "The table is a prompt; product and dose are for the prescriber and the local schedule."


class Answer(Struct, frozen=True):
    """What the table says: yes, no, or empty where it cannot be judged (``missing`` says why)."""

    vaccine: str
    immunoglobulin: str
    missing: str
    why: str
    sources: tuple[Source, ...]

    @property
    def asks(self) -> tuple[str, ...]:
        """What the table calls for."""
        pairs = (("vaccine", self.vaccine), ("immunoglobulin", self.immunoglobulin))
        return tuple(name for name, said in pairs if said == "yes")


def answer(case: Case) -> Answer | None:
    """Return what the chosen table says; None where nothing about tetanus is recorded."""
    node = case.state.injury.get("tetanus")
    doses = words(node.get("doses")) if isinstance(node, Map) else ""
    if not isinstance(node, Map) or not doses:
        return None
    chosen = f"tetanus.{case.chosen('tetanus_table').name}"
    if doses != "3 or more":
        cell = case.parameters.table("tetanus.fewer")
        source = case.parameters.source_of("tetanus.fewer")
        return Answer(cell["vaccine"], cell["immunoglobulin"], "", f"doses {doses}", (source,))
    vaccine, missing, why = _by_years(case, node, chosen)
    cell, cited = case.parameters.table("tetanus.three_or_more"), "tetanus.three_or_more"
    if "immunosuppressed" in case.state.texts(case.state.patient.get("conditions")):
        cell, cited = case.parameters.table("tetanus.immunosuppressed"), "tetanus.immunosuppressed"
        why += "; immunosuppressed"
    sources = (case.parameters.source_of(chosen), case.parameters.source_of(cited))
    return Answer(vaccine, cell["immunoglobulin"], missing, why, sources)


def _by_years(case: Case, node: Map, chosen: str) -> tuple[str, str, str]:
    table = case.parameters.table(chosen)
    written = words(node.get("last"))
    if not written:
        return "", "date of the last dose not recorded", "3 doses or more"
    last = read_date(written, partial=True)
    burn = case.state.burn_time
    on = case.clock.local(burn.earliest if burn else case.now).date()
    said = [_reached(day, on, table) for day in (last.earliest(), min(last.latest(), on))]
    why = f"3 doses or more, last {last.shown()}"
    if said[0] != said[1]:
        return "", f"the {'month' if last.month is None else 'day'} of the last dose decides", why
    return ("yes" if said[0] else "no"), "", why


def _reached(day: date, on: date, table: Mapping[str, Any]) -> bool:
    if day > on:  # a dose after the burn
        return False
    days = [(one.year, one.month, one.day) for one in (day, on)]
    return formula.years_reached(days[0], days[1], int(table["years"]), str(table["how"]))


def items(case: Case) -> tuple[Item, ...]:
    """Return what the table says; nothing where nothing is recorded (the background says that)."""
    found = answer(case)
    if found is None:
        return ()
    given = _given(case)
    title = case.parameters.table(f"tetanus.{case.chosen('tetanus_table').name}")["title"]
    vaccine = found.vaccine or f"cannot be judged, {found.missing}"
    shown = f"vaccine: {vaccine}; immunoglobulin: {found.immunoglobulin} ({title}; {found.why})"
    shown += f"; given: {given or 'not recorded'}"
    open_ended = bool(found.asks) and given in ("", "no") and not case.comfort
    flag = Flag.REVIEW if open_ended else Flag.NOT_RECORDED if found.missing else Flag.NONE
    node = case.state.injury.get("tetanus")
    return (
        fact(
            "wounds.tetanus",
            LABEL,
            shown,
            system=System.WOUND,
            value=", ".join(found.asks) or ("" if found.missing else "none") or None,
            as_of=case.now,
            flag=flag,
            working=Working(
                formula="doses so far, and years since the last dose, looked up in the table for other wounds",
                sum=found.why,
                inputs=(case.input("tetanus", node, found.why),),
                rule=title,
            ),
            sources=found.sources,
            cautions=(PROMPT,),
            line=node.line if node is not None else 0,
        ),
    )


def _given(case: Case) -> str:
    node = case.state.injury.get("tetanus")
    return words(node.get("given_today")) if isinstance(node, Map) else ""


def actions(case: Case) -> tuple[Action, ...]:
    """Return the question to the prescriber, or to the patient where nothing is recorded; none in comfort."""
    if case.comfort:
        return ()
    found = answer(case)
    if found is None or found.missing:
        what = found.missing if found else "nothing is recorded"
        return (
            Action(
                key="wounds.tetanus_ask",
                area="Wounds",
                text="Ask patient, family or their doctor: how many tetanus doses, and the date of the last",
                why=what,
                system=System.WOUND,
                sources=found.sources if found else (),
            ),
        )
    if not found.asks or _given(case) not in ("", "no"):
        return ()
    return (
        Action(
            key="wounds.tetanus_prompt",
            area="Wounds",
            text=f"Ask the prescriber about tetanus: the table says {' and '.join(found.asks)}",
            why=found.why,
            system=System.WOUND,
            urgency=Urgency.SHIFT,
            sources=found.sources,
            cautions=(PROMPT,),
        ),
    )
