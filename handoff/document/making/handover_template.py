"""The built-in template of the handover."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
    SHADE,
    blank,
    cell,
    each,
    each_row,
    header_row,
    paragraph,
    row,
    run,
    table,
    tick_box,
    when,
)
from handoff.document.making.shared import identity_band, labelled, signature_row, title, unit_line, warnings

WIDTH = 10546
"""Text width of the page in twentieths of a point."""

NEXT_PAGE = "<w:pageBreakBefore/>"


def body() -> str:
    """Return the body of the template."""
    return "".join(
        (
            title(),
            unit_line(),
            warnings(WIDTH),
            _band(),
            paragraph("Gap"),
            _key_tables(),
            _gaps(),
            paragraph("Heading1", "Situation"),
            _section("situation"),
            paragraph("Heading1", "Background"),
            _section("background"),
            paragraph("Heading1", "Assessment"),
            _systems(),
            paragraph("Heading1", "Recommendation"),
            _recommendation(),
            _charts(),
            _appendix(),
        )
    )


def _band() -> str:
    quarter = WIDTH // 4
    last = WIDTH - 3 * quarter
    severity = row(
        cell(
            2 * quarter,
            paragraph("Label", "Severity, in the nurse's own word"),
            paragraph("BandName", "{{ severity }}"),
            when("severity_said", paragraph("Label", "{{ severity_said }}")),
            span=2,
        ),
        labelled(WIDTH - 2 * quarter, "Time of burn", "{{ identity.burn }}", "{{ identity.since }}", span=2),
    )
    people = row(
        labelled(2 * quarter, "Given by", "{{ given_by }}", span=2, style="Normal"),
        labelled(quarter + last, "Received by", "{{ received_by }}", span=2, style="Normal"),
    )
    return identity_band(WIDTH, severity, people)


def _key_tables() -> str:
    key = [2500, 3900, 1250, 2896]
    task = [1000, 5600, 3946]
    if_then = [4200, 6346]
    rows = row(
        cell(key[0], paragraph("Key", run("{{ row.what }}", "Strong"))),
        cell(key[1], paragraph("Key", "{{ row.value }}")),
        cell(key[2], paragraph("Key", "{{ row.time }}")),
        cell(key[3], paragraph("Normal", "{{ row.why }}")),
    )
    nothing = "No entry is flagged ACTION at this time; that does not say that the patient is well."
    return "".join(
        (
            table(
                "What needs action",
                key,
                header_row(key, "NEEDS ACTION", "What was found", "Time", "Why, or caution"),
                each_row("row in page_one.actions", rows),
            ),
            when("not page_one.actions", paragraph("KeyNote", nothing)),
            when("page_one.more_actions", paragraph("KeyNote", run("Also flagged ACTION: ", "Strong"), run("{{ page_one.more_actions }}"))),
            when(
                "page_one.tasks",
                paragraph("Gap"),
                table(
                    "What to do now",
                    task,
                    header_row(task, "DO NOW", "Task (reference of the care plan)", "Why"),
                    each_row(
                        "task in page_one.tasks",
                        row(
                            cell(task[0], paragraph("Key", run("{{ task.ref }}", "Reference"))),
                            cell(task[1], paragraph("Key", "{{ task.text }}")),
                            cell(task[2], paragraph("Normal", "{{ task.why }}")),
                        ),
                    ),
                ),
            ),
            when("page_one.more_tasks", paragraph("KeyNote", run("Also to do now: ", "Strong"), run("{{ page_one.more_tasks }}"))),
            when(
                "page_one.due",
                paragraph("Gap"),
                table(
                    "What is due or overdue",
                    key,
                    header_row(key, "DUE OR OVERDUE", "What was found", "Since", "Why, or caution"),
                    each_row("row in page_one.due", rows),
                ),
            ),
            when("page_one.more_due", paragraph("KeyNote", run("Also due for review: ", "Strong"), run("{{ page_one.more_due }}"))),
            paragraph("Gap"),
            table(
                "What to do if",
                if_then,
                header_row(if_then, "WHAT TO DO IF", "Then"),
                each_row(
                    "line in page_one.if_then",
                    row(
                        cell(if_then[0], paragraph("Key", run("{{ line.event }}", "Strong"))),
                        cell(if_then[1], paragraph("Key", "{{ line.answer }}")),
                    ),
                ),
            ),
            when("not page_one.if_then", paragraph("KeyNote", "Not recorded by the nurse: agree it at the bedside.")),
        )
    )


def _gaps() -> str:
    return when(
        "page_one.gaps",
        paragraph("Gap"),
        paragraph("Key", run("NOT RECORDED AND NEEDED FIRST: ", "Strong"), run("{{ page_one.gaps }}")),
    ) + paragraph("KeyNote", "{{ page_one.missing_count }} not recorded; the list is at the end.")


def _values(source: str, caption: str, heading: str = "") -> str:
    widths = [2900, 5600, 1146, 900]
    flag = paragraph(
        "Normal",
        run("{%r if row.is_action %}"),
        run("{{ row.flag }}", "FlagAction"),
        run("{%r elif row.flag %}"),
        run("{{ row.flag }}", "FlagReview"),
        run("{%r endif %}"),
    )
    return table(
        caption,
        widths,
        header_row(widths, "What", "Value", "Time", "Flag", heading=heading),
        each_row(
            f"row in {source}",
            row(
                cell(widths[0], paragraph("Normal", "{{ row.what }}")),
                cell(widths[1], paragraph("Normal", "{{ row.value }}")),
                cell(widths[2], paragraph("Normal", run("{{ row.time }}", "Quiet"))),
                cell(widths[3], flag),
            ),
        ),
    )


def _missing(name: str) -> str:
    return paragraph("Missing", run("Not recorded: ", "Strong"), run(f"{{{{ {name} }}}}"))


def _section(name: str) -> str:
    return "".join(
        (
            when(f"{name}.rows", _values(f"{name}.rows", name.capitalize())),
            when(f"{name}.cautions", paragraph("Small", f"{{{{ {name}.cautions }}}}")),
            _missing(f"{name}.missing"),
        )
    )


def _systems() -> str:
    return "".join(
        (
            paragraph("Small", "{{ legend }}"),
            each(
                "block in systems",
                _values("block.rows", "Assessment of one system", heading="{{ block.title }}"),
                when("block.cautions", paragraph("Small", "{{ block.cautions }}")),
                paragraph("Gap"),
            ),
            _missing("assessment_missing"),
        )
    )


def _recommendation() -> str:
    moments, awaited = [1700, 8846], [5000, 2200, 3346]
    return "".join(
        (
            _section_rows(),
            when(
                "requests",
                table(
                    "Requests to the next shift",
                    [WIDTH],
                    header_row([WIDTH], "Asked of the next shift"),
                    each_row("request in requests", row(cell(WIDTH, paragraph("Normal", "{{ request }}")))),
                ),
                paragraph("Gap"),
            ),
            when(
                "timeline",
                table(
                    "To do in the coming shift",
                    moments,
                    header_row(moments, "When", "To do in the coming shift (references of the care plan)"),
                    each_row(
                        "moment in timeline",
                        row(
                            cell(moments[0], paragraph("Normal", run("{{ moment.when }}", "Strong"))),
                            cell(moments[1], _planned()),
                        ),
                    ),
                ),
                paragraph("Gap"),
            ),
            when(
                "pending",
                table(
                    "What is awaited",
                    awaited,
                    header_row(awaited, "Awaited", "Due", "Telephone it to"),
                    each_row(
                        "wait in pending",
                        row(
                            cell(awaited[0], paragraph("Normal", "{{ wait.what }}")),
                            cell(awaited[1], paragraph("Normal", "{{ wait.due }}")),
                            cell(awaited[2], paragraph("Normal", "{{ wait.phone }}")),
                        ),
                    ),
                ),
            ),
            _missing("recommendation.missing"),
            _bedside(),
            paragraph("Gap"),
            _acceptance(),
        )
    )


def _planned() -> str:
    return paragraph(
        "Normal",
        run("{%r for task in moment.tasks %}"),
        run("{{ task.ref }}", "Reference"),
        run(" {{ task.text }}{% if not loop.last %}.  {% endif %}"),
        run("{%r endfor %}"),
    )


def _section_rows() -> str:
    return "".join(
        (
            when("recommendation.rows", _values("recommendation.rows", "Recommendation"), paragraph("Gap")),
            when("recommendation.cautions", paragraph("Small", "{{ recommendation.cautions }}")),
        )
    )


def _bedside() -> str:
    half = WIDTH // 2
    def ticks(part: str) -> str:
        return each(
            f"check in checks[{part}]",
            paragraph("Ticks", tick_box("{{ check.tag }}", "Looked at together"), run(" {{ check.text }}")),
        )

    widths = [half, WIDTH - half]
    head = row(cell(WIDTH, paragraph("CellHead", "Looked at together at the bedside"), fill=SHADE, span=2), header=True)
    left, right = ticks(":checks|length // 2"), ticks("checks|length // 2:")
    return table("Joint bedside check", widths, head, row(cell(widths[0], left), cell(widths[1], right)))


def _acceptance() -> str:
    widths = [2000, 3600, 2900, 2046]
    read_back = row(
        cell(
            WIDTH,
            paragraph(
                "Boxes",
                tick_box("check:read-back", "Read-back done"),
                run(" Read back by the receiver and corrected   "),
                tick_box("check:questions", "Questions answered"),
                run(" Questions asked and answered   Responsibility accepted at "),
                blank("sign:accepted:time", "Responsibility accepted: date and time", BLANK),
            ),
            span=4,
        )
    )
    return table(
        "Read-back and acceptance",
        widths,
        header_row(widths, "Read-back and acceptance", "Name, role, telephone", "Signature", "Date and time"),
        signature_row(widths, "Given by", "{{ given_by }}", "given"),
        signature_row(widths, "Received by", "{{ received_by }}", "received"),
        read_back,
    )


def _charts() -> str:
    burn = [3300, 2100, 1500, 1500, 1400, 746]
    hour = [900, 1900, 1900, 1900, 2046, 1900]
    return when(
        "burns or hours",
        paragraph("Heading1", "Burn and fluid tables", extra=NEXT_PAGE),
        when(
            "burns",
            paragraph("Heading2", "Burned regions"),
            table(
                "Burned regions",
                burn,
                header_row(burn, "Region", "Depth", "%TBSA", "Counted", "Circumferential", "Line"),
                each_row("burn in burns", _cells(burn, "burn", "region", "depth", "share", "counted", "around", "line")),
            ),
        ),
        when(
            "hours",
            paragraph("Heading2", "Resuscitation fluid and urine by the hour since the burn"),
            table(
                "Fluid by the hour",
                hour,
                header_row(hour, "Hour", "From", "Due, mL", "Given, mL", "Not confirmed, mL", "Urine"),
                each_row("hour in hours", _cells(hour, "hour", "hour", "start", "due", "given", "not_confirmed", "urine")),
            ),
            paragraph("Small", "Due is a formula estimate. Given is what was confirmed; what was not seen running stands apart."),
        ),
    )


def _cells(widths: list[int], name: str, *fields: str) -> str:
    cells = (cell(width, paragraph("Normal", f"{{{{ {name}.{key} }}}}")) for width, key in zip(widths, fields, strict=True))
    return row(*cells)


def _appendix() -> str:
    figure, gap, cited = [2300, 4600, 2346, 1300], [3600, 4346, 2600], [700, 9846]
    working = cell(
        figure[1],
        when("figure.formula", paragraph("Small", "{{ figure.formula }}")),
        when("figure.sum", paragraph("Small", run("{{ figure.sum }}", "Strong"))),
        when("figure.rule", paragraph("Small", "Rule: {{ figure.rule }}")),
        when("figure.cautions", paragraph("Small", "Caution: {{ figure.cautions }}")),
        paragraph("Gap"),
    )
    figures = row(
        cell(figure[0], paragraph("Normal", "{{ figure.what }}"), paragraph("Normal", run("{{ figure.value }}", "Strong"))),
        working,
        cell(figure[2], paragraph("Small", "{{ figure.inputs }}")),
        cell(figure[3], paragraph("Small", "{{ figure.sources }}")),
    )
    return "".join(
        (
            paragraph("Heading1", "Working and sources", extra=NEXT_PAGE),
            paragraph("Small", "{{ appendix.made_by }}"),
            when(
                "appendix.figures",
                table(
                    "Working of each figure",
                    figure,
                    header_row(figure, "Figure", "Working", "Put in (line of the file)", "Source"),
                    each_row("figure in appendix.figures", figures),
                ),
            ),
            when("appendix.details", paragraph("Heading2", "Further values"), _values("appendix.details", "Further values")),
            when(
                "appendix.sources",
                paragraph("Heading2", "Sources"),
                table(
                    "Sources",
                    cited,
                    header_row(cited, "Mark", "Source"),
                    each_row(
                        "source in appendix.sources",
                        row(cell(cited[0], paragraph("Small", "{{ source.mark }}")), cell(cited[1], paragraph("Small", "{{ source.text }}"))),
                    ),
                ),
            ),
            paragraph("Heading1", "Not recorded"),
            when(
                "appendix.gaps",
                table(
                    "What is not recorded",
                    gap,
                    header_row(gap, "What", "Printed as", "Where"),
                    each_row("gap in appendix.gaps", _cells(gap, "gap", "what", "value", "where")),
                ),
            ),
            when("not appendix.gaps", paragraph("Normal", "Every entry that the tool asks for is on the file.")),
            paragraph("Gap"),
        )
    )
