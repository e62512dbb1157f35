"""The ROX index, with the population that it comes from."""

from __future__ import annotations

from handoff.plugin import Case, Item, Reading, System, Working, amount, number_text, with_unit

from . import charted, formula, oxygen, say
from .oxygen import OPEN_DEVICE, Fraction


def items(case: Case, reading: Reading | None, doubt: str) -> tuple[Item, ...]:
    """Return the index for an adult on high-flow nasal oxygen, the only device that it was derived on.

    ``doubt`` labels the saturation that it is made from.
    """
    if reading is None or charted.tube(case).in_place:
        return ()
    held = oxygen.holding(case, reading.at)
    if held is None or held.device != oxygen.HIGH_FLOW:
        return ()
    key, label = "airway_watch.rox_index", "ROX index"
    age = case.state.age_at(case.now)
    if age is not None and age.years < case.parameters.number("adult_from"):
        return ()
    pct, breaths = amount(reading.node, "%") or 0.0, amount(reading.row.get("resp"), "/min")
    given, missing = oxygen.fraction(case, held)
    if not breaths:
        missing = f"breaths a minute at {say.at(case, reading.at)}"
    if given is None or not breaths:
        return (say.gap(key, label, missing, unit="1/(breaths/min)", system=System.BREATHING),)
    return (_item(case, reading, held, given, pct, breaths, doubt),)


def _item(
    case: Case, reading: Reading, held: oxygen.Oxygen, given: Fraction, pct: float, breaths: float, doubt: str
) -> Item:
    value = formula.rox_index(pct, given.high, breaths)
    by = number_text(given.high / 100, 2)
    lower = case.parameters.number("rox.lower_risk")
    hours = case.hours_between(held.start, reading.at)
    said = f"{number_text(value, 2)} at {say.at(case, reading.at)}"
    passed = [limit for after, limit in case.parameters["rox.failure"].value if hours >= after]
    said += f", {'at or above' if value >= lower else 'below'} {number_text(lower, 2)}"
    if passed and value < passed[-1]:
        said += f" and below {number_text(passed[-1], 2)}: tell the doctor"
    return say.fact(
        "airway_watch.rox_index",
        "ROX index",
        said + (f", {doubt}" if doubt else ""),
        value=value,
        unit="1/(breaths/min)",
        as_of=reading.at,
        system=System.BREATHING,
        detail=True,
        working=Working(
            formula="saturation / inspired oxygen fraction / breaths a minute",
            sum=f"{number_text(pct, say.PLACES)} / {by} / {number_text(breaths)} = {number_text(value, 2)}",
            inputs=(
                case.input("Saturation", reading.node),
                case.input("Inspired oxygen", None, given.shown()),
                case.input("Breaths", reading.row.get("resp"), with_unit(breaths, "/min")),
            ),
            rule=given.table,
        ),
        sources=(case.parameters.source_of("rox.lower_risk"), *([given.source] if given.source else [])),
        cautions=(
            "Derived in adults with pneumonia on high-flow nasal oxygen, not in burns; the limits hold only there.",
            *((OPEN_DEVICE,) if given.estimated else ()),
        ),
    )
