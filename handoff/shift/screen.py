"""One patient on a terminal: page one of the handover, then the parts; reads without colour."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rich.console import Console
from rich.padding import Padding
from rich.table import Table
from rich.text import Text

from handoff.assess import Assessment
from handoff.document.handover import IN_THE_BAND
from handoff.document.identity import identity
from handoff.document.page_one import KeyRow, PageOne, page_one
from handoff.document.printable import visible
from handoff.document.schedule import Shift
from handoff.document.sections import bands, row, sentence
from handoff.plugin import Flag, Item, Part, System, words
from handoff.terminal import WIDTH

STRONG, QUIET = "bold", "dim"
MARK = "bold reverse"
"""How a flag looks beside the word that says it."""

NAME_WIDTH, LABEL_WIDTH, REFERENCE_WIDTH, TIME_WIDTH = 13, 26, 4, 6
"""Letters of a column."""


def width_for(console: Console) -> int:
    """Return the width to print at: the terminal's own, or that of a page for a file or a program."""
    return console.width if console.is_terminal else WIDTH


def print_screen(assessment: Assessment, console: Console) -> None:
    """Print one patient: who, what needs action, what is due, what to do if, what is missing, then the parts."""
    shift = Shift(assessment.now, assessment.now + assessment.policy.shift_length, assessment.state.clock)
    _who(assessment, console)
    for band in bands(assessment):
        _head(console, band.title)
        for line in band.lines:
            _line(console, line)
    _page(page_one(assessment, shift), console)
    for part in Part:
        items = [item for item in assessment.items if item.part is part and not _is_placed(item)]
        _part(part, items, assessment, console)
    missing = list(dict.fromkeys(sentence(item.label) for item in assessment.not_recorded))
    if missing:
        _head(console, f"not recorded ({len(assessment.not_recorded)})")
        _line(console, "; ".join(missing))


def _is_placed(item: Item) -> bool:
    """Return whether an item stands in the band at the top, or is kept for the appendix."""
    return item.detail or (item.key in IN_THE_BAND and item.flag is Flag.NONE)


def _who(assessment: Assessment, console: Console) -> None:
    state, clock = assessment.state, assessment.state.clock
    band = identity(assessment)
    written = state.handover
    severity = words(written.get("severity")) or "not recorded by the nurse"
    at = state.when(written.get("at"))
    facts = [
        ("as of", f"{clock.day_and_time(assessment.now)} ({clock.zone}); policy: {assessment.policy.name}"),
        ("severity", f"{severity} ({clock.time(at, assessment.now)})" if at else severity),
        ("worries", "; ".join(state.texts(written.get("concerns"))) or "not recorded"),
        ("burn", f"{band.burn}; {band.since}"),
        ("where", band.location),
        ("weight", band.weight),
        ("allergies", band.allergies),
        ("resuscitation", band.resuscitation),
        ("isolation", band.isolation),
    ]
    _grid(console, [(name, text, "") for name, text in facts], (NAME_WIDTH, 0))


def _page(page: PageOne, console: Console) -> None:
    _head(console, "needs action")
    _rows(console, page.actions)
    if not page.actions and not page.more_actions:
        _line(console, "no entry is flagged ACTION; that does not say that the patient is well")
    _more(console, "also flagged ACTION", page.more_actions)
    if page.tasks:
        _head(console, "do now (reference in the care plan)")
        _grid(console, [(task.ref, task.text, "") for task in page.tasks], (REFERENCE_WIDTH, 0))
    _more(console, "also to do now", page.more_tasks)
    _head(console, "what to do if")
    _grid(console, [(line.event, line.answer, "") for line in page.if_then], (LABEL_WIDTH, 0))
    if not page.if_then:
        _line(console, "not recorded by the nurse: agree it at the bedside")
    _head(console, "not recorded and needed first")
    _line(console, page.gaps or "none of the entries that can kill first is missing")
    _line(console, f"{page.missing_count} not recorded; the list is at the end")
    if page.due:
        _head(console, "due or overdue")
        _rows(console, page.due)
    _more(console, "also due for review", page.more_due)


def _part(part: Part, items: Sequence[Item], assessment: Assessment, console: Console) -> None:
    shown = [item for item in items if item.flag is not Flag.NOT_RECORDED]
    if not shown:
        return
    _head(console, part.value)
    for system in System:
        rows = [row(item, assessment) for item in shown if item.system is system]
        if rows:
            _line(console, system.value, STRONG)
            _grid(
                console,
                [(f"{one.what}{f' [{one.flag}]' if one.flag else ''}", one.value, one.time) for one in rows],
                (LABEL_WIDTH, TIME_WIDTH),
            )


def _rows(console: Console, rows: Iterable[KeyRow]) -> None:
    found = [(one.what, one.value + (f" - {one.why}" if one.why else ""), one.time) for one in rows]
    _grid(console, found, (LABEL_WIDTH, TIME_WIDTH))


def _grid(console: Console, rows: Sequence[tuple[str, str, str]], widths: tuple[int, int]) -> None:
    """Print rows of what, value and time; ``widths`` are those of the first and the last (0: none)."""
    if not rows:
        return
    first, last = widths
    table = Table.grid(padding=(0, 1), expand=True)
    table.add_column(width=first, overflow="fold")
    table.add_column(ratio=1, overflow="fold")
    if last:
        table.add_column(width=last, overflow="fold", justify="right")
    for what, value, time in rows:
        cells = [_marked(what), Text(visible(value)), Text(visible(time), style=QUIET)]
        table.add_row(*cells[: 2 + bool(last)])
    console.print(Padding(table, (0, 0, 0, 1)))


def _marked(what: str) -> Text:
    text = Text(visible(what), style=STRONG)
    for mark in ("[ACTION]", "[REVIEW]"):
        if what.endswith(mark):
            text.stylize(MARK, len(text) - len(mark))
    return text


def _more(console: Console, label: str, text: str) -> None:
    if text:
        _line(console, f"{label}: {text}")


def _head(console: Console, title: str) -> None:
    console.print()
    console.print(Text(visible(title).upper(), style=STRONG))


def _line(console: Console, text: str, style: str = "") -> None:
    console.print(Padding(Text(visible(text), style=style, overflow="fold"), (0, 0, 0, 1)))
