"""The assessment as plain lines for a terminal: readable without colour, at 80 columns."""

from __future__ import annotations

import shutil
import textwrap
from collections.abc import Iterator

from handoff.assess import Assessment
from handoff.plugin import Flag, Item, Part, System

WIDTH = 80
_MARKS = {Flag.ACTION: "ACTION", Flag.REVIEW: "REVIEW", Flag.NONE: "", Flag.NOT_RECORDED: ""}


def screen(assessment: Assessment) -> Iterator[str]:
    """Yield the lines of one patient: what needs action first, then each part by system."""
    clock = assessment.state.clock
    yield f"as of {clock.day_and_time(assessment.now)} ({clock.zone}); policy: {assessment.policy.name}"
    for failure in assessment.failures:
        yield from _wrapped(f"NOT COMPUTED: {failure.title}: {failure.what}", "")
    for fault in assessment.warnings:
        yield from _wrapped(f"UNUSUAL: line {fault.line}: {fault.path}: {fault.what}", "")
    for part in Part:
        items = [item for item in assessment.items if item.part is part and not item.detail]
        if items:
            yield ""
            yield part.value.upper()
            yield from _part(items, assessment)
    missing = assessment.not_recorded
    if missing:
        yield ""
        yield f"NOT RECORDED ({len(missing)})"
        yield from _wrapped("; ".join(item.label for item in missing), "  ")


def _part(items: list[Item], assessment: Assessment) -> Iterator[str]:
    for system in System:
        of_system = [item for item in items if item.system is system and item.flag is not Flag.NOT_RECORDED]
        if of_system:
            yield f" {system.value}"
        for item in of_system:
            yield from _wrapped(_line(item, assessment), "  ")


def _line(item: Item, assessment: Assessment) -> str:
    mark = f"[{_MARKS[item.flag]}] " if _MARKS[item.flag] else ""
    when = f" ({assessment.state.clock.time(item.as_of, assessment.now)})" if item.as_of else ""
    return f"{mark}{item.label}: {item.shown}{when}"


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
