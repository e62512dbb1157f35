"""The styles of the built-in templates: black, grey and one dark blue that prints as grey."""

from __future__ import annotations

FONT = "Arial"
ACCENT = "1F4460"
GREY = "555555"
LINE = "A6A6A6"
CLOSE = '<w:spacing w:before="0" w:after="0" w:line="232" w:lineRule="auto"/>'
"""Lines a little closer than the font asks for: the first two pages hold much."""

W = 'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"'


def styles_xml() -> str:
    """Return the styles part."""
    return (
        f"<w:styles {W}>{_defaults()}{''.join(_paragraph_styles())}{''.join(_character_styles())}"
        f"{''.join(_table_styles())}</w:styles>"
    )


def _defaults() -> str:
    fonts = f'<w:rFonts w:ascii="{FONT}" w:hAnsi="{FONT}" w:eastAsia="{FONT}" w:cs="{FONT}"/>'
    return (
        f'<w:docDefaults><w:rPrDefault><w:rPr>{fonts}<w:sz w:val="19"/><w:szCs w:val="19"/>'
        '<w:lang w:val="en-GB" w:eastAsia="en-GB" w:bidi="ar-SA"/></w:rPr></w:rPrDefault>'
        '<w:pPrDefault><w:pPr><w:spacing w:before="0" w:after="0" w:line="240" w:lineRule="auto"/></w:pPr>'
        "</w:pPrDefault></w:docDefaults>"
    )


def _style(
    kind: str,
    key: str,
    name: str,
    paragraph: str = "",
    run: str = "",
    *,
    based: str = "",
    following: str = "",
    default: bool = False,
    extra: str = "",
) -> str:
    marks = ' w:default="1"' if default else ""
    body = f'<w:name w:val="{name}"/>'
    body += f'<w:basedOn w:val="{based}"/>' if based else ""
    body += f'<w:next w:val="{following}"/>' if following else ""
    body += "<w:qFormat/>" if kind == "paragraph" else ""
    body += f"<w:pPr>{paragraph}</w:pPr>" if paragraph else ""
    body += f"<w:rPr>{run}</w:rPr>" if run else ""
    return f'<w:style w:type="{kind}"{marks} w:styleId="{key}">{body}{extra}</w:style>'


def _size(half_points: int) -> str:
    return f'<w:sz w:val="{half_points}"/><w:szCs w:val="{half_points}"/>'


def _space(before: int, after: int, line: str = "") -> str:
    return f'<w:spacing w:before="{before}" w:after="{after}"{line}/>'


def _paragraph_styles() -> list[str]:
    bold, accent, grey = "<w:b/><w:bCs/>", f'<w:color w:val="{ACCENT}"/>', f'<w:color w:val="{GREY}"/>'
    under = f'<w:pBdr><w:bottom w:val="single" w:sz="8" w:space="1" w:color="{ACCENT}"/></w:pBdr>'
    over = f'<w:pBdr><w:top w:val="single" w:sz="4" w:space="3" w:color="{LINE}"/></w:pBdr>'
    keep = "<w:keepNext/><w:keepLines/>"
    made = [_style("paragraph", "Normal", "Normal", default=True)]

    def add(key: str, name: str, paragraph: str, run: str, following: str = "") -> None:
        made.append(_style("paragraph", key, name, paragraph, run, based="Normal", following=following))

    add("Title", "Title", keep + _space(0, 0), bold + accent + _size(26), "Subtitle")
    add("Subtitle", "Subtitle", _space(0, 80), grey + _size(17))
    add(
        "Heading1",
        "heading 1",
        keep + under + _space(70, 20) + '<w:outlineLvl w:val="0"/>',
        bold + accent + _size(22),
        "Normal",
    )
    add(
        "Heading2",
        "heading 2",
        keep + _space(80, 20) + '<w:outlineLvl w:val="1"/>',
        bold + _size(18),
        "Normal",
    )
    add("Header", "header", under + _space(0, 60), _size(17))
    add("Footer", "footer", over + _space(0, 0), grey + _size(15))
    add("Key", "Key", CLOSE, _size(18))
    add("KeyNote", "Key note", _space(10, 10), _size(18))
    add("Brief", "Brief", CLOSE, _size(17))
    add("Caution", "Caution", "", grey + _size(15))
    add("Label", "Label", "<w:keepNext/>", grey + _size(15))
    add("BandName", "Band name", "", bold + _size(26))
    add("BandValue", "Band value", "", bold + _size(18))
    add("Warning", "Warning", "<w:keepNext/>", bold + _size(22))
    add("CellHead", "Cell head", "<w:keepNext/>", bold + _size(16))
    add("Small", "Small", _space(10, 10), grey + _size(16))
    add("Missing", "Missing", CLOSE, _size(17))
    add("Ticks", "Ticks", _space(0, 0) + '<w:ind w:left="280" w:hanging="280"/>', _size(17))
    add("Boxes", "Boxes", '<w:spacing w:before="0" w:after="0" w:line="310" w:lineRule="exact"/>', _size(18))
    add("Gap", "Gap", '<w:spacing w:before="0" w:after="0" w:line="70" w:lineRule="exact"/>', _size(4))
    return made


