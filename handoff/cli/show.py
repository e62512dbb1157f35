"""``handoff show``: the patient in the terminal, or the same JSON as items.json."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import AtOption, BundledOption, FileArgument, PolicyOption, assessed, leave, say, who

if TYPE_CHECKING:
    from handoff.assess import Assessment

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
        say(who(assessment.state))
        _print(assessment)
    leave(assessment)


def _print(assessment: Assessment) -> None:
    from rich.console import Console

    from handoff.shift.screen import print_screen, width_for

    console = Console(markup=False, emoji=False, highlight=False)
    console.width = width_for(console)
    if console.is_terminal:
        print_screen(assessment, console)
        return
    with console.capture() as captured:
        print_screen(assessment, console)
    for line in captured.get().splitlines():
        say(line.rstrip())
