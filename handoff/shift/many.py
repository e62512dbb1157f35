"""Many state files, one after the other or side by side; a bad one never stops the rest."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator, Sequence
from concurrent.futures import ProcessPoolExecutor
from concurrent.futures.process import BrokenProcessPool
from functools import lru_cache, partial
from pathlib import Path
from typing import Generic, TypeVar

from msgspec import Struct

from handoff.assess import Assessment
from handoff.plugin import plural
from handoff.registry import Setup
from handoff.shift.people import Person
from handoff.state.faults import StateFaults
from handoff.state.file_text import NotAStateFile
from handoff.state.load import MomentError
from handoff.work import assess_loaded, make_setup, open_file

T = TypeVar("T")

SUFFIXES = (".yaml", ".yml")

_POLICY = re.compile(rb"^policy[ \t]*:", re.MULTILINE)


class Unread(Struct, frozen=True):
    """A file that could not be read, and why, in one line each; ``usage`` where the command was at fault."""

    file: str
    lines: tuple[str, ...]
    usage: bool = False


class Patient(Struct, Generic[T], frozen=True):
    """One patient of many: how they are named, who they are, what could not be computed, what was made."""

    said: str
    person: Person
    lost: tuple[str, ...]
    made: T


class Read(Struct, Generic[T], frozen=True):
    """A file and what was made of it."""

    file: str
    made: T


class Request(Struct, Generic[T], frozen=True):
    """How each file is read, and what is made of its assessment; can be handed to another process."""

    at: str
    policy: Path | None
    bundled_only: bool
    make: Callable[[Assessment], T]


def state_files(paths: Iterable[Path]) -> tuple[list[Path], list[Path]]:
    """Return the state files of ``paths``, and the policy files that were left out.

    A folder stands for every YAML file in and below it, hidden ones left out; a file for itself.
    """
    found: list[Path] = []
    policies: list[Path] = []
    for path in paths:
        if not path.is_dir():
            found.append(path)
            continue
        for file in sorted(path.rglob("*")):
            if file.suffix.lower() in SUFFIXES and not _is_hidden(file.relative_to(path)) and file.is_file():
                (policies if _is_policy(file) else found).append(file)
    return list(dict.fromkeys(found)), policies


def read_each(
    paths: Sequence[Path], request: Request[T], setup: Setup, jobs: int = 1
) -> Iterator[Read[T] | Unread]:
    """Yield what was made of each file, in the order of ``paths``.

    Args:
        paths: State files.
        request: How each is read and what is made of it.
        setup: Policy and plugins, used where no further process is needed.
        jobs: How many processes read side by side.
    """
    if min(jobs, len(paths)) < 2:
        for path in paths:
            yield _one(path, request, setup)
        return
    done = 0
    try:
        with ProcessPoolExecutor(min(jobs, len(paths))) as pool:
            for one in pool.map(partial(_elsewhere, request), paths):
                yield one
                done += 1
    except BrokenProcessPool:  # the machine took a process away: the rest is read here, one by one
        for path in paths[done:]:
            yield _one(path, request, setup)


@lru_cache(maxsize=1)
def _setup(policy: Path | None, bundled_only: bool) -> Setup:
    """Return what a reading process makes once for all its files."""
    return make_setup(policy, bundled_only)


def _elsewhere(request: Request[T], path: Path) -> Read[T] | Unread:
    return _one(path, request, _setup(request.policy, request.bundled_only))


def _one(path: Path, request: Request[T], setup: Setup) -> Read[T] | Unread:
    name = str(path)
    try:
        return Read(name, request.make(assess_loaded(open_file(path, setup, request.at), setup)))
    except NotAStateFile as error:
        return Unread(name, (str(error),))
    except MomentError as error:
        return Unread(name, (str(error),), usage=True)
    except StateFaults as error:
        first = error.faults[0].said(error.file)
        more = len(error.faults) - 1
        also = (f"and {plural(more, 'more fault')}: handoff check {name}",) if more else ()
        return Unread(name, (first, *also))
    except Exception as error:  # one patient's file must not take the ward away
        return Unread(name, (f"{name}: handoff stopped on a fault of its own ({type(error).__name__})",))


def _is_hidden(path: Path) -> bool:
    return any(part.startswith(".") for part in path.parts)


def _is_policy(path: Path) -> bool:
    try:
        return _POLICY.search(path.read_bytes()) is not None
    except OSError:
        return False
