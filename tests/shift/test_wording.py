"""Unsafe and vague wording: every rule with its examples, its exceptions, its place and its source."""

from __future__ import annotations

import json
import time
import zipfile
from io import BytesIO
from pathlib import Path
from typing import Any

import pytest
import yaml
from docx import Document
from jsonschema import Draft202012Validator

from handoff.document import draft
from handoff.shift.wording import Finding, check_lines, check_state, load_rules
from handoff.shift.wording.find import hits
from handoff.shift.wording.table import RuleError, read_rules
from handoff.shift.wording.word_text import NotADocument, lines_of
from tests.conftest import ROOT
from tests.shift.helpers import EXAMPLES, assessed, loaded, run, setup, small, text_of_example

AT = EXAMPLES["house-fire"]
FOLDER = ROOT / "handoff/shift/wording"
RULES = load_rules()
TABLE: dict[str, Any] = yaml.safe_load((FOLDER / "rules.yaml").read_text(encoding="utf-8"))


def found_in(text: str) -> list[str]:
    return [rule.id for _, _, rule in hits(text, RULES.rules)]


def of_state(text: str) -> list[Finding]:
    return check_state(loaded(text, AT).state.root, setup().schema, text, RULES)


def examples(kind: str) -> list[tuple[str, str]]:
    return [(name, text) for name, texts in RULES.examples.items() for text in texts[kind]]


@pytest.mark.parametrize(("name", "text"), examples("flag"))
def test_each_rule_speaks_up_at_its_examples(name: str, text: str) -> None:
    rule = RULES.rule(name)
    if rule.pattern is None:
        assert rule.missing is not None
        assert not rule.missing.search(text)
    else:
        assert hits(text, [rule])
        assert hits(f"{text}\n", [rule])


@pytest.mark.parametrize(("name", "text"), examples("pass"))
def test_each_rule_is_silent_at_its_exceptions(name: str, text: str) -> None:
    rule = RULES.rule(name)
    assert not hits(text, [rule])
    if rule.missing is not None:
        assert rule.missing.search(text)


def test_the_table_fits_its_schema() -> None:
    schema = json.loads((FOLDER / "rules.schema.json").read_text())
    Draft202012Validator.check_schema(schema)
    assert [error.message for error in Draft202012Validator(schema).iter_errors(TABLE)] == []


@pytest.mark.parametrize(
    "change",
    [
        {"source": "none"},
        {"locator": ""},
        {"kind": "guess"},
        {"why": ""},
        {"patern": "x"},
        {"examples": {"flag": [], "pass": ["x"]}},
    ],
)
def test_the_schema_refuses_a_rule_without_its_source_or_its_examples(change: dict[str, object]) -> None:
    schema = json.loads((FOLDER / "rules.schema.json").read_text())
    rule = {**TABLE["rules"][0], **change}
    assert list(Draft202012Validator(schema).iter_errors({**TABLE, "rules": [rule]}))


@pytest.mark.parametrize(
    "change", [{"source": "nowhere"}, {"source": "none"}, {"pattern": "("}, {"pattern": "<nothing>x"}]
)
def test_a_rule_that_cannot_be_used_is_refused_by_name(change: dict[str, object]) -> None:
    with pytest.raises(RuleError, match="unit-as-letter"):
        read_rules({**TABLE, "rules": [{**TABLE["rules"][0], **change}]})
    with pytest.raises(RuleError, match="two rules"):
        read_rules({**TABLE, "rules": [TABLE["rules"][0]] * 2})


def test_the_official_list_is_whole() -> None:
    assert [rule.id for rule in RULES.rules if rule.group == "do not use"] == [
        "unit-as-letter",
        "international-unit",
        "every-day",
        "every-other-day",
        "trailing-zero",
        "no-leading-zero",
        "morphine-or-magnesium",
        "sulfate-formula",
    ]
    assert {rule.source.key for rule in RULES.rules if rule.group == "do not use"} == {"joint-commission"}


