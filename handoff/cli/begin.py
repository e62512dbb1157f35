"""``handoff begin``: a new patient file, by questions or as a skeleton."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    BundledOption,
    Exit,
    PolicyOption,
    look_alikes,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from handoff.begin.conversation import Conversation
    from handoff.registry import Setup

NewFileArgument = Annotated[
    Path, typer.Argument(metavar="FILE", help="The file to make, for example ferrandel.yaml")
]
BlankOption = Annotated[
    bool, typer.Option("--blank", help="Ask nothing: make a commented skeleton to fill in")
]
NowOption = Annotated[
    str,
    typer.Option("--now", metavar="TIME", help="The moment of beginning, where it is not the present minute"),
]


def begin(
    file: NewFileArgument,
    blank: BlankOption = False,
    now: NowOption = "",
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
) -> None:
    """Begin a new patient file by questions in the terminal; a file that is there is never overwritten.

    Example: handoff begin ferrandel.yaml
    """
    from handoff.begin.new_file import local_zone, make_file, refuse_existing
    from handoff.files import CannotWrite

    setup = setup_or_stop(policy, bundled_only)
    try:
        refuse_existing(file)
        if blank:
            _blank(file, setup, local_zone())
            return
        conversation = _conversation(file, setup, now, local_zone())
        text = _asked(conversation)
        make_file(file, text)
    except CannotWrite as error:
        stop(Exit.USAGE, str(error), "nothing was written")
    _tell(file, setup, conversation)


def _blank(file: Path, setup: Setup, zone: str) -> None:
    from handoff.begin.filling import faults_of
    from handoff.begin.new_file import make_file
    from handoff.begin.skeleton import skeleton

    text = skeleton(setup.schema, zone)
    make_file(file, text)
    say(f"{file}: a skeleton without a patient yet; blank means not recorded")
    say("to be filled in before it can be used:")
    for fault in faults_of(text, str(file), setup)[0]:
        say(f"  {fault.said(str(file))}")


def _conversation(file: Path, setup: Setup, now: str, zone: str) -> Conversation:
    from handoff.begin.conversation import Conversation
    from handoff.state.clock import ClockError

    conversation = Conversation(str(file), setup, now, zone, _line, say)
    try:
        _ = conversation.now
    except ClockError as error:
        stop(Exit.USAGE, f"--now: {error.what}; {error.cure}")
    return conversation


def _line(question: str) -> str:
    """Print ``question`` and return the line typed; the end of what is typed stops the questions."""
    from handoff.begin.conversation import Stopped

    typer.echo(question, nl=False)
    line = sys.stdin.readline()
    if not line:
        raise Stopped
    return line


def _asked(conversation: Conversation) -> str:
    from handoff.begin.conversation import Stopped
    from handoff.begin.filling import faults_of

    try:
        text = conversation.run()
        faults, _ = faults_of(text, conversation.file, conversation.setup, conversation.moment)
        if faults:
            lines = (fault.said(conversation.file) for fault in faults)
            stop(Exit.FAULTS, *lines, "nothing was written")
        say("")
        for line in text.splitlines():
            if line and not line.startswith("#"):
                say(f"  {line}")
        if conversation.ask(f"Write this to {conversation.file}? [y/N] > ").strip().casefold() not in (
            "y",
            "yes",
        ):
            raise Stopped
    except Stopped:
        say("")
        stop(Exit.USAGE, "stopped; nothing was written")
    return text


def _tell(file: Path, setup: Setup, conversation: Conversation) -> None:
    from handoff.work import open_file

    say(who(open_file(file, setup, conversation.moment).state))
    say(f"written: {file} (only you can read it)")
    if missing := conversation.skipped():
        say(f"not recorded yet: {'; '.join(missing)}")
    say(f'next: handoff chart {file} "pulse 118 /min" "urine 35 mL" --by EM')
    look_alikes(file)
