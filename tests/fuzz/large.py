"""Files just below a megabyte that are meant to take long or much memory."""

from __future__ import annotations

import random
from collections.abc import Callable

from tests.chart.charts import HEAD

MOST_BYTES = 990_000
"""The promise is made for files under one megabyte."""


def _full(head: str, piece: str, end: str = "") -> str:
    return head + piece * ((MOST_BYTES - len(head.encode()) - len(end)) // len(piece.encode())) + end


def _rows(rng: random.Random) -> str:
    text = [f"{HEAD}observations:\n  2026-03-14:\n"]
    size = 0
    for number in range(400):
        minute = f"    {14 + number // 60 % 5:02d}:{number % 60:02d}: "
        rows = ", ".join(
            "{pulse: 118 /min, bp: 104/62 mmHg, resp: 20 /min}" for _ in range(rng.randint(1, 40))
        )
        size += len(rows) + len(minute)
        if size > MOST_BYTES - 3000 or number // 60 > 4:
            break
        text.append(f"{minute}[{rows}]\n")
    return "".join(text)


SHAPES: dict[str, Callable[[random.Random], str]] = {
    "brackets": lambda rng: _full("", rng.choice("[{")),
    "brackets below a key": lambda rng: _full(f"{HEAD}area: ", rng.choice(("[", "{a: ", "- ", "? "))),
    "one long word": lambda rng: _full(f"{HEAD}events: ", rng.choice("a0 .-'\"#")),
    "one long line": lambda rng: _full(
        f"{HEAD}events: [", rng.choice(("a, ", "'', ", "{}, ", "a: b, ")), "]"
    ),
    "a key many times": lambda rng: _full(HEAD, "patient: {}\n"),
    "many keys": lambda rng: HEAD + "".join(f"k{number}: v\n" for number in range(85_000)),
    "anchors": lambda rng: _full(HEAD, "- &a [*a, *a]\n"),
    "tabs": lambda rng: _full(HEAD, rng.choice(("\t\n", "\ta: 1\n", "\x00\n", "\u2028"))),
    "unknown entries": lambda rng: _full(
        f"{HEAD}results:\n", "  - {at: 2026-03-14 15:00, potasium: 4 mmol}\n"
    ),
    "entries": lambda rng: _full(f"{HEAD}results:\n", "  - {at: 2026-03-14 15:00, potassium: 4.1 mmol/L}\n"),
    "doses": lambda rng: _full(
        f"{HEAD}pain:\n  doses:\n",
        "    - {at: 2026-03-14 15:00, drug: morphine, dose: 2 mg, route: IV, by: EM}\n",
    ),
    "rows of observations": _rows,
    "comments": lambda rng: _full(HEAD, rng.choice(("# - a\n", "#" * 50 + "\n", " #: \n"))),
    "a text of many lines": lambda rng: _full(f"{HEAD}events:\n  - what: |\n", "      # - a: b\n"),
    "blank lines": lambda rng: _full(HEAD, rng.choice(("\n", "   \n", "\r\n"))),
    "commas": lambda rng: _full(f"{HEAD}results: {{", "1,"),
    "slashes": lambda rng: _full(f'{HEAD}events: "', rng.choice(("\\x", "\\n", "\\u00e9", "\\ "))),
}


def large(rng: random.Random) -> str:
    """Return one of the files, or one of them with slips."""
    return SHAPES[rng.choice(list(SHAPES))](rng)
