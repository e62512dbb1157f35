"""The first two pages: what stands on them, and that nothing is lost by it."""

from __future__ import annotations

from pathlib import Path

import pytest
from msgspec.structs import replace

from handoff.document import draft
from handoff.document.brief import LETTERS, MORE, earns, named, shortened
from handoff.document.read_back import text_of
from handoff.plugin import Flag, Part
from tests.document.fake import STEM, assessment, item
from tests.document.printing import example_documents, pages
from tests.document.reading import body, cells, tables
from tests.document.reading import text as text_below
from tests.shift.helpers import EXAMPLES, assessed, text_of_example

ADULT = "house-fire"
FIGURES = "Burn chart, fluid and trends"


@pytest.fixture
def adult(example_pdfs: dict[str, Path]) -> list[str]:
    """The pages of the handover of the adult example."""
    return pages(example_pdfs[f"{ADULT}-handover"])


def test_the_adult_example_has_at_most_two_pages_before_the_figures(adult: list[str]) -> None:
    first = next(number for number, page in enumerate(adult) if FIGURES in page)
    assert first <= 2


def test_page_one_holds_what_is_needed_at_the_bed(adult: list[str]) -> None:
    order = ["Tomas Ferrandel", "sick, may get worse", "NEEDS ACTION", "DO NOW", "DUE OR OVERDUE"]
    order += ["WHAT TO DO IF", "entries are not recorded"]
    places = [adult[0].index(words) for words in order]
    assert places == sorted(places)


def test_the_second_page_ends_with_the_joint_check_and_the_acceptance(adult: list[str]) -> None:
    order = ["Assessment", "Recommendation", "To do in the coming shift", "Awaited", "who telephones whom"]
    order += ["Looked at together at the bedside", "Responsibility accepted at"]
    places = [adult[1].index(words) for words in order]
    assert places == sorted(places)


@pytest.mark.parametrize("name", EXAMPLES)
def test_every_value_stands_in_full_whatever_the_first_pages_leave_out(name: str) -> None:
    page = text_of(example_documents()[f"{name}-handover.docx"])
    given = assessed(text_of_example(name), EXAMPLES[name])
    for one in given.items:
        if one.flag is not Flag.NOT_RECORDED and not one.key.startswith("handover."):
            assert one.shown.strip() in page
    for action in given.actions:
        if not action.key.startswith("handover."):
            assert action.text in page


def test_what_was_charted_or_carries_a_flag_or_leads_its_system_earns_its_place() -> None:
    def figure(key: str = "one.figure", **given: object) -> bool:
        return earns(replace(item(key, "A", "1 mL", Part.ASSESSMENT), **{"repeats": False, **given}))  # type: ignore[arg-type]

    assert figure(repeats=True)
    assert figure(flag=Flag.REVIEW)
    assert figure("fluid.rate_now")
    assert not figure()
    assert not figure(repeats=True, detail=True)
    assert not figure(flag=Flag.NOT_RECORDED)


@pytest.mark.parametrize(
    ("text", "letters", "short"),
    [
        ("18 % at 14:15", 20, "18 % at 14:15"),
        ("one clause here; another clause there", 20, "one clause here [+]"),
        ("stay whole (a, b, c and d, all of it) then end", 20, "stay whole [+]"),
        ("looked at by E. Marsh of the burn unit", 20, "looked at by E. [+]"),
        ("write mL and the interval", 17, "write mL [+]"),
        ("stridor was not looked for at all", 15, "stridor was not [+]"),
        ("x" * 60, 20, "x" * 20 + " [+]"),
        ("two\nlines", 20, "two lines"),
    ],
)
def test_a_long_value_is_cut_at_a_clause_and_never_inside_brackets(
    text: str, letters: int, short: str
) -> None:
    assert shortened(text, letters) == short.replace("E. [+]", "E [+]")


def test_a_value_that_was_cut_says_so_and_the_legend_says_where_the_rest_is(handover: bytes) -> None:
    long = item("one.long", "Long finding", "word " * 60, Part.ASSESSMENT)
    given = assessment()
    page = text_of(draft(replace(given, items=(*given.items, long)), STEM)[f"{STEM}-handover.docx"])
    (line,) = [line for line in page.splitlines() if "Long finding" in line and MORE in line]
    assert len(line) < LETTERS[Part.ASSESSMENT] * 10
    assert "[+]: in full in Detail by system" in page
    assert ("word " * 60).strip() in page


def test_a_long_name_goes_without_its_brackets() -> None:
    long = item("a.b", "Beyond the burn: right arm (right upper arm full thickness)", "x", Part.ASSESSMENT)
    assert named(long) == "Beyond the burn: right arm"


def test_a_computed_rate_never_stands_without_its_cautions() -> None:
    name = f"{ADULT}-handover.docx"
    rows = [cells(table) for table in tables(example_documents()[name])["System"]]
    (fluid,) = [row[1] for table in rows for row in table if row[0].startswith("Fluid")]
    assert "Planned rate now" in fluid
    assert "the formula may be low" in fluid
    assert "Formula estimate" in fluid


def test_body_text_of_the_first_pages_is_at_least_eight_and_a_half_points() -> None:
    from io import BytesIO

    from docx import Document

    styles = Document(BytesIO(example_documents()[f"{ADULT}-handover.docx"])).styles
    for name in ("Brief", "Key", "Key note", "Ticks", "Missing"):
        assert styles[name].font.size.pt >= 8.5


def test_a_name_on_page_one_is_named_again_in_its_system(handover: bytes) -> None:
    assert "On page one: Airway signs present" in text_below(body(handover))
