"""A unit's own look: written out, changed as a clerk changes it, checked, and used without harm."""

from __future__ import annotations

import re
from collections.abc import Callable
from copy import deepcopy
from functools import lru_cache
from io import BytesIO
from pathlib import Path
from typing import Any

import pytest
from docx import Document
from msgspec.structs import replace
from openxml_audit import FileFormat, OpenXmlValidator
from typer.testing import CliRunner, Result

from handoff.assess import Assessment
from handoff.cli import app
from handoff.document import documents, draft, outside
from handoff.document.names import WORD
from handoff.document.read_back import text_of
from handoff.document.render import template_bytes
from handoff.document.template_check import KINDS
from handoff.policy import Policy
from tests.packaging.project import ROOT
from tests.shift.helpers import EXAMPLES, assessed, text_of_example

EXAMPLE = str(ROOT / "examples" / "nearly-empty.yaml")
AT = EXAMPLES["nearly-empty"]


def run(*arguments: object) -> Result:
    return CliRunner().invoke(app, [str(one) for one in arguments])


@lru_cache(maxsize=1)
def patient() -> Assessment:
    return assessed(text_of_example("nearly-empty"), AT)


def of(folder: Path) -> Assessment:
    return replace(patient(), policy=Policy(templates=str(folder)))


def edited(folder: Path, name: str, change: Callable[[Any], None]) -> Path:
    """Return the built-in template ``name``, changed by a Word library and saved into ``folder``."""
    document = Document(BytesIO(template_bytes(name)))
    change(document)
    folder.mkdir(exist_ok=True)
    document.save(str(folder / name))
    return folder / name


def put_first(text: str) -> Callable[[Any], None]:
    return lambda document: document.paragraphs[0].insert_paragraph_before(text) and None


def written(folder: Path, made: dict[str, bytes]) -> list[str]:
    """Return the faults that the auditor finds in documents."""
    found = []
    for name, content in made.items():
        (folder / name).write_bytes(content)
        audit = OpenXmlValidator(file_format=FileFormat.MICROSOFT_365)
        found += [f"{name}: {error}" for error in audit.validate(folder / name).errors]
    return found


def test_the_built_in_templates_are_written_out_and_pass_their_own_check(tmp_path: Path) -> None:
    assert run("templates", "write", tmp_path / "look").exit_code == 0
    assert sorted(path.name for path in (tmp_path / "look").iterdir()) == sorted(KINDS)
    done = run("templates", "check", tmp_path / "look")
    assert done.exit_code == 0, done.output
    assert done.output.count("every field is known") == len(KINDS)


def test_edited_templates_are_never_written_over(tmp_path: Path) -> None:
    path = edited(tmp_path / "look", "handover.docx", put_first("Harrow Burn Unit"))
    before = path.read_bytes()
    assert run("templates", "write", tmp_path / "look").exit_code == 2
    assert path.read_bytes() == before
    assert [one.name for one in (tmp_path / "look").iterdir()] == ["handover.docx"]


def clerk(document: Any) -> None:
    """A letterhead, labels in another language, and two parts in another order."""
    document.paragraphs[0].insert_paragraph_before("Harrow Burn Unit, Harrow Street")
    for paragraph in document.paragraphs:
        for english, other in (("Situation", "Situación"), ("Background", "Antecedentes")):
            if paragraph.text == english:
                paragraph.runs[0].text = other
    first = next(one for one in document.paragraphs if one.text == "Situación")
    second = next(one for one in document.paragraphs if one.text == "Antecedentes")
    third = next(one for one in document.paragraphs if one.text == "Assessment")
    moved, node = [], second._element
    while node is not third._element:
        moved.append(node)
        node = node.getnext()
    for one in moved:
        first._element.addprevious(one)


def test_letterhead_words_and_order_of_a_clerk_are_printed_and_the_file_is_clean(tmp_path: Path) -> None:
    edited(tmp_path / "look", "handover.docx", clerk)
    (tmp_path / "unit.yaml").write_text("policy: 1\ntemplates: look\n", encoding="utf-8")
    out = tmp_path / "out"
    done = run("draft", EXAMPLE, "--at", AT, "--policy", tmp_path / "unit.yaml", "--out", out)
    assert done.exit_code == 0, done.output
    page = text_of((out / "nearly-empty-handover.docx").read_bytes())
    assert page.startswith("Harrow Burn Unit, Harrow Street")
    assert page.index("Antecedentes") < page.index("Situación") < page.index("Assessment")
    made = {path.name: path.read_bytes() for path in out.glob("*.docx")}
    assert written(tmp_path, made) == []


def split_runs(document: Any) -> None:
    """Cut every run as Word does when it marks a spelling: pieces of three letters, marks between them."""
    for text in list(document.element.body.iter(f"{WORD}t")):
        run_, said = text.getparent(), text.text or ""
        if run_.tag != f"{WORD}r" or "{" not in said or "%" in said[:3]:
            continue
        last = run_
        for start in range(3, len(said), 3):
            piece = deepcopy(run_)
            piece.find(f"{WORD}t").text = said[start : start + 3]
            mark = run_.makeelement(f"{WORD}proofErr", {f"{WORD}type": "spellStart"})
            last.addnext(mark)
            mark.addnext(piece)
            last = piece
        text.text = said[:3]


