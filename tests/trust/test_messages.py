"""Messages hold nothing of a patient, and what a document carries unseen is what its page shows."""

from __future__ import annotations

import json
import re
import sys
from io import BytesIO
from pathlib import Path
from zipfile import ZipFile

import pytest
from lxml import etree

from handoff.cli.edge import guarded
from handoff.document import draft, outside
from handoff.document.read_back import text_of
from handoff.policy import Policy
from handoff.state.clock import read_date
from tests.document.test_templates import edited, put_first
from tests.shift.helpers import EXAMPLES, assessed, run, text_of_example

NAMED = "Ferrandel"
AT = EXAMPLES["house-fire"]


def fail() -> None:
    try:
        raise KeyError(f"patient {NAMED}")
    except KeyError as error:
        raise ValueError(f"cannot read {NAMED}") from error


def fail_on_a_file() -> None:
    raise PermissionError(13, "Permission denied", f"/ward/{NAMED}.yaml")


@pytest.mark.parametrize("debug", [[], ["--debug"]])
@pytest.mark.parametrize("failing", [fail, fail_on_a_file])
def test_a_fault_of_the_tool_names_the_place_and_no_patient(
    failing: object, debug: list[str], monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(sys, "argv", ["handoff", "show", "x.yaml", *debug])
    with pytest.raises(SystemExit) as left:
        guarded(failing)  # type: ignore[arg-type]
    said = "".join(capsys.readouterr())
    assert left.value.code in (2, 4)
    assert NAMED not in said
    assert "your file was not changed" in said
    if failing is fail:
        assert ("test_messages.py:" in said) == bool(debug)
        assert "--debug" not in sys.argv


@pytest.mark.parametrize("where", ["handoff.assess.breach", "handoff.document.documents.handover"])
def test_a_fault_in_the_middle_of_a_command_holds_no_patient_data(
    where: str, monkeypatch: pytest.MonkeyPatch, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    from handoff.cli import app

    def broken(*given: object) -> None:
        raise RuntimeError(f"{NAMED} {given}")

    monkeypatch.setattr(where, broken)
    (tmp_path / "a.yaml").write_text(text_of_example("house-fire"), encoding="utf-8")
    monkeypatch.setattr(sys, "argv", ["handoff", "draft", str(tmp_path / "a.yaml"), "--at", AT, "--debug"])
    with pytest.raises(SystemExit):
        guarded(app)
    _, complained = capsys.readouterr()
    assert "RuntimeError" in complained
    assert NAMED not in complained


@pytest.mark.parametrize(
    "tag",
    [
        "{{ frame[identity.name] }}",
        "{{ identity[identity.name].x }}",
        "{{ identity.name / 0 }}",
        "{{ identity.name() }}",
        "{% include identity.name %}",
        "{{ identity.name.__class__ }}",
    ],
)
def test_what_is_said_of_a_template_repeats_no_value_of_the_page(tag: str, tmp_path: Path) -> None:
    edited(tmp_path, "handover.docx", put_first(tag))
    given = assessed(text_of_example("house-fire"), AT)
    trouble: list[str] = []
    from msgspec.structs import replace

    draft(replace(given, policy=Policy(templates=str(tmp_path))), "x", None, trouble)
    assert len(trouble) == 1
    assert NAMED not in trouble[0]
    assert outside.CHILD


def test_the_properties_of_a_document_hold_what_its_page_shows(tmp_path: Path) -> None:
    text = text_of_example("house-fire").replace(
        "record_number:", "national: 88-417, temporary: T-9, earlier: OLD-55, record_number:", 1
    )
    (tmp_path / "a.yaml").write_text(text, encoding="utf-8")
    assert run("draft", tmp_path / "a.yaml", "--at", AT, "--out", tmp_path / "out").code == 0
    assert run("transfer", tmp_path / "a.yaml", "--at", AT, "--out", tmp_path / "out").code in (0, 3)
    seen = 0
    for path in sorted((tmp_path / "out").rglob("*.docx")):
        page = re.sub(r"\s+", " ", text_of(path.read_bytes()) + headers(path))
        for value in unseen_values(path):
            seen += 1
            assert shown(value, page), f"{path.name}: {value}"
    assert seen > 8


def headers(path: Path) -> str:
    with ZipFile(path) as archive:
        parts = [name for name in archive.namelist() if re.match(r"word/(header|footer)", name)]
        return " ".join(" ".join(etree.fromstring(archive.read(name)).itertext()) for name in parts)


def unseen_values(path: Path) -> list[str]:
    """Every text of the properties that is not of the tool itself: a digest, its name, a kind of task."""
    ours = re.compile(
        r"(as drafted: )?[0-9a-f]{64}|handoff|[a-z_]+\.[a-z0-9_.]+|en-GB|\d|\d{4}-\d\d-\d\dT[\d:+Z]+"
    )
    with ZipFile(BytesIO(path.read_bytes())) as archive:
        found = []
        for name in archive.namelist():
            if name in ("docProps/core.xml", "docProps/custom.xml") or name.startswith("customXml/"):
                found += [text.strip() for text in etree.fromstring(archive.read(name)).itertext()]
    return [text for text in found if text and not ours.fullmatch(text)]


def shown(value: str, page: str) -> bool:
    if re.fullmatch(r"\d{4}-\d\d-\d\d", value):
        value = read_date(value).shown()
    return all(part in page for part in value.split(", made at "))


def test_items_json_holds_the_confidential_block_under_no_name(tmp_path: Path) -> None:
    block = "\nconfidential: {safeguarding: [{at: 2026-03-14 15:30, by: EM, note: SECRETWORD}]}\n"
    (tmp_path / "a.yaml").write_text(text_of_example("house-fire") + block, encoding="utf-8")
    done = run("show", tmp_path / "a.yaml", "--json", "--at", AT)
    assert json.loads(done.out)["patient"]["name"]
    assert "confidential" not in done.out
