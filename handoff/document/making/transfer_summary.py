"""The built-in template of the transfer summary."""

from __future__ import annotations

from handoff.document.making.handover_appendix import NEXT_PAGE, appendix, charts
from handoff.document.making.handover_parts import WIDTH, detail, section, systems
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
from handoff.document.making.shared import burn_band, signature_row, title, unit_line, warnings
from handoff.document.making.transfer_templates import airway, lines, missing_on_top


def body() -> str:
    """Return the body of the template."""
    return "".join(
        (
            title(),
            unit_line(paragraph("Subtitle", "Asked for by: {{ profile }}")),
            airway(),
            lines("airway_plan", "Airway plan for the journey", "Airway"),
            paragraph("Gap"),
            missing_on_top(),
            warnings(WIDTH),
            burn_band(WIDTH),
            paragraph("Gap"),
            lines("journey", "The journey", "Journey"),
            paragraph("Gap"),
            _actions(),
            _parts(),
            _medicines(),
            _pumps(),
            paragraph("Heading2", "Oxygen for the journey"),
            lines("oxygen", "Oxygen for the journey", "Oxygen"),
            _advice(),
            _pending(),
            paragraph("Heading1", "People and papers"),
            lines("people", "People and papers", "People and belongings"),
            _enclosed(),
            _law(),
            _signatures(),
            charts(),
        )
    )


def working_body() -> str:
    """Return the body of the sheet that a reader checks the figures by."""
    return "".join((title(), unit_line(), burn_band(WIDTH), detail().replace(NEXT_PAGE, ""), appendix()))


def _actions() -> str:
    found = paragraph(
        "Key",
        run("{{ row.value }}"),
        run("{%r if row.why %}"),
        run("  {{ row.why }}", "Aside"),
        run("{%r endif %}"),
    )
    rows = listing(
        "What needs action",
        "row in actions",
        column(2600, "NEEDS ACTION", "row.what", "Key", "Strong"),
        Column(WIDTH - 3600, "What was found, and why it matters", found),
        column(1000, "Time", "row.time", "Key"),
    )
    more = paragraph("KeyNote", run("Also flagged ACTION: ", "Strong"), run("{{ more_actions }}"))
    nothing = "No entry is flagged ACTION at this time; that does not say that the patient is well."
    return "".join(
        (
            when("actions", rows),
            when("not actions", paragraph("KeyNote", nothing)),
            when("more_actions", more),
        )
    )


def _parts() -> str:
    scores = lines("scores", "Scores that this receiver asks for", "Scores asked for")
    return "".join(
        (
            paragraph("Heading1", "Situation"),
            section("situation"),
            paragraph("Heading1", "Background"),
            section("background"),
            paragraph("Heading1", "Assessment"),
            systems(),
            paragraph("Heading1", "Recommendation"),
            section("recommendation"),
            when("scores", paragraph("Gap"), scores),
        )
    )


def _medicines() -> str:
    given = listing(
        "Medicines with their last dose",
        "one in medicines",
        column(2800, "Medicine", "one.drug", look="Strong"),
        column(3000, "Last dose", "one.dose"),
        column(1900, "Time", "one.time"),
        column(WIDTH - 7700, "Note", "one.note"),
    )
    held = listing(
        "Held, refused or not available",
        "one in not_given",
        column(2800, "Not given", "one.drug", look="Strong"),
        column(3000, "How", "one.dose"),
        column(1900, "Time", "one.time"),
        column(WIDTH - 7700, "Why", "one.note"),
    )
    return "".join(
        (
            paragraph("Heading1", "Medicines, pumps and oxygen"),
            when("medicines", given),
            when("not medicines", paragraph("Missing", "No dose is recorded; check the medicine chart.")),
            when("not_given", paragraph("Gap"), held),
            when(
                "not not_given",
                paragraph("Missing", "Held or refused: not recorded; ask before the patient leaves."),
            ),
        )
    )


