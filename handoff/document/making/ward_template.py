"""The built-in template of the ward page."""

from __future__ import annotations

from handoff.document.making.markup import (
    Column,
    column,
    field,
    listing,
    paragraph,
    run,
    tab,
    when,
)
from handoff.document.making.shared import right_tab, title, unit_line, warnings

WIDTH = 15478
"""Text width of the page in twentieths of a point."""


def body() -> str:
    """Return the body of the template."""
    made = "{{ frame.made_at }}: {{ count }}. Severity is the nurse's own word; no flag does not say well."
    patient = paragraph("Key", run("{{ row.patient }}", "Strong")) + paragraph("Small", "{{ row.place }}")
    rows = listing(
        "The patients of the ward",
        "row in rows",
        Column(3600, "Patient and place", patient),
        column(1900, "Severity", "row.severity"),
        column(5200, "Needs action first", "row.first"),
        column(900, "Overdue", "row.overdue", look="Strong"),
        column(3878, "Next", "row.next"),
    )
    nobody = paragraph("Normal", "No patient could be read.")
    return "".join(
        (
            title(),
            unit_line(paragraph("Subtitle", made)),
            warnings(WIDTH),
            paragraph("Heading1", "Patients, who needs action first on top"),
            when("rows", rows),
            when("not rows", nobody),
            paragraph("Gap"),
        )
    )


def header() -> str:
    """Return the header of every page; it names no patient."""
    return paragraph(
        "Header",
        run("{{ frame.title }}", "Strong"),
        tab(),
        run("{{ frame.made_at }}"),
        extra=right_tab(WIDTH),
    )


def footer() -> str:
    """Return the footer of every page."""
    return paragraph(
        "Footer",
        run("{{ frame.caution }}"),
        tab(),
        run("Page "),
        field("PAGE"),
        run(" of "),
        field("NUMPAGES"),
        extra=right_tab(WIDTH),
    )
