"""Writing: byte for byte, one writer at a time, and never over what another program wrote."""

from __future__ import annotations

import os
import socket
import subprocess
import sys
import time
from pathlib import Path

import pytest

from handoff.chart import locking
from handoff.chart.asking import Refused
from handoff.chart.charting import Charted
from handoff.chart.locking import lock_path, locked
from handoff.chart.storing import store
from handoff.files import CannotWrite
from tests.chart.charts import MOMENTS, NOW, charted, example, is_kept, rows, tree

BOM = b"\xef\xbb\xbf"
COMMENTED = """\
# top of the file
handoff: 1  # the format
clock: Europe/Dublin  # where we are

patient: {name: "Zoë \\"Zo\\" Ferrandel", born: '1985-02-11', identifiers: {record_number: 00451203}}  # wrist band
injury:   # what happened
    at:   2026-03-14 13:20   # by the neighbour
# between blocks
pain:
    doses:   # morphine first

    -   at: 2026-03-14 14:12  # by the crew
        drug: morphine
        dose: 4 mg
        route: IV

        # nothing since
observations:
  '2026-03-14':
      "14:15": {by: EM, pulse: 124 /min,  # felt
        resp: 26 /min ,
      }   # end of the row

      # quiet hour
      16:00: {
        by: EM, pulse: 118 /min }
# the end, without a newline"""


def made(text: str) -> Charted:
    return charted(text, "urine 35 mL", "give morphine 3 mg IV", "stridor absent")


@pytest.fixture
def patient(tmp_path: Path) -> Path:
    path = tmp_path / "ferrandel.yaml"
    path.write_bytes(COMMENTED.encode())
    return path


@pytest.mark.parametrize("newline", ["\n", "\r\n"], ids=["unix", "windows"])
@pytest.mark.parametrize("mark", [b"", BOM], ids=["no mark", "byte-order mark"])
def test_every_byte_that_was_there_is_there(tmp_path: Path, newline: str, mark: bytes) -> None:
    path = tmp_path / "f.yaml"
    old = mark + COMMENTED.replace("\n", newline).encode()
    path.write_bytes(old)
    store(path, made)
    store(path, lambda text: charted(text, "resp 20 /min", at="16:00", by="JO"))
    store(path, lambda text: charted(text, by="JO", correct="14:15 pulse 142 /min", why="misread"))
    store(path, lambda text: charted(text, by="JO", strike="14:12 morphine", why="wrong patient"))
    new = path.read_bytes()
    assert is_kept(old, new)
    assert new.startswith(mark)
    assert new.count(b"\r") == (new.count(b"\n") if newline == "\r\n" else 0)
    told = tree(new.decode("utf-8-sig"))
    assert [dose.get("struck", {}).get("by") for dose in told["pain"]["doses"]] == ["JO", None]
    assert told["observations"]["2026-03-14"]["14:15"]["pulse"]["value"] == "142 /min"
    assert [row["by"] for row in told["observations"]["2026-03-14"]["16:00"]] == ["EM", "JO"]
    assert told["patient"]["name"] == 'Zoë "Zo" Ferrandel'


@pytest.mark.parametrize("name", MOMENTS)
def test_the_invented_patients_keep_every_byte(tmp_path: Path, name: str) -> None:
    path = tmp_path / "f.yaml"
    old = example(name).encode()
    path.write_bytes(old)
    store(path, lambda text: charted(text, "urine 35 mL", "note seen", "lactate 2 mmol/L", now=MOMENTS[name]))
    assert is_kept(old, path.read_bytes())


def test_what_is_refused_leaves_the_file_as_it_was(patient: Path) -> None:
    before = patient.read_bytes()
    for phrase in ("pulse 118", "pulse 400 /min", "xyzzy"):
        with pytest.raises(Refused):
            store(patient, lambda text, phrase=phrase: charted(text, phrase))
    assert patient.read_bytes() == before
    assert list(patient.parent.iterdir()) == [patient]


def test_a_file_changed_by_an_editor_in_between_is_read_again(patient: Path) -> None:
    seen: list[str] = []

    def slow(text: str) -> Charted:
        seen.append(text)
        if len(seen) == 1:
            patient.write_bytes(patient.read_bytes() + b"\n# saved by the editor\n")
        return made(text)

    store(patient, slow)
    assert len(seen) == 2
    assert "# saved by the editor" in patient.read_text(encoding="utf-8")
    assert rows(patient.read_text(encoding="utf-8"))["19:30"]["urine"] == "35 mL"


def test_a_file_that_keeps_changing_is_left_alone(patient: Path) -> None:
    def always(text: str) -> Charted:
        patient.write_bytes(patient.read_bytes() + b"\n# again")
        return made(text)

    with pytest.raises(CannotWrite, match="is being changed by another program; save and close it there"):
        store(patient, always)
    assert b"35 mL" not in patient.read_bytes()


