"""Measure whole processes, alternated, so that a machine that is busy for a while is busy for both."""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import time
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path


@dataclass(frozen=True)
class Measured:
    """One run: processor time and elapsed time in seconds, most memory held in MB."""

    cpu_s: float
    wall_s: float
    memory_mb: float


@dataclass(frozen=True)
class Command:
    """A command that is measured: what to call it, its arguments, its folder, the exit codes that are right."""

    name: str
    arguments: tuple[str, ...]
    folder: Path
    right: tuple[int, ...] = (0,)


def environment() -> dict[str, str]:
    """Return the environment of a measured process: compiled Python files are used, as in an installation."""
    kept = {name: value for name, value in os.environ.items() if not name.startswith("PYTHON")}
    return {**kept, "COLUMNS": "100", "NO_COLOR": "1"}


def run(command: Command) -> Measured:
    """Return what one run of ``command`` cost, its children included.

    Raises:
        RuntimeError: It ended with another exit code; carries what it said.
    """
    begin = time.perf_counter()
    process = subprocess.Popen(
        command.arguments,
        cwd=command.folder,
        env=environment(),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.DEVNULL,
        stderr=subprocess.PIPE,
    )
    assert process.stderr is not None
    said = process.stderr.read()
    _, status, usage = os.wait4(process.pid, 0)
    elapsed = time.perf_counter() - begin
    process.returncode = os.waitstatus_to_exitcode(status)
    process.stderr.close()
    if process.returncode not in command.right:
        raise RuntimeError(f"{command.name} ended with {process.returncode}: {said.decode(errors='replace')}")
    to_mb = 1 / 1e6 if sys.platform == "darwin" else 1024 / 1e6
    return Measured(usage.ru_utime + usage.ru_stime, elapsed, usage.ru_maxrss * to_mb)


def alternated(commands: Sequence[Command], runs: int) -> Mapping[str, list[Measured]]:
    """Return ``runs`` counted runs of each command, in turn, after one of each that is not counted."""
    for command in commands:
        run(command)
    found: dict[str, list[Measured]] = {command.name: [] for command in commands}
    for _ in range(runs):
        for command in commands:
            found[command.name].append(run(command))
    return found


def ratio(above: Sequence[float], below: Sequence[float]) -> float:
    """Return the median of the ratios, pair by pair of one round."""
    return statistics.median(one / other for one, other in zip(above, below, strict=True))
