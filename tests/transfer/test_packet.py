"""The packet is whole, says what is missing, and can be checked by programs that are not ours."""

from __future__ import annotations

import hashlib
import shutil
import subprocess
import zipfile
from io import BytesIO
from pathlib import Path

import pytest

from handoff.transfer.leaving import state_text
from tests.document.reading import cells, headings, tables, tags
from tests.shift.helpers import run
from tests.transfer.helpers import AT, CONFIDENTIAL, SECRET, document, made, said, text


@pytest.fixture
def place(tmp_path: Path) -> Path:
    (tmp_path / "fire.yaml").write_text(text(), encoding="utf-8")
    return tmp_path


def transfer(place: Path, *more: object, file: str = "fire.yaml", at: str = AT) -> tuple[int, str, str, Path]:
    done = run("transfer", place / file, "--at", at, "--out", place / "out", *more)
    return (
        done.code,
        done.out,
        done.err,
        place / "out" / f"fire-transfer-{at.replace(' ', '-').replace(':', '')}",
    )


def test_one_folder_and_one_file_to_send_hold_the_same(place: Path) -> None:
    code, out, err, folder = transfer(place)
    assert (code, err) == (0, "")
    assert out.splitlines()[0] == "Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518"
    with zipfile.ZipFile(f"{folder}.zip") as archive:
        assert archive.testzip() is None
        held = {name.partition("/")[2]: archive.read(name) for name in archive.namelist()}
    assert held == {path.name: path.read_bytes() for path in folder.iterdir()}
    assert sorted(held) == [
        "contents.txt",
        "fire-1-phone-report.docx",
        "fire-2-transfer-summary.docx",
        "fire-3-journey-sheet.docx",
        "fire-4-working-and-sources.docx",
        "fire.items.json",
        "fire.yaml",
    ]


def test_the_same_file_and_moment_give_the_same_bytes() -> None:
    first = made().zipped()
    made.cache_clear()
    assert made().zipped() == first


@pytest.mark.skipif(shutil.which("sha256sum") is None, reason="no sha256sum on this machine")
def test_another_program_finds_every_checksum_right_and_a_changed_file_wrong(place: Path) -> None:
    _, _, _, folder = transfer(place)
    command = ["sha256sum", "--strict", "-c", "contents.txt"]
    done = subprocess.run(command, cwd=folder, capture_output=True, text=True, check=False)
    assert (done.returncode, done.stdout.count(": OK")) == (0, 6)
    (folder / "fire.items.json").write_bytes(b"{}")
    assert subprocess.run(command, cwd=folder, capture_output=True, check=False).returncode == 1


def test_every_file_is_in_the_contents_list() -> None:
    files = made().files
    listed = [line for line in files["contents.txt"].decode().splitlines() if not line.startswith("#")]
    assert listed == [
        f"{hashlib.sha256(content).hexdigest()}  {name}"
        for name, content in files.items()
        if name != "contents.txt"
    ]


def test_the_summary_opens_with_the_airway_and_its_plan() -> None:
    first = said("transfer-summary")
    assert first.index("AIRWAY NOT SECURED") < first.index("NOT RECORDED, and this receiver")
    plan = dict(cells(tables(document("transfer-summary"))["Airway"][0])[1:])
    assert plan["Decided by"] == "Dr B. Osei, anaesthetics, 19:20"
    assert plan["Who can intubate on board"] == "Dr S. Brandt, retrieval doctor"
    assert plan["Difficulty"].startswith("swelling of the face")
    assert plan["Fallback on the road"].startswith("stop, sit up")


def test_without_a_plan_the_summary_says_not_recorded_and_never_that_there_is_none() -> None:
    more = text().partition("\ntransfer:\n")[0] + "\n"
    from handoff.transfer.packet import packet
    from handoff.transfer.profile import load_profile
    from handoff.work import assess_loaded
    from tests.shift.helpers import loaded, setup

    assessment = assess_loaded(loaded(more, AT), setup())
    found = packet(assessment, load_profile("burn-centre"), setup().parameters, "fire", None)
    from handoff.document.read_back import text_of

    summary = str(text_of(found.files["fire-2-transfer-summary.docx"]))
    assert "AIRWAY SECURED OR NOT: not recorded" in summary
    assert "Held or refused: not recorded" in summary
    assert "fire.yaml" not in found.files


