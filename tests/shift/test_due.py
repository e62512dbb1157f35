"""What is due, for one patient and for many."""

from __future__ import annotations

import subprocess
import sys
from datetime import timedelta
from pathlib import Path

import pytest

from handoff.plugin import Findings, Urgency
from handoff.shift.due import Group, due_list, overdue_count
from tests.conftest import ROOT
from tests.core.helpers import AT, action, assessment_of, plugin_of
from tests.shift.helpers import EXAMPLES, assessed, run, small, text_of_example, write

HOUR = timedelta(hours=1)


def listed(**given: object) -> list[tuple[Group, str]]:
    def compute(case: object) -> Findings:
        offset = given.pop("minutes", None)
        first = None if offset is None else case.now + timedelta(minutes=int(str(offset)))  # type: ignore[attr-defined]
        return Findings(actions=(action("one.a", first_due=first, **given),))

    made = due_list(assessment_of(plugin_of("one", compute)))
    return [(line.group, line.time) for line in made.lines]


@pytest.mark.parametrize(
    ("given", "expected"),
    [
        ({"minutes": -1}, [(Group.OVERDUE, "since 19:29")]),
        ({"minutes": -1, "urgency": Urgency.NOW}, [(Group.OVERDUE, "since 19:29")]),
        ({"minutes": 0}, [(Group.HOUR, "19:30")]),
        ({"minutes": 60}, [(Group.HOUR, "20:30")]),
        ({"minutes": 61}, [(Group.SHIFT, "20:31")]),
        ({"minutes": 12 * 60 - 1}, [(Group.SHIFT, "07:29 on 15 Mar")]),
        ({"minutes": 12 * 60}, []),
        ({"minutes": 90, "every": HOUR}, [(Group.SHIFT, "21:00")]),
        ({"minutes": -30, "every": HOUR}, [(Group.OVERDUE, "since 19:00")]),
        ({"every": HOUR}, [(Group.HOUR, "19:30")]),
        ({"urgency": Urgency.NOW}, [(Group.NOW, "now")]),
        ({"urgency": Urgency.SHIFT}, [(Group.SHIFT, "this shift")]),
        ({"urgency": Urgency.TIMED}, [(Group.SHIFT, "no time set")]),
        ({"urgency": Urgency.ONGOING}, []),
        ({"urgency": Urgency.ONGOING, "minutes": 10}, [(Group.HOUR, "19:40")]),
    ],
)
def test_an_action_stands_in_the_group_of_its_time(
    given: dict[str, object], expected: list[tuple[Group, str]]
) -> None:
    assert listed(**given) == expected


def test_what_has_no_line_is_counted() -> None:
    def compute(case: object) -> Findings:
        later = case.now + 13 * HOUR  # type: ignore[attr-defined]
        first = action("one.a", urgency=Urgency.ONGOING)
        return Findings(actions=(first, action("one.b", first_due=later), action("one.c", first_due=later)))

    made = due_list(assessment_of(plugin_of("one", compute)))
    assert (made.ongoing, made.later, made.lines) == (1, 2, ())


@pytest.mark.parametrize("name", EXAMPLES)
def test_every_action_of_an_example_is_listed_or_counted(name: str) -> None:
    made = assessed(text_of_example(name), EXAMPLES[name])
    due = due_list(made)
    assert len(due.lines) + due.ongoing + due.later == len(made.actions)
    assert overdue_count(made) == sum(line.group is Group.OVERDUE for line in due.lines)


def test_a_line_holds_time_patient_reference_and_text(tmp_path: Path) -> None:
    done = run("due", ROOT / "examples/house-fire.yaml", "--at", AT)
    assert done.code == 0, done.err
    lines = done.out.splitlines()
    assert lines[0] == "due at Sat 14 Mar 2026 19:30 (Europe/Dublin)"
    assert lines[1] == "  Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518"
    said = next(line for line in lines if line.startswith("20:30") and "first full dressing with" in line)
    assert said.startswith("20:30  Tomas Ferrandel, record number HSH-204518  ")
    heads = [line.partition(" (")[0] for line in lines if line.isupper() or line.split(" (")[0].isupper()]
    assert heads == ["OVERDUE", "NOW", "DUE WITHIN THE HOUR", "DUE THIS SHIFT"]


