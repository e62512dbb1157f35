"""A case for teaching names nobody, in no part of what is written, and says what it could not judge."""

from __future__ import annotations

import json
import re
from functools import lru_cache
from io import BytesIO
from pathlib import Path
from zipfile import ZipFile

import pytest
from jsonschema import Draft202012Validator
from typer.testing import CliRunner

from handoff.cli import app
from handoff.document import draft
from handoff.document.read_back import text_of
from handoff.items_json import as_json
from handoff.privacy.deidentify import deidentified
from handoff.privacy.free_text import Scrubber, known_terms
from handoff.state.schema import load_schema
from handoff.transfer.packet import packet
from handoff.transfer.profile import load_profile, nameless
from handoff.work import assess_loaded, open_text
from tests.packaging.project import ROOT
from tests.privacy.planting import AT, PLANTED, SECRETS, planted_text, setup


@lru_cache(maxsize=1)
def files() -> dict[str, bytes]:
    loaded = open_text(planted_text(), "ferrandel.yaml", setup(), AT)
    assessment, _ = deidentified(loaded, setup())
    sent = packet(
        assessment,
        nameless(load_profile("burn-centre")),
        setup().parameters,
        "case",
        None,
        name="case-transfer",
    )
    assert len(sent.files) > 4
    packed = {f"{sent.name}/{name}": content for name, content in sent.files.items()}
    return draft(assessment, "case") | packed | {"case.items.json": as_json(assessment).encode()}


def every_part() -> dict[str, str]:
    found = {}
    for name, content in files().items():
        if name.endswith(".docx"):
            with ZipFile(BytesIO(content)) as archive:
                found |= {f"{name}!{part}": archive.read(part).decode() for part in archive.namelist()}
                found[f"{name}!text"] = text_of(content)
        else:
            found[name] = content.decode()
    return found


def test_what_was_planted_would_be_printed_without_it() -> None:
    loaded = open_text(planted_text(), "ferrandel.yaml", setup(), AT)
    printed = "".join(text_of(content) for content in draft(assess_loaded(loaded, setup()), "x").values())
    assert printed.count("Vantongeren") > 20
    assert planted_text().count(PLANTED) > 60


@pytest.mark.parametrize("secret", SECRETS)
def test_no_planted_identifier_is_in_any_part_property_or_name(secret: str) -> None:
    word = re.compile(rf"(?<![a-z]){re.escape(secret)}(?![a-z])", re.IGNORECASE)
    found = [name for name, text in every_part().items() if word.search(f"{name} {text}")]
    assert found == []


def test_no_digest_leads_back_to_the_file() -> None:
    digest = open_text(planted_text(), "ferrandel.yaml", setup(), AT).state.digest
    assert [name for name, text in every_part().items() if digest[:12] in text] == []


def test_times_are_hours_since_the_burn() -> None:
    page = text_of(files()["case-handover.docx"])
    assert "Made at +06:10 h since burn" in page
    assert "6 h 10 min since burn" in page
    assert not re.search(r"\b\d{1,2} (Jan|Mar) 20\d\d", page)


def test_figures_and_ages_are_those_of_the_patient() -> None:
    loaded = open_text(planted_text(), "ferrandel.yaml", setup(), AT)
    before = {item.key: item for item in assess_loaded(loaded, setup()).items}
    after = {item.key: item for item in deidentified(loaded, setup())[0].items}
    for key in ("area.counted", "fluid.total_24h", "fluid.due_by_now", "fluid.given", "injury.hours_since"):
        assert after[key].value == pytest.approx(before[key].value), key
    assert "41 years" in text_of(files()["case-handover.docx"])


def test_items_json_keeps_its_schema() -> None:
    data = json.loads(files()["case.items.json"])
    assert list(Draft202012Validator(load_schema("items.schema.json")).iter_errors(data)) == []
    assert data["digest"] == "deidentified"


