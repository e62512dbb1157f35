"""Two runs on the same file, moment and policy give the same bytes, wherever and by whomever they are made."""

from __future__ import annotations

import os
import subprocess
import sys
from functools import lru_cache
from pathlib import Path

import pytest

from tests.shift.helpers import EXAMPLES, text_of_example

HOMES: dict[str, tuple[dict[str, str], tuple[str, ...]]] = {
    "the same again": ({}, ()),
    "another time zone": ({"TZ": "Pacific/Kiritimati"}, ()),
    "a time zone behind": ({"TZ": "America/St_Johns"}, ()),
    "letters as in Turkey": ({"LANG": "tr_TR.UTF-8", "LC_ALL": "tr_TR.UTF-8", "LANGUAGE": "tr"}, ()),
    "no letters but the plain ones": ({"LANG": "C", "LC_ALL": "C", "PYTHONUTF8": "0"}, ()),
    "another order of sets": ({"PYTHONHASHSEED": "1"}, ()),
    "yet another order of sets": ({"PYTHONHASHSEED": "31337"}, ()),
    "another person": ({"USER": "else", "LOGNAME": "else", "USERNAME": "else", "HOME": "/nonexistent"}, ()),
    "without assertions": ({}, ("-O",)),
    "without comments in the code": ({}, ("-OO",)),
    "a narrow terminal": ({"COLUMNS": "20", "TERM": "dumb", "FORCE_COLOR": "1"}, ()),
}
CHILD = ("another time zone", "another order of sets", "without assertions")
RUNS = [*(("house-fire", home) for home in HOMES), *(("toddler-scald", home) for home in CHILD)]


def made(place: Path, patient: str, changes: dict[str, str], options: tuple[str, ...]) -> dict[str, bytes]:
    """Return every file that draft, note, transfer and ward write for ``patient``, in a process of its own."""
    place.mkdir(parents=True)
    (place / "patient.yaml").write_text(text_of_example(patient), encoding="utf-8")
    kept = {key: value for key, value in os.environ.items() if key in ("PATH", "SYSTEMROOT", "PYTHONPATH")}
    script = (
        "import sys\n"
        "from handoff.cli import app\n"
        "at = sys.argv[1]\n"
        "for words in (['draft', 'patient.yaml', '--out', 'out'], ['note', 'patient.yaml', '--out', 'out'],\n"
        "        ['transfer', 'patient.yaml', '--out', 'out'], ['ward', '.', '--out', 'out'],\n"
        "        ['draft', 'patient.yaml', '--deidentified', '--out', 'out']):\n"
        "    try:\n"
        "        app([*words, '--at', at])\n"
        "    except SystemExit as left:\n"
        "        if left.code not in (0, 3): raise\n"
    )
    done = subprocess.run(
        [sys.executable, *options, "-B", "-c", script, EXAMPLES[patient]],
        cwd=place,
        env={**kept, "LANG": "en_GB.UTF-8", **changes},
        capture_output=True,
        timeout=120,
        check=False,
    )
    assert done.returncode == 0, done.stderr.decode()
    return {
        path.relative_to(place).as_posix(): path.read_bytes()
        for path in sorted((place / "out").rglob("*"))
        if path.is_file()
    }


@pytest.fixture(scope="module")
def first(tmp_path_factory: pytest.TempPathFactory):  # type: ignore[no-untyped-def]
    """The files of a patient as they were made first, once a patient."""

    @lru_cache
    def of(patient: str) -> dict[str, bytes]:
        return made(tmp_path_factory.mktemp("first") / "here", patient, {"PYTHONHASHSEED": "0"}, ())

    return of


@pytest.mark.parametrize(("patient", "home"), RUNS)
def test_the_same_file_gives_the_same_bytes(patient: str, home: str, tmp_path: Path, first) -> None:  # type: ignore[no-untyped-def]
    before = first(patient)
    after = made(tmp_path / "a folder with a longer name" / "below", patient, *HOMES[home])
    assert len(before) >= 12
    assert sorted(before) == sorted(after)
    assert [name for name in before if before[name] != after[name]] == []
