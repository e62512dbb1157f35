"""A whole ward on one page: order, nothing confidential, one bad file never in the way."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Callable, Iterator
from concurrent.futures.process import BrokenProcessPool
from datetime import timedelta
from pathlib import Path

import pytest
from msgspec.structs import replace

from handoff.assess import Assessment
from handoff.document import ward_document
from handoff.document.read_back import text_of
from handoff.plugin import Findings, Flag, Item, Part, Urgency
from handoff.policy import Policy
from handoff.shift.ward import NO_FLAG, in_order, standing, ward_page
from tests.conftest import ROOT
from tests.core.helpers import AT, action, assessment_of, item, plugin_of
from tests.document.reading import cells, parts, tables
from tests.shift.helpers import EXAMPLES, assessed, run, small, text_of_example, write

PLANTED = "Zimtrindenglocke"


def patient(name: str, items: tuple[Item, ...] = (), overdue: int = 0) -> Assessment:
    def compute(case: object) -> Findings:
        late = case.now - timedelta(minutes=5)  # type: ignore[attr-defined]
        return Findings(items, tuple(action(f"one.a{n}", first_due=late) for n in range(overdue)))

    text = small(name=name)
    return assessment_of(plugin_of("one", compute), text=text)


def flagged(rank: int | None, flag: Flag = Flag.ACTION, key: str = "one.x") -> Item:
    return item(key, label=f"finding {rank}", rank=rank, flag=flag, shown="seen", part=Part.ASSESSMENT)


def test_rank_of_what_needs_action_then_overdue_then_name_decides_the_order() -> None:
    ward = [
        patient("Nobody Flagged"),
        patient("Gap Only", (flagged(10, Flag.NOT_RECORDED),)),
        patient("Without Rank", (flagged(None),)),
        patient("Later Killer", (flagged(40),)),
        patient("Zoe Equal", (flagged(20),), overdue=1),
        patient("Adam Equal", (flagged(20),), overdue=1),
        patient("More Overdue", (flagged(20),), overdue=3),
        patient("Airway First", (flagged(60), flagged(11, key="one.y"))),
    ]
    order = [one.row.patient for one in in_order(standing(made, made.state.name) for made in ward)]
    assert order == [
        "Airway First",
        "More Overdue",
        "Adam Equal",
        "Zoe Equal",
        "Later Killer",
        "Without Rank",
        "Gap Only",
        "Nobody Flagged",
    ]


def test_a_line_says_what_needs_action_first_and_how_many_more() -> None:
    row = standing(patient("A B", (flagged(60), flagged(11, key="one.y")), overdue=2), "A B").row
    assert (row.first, row.overdue) == ("Finding 11: seen (and 1 more)", "2")
    assert standing(patient("A B", (flagged(None),)), "A B").row.first == "Finding None"
    gap = standing(patient("A B", (flagged(31, Flag.NOT_RECORDED),)), "A B").row
    assert gap.first == "not recorded and needed first: Finding 31"
    assert standing(patient("A B"), "A B").row.first == NO_FLAG


def test_a_cut_finding_does_not_promise_more_further_on() -> None:
    long = replace(flagged(11), shown=f"{'look at the airway again ' * 6}; second clause")
    assert "further on" not in standing(patient("A B", (long,)), "A B").row.first


def test_what_could_not_be_computed_is_said_in_the_line() -> None:
    def broken(case: object) -> Findings:
        raise ZeroDivisionError

    made = assessment_of(plugin_of("one", broken))
    assert standing(made, "A B").row.first.endswith("NOT ALL COMPUTED")


def test_coming_events_of_the_shift_stand_by_time_and_the_rest_is_counted() -> None:
    def compute(case: object) -> Findings:
        now = case.now  # type: ignore[attr-defined]
        single = [
            action(f"one.{n}", text=f"event {n}", first_due=now + timedelta(hours=n), urgency=Urgency.TIMED)
            for n in (5, 4, 3, 2, 12, 13)
        ]
        rhythm = action("one.r", first_due=now, every=timedelta(hours=1), urgency=Urgency.TIMED)
        past = action("one.p", first_due=now - timedelta(hours=1), urgency=Urgency.TIMED)
        return Findings(actions=(*single, rhythm, past, action("one.s", urgency=Urgency.SHIFT)))

    row = standing(assessment_of(plugin_of("one", compute)), "A B").row
    assert row.next == "21:30 event 2; 22:30 event 3; 23:30 event 4; and 1 more"


def test_results_that_are_awaited_are_no_events() -> None:
    row = standing(assessed(text_of_example("house-fire"), AT), "A B").row
    assert "first full dressing" in row.next
    assert "Chase" not in row.next


def test_the_severity_is_the_nurses_word_and_missing_facts_say_so() -> None:
    row = standing(assessed(text_of_example("house-fire"), AT), "A B").row
    assert (row.severity, row.place) == ("sick, may get worse", "Harrow Ward, bed 3")
    bare = standing(patient("A B"), "A B").row
    assert (bare.severity, bare.place) == ("not recorded by the nurse", "location not recorded")
    assert bare.next == "none planned in the shift"


@pytest.fixture
def ward(tmp_path: Path) -> Path:
    folder = tmp_path / "patients"
    (folder / "bay 2").mkdir(parents=True)
    for name in EXAMPLES:
        place = folder / "bay 2" if name == "toddler-scald" else folder
        (place / f"{name}.yaml").write_text(text_of_example(name), encoding="utf-8")
    return folder


MOMENT = "2026-10-02 03:40"


def test_every_file_in_and_below_the_folder_is_in_the_table(ward: Path) -> None:
    done = run("ward", ward, "--at", MOMENT)
    assert done.code == 0, done.err
    out = " ".join(done.out.replace("|", " ").split())
    assert out.startswith("Burn ward, Fri 2 Oct 2026 03:40")
    for name in ("Lumi Aramaki", "Marek Szolnoki", "Tomas Ferrandel", "unknown"):
        assert name in out
    assert max(map(len, done.out.splitlines())) <= 80
    assert "\x1b" not in done.out


def test_reading_side_by_side_gives_the_same_page(ward: Path) -> None:
    write(ward, bad="handoff: 1\n")
    assert run("ward", ward, "--at", MOMENT) == run("ward", ward, "--at", MOMENT, "--jobs", "3")


def test_a_reading_process_that_is_lost_costs_no_patient(ward: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    class Broken:
        def __init__(self, jobs: int) -> None:
            pass

        def __enter__(self) -> Broken:
            return self

        def __exit__(self, *_: object) -> None:
            pass

        def map(self, read: Callable[[Path], object], paths: list[Path]) -> Iterator[object]:
            yield read(paths[0])
            raise BrokenProcessPool

    alone = run("ward", ward, "--at", MOMENT)
    monkeypatch.setattr("handoff.shift.many.ProcessPoolExecutor", Broken)
    assert run("ward", ward, "--at", MOMENT, "--jobs", "2") == alone


def test_nothing_confidential_is_on_the_page(ward: Path, tmp_path: Path) -> None:
    planted = text_of_example("toddler-scald").replace("Account given by both parents", PLANTED)
    planted = planted.replace("told: named nurse at 11:00", f"told: {PLANTED}")
    assert planted.count(PLANTED) == 2
    (ward / "bay 2/toddler-scald.yaml").write_text(planted, encoding="utf-8")
    done = run("ward", ward, "--at", MOMENT, "--out", tmp_path)
    assert done.code == 0, done.err
    assert "Aramaki" in done.out
    assert PLANTED not in done.out + done.err
    for name, content in parts((tmp_path / "ward.docx").read_bytes()).items():
        assert PLANTED.encode() not in content, name


def test_one_bad_file_is_listed_and_the_rest_is_there(ward: Path) -> None:
    write(ward, bad="handoff: 1\n", unit="policy: 1\n")
    done = run("ward", ward, "--at", MOMENT)
    assert done.code == 1
    assert "COULD NOT BE READ AND IS NOT IN THE TABLE" in done.out
    assert "bad.yaml:1:1:" in done.out.replace("\n ", "")
    assert "4 patients" in " ".join(done.out.split())
    assert "(a policy file)" in done.err


def test_who_could_be_taken_for_whom_stands_above_the_table(ward: Path) -> None:
    write(ward, twin=small(number="HSH-204518"), alike=small(name="Marek Szolnaki", number="X-9"))
    out = " ".join(run("ward", ward, "--at", MOMENT).out.split())
    assert "the same patient twice: Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518" in out
    assert "two patients with similar names: " in out
    assert out.index("similar names") < out.index("patient, place")


def test_the_word_page_holds_the_same_table(ward: Path, tmp_path: Path) -> None:
    write(ward, bad="handoff: 1\n")
    done = run("ward", ward, "--at", MOMENT, "--out", tmp_path / "new")
    assert done.code == 1
    content = (tmp_path / "new/ward.docx").read_bytes()
    (table,) = tables(content)["Patient and place"]
    rows = cells(table)
    assert rows[0] == ["Patient and place", "Severity", "Needs action first", "Overdue", "Next"]
    assert len(rows) == 5
    assert "Kestrel Ward, cot 2" in [row[0].split("\n")[1] for row in rows[1:]]
    page = text_of(content)
    assert page.index("bad.yaml") < page.index("Lumi Aramaki")
    assert "4 patients" in page


def test_the_word_page_is_the_same_for_the_same_ward_and_takes_any_text() -> None:
    made = patient("<Ada> & \u05d0\u05d1")
    ones = [standing(made, "<Ada> & \u05d0\u05d1, born 11 Feb 1985")]
    page = ward_page(ones, "Unit <1>", ("a & b",), ("x <y>",), ())
    first, second = (ward_document(page, made.now, "0" * 64, Policy()) for _ in range(2))
    assert first == second
    assert "<Ada> & \u05d0\u05d1" in text_of(first)
    assert "Unit <1>" in text_of(first)


def test_a_folder_that_is_none_and_a_folder_without_patients_are_wrong_usage(
    ward: Path, tmp_path: Path
) -> None:
    assert run("ward", ward / "house-fire.yaml").code == 2
    (tmp_path / "empty").mkdir()
    assert run("ward", tmp_path / "empty").code == 2
    assert run("ward", ward, "--jobs", "0").code == 2
    assert run("ward", ward, "--at", "later").code == 2


def test_where_no_patient_can_be_read_no_page_is_written(tmp_path: Path) -> None:
    write(tmp_path, bad="handoff: 1\n")
    done = run("ward", tmp_path, "--out", tmp_path / "out")
    assert (done.code, (tmp_path / "out").exists()) == (1, False)


@pytest.mark.skipif(os.name == "nt", reason="a pseudo-terminal is needed")
def test_the_progress_bar_is_on_a_terminal_alone(ward: Path) -> None:
    import pty

    command = [sys.executable, "-m", "handoff", "ward", str(ward), "--at", MOMENT]
    above, below = pty.openpty()
    environment = {**os.environ, "TERM": "xterm", "COLUMNS": "80"}
    done = subprocess.run(
        command, stdout=subprocess.PIPE, stderr=below, env=environment, cwd=ROOT, check=False
    )
    os.close(below)
    seen = os.read(above, 100_000).decode()
    os.close(above)
    assert done.returncode == 0
    assert "reading" in seen
    assert b"reading" not in done.stdout
    piped = subprocess.run(command, capture_output=True, cwd=ROOT, check=False)
    assert (piped.stdout, piped.stderr) == (done.stdout, b"")