def test_what_this_receiver_misses_stands_above_the_telephone_report_and_on_the_screen(place: Path) -> None:
    head = "NOT RECORDED, and this receiver asks for it: find it out or say so"
    rows = cells(tables(document("phone-report"))[head][0])
    assert ["Sites: Circumferential burns"] in rows
    report = said("phone-report")
    assert report.index(head) < report.index("Read aloud")
    assert "  Sites: Circumferential burns\n" in transfer(place)[1]


def test_the_telephone_report_can_be_read_from_top_to_bottom_in_the_order_of_the_profile() -> None:
    rows = cells(tables(document("phone-report"))["Said"][0])
    labels = [row[1] for row in rows[1:]]
    assert labels[:3] == ["Airway plan for the journey", "Weight", "Time of injury"]
    assert labels[-1] == "Caller and direct number"
    assert all(row[2] for row in rows)
    assert sum(tag.startswith("said:") for tag in tags(document("phone-report"))) == len(labels)


def test_medicines_show_the_last_dose_of_each_and_what_was_held() -> None:
    found = tables(document("transfer-summary"))
    doses = [row[:3] for row in cells(found["Medicine"][0])[1:]]
    assert doses[:2] == [["morphine", "3 mg IV", "19:10"], ["paracetamol", "1 g IV", "14:30"]]
    assert cells(found["Not given"][0])[1] == ["metformin", "held", "18:00", "not eating, lactate raised"]


def test_pumps_oxygen_advice_and_pending_are_on_the_summary() -> None:
    found = tables(document("transfer-summary"))
    assert cells(found["Pump at departure"][0])[1][2:4] == ["520 mL/h", "1,400 mL"]
    oxygen = dict(cells(found["Oxygen"][0])[1:])
    assert oxygen["Oxygen lasts"].startswith("3 h 1 min at 15 L/min")
    assert "2,720 L / 15 L/min = 181 min" in said("transfer-summary")
    assert oxygen["Assumed"].startswith("The flow stays as it is")
    assert "Lutman" in oxygen["Sources"]
    assert cells(found["Time"][0])[1][:2] == ["14:50", "on-call burns registrar"]
    assert cells(found["Result awaited"][0])[1][0].startswith("repeat carboxyhaemoglobin")


def test_the_summary_holds_burn_chart_fluid_by_the_hour_and_the_signatures() -> None:
    assert "Burn chart, fluid and trends" in headings(document("transfer-summary"), 1)
    found = tables(document("transfer-summary"))
    assert len(cells(found["Hour"][0])) == 8
    signed = [row[0] for row in cells(found["Signed for"][0])]
    assert "Responsibility taken by the receiver" in signed


def test_the_crew_has_blank_lines_for_longer_than_the_journey_and_a_checklist() -> None:
    rows = cells(tables(document("journey-sheet"))["Time"][0])
    assert [row[0].split(")")[0] for row in rows[1:3]] == ["(20:15", "(20:30"]
    assert len(rows) == 13
    assert all(not cell.strip() for row in rows[1:] for cell in row[1:])
    assert len(cells(tables(document("journey-sheet"))["Done"][0])) == 21


def test_confidential_entries_stay_unless_they_are_chosen(place: Path) -> None:
    (place / "fire.yaml").write_text(text(CONFIDENTIAL), encoding="utf-8")
    code, _, _, folder = transfer(place)
    assert code == 0
    for path in folder.iterdir():
        content = path.read_bytes()
        parts = [content]
        if path.suffix == ".docx":
            with zipfile.ZipFile(BytesIO(content)) as file:
                parts = [file.read(name) for name in file.namelist()]
        assert not any(SECRET.encode() in part for part in parts), path.name
        assert not any(b"confidential:" in part for part in parts), path.name
    code, _, _, again = transfer(place, "--confidential", at="2026-03-14 19:31")
    assert code == 0
    assert (again / "fire-confidential.docx").is_file()
    assert SECRET in (again / "fire.yaml").read_text(encoding="utf-8")
    with zipfile.ZipFile(again / "fire-2-transfer-summary.docx") as file:
        assert not any(SECRET.encode() in file.read(name) for name in file.namelist())


