"""``python -m tests.fuzz [--count N] [--seed S] [--only TARGET ...] [--input TARGET NUMBER] [--guided S]``."""

from __future__ import annotations

import argparse
import subprocess
import sys
from collections.abc import Sequence
from datetime import UTC, datetime

from tests.packaging.project import ROOT

from .run import Result, apart, source
from .targets import TARGETS

PARTS = sum(target.share for target in TARGETS)


def main(arguments: Sequence[str] | None = None) -> int:
    """Run the targets and print a table; 1 where a promise was broken."""
    names = [target.name for target in TARGETS]
    parser = argparse.ArgumentParser(
        prog="python -m tests.fuzz", description="Input without sense or measure."
    )
    parser.add_argument(
        "--count", type=int, default=200_000, help="inputs in all; what costs little gets most"
    )
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--only", nargs="+", choices=names, default=names, metavar="TARGET")
    parser.add_argument("--input", nargs=2, metavar=("TARGET", "NUMBER"), help="print one input and try it")
    parser.add_argument(
        "--guided", type=int, metavar="SECONDS", help="let coverage guide the reader (needs atheris)"
    )
    asked = parser.parse_args(arguments)
    if asked.input:
        return _again(asked.input[0], int(asked.input[1]), asked.seed)
    if asked.guided:
        from .guided import guided

        return guided(asked.guided, asked.seed, asked.only)
    results = []
    for target in TARGETS:
        if target.name in asked.only:
            results.append(apart(target.name, asked.seed, max(1, asked.count * target.share // PARTS)))
            print(line(results[-1]), flush=True)
    print(said(results, asked.seed))
    broken = [one for result in results for one in result.broken]
    for one in broken[:100]:
        print(one)
    return int(bool(broken))


def _again(name: str, number: int, seed: int) -> int:
    target = next(target for target in TARGETS if target.name == name)
    made = target.make(source(seed, name, number))
    print(repr(made)[:5000])
    print(target.run(made))
    return 0


def line(result: Result) -> str:
    """Return the row of one target."""
    what = next(target.what for target in TARGETS if target.name == result.name)
    return (
        f"| {result.name}: {what} | {result.count:,} | {result.outcomes['read']:,} | "
        f"{result.outcomes['refused']:,} | {len(result.broken)} | {result.slowest_s:.2f} s | "
        f"{result.memory_mb:.0f} MB |"
    )


def said(results: list[Result], seed: int) -> str:
    """Return when and at which commit it ran, and the table."""
    commit = subprocess.run(
        ["git", "rev-parse", "--short", "HEAD"], cwd=ROOT, capture_output=True, text=True, check=True
    ).stdout.strip()
    total = sum(result.count for result in results)
    lines = [
        f"{datetime.now(UTC):%Y-%m-%d}, commit {commit}, Python {sys.version.split()[0]}, seed {seed}: "
        f"{total:,} inputs.",
        "",
        "| target | inputs | read | refused | broken promises | longest | memory |",
        "|---|--:|--:|--:|--:|--:|--:|",
        *map(line, results),
    ]
    return "\n".join(lines)


if __name__ == "__main__":
    sys.exit(main())
