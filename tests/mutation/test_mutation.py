"""The changes are the same each time, are put where every importer sees them, and a short run finds no gap."""

from __future__ import annotations

import ast
import os
import subprocess
import sys
from dataclasses import replace

import yaml

from .__main__ import picked
from .apply import module_of, put
from .areas import ROOT, areas
from .mutants import read
from .report import EXPLAINED, listed, table
from .runner import NOTICED, UNNOTICED, Outcome, _in_child

SAMPLE = '''
"""Text."""
LINE = 3

def wide(a: int, b: int = 2) -> bool:
    """Text."""
    if a < b and not a == 0:
        raise ValueError(f"{a} is too small")
    return max(a, b) + 1 > LINE
'''


def changes_of(text: str) -> list[tuple[str, str]]:
    return [(one.before, one.after) for one in read(text, "sample.py").mutants]


def test_each_operator_constant_and_statement_is_changed_once() -> None:
    assert changes_of(SAMPLE) == [
        ("LINE = 3", "LINE = 4"),
        ("LINE = 3", "LINE = 2"),
        ("def wide(a: int, b: int=2)", "def wide(a: int, b: int=3)"),
        ("def wide(a: int, b: int=2)", "def wide(a: int, b: int=1)"),
        ("if a < b and (not a == 0)", "if a < b or not a == 0"),
        ("if a < b and (not a == 0)", "if a <= b and (not a == 0)"),
        ("if a < b and (not a == 0)", "if a >= b and (not a == 0)"),
        ("if a < b and (not a == 0)", "if a < b and a == 0"),
        ("if a < b and (not a == 0)", "if a < b and (not a != 0)"),
        ("if a < b and (not a == 0)", "if a < b and (not a == 1)"),
        ("raise ValueError(f'{a} is too small')", "pass"),
        ("return max(a, b) + 1 > LINE", "return None"),
        ("return max(a, b) + 1 > LINE", "return max(a, b) + 1 >= LINE"),
        ("return max(a, b) + 1 > LINE", "return max(a, b) + 1 <= LINE"),
        ("return max(a, b) + 1 > LINE", "return max(a, b) - 1 > LINE"),
        ("return max(a, b) + 1 > LINE", "return a + 1 > LINE"),
        ("return max(a, b) + 1 > LINE", "return b + 1 > LINE"),
        ("return max(a, b) + 1 > LINE", "return min(a, b) + 1 > LINE"),
        ("return max(a, b) + 1 > LINE", "return max(a, b) + 2 > LINE"),
    ]


def test_reading_a_file_leaves_its_tree_as_it_was() -> None:
    source = read(SAMPLE, "sample.py")
    assert ast.dump(source.tree) == ast.dump(ast.parse(SAMPLE, "sample.py"))


def test_a_seed_picks_the_same_mutants_every_time() -> None:
    sources = [read(SAMPLE, "sample.py"), read(SAMPLE, "other.py")]
    assert picked(sources, 5, 7) == picked(sources, 5, 7) != picked(sources, 5, 8)
    assert len(picked(sources, None, 1)) == 2 * len(changes_of(SAMPLE))


def test_a_mutant_is_seen_by_those_who_imported_the_function_before() -> None:
    path = "plugins/electrical/formula.py"
    source, module = read((ROOT / path).read_text("utf-8"), path), module_of(path)
    held = module.voltage_class
    nothing = [i for i, one in enumerate(source.mutants) if one.after == "return None"]
    number = nothing[-1]

    def changed() -> object:
        put(source.mutants[number], source, module)
        return held(1000.0, 1000.0)

    assert held(1000.0, 1000.0) == "at the line"
    assert _in_child(changed) is None
    assert held(1000.0, 1000.0) == "at the line"


def test_what_stands_outside_functions_reaches_every_importer() -> None:
    path = "plugins/electrical/formula.py"
    source, module = read((ROOT / path).read_text("utf-8"), path), module_of(path)
    number = next(i for i, one in enumerate(source.mutants) if not one.function and "XXlow" in one.after)

    def changed() -> object:
        put(source.mutants[number], source, module)
        return module.voltage_class(1.0, 1000.0)

    assert _in_child(changed) == "XXlow"


def test_every_reason_belongs_to_a_change_that_exists() -> None:
    for row in yaml.safe_load(EXPLAINED.read_text("utf-8")):
        path, function = row["file"], row.get("in", "")
        there = {
            (one.before, one.after)
            for one in read((ROOT / path).read_text("utf-8"), path).mutants
            if one.function == function
        }
        for change in row["changes"]:
            assert (change["before"], change["after"]) in there, (path, function, change)


def test_every_formula_file_and_the_core_are_mutated() -> None:
    files = {path for area in areas().values() for path in area.files}
    assert {str(path.relative_to(ROOT)) for path in ROOT.glob("plugins/*/formula*.py")} <= files
    assert {"handoff/assess.py", "handoff/state/reader.py", "handoff/state/clock.py"} <= files


def test_a_short_run_finds_nothing_unexplained() -> None:
    short = ["--only", "electrical", "chemical", "--sample", "14", "--seed", "1"]
    done = subprocess.run(
        [sys.executable, "-m", "tests.mutation", *short],
        cwd=ROOT,
        env={**os.environ, "PATIENTS": "60"},
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stdout + done.stderr
    assert "electrical: 14 mutants" in done.stdout


def test_a_survivor_is_listed_with_its_reason_or_as_not_explained() -> None:
    row = yaml.safe_load(EXPLAINED.read_text("utf-8"))[0]
    change = row["changes"][0]
    known = Outcome(row["file"], row["in"], 1, change["before"], change["after"], UNNOTICED, 3)
    unknown = replace(known, after="return 12")
    noticed = replace(known, outcome=NOTICED)
    assert f"| `{row['file']}` | 4 | 2 | 50.0 % | 2 | 1 |" in table([known, unknown, noticed, noticed])
    assert row["why"] in listed([known])
    assert "**Not explained.**" in listed([unknown])
    assert listed([noticed]) == "None."
