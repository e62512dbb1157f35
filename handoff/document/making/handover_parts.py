"""The four parts of the handover in its template."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
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
    """Return a part in few lines, and the names of what is not recorded in it."""
    return when(f"{name}.said", paragraph("Brief", _said(f"{name}.said"))) + _missing(f"{name}.missing")


def _said(source: str) -> str:
    """Values in one line of text, told apart by bold names and a stroke."""
    return "".join(
        (
            run(f"{{%r for one in {source} %}}"),
            run("{{ one.what }}", "Strong"),
            run("{%r if one.time %}"),
            run(" {{ one.time }}", "Time"),
            run("{%r endif %}"),
            run(": {{ one.value }}"),
            run("{%r if one.is_action %}"),
            run(" "),
            run("{{ one.flag }}", "FlagAction"),
            run("{%r elif one.flag %}"),
            run(" "),
            run("{{ one.flag }}", "FlagReview"),
            run("{%r endif %}"),
            run("{%r if not loop.last %}"),
            run("  | "),
            run("{%r endif %}"),
            run("{%r endfor %}"),
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
    """Return the assessment in few lines: one row for each system, its name a heading."""
    title = paragraph("Heading2", "{{ block.title }}", extra='<w:spacing w:before="0" w:after="0"/>')
    known = "".join(
        (
            run("{%r if block.page_one %}"),
            run("{% if block.said %}  | {% endif %}On page one: ", "Time"),
            run("{{ block.page_one }}", "Strong"),
            run("{%r endif %}"),
        )
    )
    said = paragraph("Brief", _said("block.said") + known)
    cautions = when("block.cautions", paragraph("Caution", "{{ block.cautions }}"))
    rows = listing(
        "Assessment by system",
        "block in systems",
        Column(1150, "System", title),
        Column(WIDTH - 1150, "Values, each with its time and what it was before", said + cautions),
    )
    return when("systems", rows) + _missing("assessment_missing") + paragraph("Caution", "{{ legend }}")


def recommendation() -> str:
    """Return the recommendation: what is advised, asked, to do, awaited, checked together, accepted."""
    asked = paragraph(
        "Brief",
        run("Asked of the next shift:", "Strong"),
        run("{%r for request in requests %}"),
        run(" {{ request }}{% if not loop.last %};{% endif %}"),
        run("{%r endfor %}"),
    )
    return "".join(
        (
            section("recommendation"),
            when("requests", asked),
            when(
                "timeline",
                to_do(
                    "timeline",
                    "To do in the coming shift (references of the care plan; a reference alone: see page one)",
                ),
                paragraph("Gap"),
            ),
            when("pending", _pending(), paragraph("Gap")),
            _bedside(),
        )
    )


def detail() -> str:
    """Return every value in full, by part and by system, and the shift with every task in full."""
    return "".join(
        (
            paragraph("Heading1", "Detail by system", extra="<w:pageBreakBefore/>"),
            each(
                "block in detail",
                values("block.rows", "Every value of one part or system", heading="{{ block.title }}"),
                when("block.cautions", paragraph("Small", "{{ block.cautions }}")),
                paragraph("Gap"),
            ),
            when("not detail", paragraph("Normal", "No value was worked out.")),
            when(
                "to_do",
                paragraph("Heading2", "To do in the coming shift, in full"),
                to_do("to_do", "Task (reference of the care plan)"),
            ),
        )
    )


def _missing(name: str) -> str:
    return when(name, paragraph("Missing", run("Not recorded: ", "Strong"), run(f"{{{{ {name} }}}}")))


def to_do(source: str, label: str) -> str:
    """Return the coming shift on a line of time; ``label`` heads the tasks."""
    tasks = paragraph(
        "Brief",
        run("{%r for task in moment.tasks %}"),
        run("{%r if task.at %}"),
        run("{{ task.at }} ", "Strong"),
        run("{%r endif %}"),
        run("{{ task.ref }}", "Reference"),
        run("{% if task.text %} {{ task.text }}{% endif %}{% if task.note %} ({{ task.note }}){% endif %}"),
        run("{%r if not loop.last %}"),
        run("  | "),
        run("{%r endif %}"),
        run("{%r endfor %}"),
    )
    return listing(
        "To do in the coming shift",
        f"moment in {source}",
        column(900, "When", "moment.when", "Brief", "Strong"),
        Column(WIDTH - 900, label, tasks),
    )


def _pending() -> str:
    return listing(
        "What is awaited",
        "wait in pending",
        column(4600, "Awaited", "wait.what", "Brief"),
        column(1500, "Due", "wait.due", "Brief"),
        column(4446, "Result telephoned to (who telephones whom)", "wait.phone", "Brief"),
    )


def _bedside() -> str:
    """What is looked at together, and beside it the read-back and the names that take it on."""
    looked, taken = 5200, WIDTH - 5200
    tick = tick_box("{{ check.tag }}", "Looked at together")
    ticks = each("check in checks", paragraph("Ticks", tick, run(" {{ check.text }}")))
    return table(
        "Joint bedside check and acceptance",
        [looked, taken],
        header_row([looked, taken], "Looked at together at the bedside", "Read-back and acceptance"),
        row(cell(looked, ticks), cell(taken, *_acceptance())),
    )


def _acceptance() -> tuple[str, ...]:
    return (
        paragraph(
            "Ticks", tick_box("check:read-back", "Read-back done"), " Read back by the receiver and corrected"
        ),
        paragraph(
            "Ticks", tick_box("check:questions", "Questions answered"), " Questions asked and answered"
        ),
        *_signed("Given by", "{{ given_by }}", "given"),
        *_signed("Received by", "{{ received_by }}", "received"),
        paragraph(
            "Boxes",
            "Responsibility accepted at ",
            blank("sign:accepted:time", "Responsibility accepted: date and time", BLANK * 2),
        ),
    )


def _signed(label: str, who: str, key: str) -> tuple[str, str]:
    signature = blank(f"sign:{key}:signature", f"{label}: signature", BLANK * 2)
    time = blank(f"sign:{key}:time", f"{label}: date and time", BLANK + "_")
    return (
        paragraph("Brief", run(f"{label}: ", "Strong"), run(who)),
        paragraph("Boxes", "Signature ", signature, run("  date and time "), time),
    )