def test_every_list_is_cited_and_what_is_common_practice_says_so() -> None:
    for rule in RULES.rules:
        if rule.source.kind == "common practice":
            assert rule.source.shown() == "Common practice, no source."
        else:
            assert rule.source.citation
            assert rule.source.locator


def test_a_trailing_zero_is_unsafe_in_a_dose_and_right_in_a_result_or_a_tube_size() -> None:
    assert found_in("morphine 5.0 mg") == ["trailing-zero"]
    for safe in ("potassium 5.0 mmol/L at 14:15", "oral tube 7.0 mm at 23 cm", "catheter 14.0 Fr", "pH 7.30"):
        assert found_in(safe) == [], safe
    assert found_in("through the oral tube 7.0 mm gave 5.0 mg") == ["trailing-zero"]
    more = "results: [{at: 2026-03-14 15:00, other: fibrinogen 2.0 g}]\n"
    assert of_state(small(more)) == []
    noted = "events: [{at: 2026-03-14 15:00, what: other, said: fibrinogen 2.0 g given}]\n"
    assert [finding.rule for finding in of_state(small(noted))] == ["trailing-zero"]


def test_a_stretch_of_text_is_pointed_out_once_by_the_first_list_that_has_it() -> None:
    assert found_in("5.0mg") == ["trailing-zero"]
    assert found_in("BP 104/62 and stable, MS 4 mg") == [
        "pressure-without-unit",
        "stable",
        "morphine-or-magnesium",
    ]


def test_safe_text_is_passed_without_a_word() -> None:
    assert (
        found_in(
            "17:00 Pulse 118 /min, blood pressure 104/62 mmHg, breaths 24 /min, SpO2 98 %, temperature 36.4 C. "
            "Morphine 4 mg IV at 16:45, 0.5 mL/kg/h urine, 12,000 mL so far. R1 520 mL/h, seen running 18:00. "
            "17:10 Dr Quill told that the Doppler is weaker; will come by 17:30."
        )
        == []
    )


def test_a_place_is_line_and_column_of_the_words_in_the_file() -> None:
    text = small(
        "handovers:\n"
        "  - at: 2026-03-14 19:00\n"
        "    summary: |\n"
        "      Burned in a kitchen fire.\n"
        "      Obs stable, later stable again.\n"
        "    concerns:\n"
        "      - looks stable\n"
        '      - "quoted: \\"stable\\" twice"\n'
        "      - >\n"
        "        folded text that is\n"
        "        not stable at all\n"
        "    if_then: [{if: not stable, then: 'ring, it''s stable'}]\n"
    )
    lines = text.splitlines()
    found = of_state(text)
    assert [finding.quoted for finding in found] == ["stable"] * 7
    for finding in found:
        assert lines[finding.line - 1][finding.column - 1 :].startswith("stable"), finding
    assert [finding.line for finding in found] == [9, 9, 11, 12, 15, 16, 16]
    assert len({(finding.line, finding.column) for finding in found}) == 7
    assert found[0].where == "handovers[1].summary"
    assert found[2].where == "handovers[1].concerns[1]"


@pytest.mark.parametrize("newline", ["\n", "\r\n", "\r"])
def test_a_place_is_right_with_any_line_end(newline: str) -> None:
    text = small("handovers:\n  - at: 2026-03-14 19:00\n    severity: very stable\n").replace("\n", newline)
    (finding,) = of_state(text)
    assert (finding.line, finding.column) == (7, 20)


def test_only_free_text_is_read_and_no_names_quantities_or_struck_entries() -> None:
    text = small(
        "events:\n"
        "  - {at: 2026-03-14 15:00, what: other, who: MS, by: MS, said: well said, note: MS}\n"
        "  - {at: 2026-03-14 15:00, what: other, said: stable, struck: {by: MS, at: 2026-03-14 15:10, why: stable}}\n"
        "fluid: {given: [{at: 2026-03-14 15:00, fluid: water, volume: 1000 mL, purpose: oral}]}\n"
        "observations: {2026-03-14: {15:00: {urine: 5000 mL, note: obs stable}}}\n",
        name="IN Stable",
    )
    assert [(finding.where, finding.quoted) for finding in of_state(text)] == [
        ("events[1].note", "MS"),
        ("observations.2026-03-14.15:00.note", "stable"),
    ]