def test_lines_of_many_patients_are_sorted_by_time_then_patient(tmp_path: Path) -> None:
    to_do = "handovers: [{at: 2026-03-14 19:00, to_do: [{what: theatre, due: 2026-03-14 %s}]}]\n"
    write(
        tmp_path,
        a=small(to_do % "22:00", "Ada Brisk", "1990-01-01", "N-1"),
        b=small(to_do % "21:00", "Cor Daal", "1991-01-01", "N-2"),
        c=small(to_do % "21:00", "Bea Esch", "1992-01-01", "N-3"),
    )
    done = run("due", *sorted(tmp_path.iterdir()), "--at", AT)
    shift = [line.split("  ")[:2] for line in done.out.splitlines() if line.endswith("theatre")]
    assert shift == [
        ["21:00", "Bea Esch, record number N-3"],
        ["21:00", "Cor Daal, record number N-2"],
        ["22:00", "Ada Brisk, record number N-1"],
    ]


def test_one_bad_file_is_named_and_never_stops_the_rest(tmp_path: Path) -> None:
    write(tmp_path, bad=small("pulse: 3\nbp: 4\n"), good=small())
    missing = tmp_path / "missing.yaml"
    done = run("due", tmp_path / "bad.yaml", missing, tmp_path / "good.yaml", "--at", AT)
    assert done.code == 1
    assert "Tomas Ferrandel, record number HSH-1" in done.out
    assert "2 files could not be read and stand in no list above:" in done.err
    assert f"{tmp_path / 'bad.yaml'}:5:1: pulse: unknown key 'pulse'" in done.err
    assert "and 1 more fault: handoff check" in done.err
    assert str(missing) in done.err


def test_two_who_could_be_mixed_up_are_flagged_above_the_list(tmp_path: Path) -> None:
    write(tmp_path, a=small(), b=small(name="Tomas Ferrandal", born="1990-01-01", number="HSH-2"), c=small())
    done = run("due", tmp_path, "--at", AT)
    twice, alike = (
        f"the same patient twice: {'Tomas Ferrandel, born 11 Feb 1985, record number HSH-1'}",
        "similar",
    )
    assert f"LOOK TWICE: {twice} ({tmp_path / 'a.yaml'})" in done.out
    assert done.out.count(alike) == 2
    assert done.out.index("LOOK TWICE") < done.out.index("OVERDUE (")


def test_a_folder_stands_for_its_files_without_hidden_ones_and_policies(tmp_path: Path) -> None:
    write(tmp_path, good=small(), unit="policy: 1\n", _hidden="x")
    (tmp_path / "-hidden.yaml").rename(tmp_path / ".hidden.yaml")
    (tmp_path / "notes.txt").write_text("not a state file")
    done = run("due", tmp_path, "--at", AT)
    assert done.code == 0
    assert f"left out: {tmp_path / 'unit.yaml'} (a policy file)" in done.err
    assert run("due", tmp_path / "notes.txt", "--at", AT).code == 1


def test_an_empty_folder_and_a_wrong_time_are_wrong_usage(tmp_path: Path) -> None:
    assert run("due", tmp_path).code == 2
    write(tmp_path, good=small(), other=small(number="HSH-2"))
    done = run("due", tmp_path, "--at", "later")
    assert done.code == 2
    assert done.err.count("--at:") == 1


def test_help_shows_an_example() -> None:
    assert "Example: handoff due ferrandel.yaml" in " ".join(run("due", "--help").out.split())


def test_no_word_library_is_loaded_for_the_list() -> None:
    script = (
        "import sys; import handoff.cli as c\n"
        f"sys.argv = ['handoff', 'due', {str(ROOT / 'examples/house-fire.yaml')!r}, '--at', {AT!r}]\n"
        "try: c.main()\nexcept SystemExit: pass\n"
        "assert not {'docx', 'docxtpl', 'lxml', 'rich.table'} & set(sys.modules), sorted(sys.modules)\n"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
