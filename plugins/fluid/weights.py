"""Which weight a figure used, and what that weight may hide."""

from __future__ import annotations

from msgspec import Struct

from handoff.plugin import Case, Input, Weight, amount, joined, number_text

from . import formula

ORDER = {
    "before-burn": ("before burn", "today", "ideal"),
    "today": ("today", "before burn", "ideal"),
}
KG_PLACES = 1


class Used(Struct, frozen=True):
    """A weight in use: kg, what it is called in print, where it stands, its cautions, and others that differ."""

    kg: float
    name: str
    input: Input
    cautions: tuple[str, ...] = ()
    others: tuple[str, ...] = ()


def kg_text(kg: float) -> str:
    """Return a weight as printed: ``11.2 kg``."""
    return f"{number_text(kg, KG_PLACES)} kg"


def volume_weight(case: Case) -> Used | None:
    """Return the weight that volumes go by, by the policy's choice; None where none is recorded."""
    wanted = ORDER[case.chosen("volume_weight").name]
    found = case.state.weight(*wanted)
    if found is None:
        return None
    cautions = []
    if found.kind != wanted[0]:
        cautions.append(f"Weight {found.kind} is used: weight {_said(wanted[0])} is not recorded.")
    if found.kind == "today":
        height = "" if height_cm(case) is not None else " and the height"
        cautions.append(f"Today's weight may hold oedema; ask for the weight before the burn{height}.")
    if found.known != "measured":
        cautions.append(f"The weight was {_known(found)}, not measured.")
    others = others_said(case, found)
    cautions += [*others, *_build(case, found)]
    return Used(found.kg, _name(found), _input(case, found), tuple(cautions), tuple(others))


def urine_weight(case: Case) -> Used | None:
    """Return the weight that urine goes by; the weight of the volumes unless the policy asks for the ideal."""
    used = volume_weight(case)
    if case.chosen("urine_weight").name != "ideal":
        return used
    ideal = case.state.weight("ideal")
    if ideal is None:
        if used is None:
            return None
        caution = "The policy asks for the ideal weight for urine, and it is not recorded."
        return Used(used.kg, used.name, used.input, (*used.cautions, caution), used.others)
    others = tuple(others_said(case, ideal))
    return Used(ideal.kg, _name(ideal), _input(case, ideal), others, others)


def differing(case: Case, used: Weight) -> tuple[Weight, ...]:
    """Return the other weights of the kind of ``used`` that differ from it.

    Weights of today follow each other day by day: of those only one that is later, or undated, differs.
    """
    share = case.parameters.number("weight.differs_from") / 100
    return tuple(
        other
        for other in case.state.weights
        if other.kind == used.kind
        and other.node is not used.node
        and abs(other.kg - used.kg) > share * used.kg
        and (used.kind != "today" or None in (other.at, used.at) or not _before(other, used))
    )


def _before(one: Weight, other: Weight) -> bool:
    return one.at is not None and other.at is not None and one.at < other.at


def others_said(case: Case, used: Weight) -> list[str]:
    """Return the sentence that says which of several weights of one kind is used; none where they agree."""
    others = [f"{kg_text(one.kg)} ({_known(one)}, line {one.node.line})" for one in differing(case, used)]
    if not others:
        return []
    return [
        f"{_name(used)} ({_known(used)}) is used; another weight {_said(used.kind)} differs: {joined(others)}."
    ]


def height_cm(case: Case) -> float | None:
    """Return the height in cm, or None."""
    return amount(case.state.patient.get("height"), "cm")


def _said(kind: str) -> str:
    return {"before burn": "before the burn", "today": "of today", "ideal": "ideal"}[kind]


def _known(weight: Weight) -> str:
    said = {"estimated": "estimated", "from records": "taken from records"}
    return said.get(weight.known, weight.known or "written without how it is known")


def _name(weight: Weight) -> str:
    return f"{kg_text(weight.kg)} {weight.kind}"


def _input(case: Case, weight: Weight) -> Input:
    written = case.input("", weight.node.get("value")).shown
    known = weight.known or "how known is not recorded"
    return case.input(f"weight, {weight.kind}", weight.node, f"{written} ({known})")


def _build(case: Case, weight: Weight) -> list[str]:
    """What obesity asks for; without a height it cannot be told."""
    height = height_cm(case)
    burn = case.state.burn_time
    age = case.state.age_at(burn.earliest if burn else case.now)
    adult_from = case.parameters.number(f"adult_from.{case.chosen('adult_from').name}")
    if age is None or age.years < adult_from:
        return []
    if height is None:
        heavy = weight.kg >= case.parameters.number("obesity.ask_height_from")
        return ["Height is not recorded: obesity cannot be judged; ask for it."] if heavy else []
    index = formula.body_mass_index(weight.kg, height)
    if index < case.parameters.number("obesity.from"):
        return []
    return [
        f"Body mass index {number_text(index, 0)}: formulas by weight overestimate in obesity; "
        "ask which weight the prescriber uses."
    ]