def test_a_value_in_the_handover_asks_for_its_time_and_a_trigger_does_not() -> None:
    text = small(
        "handovers:\n"
        "  - at: 2026-03-14 19:00\n"
        "    summary: |\n"
        "      Pulse 118 /min and urine 20 mL.\n"
        "      At 19:00 pulse 120 /min.\n"
        "    concerns: [SpO2 91 %]\n"
        "    if_then: [{if: urine 20 mL, then: ring}]\n"
    )
    assert [(finding.line, finding.rule) for finding in of_state(text)] == [
        (8, "value-without-time"),
        (10, "value-without-time"),
    ]


def test_missing_identifiers_are_pointed_out_where_the_patient_block_stands() -> None:
    found = of_state("handoff: 1\nclock: Europe/Dublin\npatient: {name: unknown}\ninjury: {}\n")
    assert [(one.rule, one.line, one.where) for one in found] == [
        ("no-birth-date", 3, "patient.born"),
        ("no-record-number", 3, "patient.identifiers"),
    ]


def test_a_finding_says_place_words_safe_form_and_reason() -> None:
    (finding,) = of_state(small("handovers: [{at: 2026-03-14 19:00, severity: stable}]\n"))
    assert finding.said("p.yaml") == (
        'p.yaml:5:46: handovers[1].severity: "stable": write the values with their times; '
        "it says neither what was measured nor when"
    )


def test_the_command_prints_findings_count_and_lists(tmp_path: Path) -> None:
    path = tmp_path / "p.yaml"
    path.write_text(small("handovers: [{at: 2026-03-14 19:00, severity: stable}]\n"), encoding="utf-8")
    done = run("wording", path, "--at", AT)
    assert (done.code, done.err) == (0, "")
    lines = done.out.splitlines()
    assert lines[0] == "Tomas Ferrandel, born 11 Feb 1985, record number HSH-1"
    assert lines[1].startswith(f"{path}:5:46: ")
    assert lines[3] == "1 finding"
    assert lines[4].startswith("  Nursing and Midwifery Council. The Code")
    path.write_text(small(), encoding="utf-8")
    assert "nothing is pointed out; that does not say it is safe" in run("wording", path, "--at", AT).out


def test_what_is_typed_in_has_its_line_and_column() -> None:
    done = run("wording", "-", stdin="born 11 Feb 1985, record number 7\npain ok, MS 4 mg\n")
    assert done.code == 0, done.err
    assert done.out.splitlines()[:2] == [
        'text:2:1: "pain ok": write the score, the scale and the time, or the patient\'s own words; '
        "a quiet patient may be over-sedated or past complaining",
        'text:2:10: "MS": write "morphine sulfate" or "magnesium sulfate"; it stands for both',
    ]
    bare = run("wording", "-", stdin="all fine\n").out
    assert "the whole text: write the date of birth" in bare
    assert "the whole text: write the record number" in bare
    assert "nothing is pointed out" in run("wording", "-", stdin="").out


def word_file(tmp_path: Path) -> Path:
    document = Document()
    document.add_paragraph("Tomas Ferrandel, born 11 Feb 1985, record number 7")
    document.add_paragraph("Obs ").add_run("sta").bold = True
    document.paragraphs[-1].add_run("ble")
    table = document.add_table(2, 2)
    table.cell(0, 0).text, table.cell(0, 1).text = "Time", "What"
    table.cell(1, 0).text, table.cell(1, 1).text = "19:00", "Pulse 118 /min, fluids running"
    document.sections[0].header.paragraphs[0].text = "MS 4 mg"
    path = tmp_path / "note.docx"
    document.save(str(path))
    return path