def test_a_very_old_patient_is_told_as_ninety() -> None:
    old = planted_text().replace("1985-02-11", "1929-02-11")
    assessment, _ = deidentified(open_text(old, "x.yaml", setup(), AT), setup())
    page = text_of(draft(assessment, "case")["case-handover.docx"])
    assert "90 years" in page
    assert "97 years" not in page


def test_a_word_that_may_be_a_name_is_taken_out_or_reported_with_its_place() -> None:
    scrubber = Scrubber((), frozenset(("pulse",)))
    assert scrubber.free_text("pulled out by Padraig", "line 4, x") == "pulled out by [name?]"
    assert scrubber.free_text("Padraig pulled him out. Pulse weak", "line 4, x").startswith("Padraig")
    assert scrubber.doubtful == [("line 4, x", "Padraig")]


def test_figures_are_not_taken_for_dates_times_or_numbers_of_people() -> None:
    scrubber = Scrubber((), frozenset())
    kept = "pH 7.31, 2000 mL, 1:1000, 14 mg, 104/62 mmHg, 0.51, may 2 hourly checks, q4h, 12,412 mL"
    assert scrubber.free_text(kept, "") == kept


def test_a_role_is_no_name_and_a_name_is_found_in_any_letters() -> None:
    terms = known_terms([("patient", "[person]"), ("Dr A. Quill", "[person]")], frozenset())
    assert Scrubber(terms, frozenset()).known_out("the patient saw QUILL") == "the patient saw [person]"


def test_draft_writes_it_under_a_name_of_its_own_and_says_what_to_look_at(tmp_path: Path) -> None:
    source = tmp_path / "ferrandel.yaml"
    source.write_bytes((ROOT / "examples" / "house-fire.yaml").read_bytes())
    out = tmp_path / "teaching"
    done = CliRunner().invoke(app, ["draft", str(source), "--at", AT, "--deidentified", "--out", str(out)])
    assert done.exit_code == 0, done.output
    assert sorted(path.name for path in out.iterdir()) == [
        "case-care-plan.docx",
        "case-handover.docx",
        "case.items.json",
    ]
    assert "look at it: line 34, injury.what_happened: Kitchen" in done.output
    assert "not looked for" in done.output


def test_it_goes_without_the_confidential_sheet(tmp_path: Path) -> None:
    source = str(ROOT / "examples" / "house-fire.yaml")
    done = CliRunner().invoke(
        app, ["draft", source, "--deidentified", "--confidential", "--out", str(tmp_path)]
    )
    assert done.exit_code == 2
    assert list(tmp_path.iterdir()) == []


def test_the_letterhead_of_the_unit_is_left_out(tmp_path: Path) -> None:
    from docx import Document

    from handoff.document.render import template_bytes

    document = Document(BytesIO(template_bytes("handover.docx")))
    document.paragraphs[0].insert_paragraph_before("SECRETWORD Hospital")
    (tmp_path / "look").mkdir()
    document.save(str(tmp_path / "look" / "handover.docx"))
    (tmp_path / "unit.yaml").write_text(
        "policy: 1\nname: SECRETWORD\nunit_name: SECRETWORD Unit\ntemplates: look\n", encoding="utf-8"
    )
    source, out = str(ROOT / "examples" / "house-fire.yaml"), tmp_path / "out"
    policy = ["--policy", str(tmp_path / "unit.yaml"), "--at", AT, "--out", str(out)]
    assert CliRunner().invoke(app, ["draft", source, *policy]).exit_code == 0
    assert "SECRETWORD" in text_of((out / "house-fire-handover.docx").read_bytes())
    assert CliRunner().invoke(app, ["draft", source, "--deidentified", *policy]).exit_code == 0
    made = [text_of(path.read_bytes()) for path in out.glob("case-*.docx")]
    assert len(made) == 2
    assert [text for text in made if "SECRETWORD" in text] == []
    assert "SECRETWORD" not in (out / "case.items.json").read_text(encoding="utf-8")
