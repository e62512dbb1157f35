"""What one written value may not be, because a part of it would be lost or read as something else."""

from __future__ import annotations

import re
from typing import Any, NamedTuple

import yaml

from handoff.state.characters import SPACES, unprintable
from handoff.state.quantity import comma_cure

_ODD_SPACE = re.compile(f"^-?[{SPACES}]|:[{SPACES}]|[{SPACES}]$")
_BLOCK_HEADER = re.compile(r"[|>][+-]?(?=\s|$)")
_LINE_BEGIN = re.compile(r"[\r\n]+( *)(?=\S)")
_REST_OF_NUMBER = re.compile(r"(?<=[0-9])(?:,[0-9]+)*,[0-9][^,\]}\r\n]*")
_TOO_NEAR = re.compile(r" ?(, ?)?#")
_NUMBER_BEFORE = re.compile(r"[0-9.]*$")


class Refusal(NamedTuple):
    """What is wrong with a value and what to do; whether it upsets the reading of what follows."""

    what: str
    cure: str
    upsets: bool = True


def _marks(event: yaml.ScalarEvent) -> tuple[Any, Any]:
    # The type stubs allow an event without marks; the parser makes none.
    return event.start_mark, event.end_mark


def plain_refused(text: str, event: yaml.ScalarEvent, in_brackets: bool) -> Refusal | None:
    """Return what is wrong with a value written without quotes, alone or inside brackets."""
    first, last = _marks(event)
    end = last.index
    if last.line != first.line:
        return Refusal(
            "the text runs on over the next line",
            "check that the bracket is closed, or put a long text in quotes"
            if in_brackets
            else "check the indentation below it, or put a long text after '|' on lines of its own",
        )
    lost = lost_comment(text, end)
    if lost is not None:
        return lost
    if not event.value.isascii() and (odd := _ODD_SPACE.search(event.value)):
        return Refusal(f"a no-break space at character {odd.end()}", "type an ordinary space there")
    return None


def lost_comment(text: str, end: int) -> Refusal | None:
    """Return what is wrong where a ``#`` that may have been meant as text follows at ``end``."""
    sign = _TOO_NEAR.match(text, end)
    if sign is None:
        return None
    before = "," if "," in sign[0] else text[end - 1]
    place = {",": "a comma", ":": "a colon", "-": "a dash"}.get(before, "a value")
    return Refusal(
        f"'#' after {place} with fewer than two spaces: the rest would be lost as a comment",
        "put the whole text in quotes, or put two spaces before a comment",
    )


def quoted_refused(text: str, event: yaml.ScalarEvent, indent: int) -> Refusal | None:
    """Return what is wrong with a value in quotes or after ``|`` or ``>``.

    Args:
        text: The whole file.
        event: The value as the parser gives it.
        indent: Spaces at the begin of a line that belongs to it. YAML asks for them and the
            parser does not check, so that a quote left open would swallow the lines below.
    """
    start, end = _marks(event)
    if unprintable(event.value):
        return Refusal(
            "a backslash code for an unprintable character", "delete it, or use single quotes", False
        )
    if event.style in ("|", ">"):
        if _BLOCK_HEADER.match(text, start.index):
            return None
        written = text[start.index : start.index + 12].split(maxsplit=1)[0]
        return Refusal(f"'{written}' begins a block of text and would be lost", "put it in quotes")
    lost = lost_comment(text, end.index)
    if lost is not None:
        return lost
    if end.line != start.line:
        lines = _LINE_BEGIN.finditer(text, start.index, end.index)
        if any(len(line[1]) < indent for line in lines):
            return Refusal(
                f"the quotes that open here close only on line {end.line + 1}",
                "close them where the text ends, or indent the lines between further than the key",
            )
    return None


def split_number(text: str, event: yaml.ScalarEvent) -> tuple[Refusal, int] | None:
    """Return what is wrong where a comma inside brackets cuts a number (``{value: 0,51}``), and its end."""
    rest = _REST_OF_NUMBER.match(text, _marks(event)[1].index)
    if rest is None:
        return None
    before = _NUMBER_BEFORE.search(event.value)
    said = (before[0] if before else "") + rest[0].strip()
    cure = f"{comma_cure(said)}; between two entries put a space after the comma"
    return Refusal(f"a comma in '{said}' splits the number", cure), rest.end()


def without_colon(key: str) -> Refusal:
    """Return what is wrong with a key that has no value inside braces."""
    name, colon, value = key.partition(":")
    if colon and value:
        return Refusal(f"no space after the colon in '{key}'", f"write '{name}: {value}'")
    return Refusal(
        f"'{key}' has no value: a comma ends an entry inside {{ }}",
        "put text with a comma in quotes, or write 'key: value'",
    )
