"""One whole shift in the terminal: begun, charted over midnight, drafted, ticked, collected, transferred."""

from __future__ import annotations

import json
import re
import sys
from pathlib import Path

import pytest

from tests.begin.test_begin import ANSWERS
from tests.chart.charts import is_kept, tree
from tests.chart.run import in_terminal
from tests.chart.run import run as run_apart
from tests.collect.filling import filled
from tests.document.reading import tags
from tests.shift.helpers import run

pytestmark = pytest.mark.skipif(sys.platform == "win32", reason="a pseudo-terminal is needed")

WHO = "Tomas Ferrandel, born 11 Feb 1985, record number 00451203"
EVENING, NIGHT, MORNING = "2026-03-14", "2026-03-15", "2026-03-15 07:00"
ENTRIES: list[tuple[str, str, list[str]]] = [
    (f"{EVENING} 19:20", "pulse 124 /min", ["bp 104/62 mmHg", "resp 26 /min", "spo2 97 %"]),
    (f"{EVENING} 19:25", "line in IV cannula 18 G at left forearm", []),
    (f"{EVENING} 19:30", "start R1 lactated Ringer's 600 mL/h resuscitation", []),
    (f"{EVENING} 19:40", "give morphine 4 mg IV", ["pain 8 numeric at rest"]),
    (f"{EVENING} 20:00", "line in urinary catheter 14 Fr at urethra drained 180 mL", []),
    (f"{EVENING} 20:30", "pain 5 numeric at rest", ["sedation poss 2"]),
    (f"{EVENING} 21:00", "urine 35 mL", ["pulse 118 /min"]),
    (f"{EVENING} 21:30", "event escharotomy requested at right arm: Doppler weaker", []),
    (f"{EVENING} 22:00", "urine 30 mL", ["temp 36.4 C tympanic"]),
    (f"{EVENING} 22:30", "answered escharotomy requested: not now, hourly Doppler", []),
    (f"{EVENING} 23:00", "urine 28 mL", ["pulse 116 /min", "R1 running"]),
    (f"{EVENING} 23:30", "start pca P1 morphine 1 mg lockout 5 min IV", []),
    (f"{NIGHT} 00:05", "urine 41 mL", ["pulse 112 /min"]),
    (f"{NIGHT} 01:00", "pca P1 delivered 6 mg 9 presses 6 given", ["pain 3 numeric at rest"]),
    (f"{NIGHT} 02:00", "urine 45 mL", ["bp 110/64 mmHg"]),
    (f"{NIGHT} 03:00", "line out IV cannula 18 G", ["line in IV cannula 16 G at left antecubital fossa"]),
    (f"{NIGHT} 05:00", "urine 44 mL", ["note sister telephoned"]),
]


def chart(file: Path, now: str, *phrases: str, code: int = 0, **asked: str) -> str:
    """Chart at ``now``; return what was said. What stood in the file must still stand there, byte for byte."""
    before = file.read_bytes()
    options = [part for name, value in asked.items() for part in (f"--{name}", value)]
    done = run("chart", str(file), *phrases, "--by", "EM", "--now", now, *options)
    assert done.code == code, (phrases, done.out, done.err)
    if code == 0:
        assert done.out.startswith(WHO), "every write names the patient first"
        assert file.read_bytes() != before
    else:
        assert file.read_bytes() == before
    assert is_kept(before, file.read_bytes())
    return done.out + done.err


def test_a_whole_shift_from_a_new_file_to_the_transfer(tmp_path: Path) -> None:
    file = tmp_path / "ferrandel.yaml"
    code, screen = in_terminal({**ANSWERS, "Write this to": "y"}, "begin", file, "--now", f"{EVENING} 19:10")
    assert code == 0 and WHO in screen

    charted = 0
    for now, first, others in ENTRIES:
        chart(file, now, first, *others)
        charted += 1 + len(others)
    _slips(file)
    _over_midnight(file)
    assert charted + 4 >= 30

    due = run("due", str(file), "--at", f"{NIGHT} 05:30")
    assert due.code == 0 and "00451203" in due.out
    document = _draft_and_tick(file, tmp_path)
    digest = _digest(file, MORNING)
    code, screen = in_terminal(
        {"ticks into": "y", "tick into": "y"}, "collect", document, file, "--now", MORNING
    )
    assert code == 0 and WHO in screen and "by JO" in screen
    assert _digest(file, MORNING) == digest, "ticks change no figure"
    collected = tree(file.read_text(encoding="utf-8"))["collected"]
    assert [entry["by"] for entry in collected] == ["JO", "JO"]
    assert {"ref", "task", "plan", "due"} <= collected[0].keys()
    assert "ticked done" in run("due", str(file), "--at", MORNING).out

    _second_shift(file, tmp_path)