def _character_styles() -> list[str]:
    bold = "<w:b/><w:bCs/>"
    looks = [
        ("Strong", "Strong", bold),
        (
            "FlagAction",
            "Flag action",
            f'{bold}<w:color w:val="FFFFFF"/>{_size(16)}<w:shd w:val="clear" w:color="auto" w:fill="000000"/>',
        ),
        (
            "FlagReview",
            "Flag review",
            f'{bold}{_size(15)}<w:bdr w:val="single" w:sz="6" w:space="0" w:color="000000"/>',
        ),
        ("Reference", "Reference", f'{bold}<w:color w:val="{ACCENT}"/>'),
        ("Quiet", "Quiet", f'<w:b w:val="0"/><w:bCs w:val="0"/><w:color w:val="{GREY}"/>{_size(17)}'),
        ("Aside", "Aside", f'<w:color w:val="{GREY}"/>{_size(15)}'),
        ("Time", "Time", f'<w:color w:val="{GREY}"/>'),
        ("PlaceholderText", "Placeholder Text", f'<w:color w:val="{GREY}"/>'),
    ]
    default = _style("character", "DefaultParagraphFont", "Default Paragraph Font", default=True)
    return [
        default,
        *(
            _style("character", key, name, run=look, based="DefaultParagraphFont")
            for key, name, look in looks
        ),
    ]


def _table_styles() -> list[str]:
    def margins(top: int, side: int) -> str:
        sides = "".join(
            f'<w:{name} w:w="{w}" w:type="dxa"/>'
            for name, w in (("top", top), ("left", side), ("bottom", top), ("right", side))
        )
        return f'<w:tblInd w:w="0" w:type="dxa"/>{{}}<w:tblCellMar>{sides}</w:tblCellMar>'

    def line(name: str, size: int, colour: str) -> str:
        return f'<w:{name} w:val="single" w:sz="{size}" w:space="0" w:color="{colour}"/>'

    hair = "".join(line(name, 4, LINE) for name in ("top", "bottom", "insideH"))
    grid = "".join(line(name, 4, LINE) for name in ("top", "left", "bottom", "right", "insideH", "insideV"))
    band = "".join(line(name, 12, ACCENT) for name in ("top", "left", "bottom", "right"))
    band += line("insideH", 4, LINE) + line("insideV", 4, LINE)
    alarm = "".join(line(name, 24, "000000") for name in ("top", "left", "bottom", "right"))
    looks = (
        ("HandoffRows", "Handoff rows", hair, 2),
        ("HandoffGrid", "Handoff grid", grid, 25),
        ("HandoffBand", "Handoff band", band, 20),
        ("HandoffAlarm", "Handoff alarm", alarm, 40),
    )
    plain = (
        '<w:style w:type="table" w:default="1" w:styleId="TableNormal"><w:name w:val="Normal Table"/>'
        f"<w:tblPr>{margins(0, 70).format('')}</w:tblPr></w:style>"
        '<w:style w:type="numbering" w:default="1" w:styleId="NoList"><w:name w:val="No List"/></w:style>'
    )
    made = [plain]
    for key, name, borders, top in looks:
        properties = (
            f"<w:tblPr>{margins(top, 70).format(f'<w:tblBorders>{borders}</w:tblBorders>')}</w:tblPr>"
        )
        made.append(_style("table", key, name, based="TableNormal", extra=properties))
    return made