def test_tags_that_word_split_over_runs_still_render(tmp_path: Path) -> None:
    path = edited(tmp_path / "look", "handover.docx", split_runs)
    whole = text_of(template_bytes("handover.docx"))
    assert text_of(path.read_bytes()) == whole
    assert len(list(Document(str(path)).element.body.iter(f"{WORD}proofErr"))) > 200
    trouble: list[str] = []
    made = draft(of(tmp_path / "look"), "x", None, trouble)
    assert trouble == []
    assert text_of(made["x-handover.docx"]) == text_of(draft(patient(), "x")["x-handover.docx"])


def respell(before: str, after: str) -> Callable[[Any], None]:
    def change(document: Any) -> None:
        places = [document.element, *(section.footer._element for section in document.sections)]
        for text in [one for place in places for one in place.iter(f"{WORD}t")]:
            if before in (text.text or ""):
                text.text = text.text.replace(before, after)

    return change


@pytest.mark.parametrize(
    ("before", "after", "place", "cure"),
    [
        ("frame.made_at", "frame.maid_at", "footer, paragraph 1", "did you mean 'made_at'?"),
        ("identity.burn", "identity.burm", "body, paragraph", "did you mean 'burn'?"),
        ("row.value", "row.valeu", "body, paragraph", "did you mean 'value'?"),
        ("in page_one.actions", "in page_one.actoins", "body, paragraph", "did you mean 'actions'?"),
        ("{%p endif %}", "", "body, near", "correct or close that tag"),
        ("{{ severity }}", "{{ severity|safe }}", "body, near", "No filter named 'safe'"),
    ],
)
def test_a_misspelt_field_is_named_with_place_and_nearest_name(
    tmp_path: Path, before: str, after: str, place: str, cure: str
) -> None:
    path = edited(tmp_path, "handover.docx", respell(before, after))
    done = run("templates", "check", path)
    assert done.exit_code == 4, done.output
    assert place in done.output
    assert cure in done.output


def test_a_field_that_was_taken_out_is_named(tmp_path: Path) -> None:
    path = edited(tmp_path, "handover.docx", respell("{{ identity.allergies }}", ""))
    done = run("templates", "check", path)
    assert done.exit_code == 4
    assert "does not print the field identity.allergies" in done.output


def test_with_a_fault_the_document_is_made_with_the_built_in_look_and_says_so(tmp_path: Path) -> None:
    edited(tmp_path / "look", "handover.docx", respell("identity.burn", "identity.burm"))
    (tmp_path / "unit.yaml").write_text("policy: 1\ntemplates: look\n", encoding="utf-8")
    done = run("draft", EXAMPLE, "--at", AT, "--policy", tmp_path / "unit.yaml", "--out", tmp_path / "out")
    assert done.exit_code == 4
    assert "template fault: the template handover.docx" in done.output
    page = text_of((tmp_path / "out" / "nearly-empty-handover.docx").read_bytes())
    assert documents.OWN_BAND in page
    assert "Situation" in page


HOSTILE = {
    "{{ ''.__class__.__mro__ }}": "it reaches for the program itself",
    "{{ frame.title.__init__.__globals__ }}": "it reaches for the program itself",
    "{% include '/etc/hostname' %}": "it asks for another file",
    "{% import 'os' as os %}": "it asks for another file",
    "{% set a = 'ab' * 2000000000 %}": "it fills the memory",
    "{% for a in range(99999) %}{% for b in range(99999) %}{% endfor %}{% endfor %}": "does not come to an end",
}


@pytest.mark.parametrize("tag", HOSTILE, ids=list(HOSTILE.values()))
def test_a_hostile_template_is_stopped_by_name_and_the_document_is_made(
    tmp_path: Path, tag: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(outside, "STOPPED_AFTER_S", 8)
    edited(tmp_path, "handover.docx", put_first(tag))
    trouble: list[str] = []
    made = draft(of(tmp_path), "x", None, trouble)
    assert len(trouble) == 1
    assert trouble[0].startswith("the template handover.docx was stopped: ")
    assert HOSTILE[tag] in trouble[0]
    assert documents.OWN_BAND in text_of(made["x-handover.docx"])


def link(document: Any) -> None:
    document.part.relate_to("file:///nowhere/picture.png", "urn:image", is_external=True)


def field(document: Any) -> None:
    paragraph = document.paragraphs[0]._element
    simple = paragraph.makeelement(f"{WORD}fldSimple", {f"{WORD}instr": "INCLUDETEXT nowhere.docx"})
    paragraph.append(simple)


@pytest.mark.parametrize(("change", "said"), [(link, "fetches something"), (field, "the field INCLUDETEXT")])
def test_a_template_that_fetches_from_outside_itself_is_refused(
    tmp_path: Path, change: Callable[[Any], None], said: str
) -> None:
    path = edited(tmp_path, "handover.docx", change)
    done = run("templates", "check", path)
    assert done.exit_code == 4
    assert said in done.output


def test_what_is_no_word_file_is_refused(tmp_path: Path) -> None:
    (tmp_path / "handover.docx").write_text("hello", encoding="utf-8")
    done = run("templates", "check", tmp_path / "handover.docx")
    assert done.exit_code == 4
    assert "no Word document" in done.output


def test_a_policy_that_names_no_folder_stops_before_anything_is_written(tmp_path: Path) -> None:
    (tmp_path / "unit.yaml").write_text("policy: 1\ntemplates: nowhere\n", encoding="utf-8")
    done = run("draft", EXAMPLE, "--at", AT, "--policy", tmp_path / "unit.yaml", "--out", tmp_path / "out")
    assert done.exit_code == 4
    assert re.search(r"templates: there is no folder .*nowhere", done.output)
    assert not (tmp_path / "out").exists()
