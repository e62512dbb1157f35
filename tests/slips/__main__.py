"""``python -m tests.slips [--sample N --seed S] [--only NAME ...]``: every slip of one key, and who notices it."""

from __future__ import annotations

import argparse
import random
import subprocess
import sys
from collections import Counter
from collections.abc import Iterable, Sequence
from datetime import UTC, datetime

from tests.chart.charts import MOMENTS, example, setup
from tests.packaging.project import ROOT

from .judging import FAULT, LEFT, MEANT, SAME_FIGURES, SAME_READING, WARNING, Outcome, Patient
from .making import Slip, slips

VERDICTS = (FAULT, WARNING, SAME_READING, SAME_FIGURES, MEANT, LEFT)


def main(arguments: Sequence[str] | None = None) -> int:
    """Judge the slips and print two tables; 1 where a figure changed that no rule calls plausible."""
    parser = argparse.ArgumentParser(
        prog="python -m tests.slips", description="Slip on one key; see who notices."
    )
    parser.add_argument(
        "--sample", type=int, metavar="N", help="so many slips, picked by --seed; all if left out"
    )
    parser.add_argument("--seed", type=int, default=1)
    parser.add_argument("--only", nargs="+", choices=sorted(MOMENTS), default=list(MOMENTS), metavar="NAME")
    parser.add_argument(
        "--kinds", nargs="+", metavar="KIND", help="kinds by their beginning: indent 'line joined'"
    )
    asked = parser.parse_args(arguments)
    outcomes = judged(asked.only, asked.sample, asked.seed, asked.kinds)
    left = [one for one in outcomes if one[1].verdict == LEFT]
    print(said(outcomes, asked.sample, asked.seed))
    for name, outcome in left:
        print(f"{name}:{outcome.line}: {outcome.slip.kind} {outcome.slip.typed!r}: {outcome.why}")
    return int(bool(left))


def every(names: Iterable[str]) -> list[tuple[Patient, Slip]]:
    """Return every slip of the invented patients of these names."""
    patients = [Patient(name, example(name), MOMENTS[name], setup()) for name in names]
    return [(patient, slip) for patient in patients for slip in slips(patient.text)]


def judged(
    names: Iterable[str], sample: int | None, seed: int, kinds: Sequence[str] | None = None
) -> list[tuple[str, Outcome]]:
    """Return what became of the slips, or of so many of them picked by ``seed``."""
    begun = tuple(kinds or ("",))
    found = [(patient, slip) for patient, slip in every(names) if slip.kind.startswith(begun)]
    if sample is not None and sample < len(found):
        found = random.Random(seed).sample(found, sample)  # noqa: S311  (no secret)
    return [(patient.name, patient.judge(slip)) for patient, slip in found]


def said(outcomes: list[tuple[str, Outcome]], sample: int | None, seed: int) -> str:
    """Return when and at which commit it ran, the table by kind of slip, and the plausible changes by rule."""
    commit = subprocess.run(
        ["git", "rev-parse", "--short", "HEAD"], cwd=ROOT, capture_output=True, text=True, check=True
    ).stdout.strip()
    which = f"{sample:,} slips picked by seed {seed}" if sample else "every slip"
    lines = [f"{datetime.now(UTC):%Y-%m-%d}, commit {commit}, Python {sys.version.split()[0]}, {which}.", ""]
    lines += [f"| slip | all | {' | '.join(VERDICTS)} |", f"|---|{'--:|' * (len(VERDICTS) + 1)}"]
    kinds = Counter(outcome.slip.kind for _, outcome in outcomes)
    for kind, count in [*sorted(kinds.items()), ("all", len(outcomes))]:
        found = Counter(one.verdict for _, one in outcomes if kind in ("all", one.slip.kind))
        lines.append(f"| {kind} | {count:,} | {' | '.join(f'{found[verdict]:,}' for verdict in VERDICTS)} |")
    rules = Counter(one.why for _, one in outcomes if one.verdict == MEANT)
    lines += ["", "| plausible change | slips |", "|---|--:|"]
    lines += [f"| {why} | {count:,} |" for why, count in rules.most_common()]
    return "\n".join(lines)


if __name__ == "__main__":
    sys.exit(main())