def test_a_word_file_is_read_by_paragraph_and_table_row_headers_too(tmp_path: Path) -> None:
    path = word_file(tmp_path)
    done = run("wording", path)
    assert done.code == 0, done.err
    assert [line.split(": ")[1:3] for line in done.out.splitlines() if line.startswith(str(path))] == [
        ["paragraph 2", '"stable"'],
        ["table row 2", '"fluids running"'],
        ["header1, paragraph 1", '"MS"'],
    ]


def test_a_time_in_the_same_table_row_is_the_time_of_the_value() -> None:
    rules = [RULES.rule("value-without-time")]
    assert not hits("19:00 | Pulse 118 /min", rules)
    assert hits("ward | Pulse 118 /min", rules)


def packed(**parts: bytes) -> bytes:
    made = BytesIO()
    with zipfile.ZipFile(made, "w", zipfile.ZIP_DEFLATED) as file:
        for name, content in parts.items():
            file.writestr(f"word/{name}.xml", content)
    return made.getvalue()


W = 'xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"'
MEGABYTES_11 = b"<x>" + (b"<y>" + b" " * 1_000_000 + b"</y>") * 11 + b"</x>"
ENTITY = f'<!DOCTYPE d [<!ENTITY a "stable">]><w:d {W}><w:p><w:r><w:t>&a;</w:t></w:r></w:p></w:d>'


@pytest.mark.parametrize(
    ("content", "said"),
    [
        (b"not a zip", "not a Word document"),
        (b"", "not a Word document"),
        (packed(styles=b"<x/>"), "not a Word document"),
        (packed(document=b"<w:document"), "damaged"),
        (packed(document=b"\x00" * 60_000_000), "unpacks to more"),
        (
            packed(
                document=f"<w:d {W}/>".encode(),
                **{f"header{n}": MEGABYTES_11 for n in range(5)},
            ),
            "unpacks",
        ),
        (
            packed(document=ENTITY.encode()),
            "document type",
        ),
        (packed(document=f"<w:d {W}/>".encode())[:-30], "damaged"),
    ],
)
def test_a_file_that_is_no_document_or_a_bomb_is_refused_in_one_line(
    tmp_path: Path, content: bytes, said: str
) -> None:
    path = tmp_path / "x.docx"
    path.write_bytes(content)
    begun = time.monotonic()
    done = run("wording", path)
    assert time.monotonic() - begun < 5
    assert (done.code, done.out, done.err.count("\n")) == (2, "", 1)
    assert said in done.err


def test_a_part_that_lies_about_its_size_is_stopped_while_it_unpacks() -> None:
    content = bytearray(packed(document=b" " * 60_000_000))
    place = content.rindex(b"PK\x01\x02")
    content[place + 24 : place + 28] = (100).to_bytes(4, "little")
    with pytest.raises(NotADocument):
        lines_of(bytes(content))


def test_deep_xml_is_refused_and_outside_entities_are_not_fetched() -> None:
    with pytest.raises(NotADocument):
        lines_of(packed(document=f"<w:d {W}>".encode() + b"<a>" * 5000 + b"</a>" * 5000 + b"</w:d>"))
    outside = f'<!DOCTYPE d SYSTEM "nowhere.dtd"><w:d {W}/>'.encode()
    with pytest.raises(NotADocument, match="document type"):
        lines_of(packed(document=outside))


def test_what_was_deleted_with_tracked_changes_is_not_read() -> None:
    body = "<w:p><w:del><w:r><w:delText>stable</w:delText></w:r></w:del><w:r><w:t>Pulse</w:t></w:r></w:p>"
    assert lines_of(packed(document=f"<w:d {W}>{body}</w:d>".encode())) == [("paragraph 1", "Pulse")]


