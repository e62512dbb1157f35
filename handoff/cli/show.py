"""``handoff show``: the patient in the terminal, or the same JSON as items.json."""

from __future__ import annotations

from typing import Annotated

import typer

from handoff.cli.console import draw
from handoff.cli.edge import AtOption, BundledOption, FileArgument, PolicyOption, assessed, leave, say, who

JsonOption = Annotated[bool, typer.Option("--json", help="Print the same JSON as items.json")]


def show(
    file: FileArgument,
    json: JsonOption = False,
    at: AtOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Show the patient in the terminal: page one of the handover first, then its parts.

    Example: handoff show ferrandel.yaml --at "2026-03-14 19:30"
    """
    assessment = assessed(file, at, policy, bundled_only)
    if json:
        from handoff.items_json import as_json

        typer.echo(as_json(assessment).encode(), nl=False)  # bytes, so that no console changes the line ends
    else:
        from handoff.shift.screen import print_screen

        say(who(assessment.state))
        draw(lambda console: print_screen(assessment, console))
    leave(assessment)
