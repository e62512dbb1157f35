"""Coverage-guided fuzzing with atheris, where it is installed: it is no part of what the tests need."""

from __future__ import annotations

import importlib
import random
import sys
import tempfile
from collections.abc import Sequence
from pathlib import Path
from typing import Any

INSTRUMENTED = (
    "handoff.state.reader",
    "handoff.state.characters",
    "handoff.state.scalars",
    "handoff.state.parser_words",
    "handoff.state.quantity",
    "handoff.state.clock",
    "handoff.chart.phrases",
    "handoff.chart.slots",
)
ORDER = ("reader", "quantities", "clock", "chart")
"""What is guided; the rest takes too long for each input."""

BEGINNINGS = 400
"""Inputs from the seed that it begins with."""


def guided(seconds: int, seed: int, only: Sequence[str]) -> int:
    """Fuzz for so many seconds; the process ends with a traceback where a promise was broken."""
    try:
        atheris: Any = importlib.import_module("atheris")
    except ImportError:
        print("atheris is not installed; python -m pip install atheris (it has no wheel for every Python)")
        return 2
    for name in [
        name for name in sys.modules if name.startswith(("handoff", "tests.chart", "tests.fuzz.targets"))
    ]:
        del sys.modules[name]  # they were read without instruments
    with atheris.instrument_imports(include=list(INSTRUMENTED)):
        targets: Any = importlib.import_module("tests.fuzz.targets")
    chosen = [name for name in ORDER if name in only]

    def try_one(content: bytes) -> None:
        name = chosen[content[0] % len(chosen)] if content else chosen[0]
        text = content[1:].decode("utf-8", "replace")
        if name == "reader":
            targets.read_words(text)
        elif name == "quantities":
            kinds = list(targets.KINDS)
            targets.read_amount((kinds[content[1] % len(kinds)] if text else kinds[0], text[1:]))
        elif name == "clock":
            targets.read_moment(("Europe/Dublin", text))
        else:
            targets.chart_phrase((text, "", False))

    targets.setup(), targets.words()
    chance = random.Random(seed)  # noqa: S311  (no secret)
    with tempfile.TemporaryDirectory() as folder:
        for number in range(BEGINNINGS):
            made = bytes([number % len(chosen)]) + _beginning(targets, chosen[number % len(chosen)], chance)
            (Path(folder) / f"{number}").write_bytes(made)
            try_one(made)
        options = [f"-max_total_time={seconds}", f"-seed={seed}", "-max_len=600"]
        atheris.Setup([sys.argv[0], *options, folder], try_one)
        atheris.Fuzz()
    return 0


def _beginning(targets: Any, name: str, chance: random.Random) -> bytes:
    if name == "reader":
        return bytes(targets.grammar.small(chance))[:600]
    if name == "quantities":
        kind, text = targets.grammar.quantity(chance)
        return bytes([list(targets.KINDS).index(kind)]) + text.encode()
    text = targets.grammar.moment(chance) if name == "clock" else targets.a_phrase(chance)[0]
    return str(text).encode()