@pytest.mark.parametrize("before", ["clock: ", "patient:\n", "events:\n", ""])
def test_the_copy_of_the_state_file_lacks_the_confidential_block_its_remarks_and_nothing_else(
    before: str,
) -> None:
    block = f"# the mother was not told\n{CONFIDENTIAL}# ask the charge nurse\n"
    plain = text()
    whole = plain.replace(f"\n{before}", f"\n{block}{before}", 1) if before else plain + block
    assert whole != plain
    assert state_text(whole, "f.yaml", with_confidential=False) == plain
    assert state_text(whole, "f.yaml", with_confidential=True) == whole


def test_a_block_that_cannot_be_cut_out_keeps_the_file_here() -> None:
    flow = "{handoff: 1, clock: Europe/Dublin, confidential: {safeguarding: [{note: x}]}, injury: {}}\n"
    assert state_text(flow, "f.yaml", with_confidential=False) is None


def test_faults_are_refused_and_nothing_is_written(place: Path) -> None:
    wrong = text().replace("can_intubate: yes", "can_intubate: maybe")
    (place / "fire.yaml").write_text(wrong, encoding="utf-8")
    code, _, err, folder = transfer(place)
    assert code == 1
    assert "transfer.escort" in err
    assert not folder.exists()


def test_a_packet_that_has_left_is_never_written_over(place: Path) -> None:
    _, _, _, folder = transfer(place)
    (folder / "photograph.jpg").write_bytes(b"x")
    code, _, err, _ = transfer(place)
    assert code == 2
    assert "photograph.jpg" in err
    assert transfer(place, at="2026-03-14 19:31")[0] == 0


def test_without_identifiers_nobody_is_named_and_no_state_file_leaves(place: Path) -> None:
    code, out, _, _ = transfer(place, "--deidentified")
    assert code == 0
    folder = place / "out" / "case-transfer"
    assert "taken out:" in out
    names = {path.name for path in folder.iterdir()}
    assert not any("yaml" in name or "fire" in name for name in names)
    for path in [*folder.iterdir(), Path(f"{folder}.zip")]:
        content = path.read_bytes()
        parts = [content]
        if path.suffix == ".docx":
            with zipfile.ZipFile(BytesIO(content)) as file:
                parts = [file.read(name) for name in file.namelist()]
        for secret in (
            "Ferrandel",
            "Fenwick",
            "Carrow",
            "Brandt",
            "Osman",
            "Quill",
            "HSH-204518",
            "2026-03",
            "Mar 2026",
        ):
            assert not any(secret.encode() in part for part in parts), (path.name, secret)
    for other in (("--confidential",), ("--addendum", folder)):
        assert transfer(place, "--deidentified", *other)[0] == 2


def test_protected_nothing_is_written_without_a_terminal(place: Path) -> None:
    code, _, err, folder = transfer(place, "--protect")
    assert code == 2
    assert "terminal" in err
    assert not folder.exists()


def test_protected_every_file_opens_with_the_password_alone(
    place: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    import msoffcrypto
    import pyzipper

    password = "kettle harbour nine ropes"  # noqa: S105 (of a test)
    monkeypatch.setattr("handoff.privacy.protect.ask_password", lambda: password)
    code, _, _, folder = transfer(place, "--protect")
    assert code == 0
    for path in folder.glob("*.docx"):
        locked = msoffcrypto.OfficeFile(BytesIO(path.read_bytes()))
        assert locked.is_encrypted()
        opened = BytesIO()
        locked.load_key(password=password)
        locked.decrypt(opened)
        assert zipfile.is_zipfile(opened)
    assert not list(folder.glob("*.yaml")) + list(folder.glob("*.json")) + list(folder.glob("*.txt"))
    with pyzipper.AESZipFile(f"{folder}.zip") as bundle:
        with pytest.raises(RuntimeError):
            bundle.read(bundle.namelist()[0])
        bundle.setpassword(password.encode())
        with zipfile.ZipFile(BytesIO(bundle.read(bundle.namelist()[0]))) as inside:
            assert "fire.yaml" in inside.namelist()
