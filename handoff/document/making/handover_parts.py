"""The four parts of the handover in its template."""

from __future__ import annotations

from handoff.document.making.markup import (
    SHADE,
    Column,
    blank,
    cell,
    column,
    each,
    header_row,
    listing,
    paragraph,
    row,
    run,
    table,
    tick_box,
    when,
)
from handoff.document.making.shared import signature_row

WIDTH = 10546
"""Text width of the page in twentieths of a point."""


def values(source: str, caption: str, heading: str = "") -> str:
    """Return a table of values with their times and flags; a ``heading`` stands in its header row."""
    flag = paragraph(
        "Normal",
        run("{%r if row.is_action %}"),
        run("{{ row.flag }}", "FlagAction"),
        run("{%r elif row.flag %}"),
        run("{{ row.flag }}", "FlagReview"),
        run("{%r endif %}"),
    )
    return listing(
        caption,
        f"row in {source}",
        column(2650, "What", "row.what"),
        column(5900, "Value", "row.value"),
        column(1030, "Time", "row.time", look="Quiet"),
        Column(966, "Flag", flag),
        heading=heading,
    )


def section(name: str) -> str:
    """Return the rows of a part, their cautions, and what is not recorded in it."""
    return "".join(
        (
            when(f"{name}.rows", values(f"{name}.rows", name.capitalize())),
            when(f"{name}.cautions", paragraph("Small", f"{{{{ {name}.cautions }}}}")),
            _missing(f"{name}.missing"),
        )
    )


def changes() -> str:
    """Return what changed since an earlier document: values by system, then the tasks of the care plan."""
    rows = listing(
        "What changed in one system",
        "row in system.rows",
        column(2650, "What", "row.what"),
        column(3150, "Before", "row.before"),
        column(3300, "Now", "row.now"),
        column(1446, "Change", "row.how", look="Strong"),
        heading="{{ system.title }}",
    )
    return when(
        "changes.title",
        paragraph("Heading1", "{{ changes.title }}"),
        each("note in changes.notes", paragraph("KeyNote", "{{ note }}")),
        each("system in changes.systems", rows, paragraph("Gap")),
        _tasks("changes.new_tasks", "New in the care plan"),
        _tasks("changes.ended_tasks", "No longer in the care plan"),
    )


def _tasks(source: str, label: str) -> str:
    return when(source, listing(label, f"task in {source}", column(WIDTH, label, "task")), paragraph("Gap"))


def systems() -> str:
    """Return the assessment: one table for each system, its heading repeated where the page turns."""
    return "".join(
        (
            paragraph("Small", "{{ legend }}"),
            each(
                "block in systems",
                values("block.rows", "Assessment of one system", heading="{{ block.title }}"),
                when("block.cautions", paragraph("Small", "{{ block.cautions }}")),
                paragraph("Gap"),
            ),
            _missing("assessment_missing"),
        )
    )


def recommendation() -> str:
    """Return the recommendation: what is advised, asked, to do, awaited, checked together, accepted."""
    advice = values("recommendation.rows", "Recommendation")
    return "".join(
        (
            when("recommendation.rows", advice, paragraph("Gap")),
            when("recommendation.cautions", paragraph("Small", "{{ recommendation.cautions }}")),
            when("requests", _requests(), paragraph("Gap")),
            when("timeline", _timeline(), paragraph("Gap")),
            when("pending", _pending()),
            _missing("recommendation.missing"),
            _bedside(),
            paragraph("Gap"),
            _acceptance(),
        )
    )


def _missing(name: str) -> str:
    return paragraph("Missing", run("Not recorded: ", "Strong"), run(f"{{{{ {name} }}}}"))


def _requests() -> str:
    return listing(
        "Requests to the next shift",
        "request in requests",
        column(WIDTH, "Asked of the next shift", "request"),
    )


def _timeline() -> str:
    tasks = paragraph(
        "Normal",
        run("{%r for task in moment.tasks %}"),
        run("{{ task.ref }}", "Reference"),
        run(" {{ task.text }}{% if not loop.last %}.  {% endif %}"),
        run("{%r endfor %}"),
    )
    return listing(
        "To do in the coming shift",
        "moment in timeline",
        column(1700, "When", "moment.when", look="Strong"),
        Column(8846, "To do in the coming shift (references of the care plan)", tasks),
    )


def _pending() -> str:
    return listing(
        "What is awaited",
        "wait in pending",
        column(5000, "Awaited", "wait.what"),
        column(2200, "Due", "wait.due"),
        column(3346, "Telephone it to", "wait.phone"),
    )


def _bedside() -> str:
    half = WIDTH // 2
    head = cell(WIDTH, paragraph("CellHead", "Looked at together at the bedside"), fill=SHADE, span=2)
    left, right = _ticks(":checks|length // 2"), _ticks("checks|length // 2:")
    return table(
        "Joint bedside check",
        [half, WIDTH - half],
        row(head, header=True),
        row(cell(half, left), cell(WIDTH - half, right)),
    )


def _ticks(part: str) -> str:
    tick = tick_box("{{ check.tag }}", "Looked at together")
    return each(f"check in checks[{part}]", paragraph("Ticks", tick, run(" {{ check.text }}")))


def _acceptance() -> str:
    widths = [2000, 3600, 2900, 2046]
    read_back = paragraph(
        "Boxes",
        tick_box("check:read-back", "Read-back done"),
        run(" Read back by the receiver and corrected   "),
        tick_box("check:questions", "Questions answered"),
        run(" Questions asked and answered   Responsibility accepted at "),
        blank("sign:accepted:time", "Responsibility accepted: date and time"),
    )
    return table(
        "Read-back and acceptance",
        widths,
        header_row(widths, "Acceptance", "Name, role, telephone", "Signature", "Date and time"),
        signature_row(widths, "Given by", "{{ given_by }}", "given"),
        signature_row(widths, "Received by", "{{ received_by }}", "received"),
        row(cell(WIDTH, read_back, span=4)),
    )
