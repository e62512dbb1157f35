"""``handoff chart``: add, correct or strike out an entry; every other byte of the file stays."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    BundledOption,
    Exit,
    PolicyOption,
    complain,
    leave,
    look_alikes,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from handoff.chart.asking import Ask
    from handoff.chart.charting import Charted, Request
    from handoff.chart.meanings import Lexicon
    from handoff.registry import Setup

FileArgument = Annotated[
    Path | None, typer.Argument(metavar="FILE", help="The patient-state file, for example ferrandel.yaml")
]
EntriesArgument = Annotated[
    list[str] | None,
    typer.Argument(
        metavar='"ENTRY"...', help='What to chart, each in quotes: "urine 35 mL" "pulse 118 /min"'
    ),
]
AtOption = Annotated[
    str,
    typer.Option("--at", metavar="TIME", help="When it was so: 15:00 or '2026-03-14 15:00'; now if left out"),
]
ByOption = Annotated[
    str, typer.Option("--by", metavar="WHO", envvar="HANDOFF_BY", help="Who charts it, for example EM")
]
NowOption = Annotated[
    str,
    typer.Option("--now", metavar="TIME", help="The moment of charting, where it is not the present minute"),
]
ConfirmOption = Annotated[
    bool, typer.Option("--confirm", help="An unusual value was checked; an entry is charted a second time")
]
CorrectOption = Annotated[
    str,
    typer.Option(
        "--correct", metavar="ENTRY", help='Time and the entry as it should be: "14:15 pulse 142 /min"'
    ),
]
StrikeOption = Annotated[
    str,
    typer.Option(
        "--strike", metavar="ENTRY", help='Time and words of what was entered in error: "14:15 pulse"'
    ),
]
WhyOption = Annotated[
    str, typer.Option("--why", metavar="TEXT", help='Why: "misread", "entered in error, wrong patient"')
]
WordsOption = Annotated[bool, typer.Option("--words", help="List every entry that is understood, and stop")]


def chart(
    file: FileArgument = None,
    entries: EntriesArgument = None,
    at: AtOption = "",
    by: ByOption = "",
    now: NowOption = "",
    confirm: ConfirmOption = False,
    correct: CorrectOption = "",
    strike: StrikeOption = "",
    why: WhyOption = "",
    words: WordsOption = False,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Chart observations, doses, fluid, findings, events and notes into a patient-state file.

    Example: handoff chart ferrandel.yaml "urine 35 mL" "pulse 118 /min" --at 15:00 --by EM
    """
    from handoff.chart.charting import Request
    from handoff.chart.lexicon import lexicon
    from handoff.chart.listing import lines
    from handoff.registry import PluginError

    setup = setup_or_stop(policy, bundled_only)
    try:
        known = lexicon(setup)
    except PluginError as error:
        stop(Exit.SETUP, f"plugin fault: {error}")
    if words:
        for line in lines(known):
            say(line)
        return
    if file is None or sum(map(bool, (entries, correct, strike))) != 1:
        stop(
            Exit.USAGE,
            'say what to chart: handoff chart FILE "urine 35 mL" --at 15:00 --by EM',
            '  or: handoff chart FILE --correct "14:15 pulse 142 /min" --why "misread"',
            '  or: handoff chart FILE --strike "14:15 pulse" --why "entered in error, wrong patient"',
        )
    if at and not entries:
        stop(Exit.USAGE, "the time of what is corrected or struck out stands in the entry; leave --at out")
    by = by.strip() or _asked("Who charts it (initials)?", "who charts it? add --by EM, or set HANDOFF_BY")
    if not entries:
        why = why.strip() or _asked("Why?", 'say why: --why "misread"')
    request = Request(tuple(entries or ()), at, " ".join(by.split()), correct, strike, " ".join(why.split()))
    charted = _charted(file, setup, known, request, now, confirm)
    try:
        _tell(charted, setup, known)
    except Exception as error:  # whatever goes wrong now, the nurse must not chart it a second time
        complain(f"the entry was written; what it changed could not be shown ({type(error).__name__})")
        raise SystemExit(int(Exit.INCOMPLETE)) from None


def _asked(question: str, otherwise: str) -> str:
    if not sys.stdin.isatty():
        stop(Exit.USAGE, f"{otherwise}; nothing was written")
    try:
        return str(typer.prompt(question)).strip()
    except typer.Abort:
        stop(Exit.USAGE, "nothing was written")


def _charted(file: Path, setup: Setup, known: Lexicon, request: Request, now: str, confirm: bool) -> Charted:
    from handoff.chart.asking import Ask, Refused
    from handoff.chart.charting import chart as chart_text
    from handoff.chart.storing import store
    from handoff.files import CannotWrite
    from handoff.state.faults import StateFaults
    from handoff.state.file_text import NotAStateFile
    from handoff.state.load import MomentError

    yes: set[str] = set()

    def make(text: str) -> Charted:
        return chart_text(text, str(file), setup, known, request, now, yes)

    while True:
        try:
            return store(file, make, lambda: complain("another program is writing this file; waiting for it"))
        except Ask as ask:
            yes.update(_answered(ask, confirm))
        except Refused as error:
            stop(Exit.USAGE, *error.lines, "nothing was written")
        except StateFaults as error:
            lines = [fault.said(error.file) for fault in error.faults]
            stop(
                Exit.FAULTS, *lines, "the file has faults of its own; correct them first; nothing was written"
            )
        except MomentError as error:
            stop(Exit.USAGE, str(error).replace("--at", "--now", 1))
        except (NotAStateFile, CannotWrite) as error:
            stop(Exit.USAGE, str(error))


def _answered(ask: Ask, confirm: bool) -> set[str]:
    yes = {question.key for question in ask.questions if confirm and question.by_confirm}
    open_ones = [question for question in ask.questions if question.key not in yes]
    if open_ones and not sys.stdin.isatty():
        stop(Exit.USAGE, *(question.refused for question in open_ones), "nothing was written")
    if open_ones:
        say(who(ask.state))
    for question in open_ones:
        try:
            is_so = typer.confirm(question.asked)
        except typer.Abort:
            is_so = False
        if not is_so:
            stop(Exit.USAGE, "nothing was written")
        yes.add(question.key)
    return yes


def _tell(charted: Charted, setup: Setup, known: Lexicon) -> None:
    from handoff.chart.effect import changes
    from handoff.work import assess_loaded

    before, after = assess_loaded(charted.before, setup), assess_loaded(charted.after, setup)
    say(who(after.state))
    for line in charted.lines:
        say(line)
    changed = list(changes(before, after, known.totals))
    if changed:
        say("changed by it:")
    for line in changed:
        say(f"  {line}")
    look_alikes(Path(after.state.file))
    leave(after)
