"""Documents of the examples as a printer would get them."""

from __future__ import annotations

import re
import subprocess
from collections.abc import Mapping
from functools import lru_cache
from pathlib import Path

from handoff.document import draft, note_document, ward_document
from handoff.document.confidential import confidential_sheet
from handoff.policy import Policy
from handoff.shift.note import shift_note
from handoff.shift.ward import digest_of, standing, ward_page
from tests.conftest import ROOT, needs_tool
from tests.shift.helpers import EXAMPLES, assessed, text_of_example
from tests.transfer.helpers import made as leaving


@lru_cache(maxsize=1)
def example_documents() -> dict[str, bytes]:
    """Return the handover and the care plan of every example by file name."""
    made: dict[str, bytes] = {}
    for name, at in EXAMPLES.items():
        made |= draft(assessed(text_of_example(name), at), name)
    return made


@lru_cache(maxsize=1)
def further_patients() -> dict[str, bytes]:
    """Return the handover and the care plan of every patient in ``examples/patients`` by file name."""
    made: dict[str, bytes] = {}
    for path in sorted((ROOT / "examples/patients").glob("*.yaml")):
        text = path.read_text(encoding="utf-8")
        (moment,) = re.findall(r'^# .*--at "([^"]+)"', text, flags=re.MULTILINE)
        made |= draft(assessed(text, moment), path.stem)
    return made


@lru_cache(maxsize=1)
def all_documents() -> dict[str, bytes]:
    """Return every document that can be made of the examples by file name, notes and the ward page too."""
    given = {name: assessed(text_of_example(name), at) for name, at in EXAMPLES.items()}
    patients = [standing(one, one.state.name) for one in given.values()]
    page = ward_page(patients, "Invented ward", ("one and another",), ("a file",), ("a plugin",))
    made = {
        "ward.docx": ward_document(
            page, max(one.now for one in given.values()), digest_of(patients), Policy()
        )
    }
    for name, one in given.items():
        made[f"{name}-note.docx"] = note_document(shift_note(one, one.now - one.policy.shift_length), one)
        sheet = confidential_sheet(one)
        if sheet:
            made[f"{name}-confidential.docx"] = note_document(sheet, one)
    packet = {
        f"packet-{name}": content for name, content in leaving().files.items() if name.endswith(".docx")
    }
    return {**example_documents(), **made, **packet}


def converted(contents: Mapping[str, bytes], kind: str, folder: Path) -> dict[str, Path]:
    """Return documents turned into ``kind`` (pdf, docx) by an office program, by their stems.

    Skips the test where the program is missing; that fails where every test must run.
    """
    office = needs_tool("soffice")
    source, target = folder / "source", folder / kind
    source.mkdir(parents=True, exist_ok=True)
    for name, content in contents.items():
        (source / name).write_bytes(content)
    command = [office, f"-env:UserInstallation={(folder / 'profile').as_uri()}", "--headless"]
    command += ["--convert-to", kind, "--outdir", str(target), *(str(source / name) for name in contents)]
    subprocess.run(command, check=True, capture_output=True, timeout=300)
    return {Path(name).stem: target / f"{Path(name).stem}.{kind}" for name in contents}


def pages(pdf: Path) -> list[str]:
    """Return the text of each page of a PDF file."""
    command = [needs_tool("pdftotext"), "-layout", str(pdf), "-"]
    said = subprocess.run(command, check=True, capture_output=True, timeout=60).stdout.decode()
    return said.split("\f")[:-1]
