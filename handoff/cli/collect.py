"""``handoff collect``: bring the ticks of a care plan that was filled on screen back into the file."""

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
    from handoff.collect.collecting import Collected
    from handoff.collect.package import Returned
    from handoff.registry import Setup

DocumentArgument = Annotated[
    Path,
    typer.Argument(
        metavar="DOCX", help="The care plan that was filled, for example ferrandel-care-plan.docx"
    ),
]
FileArgument = Annotated[
    Path, typer.Argument(metavar="FILE", help="The patient-state file, for example ferrandel.yaml")
]
YesOption = Annotated[bool, typer.Option("--yes", help="Write what was read without asking")]
NowOption = Annotated[
    str,
    typer.Option(
        "--now", metavar="TIME", help="The moment of collecting, where it is not the present minute"
    ),
]


def collect(
    document: DocumentArgument,
    file: FileArgument,
    yes: YesOption = False,
    now: NowOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Read ticks, times and initials of a filled care plan back into the file; it shows them and asks first.

    Example: handoff collect ferrandel-care-plan.docx ferrandel.yaml
    """
    setup = setup_or_stop(policy, bundled_only)
    returned = _returned(document)
    read = _collected(file, setup, returned, now, None)
    _show(document, read)
    count = len(read.charted.lines)
    if not count:
        say("no new tick to write; the file was not changed")
        return
    if not yes:
        _ask(f"Write {count} tick{'s' if count > 1 else ''} into {file}?")
    written = _collected(file, setup, returned, now, read)
    _tell(file, setup, written)


def _returned(document: Path) -> Returned:
    from handoff.collect.package import returned
    from handoff.shift.wording.word_text import NotADocument

    try:
        return returned(document.read_bytes())
    except OSError as error:
        reason = error.strerror or type(error).__name__
        stop(Exit.USAGE, f"{document} could not be read ({reason}); save it, close it in Word and try again")
    except NotADocument as error:
        stop(Exit.USAGE, f"{document}: {error}")


def _collected(file: Path, setup: Setup, returned: Returned, now: str, agreed: Collected | None) -> Collected:
    """Read into the text of ``file``; with what was ``agreed``, write it, if it is still the same."""
    from handoff.chart.asking import Refused
    from handoff.chart.charting import Charted
    from handoff.chart.storing import store
    from handoff.collect.collecting import collect as collect_text
    from handoff.collect.identity import NotThisPlan
    from handoff.files import CannotWrite
    from handoff.state.faults import StateFaults
    from handoff.state.file_text import NotAStateFile, read_text
    from handoff.state.load import MomentError

    made: list[Collected] = []

    def make(text: str) -> Charted:
        made.append(collect_text(text, str(file), setup, returned, now))
        if agreed is not None and made[-1].charted.lines != agreed.charted.lines:
            raise Refused("the file was changed while you looked; collect again")
        return made[-1].charted

    try:
        if agreed is None:
            make(read_text(file))
        else:
            store(file, make, lambda: complain("another program is writing this file; waiting for it"))
    except (Refused, NotThisPlan) as error:
        stop(Exit.USAGE, *error.lines, "nothing was written")
    except StateFaults as error:
        lines = [fault.said(error.file) for fault in error.faults]
        stop(Exit.FAULTS, *lines, "the file has faults of its own; correct them first; nothing was written")
    except MomentError as error:
        stop(Exit.USAGE, str(error).replace("--at", "--now", 1))
    except (NotAStateFile, CannotWrite) as error:
        stop(Exit.USAGE, str(error))
    return made[-1]


def _show(document: Path, read: Collected) -> None:
    state = read.charted.before.state
    say(who(state))
    say(f"{document}: {'; '.join(read.said)}")
    for line in read.charted.lines:
        say(f"  {line}")
    if read.problems:
        say("look at these yourself; they are not written:")
    for line in read.problems:
        say(f"  {line}")


def _ask(question: str) -> None:
    if not sys.stdin.isatty():
        stop(Exit.USAGE, "add --yes to write what was read; nothing was written")
    try:
        is_so = typer.confirm(question)
    except typer.Abort:
        is_so = False
    if not is_so:
        stop(Exit.USAGE, "nothing was written")


def _tell(file: Path, setup: Setup, written: Collected) -> None:
    from handoff.work import assess_loaded

    count = len(written.charted.lines)
    say(f"written: {count} tick{'s' if count > 1 else ''} into {file}")
    look_alikes(file)
    leave(assess_loaded(written.charted.after, setup))
