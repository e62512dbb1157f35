"""The edge of the commands that draw on a terminal; what is piped is plain text without trailing spaces."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

from handoff.cli.edge import say

if TYPE_CHECKING:
    from rich.console import Console


def draw(print_on: Callable[[Console], None]) -> None:
    """Let ``print_on`` print on the terminal, or as plain text of a page's width into a file or a program."""
    from rich.console import Console

    from handoff.shift.screen import width_for

    console = Console(markup=False, emoji=False, highlight=False)
    console.width = width_for(console)
    if console.is_terminal:
        print_on(console)
        return
    with console.capture() as captured:
        print_on(console)
    for line in captured.get().splitlines():
        say(line.rstrip())
