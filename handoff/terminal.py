"""Plain lines for a terminal: readable without colour, at 80 columns."""

from __future__ import annotations

import shutil
import textwrap
from collections.abc import Iterator

from handoff.assess import Assessment
from handoff.plugin import Item

WIDTH = 80


def working_lines(item: Item, assessment: Assessment) -> Iterator[str]:
    """Yield how ``item`` was worked out: formula, sum, inputs with their lines, rule, sources, cautions."""
    yield f"{item.label}: {item.shown}"
    if item.as_of:
        yield f"as of {assessment.state.clock.day_and_time(item.as_of)}"
    if item.working:
        yield from _wrapped(f"formula: {item.working.formula}", "")
        yield from _wrapped(f"sum: {item.working.sum}", "")
        if item.working.rule:
            yield from _wrapped(f"rule: {item.working.rule}", "")
        for part in item.working.inputs:
            place = f" ({assessment.state.file}, line {part.line})" if part.line else ""
            yield from _wrapped(f"input: {part.label}: {part.shown}{place}", "")
    elif item.line:
        yield f"charted: {assessment.state.file}, line {item.line}"
    for source in item.sources:
        yield from _wrapped(f"source: {source.shown()}", "")
    for caution in item.cautions:
        yield from _wrapped(f"caution: {caution}", "")


def fitted(line: str, to_terminal: bool) -> str:
    """Return ``line`` broken at the width of the terminal; unbroken for a file or another program."""
    if not to_terminal:
        return line
    width = shutil.get_terminal_size((WIDTH, 1)).columns
    return "\n".join(textwrap.wrap(line, width, subsequent_indent="    ")) or line


def _wrapped(text: str, indent: str) -> list[str]:
    return textwrap.wrap(text, WIDTH, initial_indent=indent, subsequent_indent=indent + "    ") or [""]
