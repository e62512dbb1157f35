"""The figures in the handover: in their places, with unique numbers and alternative text, valid, printed."""

from __future__ import annotations

import shutil
import subprocess
from io import BytesIO
from itertools import combinations
from pathlib import Path
from typing import Any

import pytest
from docx import Document
from lxml import etree
from msgspec.structs import replace
from openxml_audit import FileFormat, OpenXmlValidator

from handoff.assess import Assessment
from handoff.document import DocumentError, draft
from handoff.document.figures import figures
from handoff.document.figures.depths import DEPTHS, NOT_COUNTED, UNKNOWN
from handoff.document.figures.shapes import Look, box, group
from handoff.document.finish import Properties, finish
from handoff.document.paper import Page
from handoff.document.read_back import check_document, text_of
from handoff.document.sections import Mark
from tests.document.fake import STEM, assessment, at, bare, state
from tests.document.figures.seen import find
from tests.document.figures.test_body_chart import EVERYTHING
from tests.document.reading import body, headings

TAGS = ["figure:body-chart", "figure:fluid", "figure:trends"]


def full() -> Assessment:
    """The invented assessment with vital signs charted twice."""
    written = (Path(__file__).parents[1] / "patient.yaml").read_text()
    rows = ("14:15: {pulse: 124 /min, bp: 104/62 mmHg}", "15:00: {pulse: 120 /min, bp: 102/60 mmHg}")
    charted = "".join(f"    {row}\n" for row in rows)
    return replace(assessment(), state=state(f"{written}\nobservations:\n  2026-03-14:\n{charted}"))


@pytest.fixture(scope="module")
def handover() -> bytes:
    return handover_of(full())


def handover_of(given: Assessment) -> bytes:
    return draft(given, STEM)[f"{STEM}-handover.docx"]


def crowded() -> Assessment:
    """An assessment with burns and hours without end, and with names that could break a drawing."""
    given = full()
    hostile = '</wps:wsp> {{ 7*7 }} <b> & "quoted" \x00 שלום \U0001f525 ' + "x" * 2000
    hours = given.findings["fluid"].values["hours"]
    assert isinstance(hours, tuple)
    last = (hostile, *hours[0][1:5], 41.0, hostile)
    burns = (*EVERYTHING, (hostile, hostile, hostile, 1.0, True, True, 1))
    values = {
        "area": {"burns": burns},
        "fluid": {"hours": (*hours * 8, last), "urine_target_ml_h": (41.0, None)},
    }
    return replace(
        given, findings={name: replace(given.findings[name], values=values[name]) for name in values}
    )


def inlines(content: bytes) -> list[Any]:
    return find(body(content), ".//wp:inline")


def test_each_figure_lies_in_the_content_control_of_its_tag(handover: bytes) -> None:
    found = {}
    for control in find(body(handover), ".//w:sdt"):
        if find(control, ".//wp:inline"):
            found[control.find("w:sdtPr/w:tag", control.nsmap).values()[0]] = control
    assert list(found) == TAGS
    assert "[drawing]" not in text_of(handover)


def test_each_figure_has_alternative_text(handover: bytes) -> None:
    said = [find(inline, "wp:docPr")[0].get("descr") for inline in inlines(handover)]
    assert len(said) == len(TAGS)
    assert all(len(text) > 100 for text in said)


def test_no_number_of_a_drawing_or_of_a_shape_stands_twice(handover: bytes) -> None:
    root = body(handover)
    numbers = [node.get("id") for path in (".//wp:docPr", ".//wps:cNvPr") for node in find(root, path)]
    assert len(numbers) > 100
    assert len(set(numbers)) == len(numbers)


def test_the_facts_of_each_figure_stand_in_text_too(handover: bytes) -> None:
    page = text_of(handover)
    for words in (
        "Trunk, front",
        "Figure drawn with adult proportions",
        "Pulse: last",
        "Each bar is one hour",
    ):
        assert words in page


def test_figures_are_as_wide_as_the_text_of_either_paper_at_most(handover: bytes) -> None:
    widths = [int(find(inline, "wp:extent")[0].get("cx")) for inline in inlines(handover)]
    assert all(width <= (11906 - 2 * 680) * 635 for width in widths)


def test_what_is_not_recorded_is_not_drawn_and_is_said() -> None:
    content = handover_of(bare())
    page = text_of(content)
    assert not inlines(content)
    assert "Burn chart, fluid and trends" in headings(content, 1)
    assert "Not drawn: Body chart: no burned region is recorded that could be drawn." in page
    assert "Not drawn: Fluid by the hour: no hour since the burn was worked out." in page
    assert "Not drawn: Trends with fewer than two values in the last 24 h: Pulse; Blood pressure" in page


@pytest.mark.parametrize(
    ("born", "said"),
    [
        ("born: 2025-06-01", "infant proportions"),
        ("born: 2020-06-01", "child proportions"),
        ("born: 1985-02-11", "adult proportions"),
        ("estimated_age: 9 years", "child proportions"),
        ("sex: female", "adult proportions, the age is not recorded"),
    ],
)
def test_the_proportions_go_by_the_age_at_the_burn(born: str, said: str) -> None:
    patient = state(
        f'handoff: 1\nclock: Europe/Dublin\npatient: {{name: A, {born}}}\ninjury: {{at: "2026-03-14 13:20"}}\n'
    )
    (figure,) = figures(replace(assessment(), state=patient)).body
    assert f"Figure drawn with {said}." in figure.notes[0]


def test_the_chart_says_when_the_burn_was_assessed() -> None:
    (figure,) = figures(assessment()).body
    assert figure.notes[0].startswith("Assessed Sat 14 Mar 2026 14:15.")
    (undated,) = figures(replace(assessment(), items=())).body
    assert undated.notes[0].startswith("Time of the assessment not recorded.")


