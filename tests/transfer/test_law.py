"""What the law of the policy's country asks for is there to be written, filled where it is charted."""

from __future__ import annotations

from pathlib import Path

from tests.document.reading import cells, tables
from tests.shift.helpers import run
from tests.transfer.helpers import AT, text

CERTIFIED = """\
  certification:
    basis: physician certification
    certified_by: {name: Dr A. Quill, role: surgeon}
    at: 2026-03-14 18:30
    benefits: burn theatre and burn intensive care
"""


def fields(folder: Path, country: str, more: str = "") -> tuple[dict[str, str], str]:
    (folder / "fire.yaml").write_text(text(more), encoding="utf-8")
    (folder / "policy.yaml").write_text(f"policy: 1\ncountry: {country}\n", encoding="utf-8")
    done = run("transfer", folder / "fire.yaml", "--at", AT, "--policy", folder / "policy.yaml")
    assert done.code == 0, done.err
    made = folder / "fire-transfer-2026-03-14-1930" / "fire-2-transfer-summary.docx"
    found = [
        cells(table)
        for title, several in tables(made.read_bytes()).items()
        for table in several
        if title.startswith("United States")
    ]
    return (dict(found[0][1:]) if found else {}), done.err


def test_the_fields_stand_filled_where_charted_and_open_where_not(tmp_path: Path) -> None:
    found, _ = fields(tmp_path, "US", CERTIFIED)
    by_word = {label.split(":")[0].split(" of")[0]: value.rstrip("_ ") for label, value in found.items()}
    assert by_word["Ground"] == "physician certification"
    assert by_word["Certified by"] == "Dr A. Quill, surgeon, 18:30"
    assert by_word["Benefits expected"] == "burn theatre and burn intensive care"
    assert by_word["Risks"] == ""
    assert sum("(from memory)" in label for label in found) == 2


def test_a_country_whose_law_is_not_held_is_said_and_prints_nothing(tmp_path: Path) -> None:
    found, err = fields(tmp_path, "IE")
    assert found == {}
    assert "no fields are held for the law of IE" in err
