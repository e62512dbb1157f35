"""The invented patients of the examples, with every bundled plugin, and the command line in this process."""

from __future__ import annotations

import io
import sys
from contextlib import redirect_stderr, redirect_stdout
from functools import lru_cache
from pathlib import Path
from typing import NamedTuple

from handoff.assess import Assessment
from handoff.registry import Setup
from handoff.state.load import Loaded
from handoff.work import assess_loaded, make_setup, open_text
from tests.conftest import ROOT
from tests.core.helpers import SMALL

EXAMPLES = {
    "house-fire": "2026-03-14 19:30",
    "high-voltage": "2026-08-21 21:00",
    "toddler-scald": "2026-05-09 14:00",
    "nearly-empty": "2026-10-02 03:40",
}
"""The examples, each with the moment it was written for."""


@lru_cache(maxsize=1)
def setup() -> Setup:
    """Return the built-in policy with every bundled plugin."""
    return make_setup(None, bundled_only=True)


def text_of_example(name: str) -> str:
    """Return the text of an example."""
    return (ROOT / "examples" / f"{name}.yaml").read_text(encoding="utf-8")


def loaded(text: str, at: str, file: str = "patient.yaml") -> Loaded:
    """Return the state written in ``text``."""
    return open_text(text, file, setup(), at)


def assessed(text: str, at: str, file: str = "patient.yaml") -> Assessment:
    """Return the assessment of ``text``."""
    return assess_loaded(loaded(text, at, file), setup())


def small(
    more: str = "", name: str = "Tomas Ferrandel", born: str = "1985-02-11", number: str = "HSH-1"
) -> str:
    """Return a small patient with further blocks."""
    text = SMALL.replace("Tomas Ferrandel", name).replace("1985-02-11", born).replace("HSH-204518", number)
    return text + more


def write(folder: Path, **files: str) -> Path:
    """Write each text as ``NAME.yaml`` into ``folder`` and return the folder."""
    for name, text in files.items():
        (folder / f"{name.replace('_', '-')}.yaml").write_text(text, encoding="utf-8")
    return folder


class Done(NamedTuple):
    """What a command printed, and its exit code."""

    code: int
    out: str
    err: str


def run(*arguments: object, stdin: str = "") -> Done:
    """Return what ``handoff`` did with ``arguments``, run in this process."""
    from handoff.cli import main

    out, err = (io.TextIOWrapper(io.BytesIO(), encoding="utf-8", newline="") for _ in range(2))
    given, code = (sys.argv, sys.stdin), 0
    sys.argv, sys.stdin = ["handoff", *map(str, arguments)], io.TextIOWrapper(io.BytesIO(stdin.encode()))
    try:
        with redirect_stdout(out), redirect_stderr(err):
            main()
    except SystemExit as left:
        code = left.code if isinstance(left.code, int) else 1
    finally:
        sys.argv, sys.stdin = given
    return Done(code, _written(out), _written(err))


def _written(stream: io.TextIOWrapper) -> str:
    stream.flush()
    buffer = stream.buffer
    assert isinstance(buffer, io.BytesIO)
    return buffer.getvalue().decode()