@pytest.mark.parametrize("target", [None, (), (None, None), ("41", 82), 41.0])
def test_a_target_that_is_none_draws_no_band(target: object) -> None:
    given = assessment()
    fluid = given.findings["fluid"]
    values = {**fluid.values, "urine_target_ml_h": target}
    changed = replace(given, findings={**given.findings, "fluid": replace(fluid, values=values)})
    (figure,) = figures(changed).fluid
    has_band = "target of urine" in figure.drawing.xml
    assert has_band == (target == ("41", 82))  # the end that is a number is kept


def test_the_same_assessment_gives_the_same_figures() -> None:
    assert [figure.drawing.xml for figure in figures(crowded()).body] == [
        figure.drawing.xml for figure in figures(crowded()).body
    ]
    assert handover_of(crowded()) == handover_of(crowded())


def test_an_office_validator_finds_nothing_in_crowded_figures(tmp_path: Path) -> None:
    content = handover_of(crowded())
    (tmp_path / "crowded.docx").write_bytes(content)
    result = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365).validate(str(tmp_path / "crowded.docx"))
    assert result.is_valid, [str(error) for error in result.errors][:5]
    assert len(inlines(content)) == len(TAGS)


def test_a_template_without_the_place_of_a_figure_is_a_fault(handover: bytes) -> None:
    check_document(handover, [], {"tags": [Mark(tag) for tag in TAGS]})
    with pytest.raises(DocumentError, match=r"no content control for figure:map"):
        check_document(handover, [], {"tags": [Mark("figure:map")]})


@pytest.mark.parametrize("is_block", [True, False])
def test_a_drawing_takes_the_place_of_what_its_control_holds(is_block: bool) -> None:
    names = 'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"'
    inside = "<w:r><w:t>put it here</w:t></w:r>"
    held = "<w:sdtPr><w:tag w:val='figure:x'/></w:sdtPr><w:sdtContent>{}</w:sdtContent>"
    text = f"<w:sdt {names}>{held.format(f'<w:p>{inside}</w:p>')}</w:sdt>"
    if not is_block:
        text = f"<w:p {names}><w:sdt>{held.format(inside)}</w:sdt></w:p>"
    document = Document()
    document.element.body.insert(0, etree.fromstring(text))
    drawing = group("X", "a box", 20, 20, [box("b", 1, 1, 9, 9, Look(fill="000000"))])
    patient = state()
    made = finish(document, Properties("t", at(patient, "19:30"), "d"), Page("A4"), {"figure:x": drawing})
    assert len(inlines(made)) == 1
    assert "put it here" not in text_of(made)
    assert Document(BytesIO(made)).element.body is not None


def _swatches() -> bytes:
    looks = [depth.look for depth in (*DEPTHS.values(), UNKNOWN, NOT_COUNTED)]
    drawn = [
        box(f"swatch {n}", 2 + 60 * n, 2, 50, 40, replace(look, line="")) for n, look in enumerate(looks)
    ]
    document = Document()
    section = document.sections[0]
    section.left_margin = section.top_margin = section.right_margin = 0
    section.header_distance = 0
    paragraph = document.paragraphs[0] if document.paragraphs else document.add_paragraph()
    paragraph._p.append(etree.fromstring(group("Swatches", "patterns", 60 * len(looks), 50, drawn)))
    saved = BytesIO()
    document.save(saved)
    return saved.getvalue()


@pytest.mark.skipif(
    shutil.which("soffice") is None or shutil.which("pdftoppm") is None, reason="no office to print with"
)
def test_a_coarse_print_without_grey_still_tells_the_depths_apart(tmp_path: Path) -> None:
    (tmp_path / "swatches.docx").write_bytes(_swatches())
    profile = f"-env:UserInstallation={(tmp_path / 'profile').as_uri()}"
    convert = ["soffice", profile, "--headless", "--convert-to", "pdf", "--outdir", str(tmp_path)]
    subprocess.run([*convert, str(tmp_path / "swatches.docx")], check=True, capture_output=True, timeout=120)
    printed = [
        "pdftoppm",
        "-mono",
        "-r",
        "60",
        "-singlefile",
        str(tmp_path / "swatches.pdf"),
        str(tmp_path / "page"),
    ]
    subprocess.run(printed, check=True, capture_output=True, timeout=60)
    page = _rows((tmp_path / "page.pbm").read_bytes())
    crops = [_crop(page, n) for n in range(len(DEPTHS) + 2)]
    for (one, a), (other, b) in combinations(enumerate(crops), 2):
        assert _likeness(a, b) < 0.93, (one, other)


def _rows(pbm: bytes) -> list[str]:
    kind, wide, high, bits = pbm.split(None, 3) if b"#" not in pbm[:40] else (b"", b"0", b"0", b"")
    assert kind == b"P4"
    line = (int(wide) + 7) // 8
    return [
        "".join(f"{byte:08b}" for byte in bits[row * line : (row + 1) * line])[: int(wide)]
        for row in range(int(high))
    ]


def _crop(page: list[str], number: int) -> list[str]:
    """A part from the middle of a swatch, at 60 dots an inch."""
    left, top = round((2 + 60 * number + 8) * 60 / 72), round(10 * 60 / 72)
    return [row[left : left + 26] for row in page[top : top + 20]]


def _likeness(one: list[str], other: list[str]) -> float:
    """The largest part of dots that agree when one pattern is moved over the other."""
    best = 0.0
    for down in range(8):
        for across in range(8):
            same = total = 0
            for a, b in zip(one[down:], other, strict=False):
                pairs = list(zip(a[across:], b, strict=False))
                same += sum(x == y for x, y in pairs)
                total += len(pairs)
            best = max(best, same / total)
    return best
