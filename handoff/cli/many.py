"""The edge of the commands that read many files: name what could not be read, and who could be mixed up."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, NoReturn, TypeVar

from handoff.cli.edge import Exit, complain, setup_or_stop, stop

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.shift.many import Patient, Read, Unread

T = TypeVar("T")


def read_many(
    given: Sequence[Path],
    make: Callable[[Assessment], Patient[T]],
    at: str,
    policy: Path | None,
    bundled_only: bool,
    jobs: int = 1,
) -> tuple[list[Read[Patient[T]]], list[Unread]]:
    """Return what was made of each file and what could not be read, or leave with the exit code that fits."""
    from handoff.shift.many import Read, Request, Unread, read_each, state_files

    setup = setup_or_stop(policy, bundled_only)
    paths, policies = state_files(given)
    for left in policies:
        complain(f"left out: {left} (a policy file)")
    if not paths:
        stop(Exit.USAGE, f"no patient-state file in {', '.join(map(str, given))}; they end in .yaml")
    found = list(_watched(read_each(paths, Request(at, policy, bundled_only, make), setup, jobs), len(paths)))
    return [one for one in found if isinstance(one, Read)], [one for one in found if isinstance(one, Unread)]


def mixed_up_lines(read: Sequence[Read[Patient[T]]]) -> tuple[str, ...]:
    """Return a line for each two patients of the set who could be taken for each other."""
    from handoff.shift.alike import mixed_up

    return mixed_up([(f"{one.made.said} ({one.file})", one.made.person) for one in read])


def unread_lines(unread: Sequence[Unread]) -> list[str]:
    """Return what could not be read, and why, one line each."""
    return list(dict.fromkeys(line for one in unread for line in one.lines))


def lost_lines(read: Sequence[Read[Patient[T]]]) -> list[str]:
    """Return what could not be computed and for whom, one line each."""
    return [f"{one.made.said}: {line}" for one in read for line in one.made.lost]


def leave_many(read: Sequence[Read[Patient[T]]], unread: Sequence[Unread], said: bool = False) -> NoReturn:
    """Say what is missing from the list, unless ``said``, and leave with exit code 1 (a file), 3 (a figure) or 0."""
    lost = lost_lines(read)
    for line in () if said else lost:
        complain(f"not computed: {line}")
    if unread and not read and all(one.usage for one in unread):
        stop(Exit.USAGE, *unread_lines(unread))
    if unread and not said:
        many = "files" if len(unread) > 1 else "file"
        complain(f"{len(unread)} {many} could not be read and stand in no list above:")
        for line in unread_lines(unread):
            complain(f"  {line}")
    raise SystemExit(int(Exit.FAULTS if unread else Exit.INCOMPLETE if lost else Exit.DONE))


def _watched(found: Iterator[T], total: int) -> Iterator[T]:
    """Yield what is found, with a progress bar on the error stream where that is a terminal."""
    if total < 2 or not sys.stderr.isatty():
        yield from found
        return
    from rich.console import Console
    from rich.progress import track

    yield from track(found, "reading", total, console=Console(stderr=True), transient=True)
