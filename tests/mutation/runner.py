"""A pytest plugin that, in the place of one run of the tests, runs them against mutant after mutant.

The tests are collected once. Each mutant gets a child process of its own, in which the tests that run
the changed lines are run, the quickest first, until one fails. A mutant at which a test takes more than
ten times as long as before is noticed too.
"""

from __future__ import annotations

import os
import pickle
import signal
import time
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import pytest
from _pytest.runner import runtestprotocol

from .apply import module_of, put
from .coverage import Seen, traced
from .mutants import Mutant, Source

NOTICED, UNNOTICED, TOO_LONG = "noticed", "unnoticed", "took too long"
LONGEST_FACTOR, LONGEST_AT_LEAST_S = 10, 5.0


@dataclass(frozen=True)
class Outcome:
    """What became of one mutant."""

    path: str
    function: str
    line: int
    before: str
    after: str
    outcome: str
    tests: int


class Mutations:
    """Takes the place of pytest's loop over the tests."""

    def __init__(self, sources: list[Source], picked: list[tuple[int, int]], cases: str) -> None:
        self.sources, self.picked, self.cases = sources, picked, cases
        self.outcomes: list[Outcome] = []
        self.broken: list[str] = []

    def pytest_collection_modifyitems(self, items: list[pytest.Item]) -> None:
        """Leave out the worked examples of the other plugins."""
        items[:] = [
            one for one in items if "test_cases.py" not in one.nodeid or f"[{self.cases}-" in one.nodeid
        ]

    def pytest_runtestloop(self, session: pytest.Session) -> bool:
        """Run the tests once as they are, then against each mutant."""
        modules = {source.path: module_of(source.path) for source in self.sources}
        files = frozenset(str(module.__file__) for module in modules.values())
        seen: list[Seen] = _in_child(lambda: [_once(item, files, session.items) for item in session.items])
        self.broken = [i.nodeid for i, s in zip(session.items, seen, strict=True) if not s.passed]
        if self.broken:
            return True
        lately: list[int] = []
        for number, index in self.picked:
            source = self.sources[number]
            mutant, module = source.mutants[index], modules[source.path]
            chosen = _covering(mutant, str(module.__file__), seen, lately)

            def tried(m: Mutant = mutant, s: Source = source, order: list[int] = chosen) -> tuple[str, int]:
                try:
                    put(m, s, modules[s.path])
                except Exception:
                    if m.function:
                        raise
                    return (
                        NOTICED,
                        -1,
                    )  # what stands outside functions may no longer load: any test would fail
                return _tried(session.items, order, seen)

            outcome, by = _in_child(tried) if chosen else (UNNOTICED, -1)
            if by >= 0:
                lately = [by, *(one for one in lately if one != by)][:40]
            self.outcomes.append(
                Outcome(
                    source.path,
                    mutant.function,
                    mutant.line,
                    mutant.before,
                    mutant.after,
                    outcome,
                    len(chosen),
                )
            )
        return True


def _covering(mutant: Mutant, file: str, seen: list[Seen], lately: list[int]) -> list[int]:
    """Return the tests that run the changed lines: those that noticed a mutant lately, then by their time."""
    lines = {(file, line) for line in range(mutant.line, mutant.end_line + 1)}
    if mutant.function:
        found = [i for i, one in enumerate(seen) if not lines.isdisjoint(one.lines)]
    else:
        found = [i for i, one in enumerate(seen) if any(path == file for path, _ in one.lines)]
    rank = {index: place for place, index in enumerate(lately)}
    quick = {i for i in found if seen[i].seconds < 1}
    return sorted(found, key=lambda i: (i not in quick, rank.get(i, len(rank)), seen[i].seconds, i))


def _once(item: pytest.Item, files: frozenset[str], items: list[pytest.Item]) -> Seen:
    seen, start = Seen(), time.perf_counter()
    traced(files, seen, lambda: _passes(item, _after(item, items)))
    seen.seconds = time.perf_counter() - start
    return seen


def _after(item: pytest.Item, items: list[pytest.Item]) -> pytest.Item | None:
    place = items.index(item) + 1
    return items[place] if place < len(items) else None


def _passes(item: pytest.Item, after: pytest.Item | None) -> bool:
    return not any(report.failed for report in runtestprotocol(item, log=False, nextitem=after))


class _TooLong(BaseException):
    """Raised by the alarm of a test."""


def _tried(items: list[pytest.Item], order: list[int], seen: list[Seen]) -> tuple[str, int]:
    def ring(*_: Any) -> None:
        raise _TooLong

    signal.signal(signal.SIGALRM, ring)
    for place, index in enumerate(order):
        after = items[order[place + 1]] if place + 1 < len(order) else None
        signal.setitimer(signal.ITIMER_REAL, max(LONGEST_AT_LEAST_S, LONGEST_FACTOR * seen[index].seconds), 1)
        try:
            if not _passes(items[index], after):
                return NOTICED, index
        except _TooLong:
            return TOO_LONG, index
        finally:
            signal.setitimer(signal.ITIMER_REAL, 0)
    return UNNOTICED, -1


def _in_child(work: Callable[[], Any]) -> Any:
    """Run ``work`` in a forked child with its output thrown away, and return what it returned."""
    reading, writing = os.pipe()
    child = os.fork()
    if child == 0:
        status = 1
        try:
            nowhere = os.open(os.devnull, os.O_RDWR)
            for stream in (0, 1, 2):
                os.dup2(nowhere, stream)
            with os.fdopen(writing, "wb") as pipe:
                pickle.dump(work(), pipe)
            status = 0
        finally:
            os._exit(status)
    os.close(writing)
    with os.fdopen(reading, "rb") as pipe:
        said = pipe.read()
    os.waitpid(child, 0)
    if not said:
        raise RuntimeError("a child of the mutation run ended without a word")
    return pickle.loads(said)  # noqa: S301  (written by our own child)
