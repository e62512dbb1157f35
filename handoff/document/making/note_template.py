"""The built-in template of the nursing note."""

from __future__ import annotations

from handoff.document.making.markup import column, each, header_row, listing, paragraph, table, when
from handoff.document.making.shared import signature_row, title, unit_line

WIDTH = 10546
"""Text width of the page in twentieths of a point."""


def body() -> str:
    """Return the body of the template."""
    lines = listing(
        "What was charted in one system",
        "line in system.lines",
        column(1700, "Time", "line.time", look="Strong"),
        column(WIDTH - 1700, "Charted", "line.text"),
        heading="{{ system.title }}",
    )
    return "".join(
        (
            title(),
            unit_line(paragraph("Subtitle", "{{ window }}")),
            paragraph("Small", "{{ rule }}"),
            paragraph("Heading1", "What was charted"),
            each("system in systems", lines, paragraph("Gap")),
            when("not systems", paragraph("Normal", "Nothing was charted in this time.")),
            when("silent", paragraph("Missing", "No entry in this time: {{ silent }}")),
            paragraph("Gap"),
            _signature(),
        )
    )


def _signature() -> str:
    widths = [2000, 3600, 2900, 2046]
    return table(
        "Signature",
        widths,
        header_row(widths, "Signed", "Name and role", "Signature", "Date and time"),
        signature_row(widths, "Nurse of this shift", "", "nurse"),
    )
