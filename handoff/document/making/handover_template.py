"""The built-in template of the handover: the whole, and page one."""

from __future__ import annotations

from handoff.document.making.handover_appendix import appendix, charts
from handoff.document.making.handover_parts import (
    WIDTH,
    changes,
    detail,
    recommendation,
    section,
    systems,
)
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
from handoff.document.making.shared import band_columns, identity_band, labelled, title, unit_line, warnings


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
            _due(),
            _if_then(),
            _gaps(),
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
            detail(),
            appendix(),
        )
    )


def _band() -> str:
    half = sum(band_columns(WIDTH)[:2])
    severity = cell(
        half,
        paragraph("Label", "Severity, in the nurse's own word"),
        paragraph("BandName", "{{ severity }}"),
        paragraph("Label", "{{ severity_said }}"),
        span=2,
    )
    burn = labelled(WIDTH - half, "Time of burn", "{{ identity.burn }}", "{{ identity.since }}", span=2)
    worries = cell(WIDTH, paragraph("Brief", run("Worries: ", "Quiet"), run("{{ concerns }}")), span=4)
    story = cell(WIDTH, paragraph("Brief", run("The burn: ", "Quiet"), run("{{ burn }}")), span=4)
    return identity_band(WIDTH, row(severity, burn), row(story), row(worries))


def _key_listing(caption: str, loop: str, label: str, found_label: str, time: str, what: int) -> str:
    found = paragraph(
        "Key",
        run("{{ row.value }}"),
        run("{%r if row.why %}"),
        run("  {{ row.why }}", "Aside"),
        run("{%r endif %}"),
    )
    return listing(
        caption,
        loop,
        column(what, label, "row.what", "Key", "Strong"),
        Column(WIDTH - 800 - what, found_label, found),
        column(800, time, "row.time", "Key"),
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
                2600,
            ),
            when("not page_one.actions", paragraph("KeyNote", nothing)),
            _more("page_one.more_actions", "Also flagged ACTION"),
        )
    )


def _do_now() -> str:
    tasks = listing(
        "What to do now",
        "task in page_one.tasks",
        column(900, "DO NOW", "task.ref", "Key", "Reference"),
        column(WIDTH - 900, "Task (reference of the care plan, where the reason stands)", "task.text", "Key"),
    )
    return when("page_one.tasks", paragraph("Gap"), tasks) + _more("page_one.more_tasks", "Also to do now")


def _due() -> str:
    due = _key_listing(
        "What is due or overdue",
        "row in page_one.due",
        "DUE OR OVERDUE",
        "What was found, or what to do",
        "Since",
        3050,
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
