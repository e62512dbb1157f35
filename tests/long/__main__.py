"""``python -m tests.long patients [--count N] [--only PLUGIN ...] [--write]``: second reckonings, many patients."""

from __future__ import annotations

import argparse
import os
import re
import subprocess
import sys
import time
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
PAGE = ROOT / "docs" / "long-runs" / "patients.md"
RECKONINGS = {
    "airway_watch": (
        "test_exact.py",
        "observation timetable, missed and overdue checks, fall of carboxyhaemoglobin",
    ),
    "area": ("test_second_way.py", "totals by depth under two charts, each age column"),
    "chemical": ("test_exact.py", "minutes rinsed, what is short, what needs action"),
    "early_warning": (
        "test_*_score.py test_exact.py",
        "points, set, next score, children's lines, coma scale",
    ),
    "electrical": ("test_exact.py", "end of monitoring, tracing, checks of the limbs"),
    "first_hours": ("test_exact.py", "steps done, left and missing"),
    "fluid": ("test_exact.py", "rates, given and due, urine, balance, limits, projections"),
    "infection": ("test_exact.py", "rows met by list, temperature lines, day of each line"),
    "nutrition": ("test_exact.py", "feed against target, tube, bowels and glucose due"),
    "pain": ("test_exact.py", "opioid total, paracetamol against its limit, reassessment due"),
    "prevention": ("test_exact.py", "decisions asked for and due"),
    "theatre": ("test_exact.py", "latest food and drink, what will be short, blood sample"),
    "wellbeing": ("test_exact.py", "days to going home, teaching missing, mood due"),
    "wounds": ("test_exact.py", "dressings, grafts, donor days, tetanus, turning"),
}
"""The tests that hold the second reckoning of each plugin, and what they compare."""


HEAD = """# Second reckonings over many patients

`python -m tests.long patients --count 20000 --write` runs them all again and writes this page.

For each plugin a second reckoning, written from the published tables and not from the code, in whole
numbers and fractions, is compared with what the plugin returns for made-up patients. The same patients
come out each time, because each has its own seed. A few hundred of them are tried in every run of the
tests. `overview` computes nothing.

| plugin | compared | patients of each test | result | tests | date | commit |
|---|---|--:|---|---|---|---|
"""


@dataclass(frozen=True)
class Ran:
    """One plugin's run."""

    plugin: str
    passed: bool
    seconds: float
    last_line: str


def main(arguments: list[str] | None = None) -> int:
    """Run the second reckoning of each plugin; return how many disagreed."""
    parser = argparse.ArgumentParser(prog="python -m tests.long", description="Long runs of tests.")
    patients = parser.add_subparsers(required=True).add_parser(
        "patients", help="second reckonings, many patients"
    )
    patients.add_argument("--count", type=int, default=20_000, metavar="N", help="patients for each plugin")
    patients.add_argument(
        "--only", nargs="+", choices=sorted(RECKONINGS), default=list(RECKONINGS), metavar="PLUGIN"
    )
    patients.add_argument(
        "--write", action="store_true", help=f"put the result into {PAGE.relative_to(ROOT)}"
    )
    asked = parser.parse_args(arguments)
    failed = 0
    for name in asked.only:
        ran = run(name, asked.count)
        failed += not ran.passed
        if asked.write:
            kept = rows_of(PAGE.read_text("utf-8")) if PAGE.is_file() else {}
            PAGE.write_text(page({**kept, name: row(ran, asked.count)}), "utf-8")
    return failed


def run(name: str, count: int) -> Ran:
    """Run the second reckoning of one plugin over ``count`` patients and print how it went."""
    tests = [
        str(path)
        for pattern in RECKONINGS[name][0].split()
        for path in sorted((ROOT / "tests" / name).glob(pattern))
    ]
    start = time.monotonic()
    done = subprocess.run(
        [sys.executable, "-m", "pytest", "-x", *tests],
        cwd=ROOT,
        check=False,
        env={**os.environ, "PATIENTS": str(count)},
        capture_output=True,
        text=True,
    )
    lines = done.stdout.strip().splitlines() or [""]
    ran = Ran(name, done.returncode == 0, time.monotonic() - start, lines[-1])
    print(f"{name}: {ran.last_line}", flush=True)
    if not ran.passed:
        print(done.stdout, done.stderr, sep="\n", file=sys.stderr)
    return ran


def row(ran: Ran, count: int) -> str:
    """Return the row of one plugin for the page."""
    commit = subprocess.run(
        ["git", "rev-parse", "--short", "HEAD"], cwd=ROOT, capture_output=True, text=True, check=True
    ).stdout.strip()
    result = "all agree" if ran.passed else "**disagrees**"
    tests = re.sub(" in .*", "", ran.last_line)
    day = f"{datetime.now(UTC):%Y-%m-%d}"
    return (
        f"| {ran.plugin} | {RECKONINGS[ran.plugin][1]} | {count:,} | {result} | {tests} | {day} | {commit} |"
    )


def page(rows: Mapping[str, str]) -> str:
    """Return the page with the last row of every plugin that has one."""
    return HEAD + "\n".join(rows[name] for name in RECKONINGS if name in rows) + "\n"


def rows_of(text: str) -> dict[str, str]:
    """Return the rows of an earlier page by plugin."""
    found = (line for line in text.splitlines() if line.startswith("| "))
    return {line.split("|")[1].strip(): line for line in found}


if __name__ == "__main__":
    sys.exit(main())
