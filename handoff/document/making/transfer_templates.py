"""The built-in templates of the transfer packet: phone report and addendum."""

from __future__ import annotations

from handoff.document.making.handover_parts import WIDTH, changes
from handoff.document.making.markup import (
    BLANK,
    Column,
    blank,
    column,
    each,
    header_row,
    listing,
    paragraph,
    run,
    table,
    tick_box,
    when,
)
from handoff.document.making.shared import burn_band, signature_row, title, unit_line, warnings


def lines(name: str, caption: str, label: str, heading: str = "", first: int = 2900) -> str:
    """Return a table of what and value from the rows ``name``."""
    return listing(
        caption,
        f"line in {name}",
        column(first, label, "line.what", look="Strong"),
        column(WIDTH - first, "As charted", "line.value"),
        heading=heading,
    )


def missing_on_top() -> str:
    """Return what this receiver asks for and the file does not hold; it stands above everything else."""
    some = listing(
        "What this receiver asks for and is not recorded",
        "line in missing",
        column(WIDTH, "NOT RECORDED, and this receiver asks for it: find it out or say so", "line", "Brief"),
    )
    none = "Everything that this receiver asks for has an entry; check that each is still so."
    return when("missing", some) + when("not missing", paragraph("KeyNote", none)) + paragraph("Gap")


def airway() -> str:
    """Return whether the airway is secured, in large letters."""
    return paragraph("BandName", "{{ airway }}")


def phone_body() -> str:
    """Return the body of the phone report."""
    said = paragraph("Boxes", tick_box("{{ line.tag }}", "Said"))
    report = listing(
        "To be read aloud",
        "line in lines",
        Column(500, "Said", said),
        column(2300, "What", "line.label", look="Strong"),
        column(WIDTH - 2800, "Read aloud", "line.text"),
    )
    numbers = each(
        "line in phones", paragraph("KeyNote", run("{{ line.what }}: ", "Strong"), run("{{ line.value }}"))
    )
    return "".join(
        (
            title(),
            unit_line(paragraph("Subtitle", "Asked for by: {{ profile }}")),
            missing_on_top(),
            warnings(WIDTH),
            burn_band(WIDTH),
            paragraph("Gap"),
            numbers,
            paragraph("KeyNote", run("{{ opening }}")),
            paragraph("KeyNote", run("Caller: ", "Strong"), run("{{ caller }}")),
            paragraph("Heading1", "To be read aloud"),
            airway(),
            report,
            _spoken("concerns", "What worries the nurse"),
            _spoken("requests", "What is asked of the receiver"),
            paragraph("Heading1", "Before you put the telephone down"),
            _closing(),
        )
    )


def _spoken(name: str, label: str) -> str:
    return when(
        name, paragraph("Heading2", label), each(f"line in {name}", paragraph("Normal", "{{ line }}"))
    )


def _closing() -> str:
    ticks = (
        ("read-back", "Read back: name, weight, area, airway, fluid, allergies"),
        ("questions", "Their questions answered; what was not known is written on top"),
        ("advice", "Their advice written in the log: who, what, when"),
        ("accepted", "Accepted: name, role, time, bed and staff"),
    )
    boxes = "".join(
        paragraph("Ticks", tick_box(f"close:{key}", text), run(f" {text}")) for key, text in ticks
    )
    widths = [2600, 3600, 2500, 1846]
    return boxes + table(
        "Who spoke",
        widths,
        header_row(widths, "Call", "Name and role", "Signature", "Date and time"),
        signature_row(widths, "Given by", "", "phone-given"),
        signature_row(widths, "Listened and wrote down", "", "phone-heard"),
    )


def addendum_body() -> str:
    """Return the body of the addendum."""
    widths = [2600, 3600, 2500, 1846]
    return "".join(
        (
            title(),
            unit_line(),
            paragraph("KeyNote", run("{{ rule }}", "Strong")),
            paragraph("KeyNote", run("To the packet: ", "Strong"), run("{{ sent }}")),
            burn_band(WIDTH),
            paragraph("Gap"),
            paragraph(
                "Normal",
                run("What was wrong, and what follows from it: ", "Strong"),
                blank("addendum:why", "What was wrong", BLANK * 8),
            ),
            changes(),
            when(
                "not changes.systems", paragraph("Normal", "No value differs from the packet that was sent.")
            ),
            paragraph("Gap"),
            table(
                "Told and sent",
                widths,
                header_row(widths, "Addendum", "Name and role", "Signature", "Date and time"),
                signature_row(widths, "Read aloud to", "", "addendum-told"),
                signature_row(widths, "Read back; sent by", "", "addendum-sent"),
            ),
        )
    )
