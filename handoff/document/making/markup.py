"""Short functions that write the markup of paragraphs, tables and content controls as text."""

from __future__ import annotations

from collections.abc import Sequence
from xml.sax.saxutils import escape

from msgspec import Struct

SHADE = "E6E8EA"
BOX = "\u2610"
TICKED = "\u2612"
BLANK = "_" * 10
"""What is printed where something is to be written by hand."""

_SYMBOLS = '<w:rFonts w:hint="eastAsia" w:ascii="MS Gothic" w:eastAsia="MS Gothic" w:hAnsi="MS Gothic"/>'


def run(text: str, style: str = "") -> str:
    """Return a run of text in a character style."""
    look = f'<w:rPr><w:rStyle w:val="{style}"/></w:rPr>' if style else ""
    return f'<w:r>{look}<w:t xml:space="preserve">{escape(text)}</w:t></w:r>'


def tab() -> str:
    """Return a tab."""
    return "<w:r><w:tab/></w:r>"


def field(name: str) -> str:
    """Return a field that Word works out (``PAGE``)."""
    return f'<w:fldSimple w:instr=" {name} "><w:r><w:t>1</w:t></w:r></w:fldSimple>'


def paragraph(style: str, *runs: str, extra: str = "") -> str:
    """Return a paragraph; a run given as plain text becomes one without a style of its own."""
    made = "".join(part if part.startswith("<") else run(part) for part in runs)
    return f'<w:p><w:pPr><w:pStyle w:val="{style}"/>{extra}</w:pPr>{made}</w:p>'


def control(tag: str, body: str = "") -> str:
    """Return a paragraph that only holds the tag ``{%p ... %}`` and goes when the template is filled."""
    return paragraph("Normal", f"{{%p {tag} %}}") + body


def when(test: str, *parts: str) -> str:
    """Return ``parts`` to be printed only where ``test`` holds."""
    return control(f"if {test}") + "".join(parts) + control("endif")


def each(loop: str, *parts: str) -> str:
    """Return ``parts`` to be printed once for each step of ``loop`` (``row in rows``)."""
    return control(f"for {loop}") + "".join(parts) + control("endfor")


def cell(width: int, *paragraphs: str, fill: str = "", span: int = 1) -> str:
    """Return a table cell of ``width`` twentieths of a point."""
    look = f'<w:tcW w:w="{width}" w:type="dxa"/>'
    look += f'<w:gridSpan w:val="{span}"/>' if span > 1 else ""
    look += f'<w:shd w:val="clear" w:color="auto" w:fill="{fill}"/>' if fill else ""
    return f"<w:tc><w:tcPr>{look}</w:tcPr>{''.join(paragraphs)}</w:tc>"


def row(*cells: str, header: bool = False) -> str:
    """Return a row that does not break over pages; a header row repeats on each."""
    look = "<w:cantSplit/>" + ("<w:tblHeader/>" if header else "")
    return f"<w:tr><w:trPr>{look}</w:trPr>{''.join(cells)}</w:tr>"


def header_row(widths: Sequence[int], *labels: str, heading: str = "") -> str:
    """Return the header row of a table; a ``heading`` takes the place of the first label."""
    heads = [paragraph("CellHead", label) for label in labels]
    if heading:
        heads[0] = paragraph("Heading2", heading, extra='<w:spacing w:before="0" w:after="0"/>')
    cells = (cell(width, head, fill=SHADE) for width, head in zip(widths, heads, strict=True))
    return row(*cells, header=True)


class Column(Struct, frozen=True):
    """A column of a listing: its width in twentieths of a point, its label, and what its cells hold."""

    width: int
    label: str
    inside: str


def column(width: int, label: str, field_name: str, style: str = "Normal", look: str = "") -> Column:
    """Return a column that prints one field, in a paragraph style and a character style."""
    return Column(width, label, paragraph(style, run(f"{{{{ {field_name} }}}}", look)))


def listing(caption: str, loop: str, *columns: Column, heading: str = "") -> str:
    """Return a table with a header row and one row for each step of ``loop`` (``row in rows``)."""
    widths = [part.width for part in columns]
    return table(
        caption,
        widths,
        header_row(widths, *(part.label for part in columns), heading=heading),
        each_row(loop, row(*(cell(part.width, part.inside) for part in columns))),
    )


def each_row(loop: str, *rows: str) -> str:
    """Return ``rows`` to be printed once for each step of ``loop``."""
    return _row_control(f"for {loop}") + "".join(rows) + _row_control("endfor")


def table(
    caption: str, widths: Sequence[int], *rows: str, style: str = "HandoffRows", first_row: bool = True
) -> str:
    """Return a table of fixed widths; ``caption`` is read out by a screen reader."""
    grid = "".join(f'<w:gridCol w:w="{width}"/>' for width in widths)
    return (
        f'<w:tbl><w:tblPr><w:tblStyle w:val="{style}"/><w:tblW w:w="{sum(widths)}" w:type="dxa"/>'
        '<w:tblLayout w:type="fixed"/>'
        f'<w:tblLook w:val="{"0020" if first_row else "0000"}" w:firstRow="{int(first_row)}" w:lastRow="0" '
        'w:firstColumn="0" w:lastColumn="0" w:noHBand="1" w:noVBand="1"/>'
        f'<w:tblCaption w:val="{escape(caption)}"/></w:tblPr><w:tblGrid>{grid}</w:tblGrid>{"".join(rows)}</w:tbl>'
    )


def tick_box(tag: str, title: str) -> str:
    """Return a tick box as a content control."""
    symbol = f"<w:r><w:rPr>{_SYMBOLS}</w:rPr><w:t>{BOX}</w:t></w:r>"
    states = (
        '<w14:checked w14:val="0"/>'
        f'<w14:checkedState w14:val="{ord(TICKED):04X}" w14:font="MS Gothic"/>'
        f'<w14:uncheckedState w14:val="{ord(BOX):04X}" w14:font="MS Gothic"/>'
    )
    return _content(tag, title, f"<w14:checkbox>{states}</w14:checkbox>", symbol)


def blank(tag: str, title: str, text: str = BLANK) -> str:
    """Return room to write, by hand or in Word, as a content control for plain text."""
    return _content(tag, title, "<w:showingPlcHdr/><w:text/>", run(text, "PlaceholderText"))


def marked(tag: str, title: str, *runs: str) -> str:
    """Return ``runs`` inside a content control that a program finds again by its tag."""
    return _content(tag, title, "", "".join(runs))


def _content(tag: str, title: str, kind: str, inside: str) -> str:
    return (
        f'<w:sdt><w:sdtPr><w:alias w:val="{escape(title)}"/><w:tag w:val="{escape(tag)}"/><w:id w:val="1"/>{kind}'
        f"</w:sdtPr><w:sdtContent>{inside}</w:sdtContent></w:sdt>"
    )


def _row_control(tag: str) -> str:
    width = '<w:tcPr><w:tcW w:w="0" w:type="auto"/></w:tcPr>'
    return f"<w:tr><w:tc>{width}{paragraph('Normal', f'{{%tr {tag} %}}')}</w:tc></w:tr>"
