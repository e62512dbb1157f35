"""What is compared with what, and the limit of each figure."""

from __future__ import annotations

import gc
import statistics
import sys
import time
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from tests.bench import files
from tests.bench.processes import Command, Measured, alternated, ratio

HERE = Path(__file__).parent
PYTHON = sys.executable
HANDOFF = (PYTHON, "-m", "handoff")
INCOMPLETE = 3


@dataclass(frozen=True)
class Figure:
    """One ratio or rate with its limit; ``at_most`` says on which side of the limit it has to lie."""

    name: str
    value: float
    limit: float | None
    at_most: bool = True
    unit: str = "x"

    def kept(self) -> bool:
        """Tell whether the figure is within its limit."""
        return self.limit is None or (self.value <= self.limit if self.at_most else self.value >= self.limit)

    def line(self) -> str:
        """Return the line of the table."""
        sign = "" if self.limit is None else f"{'<=' if self.at_most else '>='} {self.limit:g}"
        return f"{self.name:58} {self.value:8.2f}{self.unit:2} {sign:>8}{'' if self.kept() else '  beyond'}"


def cpu(runs: list[Measured]) -> list[float]:
    """Return the processor seconds of each run."""
    return [one.cpu_s for one in runs]


def memory(runs: list[Measured]) -> list[float]:
    """Return the most memory of each run, in MB."""
    return [one.memory_mb for one in runs]


def draft(place: Path, runs: int) -> Iterator[Figure]:
    """``handoff draft`` of the adult as a whole process, against F2 and F1."""
    files.save_contexts(place)
    adult = files.copy_of_adult(place)
    ours = (*HANDOFF, "draft", str(adult), "--at", files.ADULT_AT, "--out", str(place / "out"))
    found = alternated(
        [
            Command("F1", (PYTHON, str(HERE / "floor_render.py"), str(place)), place),
            Command("F2", (PYTHON, str(HERE / "floor_command.py"), "render", str(place)), place),
            Command("draft", ours, place, (0, INCOMPLETE)),
        ],
        runs,
    )
    yield Figure("draft, time against F2", ratio(cpu(found["draft"]), cpu(found["F2"])), 1.4)
    yield Figure("draft, memory against F2", ratio(memory(found["draft"]), memory(found["F2"])), 1.3)
    yield Figure("draft, time against F1 (aim 2)", ratio(cpu(found["draft"]), cpu(found["F1"])), None)
    yield Figure("F2, time against F1", ratio(cpu(found["F2"]), cpu(found["F1"])), None)
    yield Figure("draft, processor time", statistics.median(cpu(found["draft"])), None, unit="s")


def commands() -> int:
    """Return how many commands the help lists, those of the floor left out."""
    from handoff.cli import app

    return len(app.registered_commands) - 2


def small(place: Path, runs: int) -> Iterator[Figure]:
    """``check``, ``--help`` and ``chart`` against a no-op command, bare help and ``check``."""
    adult = files.copy_of_adult(place)
    charted = place / "charted.yaml"
    charted.write_text(files.stay(24), encoding="utf-8")
    chart = (
        *HANDOFF,
        "chart",
        str(charted),
        "pulse 118 /min",
        "--by",
        "EM",
        "--at",
        files.end_of(24),
        "--confirm",
    )
    checked = (*HANDOFF, "check", str(charted))
    found = alternated(
        [
            Command("nothing", (PYTHON, str(HERE / "floor_command.py"), "nothing", str(adult)), place),
            Command("check", (*HANDOFF, "check", str(adult), "--at", files.ADULT_AT), place),
            Command("bare help", (PYTHON, str(HERE / "floor_command.py"), "--help", str(commands())), place),
            Command("help", (*HANDOFF, "--help"), place),
            Command("check before", checked, place),
            Command("chart", chart, place),
        ],
        runs,
    )
    yield Figure("check against a no-op command", ratio(cpu(found["check"]), cpu(found["nothing"])), 1.4)
    yield Figure("--help against bare help", ratio(cpu(found["help"]), cpu(found["bare help"])), 1.2)
    yield Figure(
        "chart, one entry, against check", ratio(cpu(found["chart"]), cpu(found["check before"])), 1.5
    )


def growth(place: Path, runs: int) -> Iterator[Figure]:
    """A stay of 30 and of 100 days against the first 24 hours, and how fast a file is read and validated."""
    commands = []
    for days in (1, 30, 50, 100):
        file = place / f"stay-{days}.yaml"
        file.write_text(files.stay(days * 24), encoding="utf-8")
        to = (str(file), "--at", files.end_of(days * 24), "--out", str(place / f"out-{days}"))
        commands.append(Command(f"{days}", (*HANDOFF, "draft", *to), place, (0, INCOMPLETE)))
    found = alternated(commands, runs)
    yield Figure("draft, 30 days against 24 hours", ratio(cpu(found["30"]), cpu(found["1"])), 2.5)
    more = [
        [long - short for long, short in zip(cpu(found[days]), cpu(found["1"]), strict=True)]
        for days in ("100", "50")
    ]
    yield Figure("rows beyond the first day: 100 days against 50", ratio(*more), 99 / 49 * 1.2)
    yield Figure(
        "read and validated, 30 days", read_speed(files.stay(720), runs), 1.0, at_most=False, unit="MB/s"
    )


def read_speed(text: str, runs: int) -> float:
    """Return how much of ``text`` is read with positions and validated, in MB per processor second."""
    from handoff.state.clock import Clock
    from handoff.state.reader import read_nodes
    from handoff.state.validate import check
    from handoff.work import make_setup

    schema, now, seconds = make_setup().schema, Clock("UTC").read("2026-12-01 00:00"), []
    for _ in range(runs):
        gc.collect()
        begin = time.process_time()
        root, _ = read_nodes(text, "long.yaml")
        check(root, schema, now)
        seconds.append(time.process_time() - begin)
    return len(text.encode()) / 1e6 / statistics.median(seconds)


def ward(place: Path, runs: int) -> Iterator[Figure]:
    """Many patients in one process with their documents, against F1; two workers against one; memory."""
    files.save_contexts(place)
    few, some, many = (files.ward_of(place / f"ward-{count}", count) for count in (10, 30, 1000))
    at = ("--at", files.ADULT_AT)

    def of(name: str, folder: Path, *more: str) -> Command:
        return Command(name, (*HANDOFF, "ward", str(folder), *at, *more), place, (0, 1, INCOMPLETE))

    documents = ("--documents", str(place / "documents"))
    found = alternated(
        [
            Command("F1", (PYTHON, str(HERE / "floor_render.py"), str(place)), place),
            of("one", some, *documents),
            of("two", some, *documents, "--jobs", "2"),
        ],
        runs,
    )
    ours = [30 / one.cpu_s for one in found["one"]]
    yield Figure(
        "ward, documents a second against F1's", ratio(ours, [1 / s for s in cpu(found["F1"])]), 0.8, False
    )
    walls = [[one.wall_s for one in found[name]] for name in ("one", "two")]
    yield Figure("ward, two workers against one, elapsed", ratio(*walls), 1.6, False)
    held = alternated([of("10", few), of("1000", many)], 1)
    yield Figure(
        "ward, memory of 1,000 patients against 10", ratio(memory(held["1000"]), memory(held["10"])), 1.2
    )


ALL: Mapping[str, Callable[[Path, int], Iterator[Figure]]] = {
    "draft": draft,
    "small": small,
    "growth": growth,
    "ward": ward,
}
