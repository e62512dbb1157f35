"""The ``transfer`` block of the state file, read into rows of finished strings."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.identity import person
from handoff.document.sections import NOT_RECORDED, Mark, sentence, shown
from handoff.parameters import Source
from handoff.plugin import Flag, Map, Node, amount, child, entries, with_unit, words

PLACES = 2


class Line(Struct, frozen=True):
    """What, and what is known of it."""

    what: str
    value: str


class Ticked(Struct, frozen=True):
    """What, how it is known, and the tag of what is ticked or written there."""

    what: str
    value: str
    tag: Mark


class Advice(Struct, frozen=True):
    """Who said what, when, and whether it was read back."""

    time: str
    who: str
    said: str
    after: str


class Pump(Struct, frozen=True):
    """One pump as it leaves."""

    drug: str
    strength: str
    rate: str
    left: str
    lasts: str


def at(assessment: Assessment, *names: str) -> Node | None:
    """Return what stands at ``names`` in the transfer block."""
    return assessment.state.at_path("transfer", *names)


def moment(assessment: Assessment, node: Node | None) -> str:
    """Return a charted moment as printed, or ``time not recorded``."""
    when = assessment.state.when(node)
    return assessment.state.clock.time(when, assessment.now) if when else f"time {NOT_RECORDED}"


def airway(assessment: Assessment) -> tuple[str, tuple[Line, ...]]:
    """Return whether the airway is secured, in capitals, and the plan for the journey line by line."""
    node = at(assessment, "airway_plan")
    heads = {"yes": "AIRWAY SECURED", "no": "AIRWAY NOT SECURED"}
    head = heads.get(words(child(node, "secured")), f"AIRWAY SECURED OR NOT: {NOT_RECORDED}")
    how = words(child(node, "how"))
    decided = f"{words(child(node, 'decided_by')) or NOT_RECORDED}, {moment(assessment, child(node, 'at'))}"
    able = assessment.item("transfer.can_intubate")
    return (f"{head}: {how}" if how else head), (
        Line("Plan for the journey", words(child(node, "plan")) or NOT_RECORDED),
        Line("Decided by", decided),
        Line("Who can intubate on board", shown(able) if able else NOT_RECORDED),
        Line("Difficulty", words(child(node, "difficulty")) or NOT_RECORDED),
        Line("Fallback on the road", words(child(node, "fallback")) or NOT_RECORDED),
    )


def journey(assessment: Assessment) -> tuple[Line, ...]:
    """Return who takes the patient, who decided, and how and when the journey goes."""
    receiver, way = at(assessment, "receiver"), at(assessment, "journey")
    to = ", ".join(part for name in ("centre", "ward", "phone") if (part := words(child(receiver, name))))
    accepted = child(receiver, "accepted_by")
    crew = "; ".join(
        ", ".join(part for part in (words(one.get("name")), words(one.get("role"))) if part)
        for one in entries(at(assessment, "escort"))
    )
    decided = words(at(assessment, "decided_by"))
    return (
        Line("To", to or NOT_RECORDED),
        Line("Accepted by", f"{person(accepted)}, {moment(assessment, child(receiver, 'accepted'))}"),
        Line("Bed and staff confirmed", words(child(receiver, "bed_confirmed")) or NOT_RECORDED),
        Line("Why", words(at(assessment, "reason")) or NOT_RECORDED),
        Line("Decided by", f"{decided or NOT_RECORDED}, {moment(assessment, at(assessment, 'decided'))}"),
        Line(
            "How",
            ", ".join(filter(None, (words(child(way, "mode")), words(child(way, "team"))))) or NOT_RECORDED,
        ),
        Line(
            "Leaves, arrives",
            f"{_item(assessment, 'transfer.leaves')}, {_item(assessment, 'transfer.arrives')}",
        ),
        Line("On board", crew or NOT_RECORDED),
    )


def oxygen(assessment: Assessment) -> tuple[Line, ...]:
    """Return how long the oxygen lasts, with the sum, the assumption and the source."""
    found: list[Line] = []
    sources: list[Source] = []
    for key in ("transfer.oxygen_endurance", "transfer.oxygen_carried", "transfer.oxygen_needed"):
        item = assessment.item(key)
        if item is None:
            continue
        mark = " (ACTION)" if item.flag is Flag.ACTION else " (REVIEW)" if item.flag is Flag.REVIEW else ""
        found.append(Line(item.label, f"{shown(item)}{mark}"))
        if item.working:
            found.append(Line("Sum", item.working.sum))
        found += [Line("Assumed", sentence(caution)) for caution in item.cautions]
        sources += item.sources
    if found:
        # One source stands behind several numbers; its citation is printed once.
        places: dict[str, dict[str, None]] = {}
        for source in sources:
            places.setdefault(source.citation or f"{source.kind}:", {})[source.locator] = None
        said = (f"{citation} {'; '.join(named)}" for citation, named in places.items())
        found.append(Line("Sources", ". ".join(said)))
    lines = dict.fromkeys(found)
    return tuple(lines) or (Line("Oxygen for the journey", NOT_RECORDED),)


def pumps(assessment: Assessment) -> tuple[Pump, ...]:
    """Return the pumps as they leave."""
    made = []
    for number, entry in enumerate(entries(at(assessment, "pumps")), start=1):
        item = assessment.item(f"transfer.pump.{number}")
        lasts = [
            part
            for part in (shown(item).split(", ") if item else ())
            if part.startswith(("lasts", "battery", "runs"))
        ]
        line = words(entry.get("line"))
        made.append(
            Pump(
                drug=words(entry.get("drug")) + (f", line {line}" if line else ""),
                strength=words(entry.get("concentration")) or NOT_RECORDED,
                rate=_measured(entry.get("rate"), "mL/h", "flow"),
                left=_measured(entry.get("left"), "mL", "volume"),
                lasts=", ".join(lasts) or NOT_RECORDED,
            )
        )
    return tuple(made)


def _measured(node: Node | None, unit: str, kind: str) -> str:
    value = amount(node, unit, kind)
    return NOT_RECORDED if value is None else with_unit(value, unit, PLACES)


def advice(assessment: Assessment) -> tuple[Advice, ...]:
    """Return the advice log: calls of the transfer and advice charted as an event, oldest first."""
    state = assessment.state
    found = []
    for row in state.dated(at(assessment, "advice")):
        found.append((row.at, _advice(row.entry, words(row.entry.get("to")))))
    for row in state.events("advice from burn centre"):
        found.append((row.at, _advice(row.entry, "")))
    found.sort(key=lambda pair: pair[0])
    return tuple(Advice(state.clock.time(when, assessment.now), *said) for when, said in found)


def _advice(entry: Map, to: str) -> tuple[str, str, str]:
    who = words(entry.get("who")) or NOT_RECORDED
    read = words(entry.get("read_back")) or NOT_RECORDED
    done = words(entry.get("done")) or words(entry.get("outcome"))
    after = f"read back: {read}" + (f"; done: {done}" if done else "")
    return (f"{who} to {to}" if to else who), words(entry.get("said")) or NOT_RECORDED, after


def enclosed(assessment: Assessment) -> tuple[Ticked, ...]:
    """Return the records that go along and how."""
    return tuple(
        Ticked(
            words(entry.get("what")),
            words(entry.get("form")) or f"form {NOT_RECORDED}",
            Mark(f"enclosed:{number}"),
        )
        for number, entry in enumerate(entries(at(assessment, "enclosed")), start=1)
    )


def people(assessment: Assessment) -> tuple[Line, ...]:
    """Return consent, photographs and belongings as they were charted."""
    consent = at(assessment, "consent")
    given = words(child(consent, "given_by"))
    how = words(child(consent, "form"))
    said = f"{given or NOT_RECORDED}{f', {how}' if how else ''}, {moment(assessment, child(consent, 'at'))}"
    return (
        Line("Consent to the transfer", said if given or how else NOT_RECORDED),
        Line("Photographs of the wounds", words(at(assessment, "photographs")) or NOT_RECORDED),
        Line("Clothing and belongings", words(at(assessment, "clothing")) or NOT_RECORDED),
        Line("Family", _item(assessment, "patient.family")),
    )


def _item(assessment: Assessment, key: str) -> str:
    item = assessment.item(key)
    return shown(item) if item else NOT_RECORDED
