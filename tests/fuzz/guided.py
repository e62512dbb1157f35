"""Coverage-guided fuzzing with atheris, where it is installed: it is no part of what the tests need."""

from __future__ import annotations

import importlib
import random
import sys
from collections.abc import Sequence
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
        data = atheris.FuzzedDataProvider(content)
        name = chosen[data.ConsumeIntInRange(0, len(chosen) - 1)]
        if name == "reader":
            targets.read_words(data.ConsumeUnicode(data.remaining_bytes()))
        elif name == "quantities":
            kinds = list(targets.KINDS)
            kind = kinds[data.ConsumeIntInRange(0, len(kinds) - 1)]
            targets.read_amount((kind, data.ConsumeUnicodeNoSurrogates(40)))
        elif name == "clock":
            targets.read_moment(("Europe/Dublin", data.ConsumeUnicodeNoSurrogates(40)))
        else:
            targets.chart_phrase((data.ConsumeUnicodeNoSurrogates(200), "", False))

    targets.setup(), targets.words()
    examples = random.Random(seed)  # noqa: S311  (no secret)
    for _ in range(200):
        try_one(bytes([0]) + targets.grammar.small(examples))
    atheris.Setup([sys.argv[0], f"-max_total_time={seconds}", f"-seed={seed}", "-max_len=400"], try_one)
    atheris.Fuzz()
    return 0
