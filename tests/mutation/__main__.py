"""``python -m tests.mutation [--only AREA ...] [--sample N --seed S] [--write]``."""

from __future__ import annotations

import argparse
import random
import subprocess
import sys
import tempfile
from datetime import UTC, datetime
from pathlib import Path

import pytest
from hypothesis import Phase, settings

from .areas import ROOT, Area, areas
from .mutants import Source, read
from .report import listed, reasons, survivors, table, why
from .runner import Mutations, Outcome

PAGE = ROOT / "docs" / "long-runs" / "mutation.md"

HEAD = """# Mutation testing: recorded runs

`python -m tests.mutation --write` runs them all again and writes this page; with `--only AREA ...` those
areas alone. [What is changed, and why by a module of our own](../decisions/mutation.md).
"""


def main(arguments: list[str] | None = None) -> int:
    """Run, print the table and the survivors; 1 where a survivor is not explained, 2 where a test fails anyway."""
    known = areas()
    parser = argparse.ArgumentParser(
        prog="python -m tests.mutation", description="Change the code; see who notices."
    )
    parser.add_argument("--only", nargs="+", choices=sorted(known), default=list(known), metavar="AREA")
    parser.add_argument(
        "--sample", type=int, metavar="N", help="so many mutants of each area, picked by --seed"
    )
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--write", action="store_true", help=f"put the result into {PAGE.relative_to(ROOT)}")
    asked = parser.parse_args(arguments)
    outcomes: list[Outcome] = []
    sections: dict[str, str] = {}
    for name in asked.only:
        found = run(known[name], asked.sample, asked.seed)
        if found is None:
            return 2
        outcomes += found
        sections[name] = section(known[name], found, asked.sample, asked.seed)
        print(f"{name}: {len(found)} mutants, {len(survivors(found))} not noticed", flush=True)
    print(table(outcomes), listed(outcomes), sep="\n\n")
    if asked.write:
        PAGE.write_text(page(PAGE.read_text("utf-8") if PAGE.is_file() else "", sections), "utf-8")
    return int(any(not why(one, reasons()) for one in survivors(outcomes)))


def run(area: Area, sample: int | None, seed: int) -> list[Outcome] | None:
    """Return the outcome of each mutant; None, with the names printed, where tests fail without any."""
    sources = [read((ROOT / path).read_text("utf-8"), path) for path in area.files]
    mutations = Mutations(sources, picked(sources, sample, seed), area.cases)
    settings.register_profile(
        "mutation", derandomize=True, deadline=None, database=None, phases=(Phase.explicit, Phase.generate)
    )
    settings.load_profile("mutation")
    with tempfile.TemporaryDirectory() as folder:
        options = [
            "-o",
            "addopts=",
            "-p",
            "no:cacheprovider",
            "-s",
            "-p",
            "no:terminal",
            "-p",
            "no:faulthandler",
            "--basetemp",
            str(Path(folder) / "t"),
        ]
        pytest.main(
            [*options, "--rootdir", str(ROOT), *(str(ROOT / test) for test in area.tests)], [mutations]
        )
    if mutations.broken or not mutations.outcomes:
        print(f"{area.name}: these tests fail without any change: {mutations.broken or 'none was run'}")
        return None
    return mutations.outcomes


def picked(sources: list[Source], sample: int | None, seed: int) -> list[tuple[int, int]]:
    """Return which mutants are tried, as (source, mutant), in the order of the files."""
    every = [(number, index) for number, source in enumerate(sources) for index in range(len(source.mutants))]
    if sample is None or sample >= len(every):
        return every
    return sorted(random.Random(seed).sample(every, sample))  # noqa: S311  (no secret)


def section(area: Area, outcomes: list[Outcome], sample: int | None, seed: int) -> str:
    """Return what the page says of one area: when, at which commit, the table and the survivors."""
    commit = subprocess.run(
        ["git", "rev-parse", "--short", "HEAD"], cwd=ROOT, capture_output=True, text=True, check=True
    ).stdout.strip()
    which = f", {sample} mutants picked by seed {seed}" if sample else ""
    when = f"{datetime.now(UTC):%Y-%m-%d}, commit {commit}, Python {sys.version.split()[0]}{which}."
    left = listed(outcomes)
    survived = f"\n\n{left}" if survivors(outcomes) else ""
    return f"{area.name}\n\n{when} Wanted: {area.wanted_pct} %.\n\n{table(outcomes)}{survived}\n"


def page(earlier: str, sections: dict[str, str]) -> str:
    """Return the page with the new sections in the place of the earlier ones of the same areas."""
    kept = {part.partition("\n")[0]: part.rstrip("\n") + "\n" for part in earlier.split("\n## ")[1:]}
    kept.update(sections)
    return HEAD + "".join(f"\n## {kept[name]}" for name in areas() if name in kept)


if __name__ == "__main__":
    sys.exit(main())
