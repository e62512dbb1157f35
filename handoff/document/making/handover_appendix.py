"""The tables and the appendix of the handover in its template."""

from __future__ import annotations

from handoff.document.making.handover_parts import values
from handoff.document.making.markup import (
    Column,
    column,
    each,
    listing,
    marked,
    paragraph,
    run,
    when,
)
from handoff.document.making.shared import sources

NEXT_PAGE = "<w:pageBreakBefore/>"


def charts() -> str:
    """Return the figures with their tables, on pages of their own, and what is not drawn."""
    said = "Due is a formula estimate. Given is what was confirmed; what was not seen running stands apart."
    title = "Burn chart, fluid and trends"
    some = "burns or hours or figures.trends"
    return "".join(
        (
            when(some, paragraph("Heading1", title, extra=NEXT_PAGE)),
            when(f"not ({some})", paragraph("Heading1", title)),
            when("burns", paragraph("Heading2", "Burned regions"), _drawn("figures.body"), _burns()),
            when(
                "hours",
                paragraph("Heading2", "Resuscitation fluid and urine by the hour since the burn"),
                _drawn("figures.fluid"),
                _hours(),
                paragraph("Small", said),
            ),
            when(
                "figures.trends",
                paragraph("Heading2", "Trends"),
                _drawn("figures.trends"),
                each("line in figures.trend_lines", paragraph("Small", "{{ line }}")),
            ),
            each(
                "line in figures.not_drawn",
                paragraph("Missing", run("Not drawn: ", "Strong"), run("{{ line }}")),
            ),
        )
    )


def _drawn(name: str) -> str:
    """A drawing, put into its content control when the document is finished, and the lines below it."""
    place = marked("{{ figure.drawing }}", "{{ figure.title }}", run("[drawing]"))
    return each(
        f"figure in {name}",
        paragraph("Normal", place, extra="<w:keepNext/>"),
        each("note in figure.notes", paragraph("Small", "{{ note }}")),
        paragraph("Gap"),
    )


def _burns() -> str:
    return listing(
        "Burned regions",
        "burn in burns",
        column(3300, "Region", "burn.region"),
        column(2100, "Depth", "burn.depth"),
        column(1500, "%TBSA", "burn.share"),
        column(1500, "Counted", "burn.counted"),
        column(1400, "Circumferential", "burn.around"),
        column(746, "Line", "burn.line"),
    )


def _hours() -> str:
    return listing(
        "Fluid by the hour",
        "hour in hours",
        column(900, "Hour", "hour.hour"),
        column(1900, "From", "hour.start"),
        column(1900, "Due, mL", "hour.due"),
        column(1900, "Given, mL", "hour.given"),
        column(2046, "Not confirmed, mL", "hour.not_confirmed"),
        column(1900, "Urine, mL", "hour.urine"),
    )


def appendix() -> str:
    """Return working, sources, and what is not recorded."""
    return "".join(
        (
            paragraph("Heading1", "Working and sources", extra=NEXT_PAGE),
            paragraph("Small", "{{ appendix.made_by }}"),
            when("appendix.figures", _figures()),
            when(
                "appendix.notes",
                paragraph("Heading2", "Sources and cautions of the other values"),
                _notes(),
            ),
            when(
                "appendix.details",
                paragraph("Heading2", "Further values"),
                values("appendix.details", "Further values"),
            ),
            when(
                "appendix.sources", paragraph("Heading2", "Sources"), sources("appendix.sources", 700, 9846)
            ),
            paragraph("Heading1", "Not recorded"),
            when("appendix.gaps", _not_recorded()),
            when("not appendix.gaps", paragraph("Normal", "No entry that was worked out lacks its value.")),
            paragraph("Gap"),
        )
    )


def _figures() -> str:
    figure = paragraph("Small", "{{ figure.what }}") + paragraph("Small", run("{{ figure.value }}", "Strong"))
    working = "".join(
        (
            when("figure.formula", paragraph("Small", "{{ figure.formula }}")),
            when("figure.rule", paragraph("Small", "Rule: {{ figure.rule }}")),
            when("figure.cautions", paragraph("Small", "Caution: {{ figure.cautions }}")),
            paragraph("Small", run("{{ figure.sum }}", "Strong")),
        )
    )
    return listing(
        "Working of each figure",
        "figure in appendix.figures",
        Column(2600, "Figure", figure),
        Column(4100, "Working", working),
        column(2946, "Put in (line of the file)", "figure.inputs", "Small"),
        column(900, "Source", "figure.sources", "Small"),
    )


def _notes() -> str:
    return listing(
        "Sources and cautions of the other values",
        "note in appendix.notes",
        column(3600, "Value", "note.what", "Small"),
        column(6046, "Caution", "note.cautions", "Small"),
        column(900, "Source", "note.sources", "Small"),
    )


def _not_recorded() -> str:
    return listing(
        "What is not recorded",
        "gap in appendix.gaps",
        column(3600, "What", "gap.what", "Small"),
        column(4346, "Printed as", "gap.value", "Small"),
        column(2600, "Where", "gap.where", "Small"),
    )
