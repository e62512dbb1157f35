"""The built-in template of the care plan."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
    Column,
    blank,
    each,
    header_row,
    listing,
    marked,
    paragraph,
    row,
    run,
    table,
    tick_box,
    when,
)
from handoff.document.making.shared import (
    band_columns,
    identity_band,
    labelled,
    signature_row,
    sources,
    title,
    unit_line,
    warnings,
)

ROOM = "_" * 12
"""Room for a time and initials written by hand."""

WIDTH = 15478
"""Text width of the page in twentieths of a point."""

WIDTHS = (700, 5200, 9578)
"""Reference, task and boxes."""


def body() -> str:
    """Return the body of the template."""
    period = "For the shift from {{ start }} to {{ end }}. Tick when done; write the time done and initials beside it."
    nothing = "No task was worked out: write the plan by hand."
    return "".join(
        (
            title(),
            unit_line(paragraph("Subtitle", period)),
            warnings(WIDTH),
            _band(),
            paragraph("Gap"),
            when("now", paragraph("Key", run("DO NOW: ", "Strong"), run("{{ now }}", "Reference"))),
            when("not areas", paragraph("Key", nothing)),
            each("area in areas", paragraph("Heading1", "{{ area.title }}"), _tasks()),
            paragraph("Heading1", "Added by hand in this shift"),
            _by_hand(),
            paragraph("Gap"),
            _signatures(),
            when("sources", paragraph("Heading1", "Sources"), sources("sources", 800, WIDTH - 800)),
            paragraph("Gap"),
        )
    )


def _band() -> str:
    half = sum(band_columns(WIDTH)[:2])
    burn = row(
        labelled(half, "Time of burn", "{{ identity.burn }}", span=2),
        labelled(WIDTH - half, "Since", "{{ identity.since }}", span=2),
    )
    return identity_band(WIDTH, burn)


def _tasks() -> str:
    reference = marked("{{ task.tag }}", "Row", run("{{ task.ref }}", "Reference"))
    task = paragraph(
        "Normal",
        run("{%r if task.urgent %}"),
        run("{{ task.urgent }}", "FlagAction"),
        run(" "),
        run("{%r endif %}"),
        run("{{ task.text }}", "Strong"),
    )
    note = when("task.note", paragraph("Small", "{{ task.note }}"))
    rhythm = paragraph(
        "Boxes",
        run("{%r if task.when %}"),
        run("{{ task.when }}", "Quiet"),
        run("   "),
        run("{%r endif %}"),
        _boxes("task.late"),
    )
    return listing(
        "Tasks of one problem area",
        "task in area.tasks",
        Column(WIDTHS[0], "Ref", paragraph("Key", reference)),
        Column(WIDTHS[1], "What to do, and why", task + paragraph("Small", "{{ task.why }}") + note),
        Column(
            WIDTHS[2],
            "When due: tick, time done, initials",
            when("task.when or task.late", rhythm) + paragraph("Boxes", _boxes("task.boxes")),
        ),
    )


def _boxes(source: str) -> str:
    return "".join(
        (
            run(f"{{%r for box in {source} %}}"),
            tick_box("{{ box.tag }}", "{{ box.title }}"),
            run("\u00a0{{ box.label }}\u00a0"),
            blank("{{ box.by_tag }}", "{{ box.by_title }}", ROOM),
            run("   "),
            run("{%r endfor %}"),
        )
    )


def _by_hand() -> str:
    """Rows to be filled in by pen or in Word, found again by their references like the others."""
    reference = marked("{{ blank.tag }}", "Row", run("{{ blank.ref }}", "Reference"))
    line = blank("{{ blank.text_tag }}", "{{ blank.text_title }}", BLANK * 4)
    boxes = "".join(
        (
            run("{%r for box in blank.boxes %}"),
            tick_box("{{ box.tag }}", "{{ box.title }}"),
            run("\u00a0due\u00a0"),
            blank("{{ box.due_tag }}", "{{ box.due_title }}", "_" * 6),
            run("\u00a0"),
            blank("{{ box.by_tag }}", "{{ box.by_title }}", ROOM),
            run("   "),
            run("{%r endfor %}"),
        )
    )
    return listing(
        "Tasks added by hand",
        "blank in by_hand",
        Column(WIDTHS[0], "Ref", paragraph("Key", reference)),
        Column(WIDTHS[1], "What to do, and why", paragraph("Boxes", line)),
        Column(WIDTHS[2], "When due: tick, time done, initials", paragraph("Boxes", boxes)),
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
