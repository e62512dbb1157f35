"""Predicted body weight, and what the ventilator gives for each kg of it."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Row, System, Working, amount, number_text, with_unit, words

from . import charted, formula, say
from .schedule import Watch

NOT_LOWER_OXYGEN = "The network's oxygen targets are not used while carbon monoxide is being cleared."


def items(case: Case, run: Watch) -> tuple[Item, ...]:
    """Return predicted body weight, tidal volume for each kg and plateau pressure of a ventilated patient."""
    rows = charted.block_rows(case, "ventilator")
    if not run.tube.in_place and not rows:
        return ()
    weight = _predicted(case)
    return (weight, *_tidal(case, rows, weight), *_plateau(case, rows))


def _predicted(case: Case) -> Item:
    key, label = "airway_watch.predicted_body_weight", "Predicted body weight"
    patient, age = case.state.patient, case.state.age_at(case.now)
    height, sex = patient.get("height"), words(patient.get("sex"))
    tall = amount(height, "cm")
    missing = [
        name
        for name, absent in (
            ("age", age is None),
            ("height", tall is None),
            ("sex (male or female, as the method needs it)", sex not in ("male", "female")),
        )
        if absent
    ]
    if age is not None and age.years < case.parameters.number("adult_from"):
        return say.gap(key, label, "the method is for adults", unit="kg", system=System.BREATHING)
    if missing or tall is None:
        return say.gap(key, label, say.and_list(missing), unit="kg", system=System.BREATHING)
    parameter = case.parameters[f"pbw.{sex}"]
    base, slope, anchor = (float(parameter.value[name]) for name in ("base", "per cm", "anchor"))
    kg = formula.predicted_body_weight_kg(tall, base, slope, anchor)
    cautions = ["For tidal volume only, never for doses or fluid."]
    if tall < anchor:
        cautions.append(f"Height is below {with_unit(anchor, 'cm', say.PLACES)}, where the line begins.")
    return say.fact(
        key,
        label,
        with_unit(kg, "kg", say.PLACES),
        value=kg,
        unit="kg",
        system=System.BREATHING,
        working=Working(
            formula="base + kg for each cm x (height - anchor)",
            sum=(
                f"{number_text(base, 1)} + {number_text(slope, 2)} x "
                f"({number_text(tall, 1)} - {number_text(anchor, 1)}) = {number_text(kg, 1)} kg"
            ),
            inputs=(
                case.input("Height", height),
                case.input("Sex", patient.get("sex")),
            ),
            rule=f"ARDS Network, {sex}",
        ),
        sources=(parameter.source,),
        cautions=cautions,
    )


def _tidal(case: Case, rows: tuple[Row, ...], weight: Item) -> tuple[Item, ...]:
    key, label = "airway_watch.tidal_per_kg", "Tidal volume for predicted body weight"
    read = [
        (row, value) for row in rows if (value := amount(row.entry.get("tidal_volume"), "mL")) is not None
    ]
    if not read:
        return (say.gap(key, label, "tidal volume", unit="mL/kg", system=System.BREATHING),)
    row, volume = read[-1]
    if not isinstance(weight.value, float):
        return (say.gap(key, label, "predicted body weight", unit="mL/kg", system=System.BREATHING),)
    value = formula.per_kg(volume, weight.value)
    low, high = (float(edge) for edge in case.parameters["tidal.range"].value)
    goal = case.parameters.number("tidal.goal")
    outside = formula.is_outside(value, low, high)
    said = f"{with_unit(value, 'mL/kg', say.PLACES)} ({words(row.entry.get('tidal_volume'))}) at {say.at(case, row.at)}"
    said += f", strategy {number_text(low)} to {number_text(high)}, goal {number_text(goal)}"
    return (
        say.fact(
            key,
            label,
            said + (": outside it, ask" if outside else ""),
            value=value,
            unit="mL/kg",
            as_of=row.at,
            flag=Flag.REVIEW if outside else Flag.NONE,
            system=System.BREATHING,
            working=Working(
                formula="tidal volume / predicted body weight",
                sum=f"{number_text(volume)} mL / {number_text(weight.value, 1)} kg = {number_text(value, 1)} mL/kg",
                inputs=(case.input("Tidal volume", row.entry.get("tidal_volume")),),
            ),
            sources=(case.parameters.source_of("tidal.range"), case.parameters.source_of("tidal.goal")),
            cautions=(NOT_LOWER_OXYGEN,),
        ),
    )


def _plateau(case: Case, rows: tuple[Row, ...]) -> tuple[Item, ...]:
    read = [(row, value) for row in rows if (value := amount(row.entry.get("plateau"), "cmH2O")) is not None]
    if not read:
        return ()
    row, value = read[-1]
    highest = case.parameters.number("plateau.highest")
    above = value > highest
    said = f"{with_unit(value, 'cmH2O', say.PLACES)} at {say.at(case, row.at)}"
    return (
        say.fact(
            "airway_watch.plateau",
            "Plateau pressure",
            f"{said}, above {number_text(highest)}: ask" if above else said,
            value=value,
            unit="cmH2O",
            as_of=row.at,
            flag=Flag.REVIEW if above else Flag.NONE,
            system=System.BREATHING,
            sources=(case.parameters.source_of("plateau.highest"),),
            cautions=("A tight burned chest raises it: look at the chest.",),
        ),
    )
