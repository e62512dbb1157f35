"""The page of a ward on a terminal: a plain table that reads without colour."""

from __future__ import annotations

from rich import box
from rich.console import Console
from rich.padding import Padding
from rich.table import Table
from rich.text import Text

from handoff.document.printable import visible
from handoff.document.ward import Ward

PATIENT_WIDTH, WORD_WIDTH, COUNT_WIDTH = 20, 10, 7
"""Letters of a column."""

FIRST_WIDTH, NEXT_WIDTH = 3, 2
"""Shares of what is left of the width."""


def print_ward(ward: Ward, console: Console) -> None:
    """Print the ward: what is missing from the table first, then one row for each patient."""
    console.print(Text(visible(f"{ward.frame.title}, {ward.frame.made_at}: {ward.count}"), style="bold"))
    for band in ward.bands:
        console.print(Text(visible(band.title).upper(), style="bold"))
        for line in band.lines:
            console.print(Padding(Text(visible(line), overflow="fold"), (0, 0, 0, 1), expand=False))
    if not ward.rows:
        return
    table = Table(box=box.ASCII, show_lines=True, expand=True, padding=(0, 0))
    table.add_column("patient, place", width=PATIENT_WIDTH, overflow="fold")
    table.add_column("nurse's word", width=WORD_WIDTH, overflow="fold")
    table.add_column("needs action first", ratio=FIRST_WIDTH, overflow="fold")
    table.add_column("overdue", width=COUNT_WIDTH, justify="right")
    table.add_column("next", ratio=NEXT_WIDTH, overflow="fold")
    for row in ward.rows:
        cells = (f"{row.patient}, {row.place}", row.severity, row.first, row.overdue, row.next)
        table.add_row(*(Text(visible(cell)) for cell in cells))
    console.print(table)
