"""What the YAML parser complains of, said with its place and a cure that a nurse can follow."""

from __future__ import annotations

import re

import yaml

from handoff.state.characters import SPACES, line_of
from handoff.state.faults import Fault

_CURES = (
    (
        "did not find expected key",
        "check the indentation, and that quotes and brackets on the line above are closed",
    ),
    (
        "could not find expected ':'",
        "write 'key: value', with a space after the colon; a list entry begins with '- '",
    ),
    ("mapping values are not allowed", "put text that holds ': ' in quotes, and check the indentation"),
    ("did not find expected ',' or ']'", "close the list with ]; put text with brackets or ': ' in quotes"),
    ("did not find expected ',' or '}'", "close the entry with }; put text with brackets or ': ' in quotes"),
    ("did not find expected '-' indicator", "begin each entry of a list with '- ', one below the other"),
    ("did not find expected comment or line break", "put text that begins with > or | in quotes"),
    ("did not find expected alphabetic or numeric", "put text that begins with & or * in quotes"),
    (
        "did not find expected node content",
        "delete the extra comma or colon, or put text that begins with ? in quotes",
    ),
    ("did not find expected <document start>", "delete the line with '...'"),
    ("mapping keys are not allowed", "put text that begins with ? in quotes"),
    ("found character that cannot start any token", "put the text in quotes (it begins with @, ` or %)"),
    (
        "found unknown escape character",
        "in double quotes write two backslashes for one, or use single quotes",
    ),
    ("found unexpected end of stream", "close the quotes or the bracket"),
    ("found unexpected document indicator", "close the quotes or the bracket"),
    ("block sequence entries are not allowed", "put the list on lines of its own, each beginning with '- '"),
    ("exceeded max", "a patient state needs less nesting; check the brackets"),
)
_FROM_ITS_BEGINNING = ("end of stream", "could not find expected ':'", "unexpected document indicator")
_NO_BREAK = re.compile(f"[{SPACES}]")


def parser_fault(error: yaml.YAMLError, text: str) -> Fault:
    """Return the fault that stopped the parser on ``text``; what was left open is named where it opens."""
    problem = str(getattr(error, "problem", None) or "not readable as YAML")
    mark, opened = getattr(error, "problem_mark", None), getattr(error, "context_mark", None)
    if mark is None or any(known in problem for known in _FROM_ITS_BEGINNING):
        mark = opened or mark
    elif opened is not None and "expected ','" in problem and mark.line > opened.line:
        problem, mark = f"{problem} up to line {mark.line + 1}", opened
    line, column = (mark.line + 1, mark.column + 1) if mark is not None else (1, 1)
    cure = next((cure for known, cure in _CURES if known in problem), "check the spelling of this line")
    odd = _NO_BREAK.search(line_of(text, line))
    if odd:
        column, cure = odd.start() + 1, "type an ordinary space where a no-break space stands"
    return Fault(line, column, "", f"the line cannot be read ({problem})", cure)
