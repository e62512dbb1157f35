"""The figures of a document, each with its facts in words, and what could not be drawn."""

from __future__ import annotations

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.charts import BURNS, HOURS, rows
from handoff.document.figures.body_chart import body_chart
from handoff.document.figures.figure import Figure
from handoff.document.figures.fluid_chart import fluid_chart
from handoff.document.figures.fluid_panels import Target
from handoff.document.figures.proportions import Build, build_for
from handoff.document.figures.trend_charts import line, trend_charts
from handoff.document.figures.trends import trends

TARGET = "urine_target_ml_h"
"""Where the fluid plugin passes the ends of the urine target on, in mL/h; either may be None."""


class Figures(Struct, frozen=True):
    """The figures, none or one of each kind; the trends in words; and a line for each that is not drawn."""

    body: tuple[Figure, ...]
    fluid: tuple[Figure, ...]
    trends: tuple[Figure, ...]
    trend_lines: tuple[str, ...]
    not_drawn: tuple[str, ...]


def figures(assessment: Assessment) -> Figures:
    """Return what is drawn of an assessment; nothing is drawn for what is not recorded."""
    clock, now = assessment.state.clock, assessment.now
    body = burn_figure(assessment)
    fluid = fluid_figure(assessment)
    found, few = trends(assessment.state, now)
    missing = []
    if not body:
        missing.append("Body chart: no burned region is recorded that could be drawn.")
    if not fluid:
        missing.append("Fluid by the hour: no hour since the burn was worked out.")
    if few:
        missing.append(f"Trends with fewer than two values in the last 24 h: {'; '.join(few)}.")
    return Figures(
        body=body,
        fluid=fluid,
        trends=trend_charts(found, clock, now),
        trend_lines=tuple(line(trend, clock, now) for trend in found),
        not_drawn=tuple(missing),
    )


def burn_figure(assessment: Assessment) -> tuple[Figure, ...]:
    """Return the body chart of an assessment; none where no burned region can be drawn."""
    counted = assessment.item("area.counted")
    at = counted.as_of if counted else None
    said = (
        f"Assessed {assessment.state.clock.day_and_time(at)}."
        if at
        else "Time of the assessment not recorded."
    )
    build, age_said = _build(assessment)
    return body_chart(rows(assessment, BURNS)[0], build, f"{said} {age_said}")


def _build(assessment: Assessment) -> tuple[Build, str]:
    """The proportions of the figure, by the age when the burn happened, and how that is said."""
    burn = assessment.state.burn_time
    age = assessment.state.age_at(burn.earliest if burn else assessment.now)
    build = build_for(age.years if age else None)
    why = "" if age else ", the age is not recorded"
    return build, f"Figure drawn with {build.name} proportions{why}."


def fluid_figure(assessment: Assessment) -> tuple[Figure, ...]:
    """Return the fluid figure of an assessment; none where no hour was worked out."""
    given = rows(assessment, HOURS)[0]
    return fluid_chart(given, assessment.state.clock, assessment.now, _target(assessment))


def _target(assessment: Assessment) -> Target | None:
    found = assessment.findings.get("fluid")
    ends = found.values.get(TARGET) if found else None
    if not isinstance(ends, tuple) or len(ends) != 2:
        return None
    low, high = (float(end) if isinstance(end, (int, float)) else None for end in ends)
    return None if low is None and high is None else (low, high)
