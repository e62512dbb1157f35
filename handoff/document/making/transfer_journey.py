"""The built-in template of the journey sheet, landscape: checklist, then blank observations."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
    Column,
    blank,
    cell,
    column,
    each_row,
    header_row,
    listing,
    paragraph,
    row,
    run,
    table,
    tick_box,
)
from handoff.document.making.shared import burn_band, signature_row, title, unit_line

WIDTH = 15478
NEXT_PAGE = "<w:pageBreakBefore/>"
OBSERVED = (
    ("Time", 1400),
    ("Pulse", 1000),
    ("Blood pressure", 1350),
    ("Breaths", 950),
    ("SpO2, %", 950),
    ("O2, L/min", 1000),
    ("CO2 out", 950),
    ("Temp, C", 950),
    ("Awake (ACVPU)", 1100),
    ("Pain, sedation", 1150),
    ("Fluid in, mL", 1100),
    ("Urine, mL", 1000),
)


def body() -> str:
    """Return the body of the template."""
    plan = listing(
        "Airway plan for the journey",
        "line in airway_plan",
        column(3200, "Airway", "line.what", look="Strong"),
        column(WIDTH - 3200, "As charted", "line.value"),
    )
    way = listing(
        "The journey",
        "line in way",
        column(3200, "Journey", "line.what", look="Strong"),
        column(WIDTH - 3200, "As charted", "line.value"),
    )
    return "".join(
        (
            title(),
            unit_line(),
            paragraph("BandName", "{{ airway }}"),
            plan,
            paragraph("Gap"),
            burn_band(WIDTH),
            paragraph("Gap"),
            way,
            paragraph("Heading1", "Before leaving", extra=NEXT_PAGE),
            _checks(),
            paragraph("Heading1", "On the road: {{ every }}", extra=NEXT_PAGE),
            _observations(),
            paragraph(
                "Small",
                "CO2 out: end-tidal, with a tube. Write the reason for every change of oxygen, drug or fluid.",
            ),
            _signatures(),
        )
    )


def _checks() -> str:
    tick = paragraph("Boxes", tick_box("{{ check.tag }}", "Done"))
    note = paragraph("Boxes", blank("note:{{ check.tag }}", "Found, or why not"))
    return listing(
        "Checklist before leaving",
        "check in checks",
        Column(600, "Done", tick),
        column(1900, "Area", "check.area", look="Strong"),
        column(8900, "Looked at by two, at the bed", "check.text"),
        Column(WIDTH - 11400, "Found, or why not; initials", note),
    )


def _observations() -> str:
    widths = [wide for _, wide in OBSERVED]
    widths.append(WIDTH - sum(widths))
    empty = [
        cell(wide, paragraph("Boxes", blank(f"{{{{ one.key }}}}:{number}", label, "   ")))
        for number, (label, wide) in enumerate((*OBSERVED[1:], ("Notes, initials", widths[-1])), start=1)
    ]
    time = cell(
        widths[0],
        paragraph(
            "Boxes",
            run("{%r if one.due %}"),
            run("({{ one.due }}) ", "Quiet"),
            run("{%r endif %}"),
            blank("{{ one.key }}", "Time", "   "),
        ),
    )
    return table(
        "Observations on the road",
        widths,
        header_row(widths, *(label for label, _ in OBSERVED), "Notes, initials"),
        each_row("one in rows", row(time, *empty)),
        style="HandoffGrid",
    )


def _signatures() -> str:
    widths = [4400, 4600, 3700, WIDTH - 12700]
    totals = "".join(
        paragraph("Boxes", f"{label}: ", blank(f"total:{key}", label, BLANK * 2))
        for key, label in (("fluid", "Fluid given on the road, mL"), ("urine", "Urine on the road, mL"))
    )
    return totals + table(
        "Signatures",
        widths,
        header_row(widths, "Signed for", "Name and role", "Signature", "Date and time"),
        signature_row(widths, "Left the ward", "", "road-left"),
        signature_row(widths, "Arrived; observations handed over", "", "road-arrived"),
        signature_row(widths, "Responsibility taken by the receiver", "", "road-taken"),
    )
