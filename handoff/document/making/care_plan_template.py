"""The built-in template of the care plan."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
    blank,
    cell,
    each,
    each_row,
    header_row,
    marked,
    paragraph,
    row,
    run,
    table,
    tick_box,
    when,
)
from handoff.document.making.shared import identity_band, labelled, signature_row, title, unit_line, warnings

WIDTH = 15478
"""Text width of the page in twentieths of a point."""


def body() -> str:
    """Return the body of the template."""
    period = paragraph("Subtitle", "For the shift from {{ start }} to {{ end }}. Tick when done; write the time done and initials beside it.")
    return "".join(
        (
            title(),
            unit_line(period),
            warnings(WIDTH),
            _band(),
            when("now", paragraph("Key", run("DO NOW: ", "Strong"), run("{{ now }}", "Reference"))),
            when("not areas", paragraph("Key", "No task was worked out: write the plan by hand.")),
            each("area in areas", paragraph("Heading1", "{{ area.title }}"), _tasks()),
            paragraph("Gap"),
            _signatures(),
            _sources(),
        )
    )


def _band() -> str:
    quarter = WIDTH // 4
    burn = row(
        labelled(2 * quarter, "Time of burn", "{{ identity.burn }}", span=2),
        labelled(WIDTH - 2 * quarter, "Since", "{{ identity.since }}", span=2),
    )
    return identity_band(WIDTH, burn)


def _tasks() -> str:
    widths = [700, 5200, 9578]
    reference = marked("{{ task.tag }}", "Row", run("{{ task.ref }}", "Reference"))
    what = cell(
        widths[1],
        paragraph(
            "Normal",
            run("{%r if task.urgent %}"),
            run("{{ task.urgent }}", "FlagAction"),
            run(" "),
            run("{%r endif %}"),
            run("{{ task.text }}", "Strong"),
        ),
        paragraph("Small", "{{ task.why }}"),
        when("task.note", paragraph("Small", "{{ task.note }}")),
    )
    rhythm = when(
        "task.when or task.late",
        paragraph("Boxes", run("{{ task.when }}", "Quiet"), run("   "), _boxes("task.late")),
    )
    return table(
        "Tasks of one problem area",
        widths,
        header_row(widths, "Ref", "What to do, and why", "When due: tick, time done, initials"),
        each_row(
            "task in area.tasks",
            row(cell(widths[0], paragraph("Key", reference)), what, cell(widths[2], rhythm, paragraph("Boxes", _boxes("task.boxes")))),
        ),
    )


def _boxes(source: str) -> str:
    return "".join(
        (
            run(f"{{%r for box in {source} %}}"),
            tick_box("{{ box.tag }}", "{{ box.title }}"),
            run("\u00a0{{ box.label }}\u00a0"),
            blank("{{ box.by_tag }}", "{{ box.by_title }}", BLANK[1:]),
            run("   "),
            run("{%r endfor %}"),
        )
    )


def _signatures() -> str:
    widths = [3000, 5200, 4278, 3000]
    return table(
        "Signatures",
        widths,
        header_row(widths, "Plan read and taken on", "Name and role", "Signature", "Date and time"),
        signature_row(widths, "Nurse of this shift", "", "nurse"),
        signature_row(widths, "Second reader", "", "second"),
        signature_row(widths, "Nurse of the next shift", "", "next"),
    )


def _sources() -> str:
    widths = [800, 14678]
    return when(
        "sources",
        paragraph("Heading1", "Sources"),
        table(
            "Sources",
            widths,
            header_row(widths, "Mark", "Source"),
            each_row(
                "source in sources",
                row(cell(widths[0], paragraph("Small", "{{ source.mark }}")), cell(widths[1], paragraph("Small", "{{ source.text }}"))),
            ),
        ),
        paragraph("Gap"),
    )
