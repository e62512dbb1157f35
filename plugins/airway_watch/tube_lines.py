"""What published lines give for the depth of an oral tube, beside the mark: the confirmed mark beats them."""

from __future__ import annotations

from handoff.plugin import (
    Case,
    FormulaInputError,
    Item,
    Map,
    System,
    Working,
    amount,
    fact,
    number_text,
    with_unit,
    words,
)

from . import formula, say

MARK_WINS = "Lines differ by 1 to 2 cm or more: the mark that was confirmed, by X-ray best, beats every line."


def items(case: Case, entry: Map) -> tuple[Item, ...]:
    """Return the depth by each published line that fits; nothing for a nasal tube or where no measure is recorded."""
    if words(entry.get("route")) != "oral":
        return ()
    found = _lines(case, entry)
    if not found:
        return ()
    return (
        fact(
            "airway_watch.tube_depth_by_line",
            "Depth of an oral tube by published lines",
            "; ".join(f"{with_unit(depth, 'cm', say.PLACES)} by {title}" for title, depth, _, _ in found),
            system=System.AIRWAY,
            value=found[0][1],
            unit="cm",
            working=Working(
                formula="base + slope x measure",
                sum="; ".join(said for _, _, said, _ in found),
                inputs=(
                    case.input("Height", case.state.patient.get("height")),
                    case.input("size of the tube", entry.get("size")),
                ),
                rule=", ".join(title for title, _, _, _ in found),
            ),
            sources=[case.parameters.source_of(name) for _, _, _, name in found],
            cautions=(MARK_WINS,),
            detail=True,
            line=entry.line,
        ),
    )


def _lines(case: Case, entry: Map) -> list[tuple[str, float, str, str]]:
    """Title, depth, sum and parameter of every line that fits this patient."""
    age, sex = case.state.age_at(case.now), words(case.state.patient.get("sex"))
    if age is None:
        return []
    tall, size = amount(case.state.patient.get("height"), "cm"), amount(entry.get("size"), "mm")
    child = age.years < case.parameters.number("adult_from")
    found = []
    for name in case.parameters.ids("tube.depth."):
        line = case.parameters.table(name)
        fits = line["for"] == ("child" if child else "adult") and line.get("sex", sex) == sex
        measure = size if line["measure"] == "tube size" else tall
        if not fits or measure is None or age.years < line.get("from_years", 0):
            continue
        base, slope = float(line["base"]), float(line["slope"])
        try:
            depth = formula.tube_depth_cm(measure, base, slope)
        except FormulaInputError:
            continue  # a height for which the line was not made
        said = f"{number_text(base, 3)} + {number_text(slope, 3)} x {number_text(measure, 1)}"
        found.append((str(line["title"]), depth, f"{said} = {number_text(depth, 1)} cm", name))
    return found