def _pumps() -> str:
    rows = listing(
        "Pumps at departure",
        "pump in pumps",
        column(3000, "Pump at departure", "pump.drug", look="Strong"),
        column(2000, "Concentration", "pump.strength"),
        column(1700, "Rate", "pump.rate"),
        column(1600, "Volume left", "pump.left"),
        column(WIDTH - 8300, "Lasts", "pump.lasts"),
    )
    none = "No pump is recorded; look at the bed before you say that there is none."
    return paragraph("Gap") + when("pumps", rows) + when("not pumps", paragraph("Missing", none))


def _advice() -> str:
    rows = listing(
        "Advice log",
        "one in advice",
        column(1200, "Time", "one.time", look="Strong"),
        column(2700, "Who", "one.who"),
        column(4200, "Said", "one.said"),
        column(WIDTH - 8100, "Read back, done", "one.after"),
    )
    return "".join(
        (
            paragraph("Heading1", "Advice log"),
            when("advice", rows),
            when("not advice", paragraph("Missing", "No advice is recorded.")),
            paragraph(
                "Boxes",
                "Further advice (time, who, what): ",
                blank("advice:more", "Further advice", BLANK * 6),
            ),
        )
    )


def _pending() -> str:
    rows = listing(
        "Results awaited",
        "wait in pending",
        column(4300, "Result awaited", "wait.what", look="Strong"),
        column(2200, "Due", "wait.due"),
        column(WIDTH - 6500, "Who telephones whom", "wait.phone"),
    )
    asked = paragraph(
        "KeyNote", run("Each result goes to the receiver by telephone: write who rings.", "Aside")
    )
    return "".join(
        (
            paragraph("Heading2", "Results that are still to come"),
            when("pending", rows, asked),
            when("not pending", paragraph("Missing", "Results awaited: not recorded.")),
        )
    )


def _enclosed() -> str:
    tick = paragraph("Boxes", tick_box("{{ line.tag }}", "Enclosed"))
    charted = listing(
        "Records enclosed",
        "line in enclosed",
        Column(500, "In", tick),
        column(WIDTH - 3500, "Record charted as going along", "line.what"),
        column(3000, "How", "line.value"),
    )
    wanted = paragraph("Ticks", tick_box("{{ line.tag }}", "Enclosed"), run(" {{ line.what }}"))
    asked = paragraph("Heading2", "Records that this receiver asks for (tick what is in the envelope)")
    files = paragraph("Heading2", "Files of this packet") + each(
        "line in files", paragraph("Normal", "{{ line }}")
    )
    return "".join(
        (
            when("enclosed", paragraph("Gap"), charted),
            when("not enclosed", paragraph("Missing", "Records enclosed: not recorded.")),
            when("records", asked, each("line in records", wanted)),
            files,
        )
    )


def _law() -> str:
    written = paragraph(
        "Boxes",
        run("{%r if line.value %}"),
        run("{{ line.value }} "),
        run("{%r endif %}"),
        blank("{{ line.tag }}", "To be written or initialled", BLANK * 2),
    )
    rows = listing(
        "What the law asks for",
        "line in one.lines",
        column(5200, "Asked for by law", "line.what"),
        Column(WIDTH - 5200, "Charted, or to be written", written),
        heading="{{ one.title }}",
    )
    return each("one in law", paragraph("Gap"), rows, paragraph("Small", "{{ one.source }}"))


def _signatures() -> str:
    widths = [3000, 3300, 2500, 1746]
    head = row(
        cell(
            sum(widths),
            paragraph("Brief", "Sign as it happens; a printed name alone is no signature."),
            span=4,
        )
    )
    return "".join(
        (
            paragraph("Heading2", "Departure, arrival, responsibility taken"),
            table(
                "Signatures",
                widths,
                header_row(widths, "Signed for", "Name and role", "Signature", "Date and time"),
                head,
                signature_row(widths, "Departure: handed to the crew", "", "departure-given"),
                signature_row(widths, "Departure: taken by the crew", "", "departure-taken"),
                signature_row(widths, "Arrival: handed over by the crew", "", "arrival-given"),
                signature_row(widths, "Responsibility taken by the receiver", "", "arrival-taken"),
            ),
        )
    )
