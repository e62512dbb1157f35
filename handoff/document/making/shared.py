"""What both templates share: identity band, warnings, header, footer, signatures."""

from __future__ import annotations

from handoff.document.making.markup import (
    BLANK,
    blank,
    cell,
    column,
    each,
    field,
    listing,
    paragraph,
    row,
    run,
    tab,
    table,
    when,
)


def page_header(width: int) -> str:
    """Return the header of every page: name, birth date, identifiers, and which document it is."""
    return paragraph(
        "Header",
        run("{{ frame.name }}", "Strong"),
        run("   {{ frame.born }}   {{ frame.numbers }}"),
        tab(),
        run("{{ frame.title }}"),
        extra=right_tab(width),
    )


def page_footer(width: int) -> str:
    """Return the footer of every page: cautions, when and from what it was made, page x of y."""
    return paragraph(
        "Footer",
        run("{{ frame.caution }}"),
        "<w:r><w:br/></w:r>",
        run("Made at {{ frame.made_at }} from state file version {{ frame.version }}"),
        tab(),
        run("Page "),
        field("PAGE"),
        run(" of "),
        field("NUMPAGES"),
        extra=right_tab(width),
    )


def right_tab(width: int) -> str:
    """Return the paragraph property that puts a tab stop at the right edge of ``width``."""
    return f'<w:tabs><w:tab w:val="right" w:pos="{width}"/></w:tabs>'


def title() -> str:
    """Return the title and the line below it."""
    return paragraph("Title", "{{ frame.title }}")


def warnings(width: int) -> str:
    """Return the band of what could not be computed and of unusual values."""
    lines = each("line in band.lines", paragraph("KeyNote", "{{ line }}"))
    return each(
        "band in bands",
        table(
            "Warnings to read first",
            [width],
            row(cell(width, paragraph("Warning", "{{ band.title }}"), lines)),
            style="HandoffAlarm",
            first_row=False,
        ),
        paragraph("Gap"),
    )


def labelled(width: int, label: str, *fields: str, span: int = 1, style: str = "BandValue") -> str:
    """Return a cell with a small label above its value."""
    return cell(width, paragraph("Label", label), *(paragraph(style, value) for value in fields), span=span)


def band_columns(width: int) -> list[int]:
    """Return the widths of the four columns of the identity band; a decision needs the most room."""
    hundredth = width // 100
    widths = [24 * hundredth, 24 * hundredth, 32 * hundredth]
    return [*widths, width - sum(widths)]


def identity_band(width: int, *further: str) -> str:
    """Return the identity band; ``further`` are rows of four cells below it."""
    widths = band_columns(width)
    half = sum(widths[:2])
    name = cell(
        half,
        paragraph("Label", "Patient"),
        paragraph("BandName", "{{ identity.name }}"),
        paragraph("BandValue", "{{ identity.born }}, {{ identity.age }}"),
        span=2,
        fill="F2F3F4",
    )
    numbers = cell(
        width - half,
        paragraph("Label", "Identifiers (a bed is never one)"),
        paragraph("BandValue", "{{ identity.numbers }}"),
        paragraph("BandValue", run("Location: ", "Quiet"), run("{{ identity.location }}")),
        span=2,
        fill="F2F3F4",
    )
    facts = row(
        labelled(widths[0], "Weight", "{{ identity.weight }}"),
        labelled(widths[1], "Allergies", "{{ identity.allergies }}"),
        labelled(widths[2], "Resuscitation decision", "{{ identity.resuscitation }}"),
        labelled(widths[3], "Isolation", "{{ identity.isolation }}"),
    )
    return table(
        "Who the patient is",
        widths,
        row(name, numbers),
        facts,
        *further,
        style="HandoffBand",
        first_row=False,
    )


def burn_band(width: int) -> str:
    """Return the identity band with the time of the burn below it."""
    half = sum(band_columns(width)[:2])
    burn = labelled(half, "Time of burn", "{{ identity.burn }}", span=2)
    since = labelled(width - half, "Since then, at the time of this sheet", "{{ identity.since }}", span=2)
    return identity_band(width, row(burn, since))


def signature_row(widths: list[int], label: str, who: str, key: str) -> str:
    """Return a row to be signed: who, signature, date and time; without ``who`` the name is left blank."""
    name = blank(f"sign:{key}:name", f"{label}: name and role", BLANK * 3)
    return row(
        cell(widths[0], paragraph("Boxes", run(label, "Strong"))),
        cell(widths[1], paragraph("Boxes", who or name)),
        cell(widths[2], paragraph("Boxes", blank(f"sign:{key}:signature", f"{label}: signature", BLANK * 2))),
        cell(widths[3], paragraph("Boxes", blank(f"sign:{key}:time", f"{label}: date and time"))),
    )


def sources(name: str, mark_width: int, text_width: int) -> str:
    """Return the list of sources with their marks."""
    return listing(
        "Sources",
        f"source in {name}",
        column(mark_width, "Mark", "source.mark", "Small"),
        column(text_width, "Source", "source.text", "Small"),
    )


def unit_line(*more: str) -> str:
    """Return the line below the title: the unit, where the policy names one, and what else is given."""
    return when("frame.unit", paragraph("Subtitle", "{{ frame.unit }}")) + "".join(more)