ONE_OF_EIGHT = """
import sys
from pathlib import Path
from handoff.chart.storing import store
from tests.chart.charts import charted

path, who = Path(sys.argv[1]), sys.argv[2]
for number in range(2):
    said = f"note {who} {number}", f"comfort turned by {who}"
    store(path, lambda text: charted(text, *said, at=f"15:0{number}", by=who))
    print(f"{who} {number}", flush=True)
"""


def test_eight_at_once_lose_nothing(patient: Path) -> None:
    before = patient.read_bytes()
    root = Path(__file__).resolve().parents[2]
    who = [f"N{number}" for number in range(8)]
    running = [
        subprocess.Popen(
            [sys.executable, "-c", ONE_OF_EIGHT, str(patient), one],
            cwd=root,
            stdout=subprocess.PIPE,
            text=True,
        )
        for one in who
    ]
    reported = [line for process in running for line in process.communicate()[0].split("\n") if line]
    assert [process.returncode for process in running] == [0] * 8
    assert len(reported) == 16
    told = tree(patient.read_text(encoding="utf-8"))
    day = told["observations"]["2026-03-14"]
    notes = [entry["note"] for number in range(2) for entry in day[f"15:0{number}"]]
    assert sorted(notes) == sorted(reported)
    assert len(told["pain"]["non_drug"]) == 16
    assert is_kept(before, patient.read_bytes())
    assert list(patient.parent.iterdir()) == [patient], "no lock is left"


def test_a_lock_whose_maker_is_gone_is_taken_at_once(patient: Path) -> None:
    gone = subprocess.Popen([sys.executable, "-c", ""])
    gone.wait()
    lock_path(patient).write_text(f"{socket.gethostname()} {gone.pid} abc", encoding="utf-8")
    begun = time.monotonic()
    with locked(patient):
        assert str(os.getpid()) in lock_path(patient).read_text(encoding="utf-8")
    assert time.monotonic() - begun < 5
    assert not lock_path(patient).exists()


@pytest.mark.parametrize("mark", ["another-machine 12 abc", ""], ids=["elsewhere", "cut short"])
def test_a_lock_that_stands_too_long_is_left_over(patient: Path, mark: str) -> None:
    lock_path(patient).write_text(mark, encoding="utf-8")
    with locked(patient, left_over_after_s=0.2):
        pass
    assert not lock_path(patient).exists()


def test_a_lock_that_is_held_is_waited_for_and_then_named(patient: Path) -> None:
    with locked(patient):
        with pytest.raises(CannotWrite) as refused, locked(patient, give_up_after_s=0.2):
            pass
        assert f"another program is writing {patient.name}" in str(refused.value)
        assert str(lock_path(patient)) in str(refused.value)
    with locked(patient):
        pass


def test_a_long_wait_is_told_once(patient: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(locking, "TELL_AFTER_S", 0.05)
    told: list[int] = []
    lock_path(patient).write_text("another-machine 12 abc", encoding="utf-8")
    with locked(patient, left_over_after_s=0.4, on_wait=lambda: told.append(1)):
        assert told == [1]


def test_a_lock_taken_over_is_not_removed_by_its_first_maker(patient: Path) -> None:
    with locked(patient):
        lock_path(patient).write_text("another-machine 12 abc", encoding="utf-8")
    assert lock_path(patient).exists()


def test_where_the_folder_cannot_be_written_it_is_said(
    patient: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def refuse(*_: object) -> int:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(locking.os, "open", refuse)
    with pytest.raises(CannotWrite, match="cannot be written; check that you may change files there"):
        store(patient, made)


def test_a_link_to_a_patient_in_the_same_folder_is_followed(patient: Path) -> None:
    link = patient.parent / "bed-3.yaml"
    link.symlink_to(patient)
    store(link, made)
    assert link.is_symlink()
    assert b"35 mL" in patient.read_bytes()


def test_a_link_out_of_the_folder_is_refused(patient: Path, tmp_path: Path) -> None:
    folder = tmp_path / "ward"
    folder.mkdir()
    (folder / "bed-3.yaml").symlink_to(patient)
    with pytest.raises(CannotWrite, match="is a link out of its folder"):
        store(folder / "bed-3.yaml", made)


def test_a_file_too_large_to_read_again_is_not_written(
    patient: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr("handoff.chart.charting.MAX_BYTES", len(COMMENTED.encode()) + 10)
    with pytest.raises(Refused, match="would grow beyond"):
        store(patient, made)


def test_a_reader_sees_the_old_or_the_new_file_whole(patient: Path) -> None:
    writer = subprocess.Popen(
        [sys.executable, "-m", "handoff", "chart", str(patient), "urine 35 mL", "--by", "EM", "--now", NOW],
        stdout=subprocess.DEVNULL,
    )
    seen = set()
    while writer.poll() is None:
        seen.add(patient.read_bytes())
    seen.add(patient.read_bytes())
    assert len(seen) <= 2
    assert writer.returncode == 0


def test_the_file_keeps_its_permissions(patient: Path) -> None:
    patient.chmod(0o640)
    store(patient, made)
    assert patient.stat().st_mode & 0o777 == 0o640
