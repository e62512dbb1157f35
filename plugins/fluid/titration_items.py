"""What the unit's named titration table says for the last urine; always to be confirmed with the prescriber."""

from __future__ import annotations

from handoff.plugin import Flag, Item, Working, number_text

from . import formula
from .bands import Band, pick
from .course import COMFORT, Course
from .say import figure, ml, ml_h, ml_kg_h, unflagged
from .urine import Urine

KEY, LABEL = "titration", "Titration table"
LIMITS = ("from", "above", "below", "to")
ROUNDING = 1e-9


def items(course: Course) -> tuple[Item, ...]:
    """Return what the named table says; nothing where the policy names none."""
    name = course.case.chosen("titration").name
    table = course.case.parameters.table(f"titration.{name}")
    if not table["rows"]:
        return ()
    source = course.source(f"titration.{name}")
    if course.comfort:
        return (unflagged(KEY, LABEL, COMFORT),)
    last = course.urine.last
    if last is None or last.ml_h is None or course.urine_kg is None:
        return (unflagged(KEY, LABEL, f"{name}: no urine by the hour to read it with", sources=(source,)),)
    picked = pick(table["applies"], course.facts)
    if picked.band is None:
        return (unflagged(KEY, LABEL, f"{name}: it has no line for this patient", sources=(source,)),)
    rows = [row for row in table["rows"] if _holds(course, row, last)]
    if not rows:
        return (unflagged(KEY, LABEL, f"{name}: it has no row for this urine", sources=(source,)),)
    return (_said(course, name, table, picked.band, rows[0], last),)


def _holds(course: Course, row: Band, last: Urine) -> bool:
    """Whether a row of the table holds for the last urine, by the hour or by weight as the row is printed."""
    if "judged" in row:
        return course.judged(last) == str(row["judged"])
    kg = course.urine_kg.kg if course.urine_kg else 0.0
    by_hour = last.ml_h or 0.0
    for limit in LIMITS:
        for unit, value in (("ml_h", by_hour), ("ml_kg_h", by_hour / kg if kg else 0.0)):
            key = f"{limit}_{unit}"
            if key in row and not _within(limit, value, float(row[key])):
                return False
    return True


def _within(limit: str, value: float, edge: float) -> bool:
    if limit == "from":
        return value >= edge - ROUNDING
    if limit == "above":
        return value > edge + ROUNDING
    if limit == "below":
        return value < edge - ROUNDING
    return value <= edge + ROUNDING


def _said(course: Course, name: str, table: Band, band: Band, row: Band, last: Urine) -> Item:
    running = course.given.rate_ml_h(course.counted)
    calculated = _calculated(course)
    base = calculated if table["base"] == "calculated" else running
    pct, step = float(row.get("step_pct", 0)), float(row.get("step_ml_h", 0))
    changed = "bolus_ml" not in row and bool(pct or step)
    parts, total = _change(row, str(table["base"])), ""
    if changed and running and base:
        floor = float(table.get("floor_ml_h", 0))
        new = formula.titrated_rate_ml_h(running, base, pct, step, min(floor, running))
        total = f"; from {ml_h(running)} that is {ml_h(new)}"
        most = course.number("titration.most_change")
        if abs(new - running) * 100 > most * running + ROUNDING:
            total += f" (more than {number_text(most)} % at once; another handbook does not go further)"
    if band.get("plasma_ml_h") and pct > 0:
        parts += f", and plasma {ml_h(float(band['plasma_ml_h']))} more"
    first = f" first {row['first']}, then" if "first" in row else ""
    return figure(
        KEY,
        LABEL,
        shown=f"table {name} says:{first} {parts}{total}; confirm with prescriber",
        value=f"table {name}",
        as_of=last.at,
        flag=Flag.REVIEW if changed or "bolus_ml" in row else Flag.NONE,
        working=Working(
            formula=f"row of {name} for urine of {ml_h(last.ml_h or 0.0)}",
            sum=f"{_per_kg(course, last)}: {parts}{total}",
            rule=f"{name}, {band['who']}",
        ),
        sources=(course.source(f"titration.{name}"),),
        cautions=(
            "Published tables differ in their steps; one change at a time, not more often than hourly.",
        ),
    )


def _per_kg(course: Course, last: Urine) -> str:
    kg = course.urine_kg.kg if course.urine_kg else 0.0
    return f"{ml_h(last.ml_h or 0.0)} = {ml_kg_h((last.ml_h or 0.0) / kg)}" if kg else ml_h(last.ml_h or 0.0)


def _change(row: Band, base: str) -> str:
    if "bolus_ml" in row:
        return f"a challenge of {ml(float(row['bolus_ml']))}"
    if "step_ml_h" in row:
        step = float(row["step_ml_h"])
        return f"{'raise' if step > 0 else 'lower'} the rate by {ml_h(abs(step))}"
    pct = float(row.get("step_pct", 0))
    if not pct:
        return "no change"
    return f"{'raise' if pct > 0 else 'lower'} the rate by {number_text(abs(pct))} % of the {base} rate"


def _calculated(course: Course) -> float:
    plan, burn = course.plan, course.burn
    if plan is None or burn is None or plan.volume is None:
        return 0.0
    return plan.volume.rate_at(max(0.0, course.case.hours_between(burn.earliest, course.now)))
