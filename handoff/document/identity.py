"""Who the patient is, straight from the state file, so that a failing plugin cannot take it away."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.sections import CAUTION, NOT_RECORDED
from handoff.plugin import Node, PatientState, child, entries, hours_text, words
from handoff.state.clock import read_date

DIGEST_LENGTH = 12


class Frame(Struct, frozen=True):
    """What stands on every page: who, which document, made when and from which version of the file."""

    title: str
    unit: str
    name: str
    born: str
    numbers: str
    made_at: str
    version: str
    caution: str


class Identity(Struct, frozen=True):
    """The identity band; a value that is missing says so."""

    name: str
    born: str
    age: str
    numbers: str
    location: str
    weight: str
    allergies: str
    resuscitation: str
    isolation: str
    burn: str
    since: str


def frame(title: str, assessment: Assessment) -> Frame:
    """Return the header and footer of a document."""
    state = assessment.state
    return Frame(
        title=title,
        unit=assessment.policy.unit_name,
        name=state.name or "name not recorded",
        born=_born(state),
        numbers=_numbers(state),
        made_at=state.clock.day_and_time(assessment.now),
        version=state.digest[:DIGEST_LENGTH],
        caution=CAUTION,
    )


def identity(assessment: Assessment) -> Identity:
    """Return the identity band of the patient at the moment of the document."""
    state = assessment.state
    age = state.age_at(assessment.now)
    burn, since = _burn(assessment)
    return Identity(
        name=state.name or "name not recorded",
        born=_born(state),
        age=age.shown() if age else "age not recorded",
        numbers=_numbers(state),
        location=words(state.patient.get("location")) or NOT_RECORDED,
        weight=_weight(assessment),
        allergies=_allergies(state),
        resuscitation=_resuscitation(assessment),
        isolation=words(state.patient.get("isolation")) or NOT_RECORDED,
        burn=burn,
        since=since,
    )


def person(node: Node | None) -> str:
    """Return a colleague as name, role and number; ``not recorded`` for nobody."""
    parts = (words(child(node, name)) for name in ("name", "role", "phone"))
    return ", ".join(part for part in parts if part) or NOT_RECORDED


def _born(state: PatientState) -> str:
    written = words(state.patient.get("born"))
    return f"born {read_date(written).shown()}" if written else "birth date not recorded"


def _numbers(state: PatientState) -> str:
    said = [f"{kind.replace('_', ' ')} {number}" for kind, number in state.identifiers if number]
    return ", ".join(said) or "record number not recorded"


def _weight(assessment: Assessment) -> str:
    state = assessment.state
    said = []
    for kind in dict.fromkeys(weight.kind for weight in reversed(state.weights)):
        weight = state.weight(kind)
        if weight is None:
            continue
        parts = [words(weight.node.get("value")), weight.kind, weight.known]
        parts += [state.clock.time(weight.at, assessment.now)] if weight.at else ["time not recorded"]
        said.append(", ".join(part for part in parts if part))
    return "; ".join(said) or NOT_RECORDED


def _allergies(state: PatientState) -> str:
    node = state.patient.get("allergies")
    said = []
    for entry in entries(node):
        reaction = words(entry.get("reaction"))
        said.append(words(entry.get("to")) + (f" ({reaction})" if reaction else " (reaction not recorded)"))
    return "; ".join(said) or words(node) or NOT_RECORDED


def _resuscitation(assessment: Assessment) -> str:
    state = assessment.state
    node = state.patient.get("resuscitation")
    decision = words(child(node, "decision"))
    if not decision:
        return NOT_RECORDED
    by, at, scope = words(child(node, "by")), state.when(child(node, "at")), words(child(node, "scope"))
    parts = [decision, scope, by or "decider not recorded"]
    parts.append(state.clock.time(at, assessment.now) if at else "time not recorded")
    seen = words(child(node, "form_seen"))
    parts.append(f"form seen: {seen or NOT_RECORDED}")
    return ", ".join(part for part in parts if part)


def _burn(assessment: Assessment) -> tuple[str, str]:
    burn, clock, now = assessment.state.burn_time, assessment.state.clock, assessment.now
    if burn is None:
        return NOT_RECORDED, "hours since burn not known"
    longest = hours_text((now - burn.earliest).total_seconds() / 3600)
    if burn.certain:
        return clock.day_and_time(burn.earliest), f"{longest} since burn"
    shortest = hours_text((now - burn.latest).total_seconds() / 3600)
    between = f"between {clock.day_and_time(burn.earliest)} and {clock.day_and_time(burn.latest)}"
    return between, f"{shortest} to {longest} since burn"
