"""``handoff wording``: what in a text is unsafe or vague, and how it is written safely."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    PolicyOption,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from handoff.shift.wording import Finding

WhatArgument = Annotated[
    str,
    typer.Argument(
        metavar="FILE|DOCX|-",
        help="A patient-state file, a Word document, a text file, or - for what is typed in",
    ),
]

STATES = (".yaml", ".yml")
MEGABYTE_BYTES = 1_000_000
MOST_BYTES = 8 * MEGABYTE_BYTES


def wording(
    what: WhatArgument, at: AtOption = "", policy: PolicyOption = None, bundled_only: BundledOption = False
) -> None:
    """Point out unsafe abbreviations, number forms and vague words, with the safe form and why.

    Example: handoff wording ferrandel.yaml --at "2026-03-14 19:30"
    """
    suffix = Path(what).suffix.lower()
    if what == "-":
        found = _of_text(_typed(), "what was typed in")
        name = "text"
    elif suffix in STATES:
        found = _of_state(Path(what), at, policy, bundled_only)
        name = what
    else:
        content = _bytes(Path(what))
        is_word = suffix == ".docx" or content.startswith(b"PK")
        found = _of_word(content, what) if is_word else _of_text(content, what)
        name = what
    for finding in found:
        say(finding.said(name))
    sources = dict.fromkeys(f"{one.source}" for one in found)
    if found:
        say("")
    count = len(found)
    say(
        f"{count} finding{'' if count == 1 else 's'}"
        if found
        else "nothing is pointed out; that does not say it is safe"
    )
    for source in sources:
        say(f"  {source}")


def _of_state(file: Path, at: str, policy: Path | None, bundled_only: bool) -> list[Finding]:
    from handoff.shift.wording import check_state, load_rules
    from handoff.state.file_text import read_text

    setup = setup_or_stop(policy, bundled_only)
    state = open_or_stop(file, setup, at).state
    say(who(state))
    return check_state(state.root, setup.schema, read_text(file), load_rules())


def _of_word(content: bytes, name: str) -> list[Finding]:
    from handoff.shift.wording import check_lines, load_rules
    from handoff.shift.wording.word_text import NotADocument, lines_of

    try:
        return check_lines(lines_of(content), load_rules())
    except NotADocument as error:
        stop(Exit.USAGE, f"{name}: {error}")


def _of_text(content: bytes, name: str) -> list[Finding]:
    from handoff.shift.wording import check_lines, load_rules

    try:
        text = content.decode("utf-8-sig")
    except UnicodeDecodeError:
        stop(Exit.USAGE, f"{name} is not text in UTF-8; save it as UTF-8 and try again")
    return check_lines([("", line) for line in text.splitlines()], load_rules())


def _typed() -> bytes:
    content = sys.stdin.buffer.read(MOST_BYTES + 1)
    if len(content) > MOST_BYTES:
        stop(Exit.USAGE, f"that is more than {MOST_BYTES // MEGABYTE_BYTES} MB; give a part of it")
    return content


def _bytes(file: Path) -> bytes:
    try:
        if not file.is_file():
            stop(Exit.USAGE, f"{file} is no file; name a patient-state file, a Word document or a text file")
        if file.stat().st_size > MOST_BYTES and file.suffix.lower() != ".docx":
            stop(Exit.USAGE, f"{file} is larger than {MOST_BYTES // MEGABYTE_BYTES} MB; give a part of it")
        return file.read_bytes()
    except OSError as error:
        stop(
            Exit.USAGE, f"{file} cannot be read ({error.strerror}); close it in other programs and try again"
        )
