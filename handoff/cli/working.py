"""``handoff working``: how one figure was worked out."""

from __future__ import annotations

import difflib
from typing import Annotated

import typer

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    FileArgument,
    PolicyOption,
    assessed,
    leave,
    say,
    stop,
)

KeyArgument = Annotated[str, typer.Argument(metavar="KEY", help="The figure, for example fluid.total_24h")]


def working(
    file: FileArgument,
    key: KeyArgument,
    at: AtOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Show one figure: formula, sum, inputs with their lines, source, cautions.

    Example: handoff working ferrandel.yaml fluid.total_24h --at "2026-03-14 19:30"
    """
    from handoff.terminal import working_lines

    assessment = assessed(file, at, policy, bundled_only)
    item = assessment.item(key)
    if item is None:
        failed = [one for one in assessment.failures if one.plugin == key.partition(".")[0]]
        if failed:
            stop(Exit.INCOMPLETE, f"not computed: {failed[0].title}: {failed[0].what}")
        keys = [item.key for item in assessment.items]
        close = difflib.get_close_matches(key, keys, n=3, cutoff=0.4)
        hint = f"did you mean {' or '.join(close)}?" if close else "handoff show FILE --json lists them"
        stop(Exit.USAGE, f"no figure '{key}'; {hint}")
    for line in working_lines(item, assessment):
        say(line)
    leave(assessment)
