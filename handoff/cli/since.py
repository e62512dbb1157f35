"""``handoff since``: what changed since the last handover."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    FileArgument,
    PolicyOption,
    leave,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.document.changes import Changes
    from handoff.registry import Setup
    from handoff.shift.snapshot import Snapshot

OtherArgument = Annotated[
    Path,
    typer.Argument(metavar="OTHER", help="What was handed over before: an earlier items.json or state file"),
]
SinceOption = Annotated[
    str,
    typer.Option(
        "--since",
        metavar="TIME",
        help="The moment OTHER is read for, if it is a state file; its last entry if left out",
    ),
]


def since(
    file: FileArgument,
    other: OtherArgument,
    at: AtOption = "",
    since_time: SinceOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Show what changed since the last handover: values with direction, flags, gaps, tasks.

    Example: handoff since ferrandel.yaml documents/ferrandel.items.json --at "2026-03-14 19:30"
    """
    from handoff.work import assess_loaded

    setup = setup_or_stop(policy, bundled_only)
    assessment = assess_loaded(open_or_stop(file, setup, at), setup)
    found = changes_or_stop(assessment, setup, other, since_time)
    say(who(assessment.state))
    _print(found, assessment)
    leave(assessment)


def changes_or_stop(assessment: Assessment, setup: Setup, other: Path, since_time: str = "") -> Changes:
    """Return what changed from ``other`` to ``assessment``, or leave with exit code 1 or 2 and the reason."""
    from handoff.shift.people import DifferentPatients
    from handoff.shift.since import WrongOrder, changes
    from handoff.shift.snapshot import NotItems, snapshot_of

    try:
        earlier = _earlier(assessment, setup, other, since_time)
        return changes(earlier, snapshot_of(assessment), assessment.state.clock)
    except DifferentPatients as error:
        stop(Exit.USAGE, f"{assessment.state.file} and {other}: {error.lines[0]}", *error.lines[1:])
    except (WrongOrder, NotItems) as error:
        stop(Exit.USAGE, f"{other}: {error}" if isinstance(error, WrongOrder) else str(error))


def _earlier(assessment: Assessment, setup: Setup, other: Path, since_time: str) -> Snapshot:
    from handoff.shift.charted import latest_moment
    from handoff.shift.snapshot import snapshot_in, snapshot_of
    from handoff.state.file_text import NotAStateFile, read_text
    from handoff.work import assess_loaded

    if other.suffix.lower() == ".json":
        if since_time:
            stop(Exit.USAGE, "--since goes with an earlier state file; an items.json holds its own moment")
        try:
            return snapshot_in(read_text(other), str(other))
        except NotAStateFile as error:
            stop(Exit.USAGE, str(error))
    clock = assessment.state.clock
    if not since_time:
        _stop_if_newer(other, setup, assessment)
        state = open_or_stop(other, setup, clock.iso(assessment.now)).state
        last = latest_moment(state, assessment.now)
        since_time = clock.iso(last or assessment.now)
    return snapshot_of(assess_loaded(open_or_stop(other, setup, since_time), setup))


def _stop_if_newer(other: Path, setup: Setup, assessment: Assessment) -> None:
    from handoff.state.faults import StateFaults
    from handoff.state.file_text import NotAStateFile
    from handoff.work import open_file

    clock = assessment.state.clock
    try:
        open_file(other, setup, clock.iso(assessment.now))
    except StateFaults as error:
        if all("later than" in fault.what for fault in error.faults):
            now = clock.day_and_time(assessment.now)
            stop(
                Exit.USAGE,
                f"{other} speaks of times after {now}; is it the newer file? Give the newer file first",
            )
    except NotAStateFile:
        return


def _print(found: Changes, assessment: Assessment) -> None:
    from handoff.document.printable import visible
    from handoff.terminal import fitted

    def line(text: str) -> None:
        say(fitted(visible(text), sys.stdout.isatty()))

    line(f"{found.title}, to {assessment.state.clock.day_and_time(assessment.now)}")
    for note in found.notes:
        line(f"  {note}")
    for system in found.systems:
        say("")
        line(system.title.upper())
        for row in system.rows:
            how = f" ({row.how})" if row.how else ""
            line(f"  {row.what}: {f'{row.before} -> ' if row.before else ''}{row.now}{how}")
    for title, tasks in (("NEW IN THE CARE PLAN", found.new_tasks), ("NO LONGER IN IT", found.ended_tasks)):
        if tasks:
            say("")
            line(title)
        for task in tasks:
            line(f"  {task}")
