"""``handoff show``: the patient in the terminal, or the same JSON as items.json."""

from __future__ import annotations

from typing import Annotated

import typer

from handoff.cli.edge import AtOption, BundledOption, FileArgument, PolicyOption, assessed, leave, say, who

JsonOption = Annotated[bool, typer.Option("--json", help="Print the same JSON as items.json")]


def show(
    file: FileArgument,
    json: JsonOption = False,
    at: AtOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Show the patient in the terminal.

    Example: handoff show ferrandel.yaml --at "2026-03-14 19:30"
    """
    from handoff.items_json import as_json
    from handoff.terminal import screen

    assessment = assessed(file, at, policy, bundled_only)
    if json:
        typer.echo(as_json(assessment), nl=False)
    else:
        say(who(assessment.state))
        for line in screen(assessment):
            say(line)
    leave(assessment)