def _slips(file: Path) -> None:
    """What a tired hand types is refused with its cure, or corrected and kept readable."""
    assert "nothing was written" in chart(file, f"{NIGHT} 05:05", "urine 35", code=2)
    assert "nothing was written" in chart(file, f"{NIGHT} 05:05", "puls 118 /min", code=2)
    assert "nothing was written" in chart(file, f"{NIGHT} 05:05", "pulse 250 /min", code=2)
    chart(file, f"{NIGHT} 05:06", correct="05:00 urine 40 mL", why="misread")
    chart(file, f"{NIGHT} 05:07", strike="02:00 bp", why="entered in error, wrong patient")
    text = file.read_text(encoding="utf-8")
    assert all(said in text for said in ("44 mL", "40 mL", "corrects: {value: ", "why: misread"))
    assert "wrong patient" in text and "110/64 mmHg" in text


def _over_midnight(file: Path) -> None:
    """After midnight an entry for 23:50 is yesterday's: asked in a terminal, refused where nobody can answer."""
    said = chart(file, f"{NIGHT} 05:08", "pulse 117 /min", code=2, at="23:50")
    assert "yesterday" in said
    before = file.read_bytes()
    arguments = ("chart", file, "pulse 117 /min", "--at", "23:50", "--by", "EM", "--now", f"{NIGHT} 05:08")
    code, screen = in_terminal({"yesterday?": "y"}, *arguments)
    assert code == 0 and "late entry" in screen
    assert is_kept(before, file.read_bytes())
    assert tree(file.read_text(encoding="utf-8"))["observations"][EVENING]["23:50"]["pulse"] == "117 /min"


def _draft_and_tick(file: Path, folder: Path) -> Path:
    drafted = run("draft", str(file), "--at", f"{NIGHT} 05:30", "--out", str(folder))
    assert drafted.code in (0, 3) and WHO in drafted.out
    document = folder / "ferrandel-care-plan.docx"
    boxes = [tag[4:] for tag in tags(document.read_bytes()) if re.fullmatch(r"row:[A-W]\d+:0[67]\d\d", tag)]
    early = [box for box in boxes if box.rpartition(":")[2] < "0655"][:2]
    assert len(early) == 2
    beside = {box: f"{box[-4:-2]}:{box[-2:]} JO" for box in early}
    document.write_bytes(filled(document.read_bytes(), beside))
    return document


def _second_shift(file: Path, folder: Path) -> None:
    items = folder / "ferrandel.items.json"
    chart(file, f"{NIGHT} 08:00", "urine 50 mL", "pulse 108 /min", "pain 2 numeric at rest")
    since = run("since", str(file), str(items), "--at", f"{NIGHT} 08:05")
    assert since.code == 0 and "108 /min" in since.out
    note = run("note", str(file), "--from", "07:00", "--at", f"{NIGHT} 08:05")
    assert note.code == 0 and "108 /min" in note.out
    packet = run(
        "transfer",
        str(file),
        "--to",
        "burn-centre",
        "--at",
        f"{NIGHT} 08:10",
        "--out",
        str(folder / "packets"),
    )
    assert packet.code in (0, 3), packet.err
    assert WHO in packet.out and any((folder / "packets").rglob("*.docx"))
    checked = run("check", str(file), "--at", f"{NIGHT} 08:10")
    assert checked.code == 0, checked.out


def _digest(file: Path, at: str) -> str:
    return str(json.loads(run("show", str(file), "--json", "--at", at).out)["digest"])


def test_writing_commands_name_the_patient_and_a_similar_neighbour(tmp_path: Path) -> None:
    text = (
        "handoff: 1\nclock: Europe/Dublin\npatient: {name: NAME, born: 1990-01-02, "
        "identifiers: {record_number: NUMBER}}\ninjury: {at: 2026-03-14 13:20}\n"
    )
    one, other = tmp_path / "one.yaml", tmp_path / "other.yaml"
    one.write_text(text.replace("NAME", "Anna Berg").replace("NUMBER", "A-1"), encoding="utf-8")
    other.write_text(text.replace("NAME", "Anne Berg").replace("NUMBER", "A-2"), encoding="utf-8")
    at = "2026-03-14 19:30"
    for arguments in (
        ("chart", one, "pulse 118 /min", "--by", "EM", "--now", at),
        ("draft", one, "--at", at, "--out", tmp_path / "out"),
        ("note", one, "--at", at, "--out", tmp_path / "out"),
        ("transfer", one, "--at", at, "--out", tmp_path / "out"),
    ):
        done = run_apart(*arguments)
        assert done.returncode in (0, 3), done.stderr
        assert "Anna Berg, born 2 Jan 1990, record number A-1" in done.stdout
        assert "two patients with similar names: Anna Berg" in done.stderr, arguments[0]
