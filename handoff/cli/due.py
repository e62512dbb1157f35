"""``handoff due``: what is overdue, due within the hour and due this shift."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import AtOption, BundledOption, PolicyOption, say, who
from handoff.cli.many import leave_many, mixed_up_lines, read_many

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.shift.due import DueList
    from handoff.shift.many import Patient

FilesArgument = Annotated[
    list[Path], typer.Argument(metavar="FILE...", help="Patient-state files, or folders that hold them")
]


def due(
    files: FilesArgument, at: AtOption = "", policy: PolicyOption = None, bundled_only: BundledOption = False
) -> None:
    """List what is overdue, due within the hour and due this shift, for one or many patients.

    Each line: time, patient, reference in the care plan, what to do.

    Example: handoff due ferrandel.yaml szolnoki.yaml --at "2026-03-14 19:30"
    """
    from handoff.shift.due import Group, in_order
    from handoff.terminal import fitted

    read, unread = read_many(files, _made, at, policy, bundled_only)
    moments = dict.fromkeys(one.made.made.moment for one in read)
    say(f"due at {'; '.join(moments)}" if moments else "no file could be read")
    for one in read:
        say(f"  {one.made.said}")
    for line in mixed_up_lines(read):
        say(f"LOOK TWICE: {line}")
    lines = in_order(line for one in read for line in one.made.made.lines)
    for group in Group:
        of_group = [line for line in lines if line.group is group]
        if read:
            say("")
            say(f"{group.title.upper()} ({len(of_group)})")
        for one_due in of_group:
            say(fitted(one_due.said(), sys.stdout.isatty()))
    ongoing = sum(one.made.made.ongoing for one in read)
    later = sum(one.made.made.later for one in read)
    if ongoing or later:
        say("")
        say(f"not listed: {ongoing} without a time, through the shift; {later} due after the shift")
    leave_many(read, unread)


def _made(assessment: Assessment) -> Patient[DueList]:
    from handoff.shift.due import due_list
    from handoff.shift.many import Patient
    from handoff.shift.people import person_of

    state = assessment.state
    lost = tuple(f"{one.title}: {one.what}" for one in assessment.failures)
    return Patient(who(state), person_of(state), lost, due_list(assessment))