def test_a_table_in_a_table_belongs_to_the_row_that_holds_it() -> None:
    def row(*cells: str) -> str:
        return f"<w:tr>{''.join(f'<w:tc>{cell}</w:tc>' for cell in cells)}</w:tr>"

    def p(text: str) -> str:
        return f"<w:p><w:r><w:t>{text}</w:t></w:r></w:p>"

    inner = f"<w:tbl>{row(p('pulse'))}</w:tbl>"
    body = f"<w:tbl>{row(p('19:00'), inner + p('end'))}</w:tbl>{p('after')}"
    lines = lines_of(packed(document=f"<w:d {W}>{body}</w:d>".encode()))
    assert [place for place, _ in lines] == ["table row 1", "paragraph 2"]
    assert "pulse" in lines[0][1]


@pytest.mark.parametrize("name", ["nothing.yaml", "nothing.docx", ".", "nothing.txt"])
def test_what_is_not_there_is_wrong_usage(tmp_path: Path, name: str) -> None:
    done = run("wording", tmp_path / name)
    assert (done.code, done.out) == (2, "")
    assert "Traceback" not in done.err


def test_text_that_is_not_utf_8_says_what_to_do(tmp_path: Path) -> None:
    (tmp_path / "x.txt").write_bytes(b"\xff\xfeP\x00")
    done = run("wording", tmp_path / "x.txt")
    assert (done.code, "save it as UTF-8" in done.err) == (2, True)
    (tmp_path / "y.txt").write_bytes("\ufeffMS 4 mg".encode())
    assert "y.txt:1:1: " in run("wording", tmp_path / "y.txt").out


def test_a_faulty_state_file_says_its_faults(tmp_path: Path) -> None:
    (tmp_path / "x.yaml").write_text(small("pulse: 1\n"))
    assert run("wording", tmp_path / "x.yaml", "--at", AT).code == 1


def test_draft_says_how_many_findings_the_free_text_holds(tmp_path: Path) -> None:
    path = tmp_path / "p.yaml"
    path.write_text(small("handovers: [{at: 2026-03-14 19:00, severity: stable}]\n"), encoding="utf-8")
    assert f"wording: 1 finding in the free text; handoff wording {path} shows them\n" in (
        run("draft", path, "--at", AT).out
    )
    path.write_text(small(), encoding="utf-8")
    assert "wording: nothing is pointed out in the free text\n" in run("draft", path, "--at", AT).out


@pytest.mark.parametrize("name", EXAMPLES)
def test_what_the_tool_writes_of_itself_is_on_none_of_the_lists(name: str) -> None:
    made = assessed(text_of_example(name), EXAMPLES[name])
    typed = {finding.quoted for finding in of_example(name)}
    for document in draft(made, name).values():
        found = check_lines(lines_of(document), RULES)
        groups = [one for one in found if RULES.rule(one.rule).group in ("do not use", "identity")]
        groups += [one for one in found if RULES.rule(one.rule).group in ("error-prone", "vague")]
        # A plus sign of a formula in words is a sum, not a list of medicines.
        assert [one for one in groups if one.quoted not in typed and one.rule != "plus-sign"] == []


def of_example(name: str) -> list[Finding]:
    text = text_of_example(name)
    return check_state(loaded(text, EXAMPLES[name]).state.root, setup().schema, text, RULES)


@pytest.mark.parametrize(
    "text", ["a", "1", "1,", "q ", "pulse ", " + ", "1.0", "@", "1/2 ", "dr ", "some ", "u/", "tolerated x "]
)
def test_no_text_keeps_the_search_busy(text: str) -> None:
    begun = time.monotonic()
    check_lines([("", text * (20_000 // len(text)))], RULES)
    assert time.monotonic() - begun < 2


def test_a_long_line_keeps_its_columns() -> None:
    line = "pain 3 of 10 at 17:00, " * 500 + "obs stable"
    (finding,) = check_lines([("", f"born 1985, record number 7 {line}")], RULES)
    assert finding.column == len(f"born 1985, record number 7 {line}") - 5
