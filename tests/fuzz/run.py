"""Run one target in a process of its own: every input by its own seed, its time and its memory."""

from __future__ import annotations

import multiprocessing
import random
import resource
import sys
import time
import traceback
from collections import Counter
from dataclasses import dataclass, field
from typing import Any

from .properties import Breach
from .targets import TARGETS, Target

LONGEST_S = 2.0
"""Time of the processor that an input may take."""

MOST_MB = 500
"""Memory that the process may come to hold."""

GIVEN_UP_S = 90
"""An input that is not done by then is stopped from outside."""


@dataclass
class Result:
    """What came of the inputs of one target."""

    name: str
    count: int = 0
    outcomes: Counter[str] = field(default_factory=Counter)
    slowest_s: float = 0.0
    slowest: int = -1
    memory_mb: float = 0.0
    broken: list[str] = field(default_factory=list)


def source(seed: int, name: str, number: int) -> random.Random:
    """Return the source of chance of one input, the same every time."""
    return random.Random(f"{seed} {name} {number}")  # noqa: S311  (no secret)


def one(target: Target, seed: int, number: int, result: Result) -> None:
    """Make one input and try it; what is broken stands in ``result`` with the number to see it again."""
    made = target.make(source(seed, target.name, number))
    started = time.process_time()
    try:
        result.outcomes[target.run(made)] += 1
    except Breach as error:
        result.broken.append(f"{target.name} {number}: {error}")
    except Exception as error:
        frame = traceback.extract_tb(error.__traceback__)[-1]
        where = f"{frame.filename.rpartition('/')[2]}:{frame.lineno}"
        result.broken.append(f"{target.name} {number}: {type(error).__name__} at {where}: {str(error)[:200]}")
    took = time.process_time() - started
    result.count += 1
    if took > result.slowest_s:
        result.slowest_s, result.slowest = took, number
    if took > LONGEST_S and number > 0:
        result.broken.append(f"{target.name} {number}: took {took:.1f} s")


def run(name: str, seed: int, count: int, start: int = 0) -> Result:
    """Return what came of inputs ``start`` to ``start + count`` of a target, tried in this process."""
    target = next(one for one in TARGETS if one.name == name)
    result = Result(name)
    warm = Result(name)
    one(target, seed, 0, warm)  # what is loaded once is not counted to an input
    for number in range(start, start + count):
        one(target, seed, number, result)
    result.memory_mb = peak_mb()
    return result


def peak_mb() -> float:
    """Return the most memory that this process held, in MB."""
    most = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss
    return (
        most / (1_000_000 if sys.platform == "darwin" else 1000) * (1 if sys.platform == "darwin" else 1.024)
    )


def apart(name: str, seed: int, count: int) -> Result:
    """Return :func:`run` from a process of its own, which is stopped where one input does not end."""
    context = multiprocessing.get_context("spawn")
    number, queue = context.Value("q", -1), context.Queue()
    child = context.Process(target=_child, args=(name, seed, count, number, queue))
    child.start()
    seen, since = -1, time.monotonic()
    while child.is_alive() and queue.empty():
        time.sleep(0.2)
        if number.value != seen:
            seen, since = number.value, time.monotonic()
        elif time.monotonic() - since > GIVEN_UP_S:
            child.kill()
            return Result(name, max(seen, 0), broken=[f"{name} {seen}: not done after {GIVEN_UP_S} s"])
    result: Result = queue.get(timeout=GIVEN_UP_S) if child.is_alive() or not queue.empty() else Result(name)
    child.join()
    if not result.count:
        result.broken.append(f"{name} {number.value}: the process ended (exit {child.exitcode})")
    if result.memory_mb > MOST_MB:
        result.broken.append(f"{name}: {result.memory_mb:.0f} MB")
    return result


def _child(name: str, seed: int, count: int, number: Any, queue: Any) -> None:
    target = next(one for one in TARGETS if one.name == name)
    result = Result(name)
    one(target, seed, 0, Result(name))
    for index in range(count):
        number.value = index
        one(target, seed, index, result)
    result.memory_mb = peak_mb()
    queue.put(result)
