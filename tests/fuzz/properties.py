"""What must be true of every refusal: it names a place, says what is wrong and what to do, on one line."""

from __future__ import annotations

import re
from collections.abc import Iterable

from handoff.assess import Assessment
from handoff.state.characters import Lines, line_of
from handoff.state.faults import Fault
from handoff.state.load import Loaded

LONGEST_SAID = 1200
"""Characters of a message with its place: more is no message."""

_PLACE = re.compile(r"^patient\.yaml:[1-9]\d*:[1-9]\d*: \S")
_PATH_PLACE = re.compile(r":[1-9]\d*:[1-9]\d*: ")


class Breach(AssertionError):
    """A promise was broken."""


def placed(faults: Iterable[Fault], text: str) -> None:
    """Raise where a fault has no place in ``text``, says nothing, or breaks its line."""
    lines = text.count("\n") + text.count("\r") + 1
    for fault in faults:
        said = fault.said("patient.yaml")
        if not _PLACE.match(said) or fault.line > lines + 1:
            raise Breach(f"no place: {said[:200]!r}")
        if fault.line <= lines and Lines(text).start(fault.line) is not None:
            length = len(line_of(text, fault.line))
            if fault.column > length + 2:
                raise Breach(f"a column that is not there: {said[:200]!r}")
        told(fault.what, fault.cure)
        if not said.isprintable() or len(said) > LONGEST_SAID:
            raise Breach(f"no line for a screen: {said[:200]!r}")


def told(*texts: str) -> None:
    """Raise where a part of a message is empty."""
    if not all(text.strip() for text in texts):
        raise Breach(f"an empty message: {texts!r}")


def named(text: str) -> None:
    """Raise where a message of a whole file has no place by line and column."""
    if not _PATH_PLACE.search(text):
        raise Breach(f"no place: {text[:200]!r}")


def every_plugin_answered(loaded: Loaded, assessment: Assessment | None = None) -> None:
    """Raise where a plugin stopped on a state that the schemas let pass."""
    for fault in loaded.unusual:
        if "could not check this file" in fault.what:
            raise Breach(fault.what)
    for failure in assessment.failures if assessment else ():
        raise Breach(f"{failure.plugin}: {failure.what}")
