"""The built-in template of the handover: the whole, and page one."""

from __future__ import annotations

from handoff.document.making.handover_appendix import appendix, charts
from handoff.document.making.handover_parts import WIDTH, changes, recommendation, section, systems
from handoff.document.making.markup import (
    Column,
    cell,
    column,
    listing,
    paragraph,
    row,
    run,
    when,
)
from handoff.document.making.shared import identity_band, labelled, title, unit_line, warnings


def body() -> str:
    """Return the body of the template."""
    return "".join(
        (
            title(),
            unit_line(),
            warnings(WIDTH),
            _band(),
            paragraph("Gap"),
            _needs_action(),
            _do_now(),
            _if_then(),
            _gaps(),
            _due(),
            changes(),
            paragraph("Heading1", "Situation"),
            section("situation"),
            paragraph("Heading1", "Background"),
            section("background"),
            paragraph("Heading1", "Assessment"),
            systems(),
            paragraph("Heading1", "Recommendation"),
            recommendation(),
            charts(),
            appendix(),
        )
    )


def _band() -> str:
    half = 2 * (WIDTH // 4)
    severity = cell(
        half,
        paragraph("Label", "Severity, in the nurse's own word"),
        paragraph("BandName", "{{ severity }}"),
        paragraph("Label", "{{ severity_said }}"),
        span=2,
    )
    burn = labelled(WIDTH - half, "Time of burn", "{{ identity.burn }}", "{{ identity.since }}", span=2)
    worries = cell(
        WIDTH,
        paragraph("Label", "What worries the nurse"),
        paragraph("Key", "{{ concerns }}"),
        span=4,
    )
    story = cell(WIDTH, paragraph("Label", "The burn"), paragraph("Key", "{{ burn }}"), span=4)
    return identity_band(WIDTH, row(severity, burn), row(story), row(worries))


def _key_listing(caption: str, loop: str, label: str, found_label: str, time: str) -> str:
    found = paragraph("Key", "{{ row.value }}") + when("row.why", paragraph("Small", "{{ row.why }}"))
    return listing(
        caption,
        loop,
        column(2900, label, "row.what", "Key", "Strong"),
        Column(6500, found_label, found),
        column(1146, time, "row.time", "Key"),
    )


def _more(name: str, label: str) -> str:
    return when(name, paragraph("KeyNote", run(f"{label}: ", "Strong"), run(f"{{{{ {name} }}}}")))


def _needs_action() -> str:
    nothing = "No entry is flagged ACTION at this time; that does not say that the patient is well."
    return "".join(
        (
            _key_listing(
                "What needs action",
                "row in page_one.actions",
                "NEEDS ACTION",
                "What was found, and why it matters",
                "Time",
            ),
            when("not page_one.actions", paragraph("KeyNote", nothing)),
            _more("page_one.more_actions", "Also flagged ACTION"),
        )
    )


def _do_now() -> str:
    tasks = listing(
        "What to do now",
        "task in page_one.tasks",
        column(1000, "DO NOW", "task.ref", "Key", "Reference"),
        column(6200, "Task (reference of the care plan)", "task.text"),
        column(3346, "Why", "task.why", "Small"),
    )
    return when("page_one.tasks", paragraph("Gap"), tasks) + _more("page_one.more_tasks", "Also to do now")


def _due() -> str:
    due = _key_listing(
        "What is due or overdue",
        "row in page_one.due",
        "DUE OR OVERDUE",
        "What was found, or what to do",
        "Since",
    )
    return when("page_one.due", paragraph("Gap"), due) + _more("page_one.more_due", "Also due for review")


def _if_then() -> str:
    lines = listing(
        "What to do if",
        "line in page_one.if_then",
        column(4200, "WHAT TO DO IF", "line.event", "Key", "Strong"),
        column(6346, "Then", "line.answer", "Key"),
    )
    nothing = paragraph("KeyNote", "Not recorded by the nurse: agree it at the bedside.")
    return paragraph("Gap") + lines + when("not page_one.if_then", nothing)


def _gaps() -> str:
    return "".join(
        (
            when(
                "page_one.gaps",
                paragraph("Gap"),
                paragraph(
                    "Key", run("NOT RECORDED AND NEEDED FIRST: ", "Strong"), run("{{ page_one.gaps }}")
                ),
            ),
            paragraph("KeyNote", "{{ page_one.missing_count }} not recorded; the list is at the end."),
        )
    )
