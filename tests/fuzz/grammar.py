"""Texts, trees and files that are nearly right, and some that are meant to do harm."""

from __future__ import annotations

import json
import random
from functools import lru_cache
from typing import Any

from handoff.state.nodes import plain
from handoff.state.reader import read_nodes
from handoff.state.units import KINDS
from tests.chart.charts import HEAD, MOMENTS, example

SIGNS = list("abz09 \n\n  :-,#?&*!|>'\"%@`{}[]\\.~<=/+\t\r") + list("\u00a0\u2028é😀\ufeff\x00\u202e٣−")
PIECES = [
    ": ", "- ", " #", "  # ", "\n  ", "\n", "{", "}", "[", "]", ", ", "a: ", "'", '"', "|\n", ">\n", "? ", "---\n",
    "...\n", "&a ", "*a", "!t ", "<<: ", "0,51", "14:30", "2026-03-14", "%YAML 1.1\n", "\\", "\r\n", "handoff: 1\n",
    "clock: Europe/Dublin\n", "!!python/object/apply:os.system", "{{ 7*7 }}", "{% for x in y %}", "]]>", "&lt;",
    "=HYPERLINK(1)", "../../etc/passwd", "\\x00", "\\u0000", "9" * 400, "[" * 30, "{a: " * 30, "é" * 50,
]  # fmt: skip
NUMBERS = [
    "0",
    "00",
    "1",
    "-1",
    "+2",
    "1.5",
    "1.250",
    "1,125",
    "1e9",
    ".5",
    "5.",
    "nan",
    "-.inf",
    "1/0",
    "104/62",
]
NUMBERS += [
    "9" * 30,
    "0." + "0" * 300 + "1",
    "1_000",
    "0x1F",
    "٣٫٥",
    "½",
    "1 200",
    "--1",
    "1.2.3",
    "999999999999",
]
MOMENTS_WRITTEN = [
    "2026-03-14 14:30", "2026-03-29 01:30", "2026-10-25 01:30", "2026-10-25 01:30+01:00", "2026-13-40 25:61",
    "0000-00-00 00:00", "9999-12-31 23:59", "0001-01-01 00:00", "0001-01-01 00:00+14:00", "2026-02-30 10:00",
    "2026-03-14T14:30Z", "14:30", "24:00", "2026-3-4 1:2", "2026-03-14 14:30:59", "2026-03-14 14:30-99:99", "now",
    "9999-12-31 23:59-14:00", "2026", "2026-03", "", " ", "14.30", "1430", "2026-03-14 14:30+00:60",
]  # fmt: skip
ZONES = ["Europe/Dublin", "UTC", "Asia/Kathmandu", "America/St_Johns", "Pacific/Apia", "Australia/Lord_Howe"]
ZONES += [
    "",
    "Europe",
    "../../etc/passwd",
    "/etc/passwd",
    "Nowhere/Else",
    "\x00",
    "a" * 5000,
    "europe/dublin",
    "é",
]


def slipped(rng: random.Random, text: str, most: int = 6) -> str:
    """Return ``text`` with some characters lost, doubled, replaced, moved, or pieces put in."""
    for _ in range(rng.randint(1, most)):
        place = rng.randrange(len(text) + 1)
        length = rng.choice((0, 1, 1, 2, 5, 40))
        cut = text[place : place + length]
        put = rng.choice((rng.choice(SIGNS), rng.choice(PIECES), cut * 2, cut[::-1], "", rng.choice(NUMBERS)))
        text = text[:place] + put + text[place + length :]
        if rng.random() < 0.1:
            elsewhere = rng.randrange(len(text) + 1)
            text = text[:elsewhere] + cut + text[elsewhere:]
    return text


def byte_slips(rng: random.Random, content: bytes, most: int = 8) -> bytes:
    """Return ``content`` with some bytes changed, lost, doubled or put in."""
    made = bytearray(content)
    for _ in range(rng.randint(1, most)):
        place = rng.randrange(len(made) + 1)
        way = rng.randrange(4)
        if way == 0 and place < len(made):
            made[place] = rng.randrange(256)
        elif way == 1:
            del made[place : place + rng.choice((1, 4, 64))]
        elif way == 2:
            made[place:place] = made[place : place + rng.choice((1, 8, 128))]
        else:
            made[place:place] = rng.randbytes(rng.choice((1, 3, 9)))
    return bytes(made)


def yaml_like(rng: random.Random) -> str:
    """Return a short text of the signs and pieces of which YAML is made."""
    return "".join(rng.choice(rng.choice((SIGNS, PIECES))) for _ in range(rng.randint(0, 40)))


@lru_cache(maxsize=1)
def trees() -> tuple[tuple[str, dict[str, Any]], ...]:
    """Return each invented patient as plain data, with the moment it was written for."""
    return tuple((MOMENTS[name], plain(read_nodes(example(name), name)[0])) for name in MOMENTS)  # type: ignore[misc]


@lru_cache(maxsize=1)
def leaves() -> tuple[Any, ...]:
    """Return every value and every group of the invented patients."""
    found: list[Any] = []

    def walk(tree: Any) -> None:
        found.append(tree)
        children = tree.values() if isinstance(tree, dict) else tree if isinstance(tree, list) else ()
        for child in children:
            walk(child)

    for _, tree in trees():
        walk(tree)
    return tuple(found)


def nearly(rng: random.Random) -> tuple[str, str]:
    """Return the text of a patient with two or three blocks, some values replaced, and its moment."""
    at, whole = rng.choice(trees())
    blocks = [key for key in whole if key not in ("handoff", "clock", "patient", "injury")]
    kept = ["handoff", "clock", "patient", "injury", *rng.sample(blocks, min(len(blocks), rng.randint(1, 3)))]
    tree = json.loads(json.dumps({key: whole[key] for key in whole if key in kept}))
    for _ in range(rng.randint(0, 4)):
        _replaced(rng, tree)
    text = "".join(f"{json.dumps(key)}: {json.dumps(tree[key], ensure_ascii=False)}\n" for key in tree)
    return (slipped(rng, text, 2) if rng.random() < 0.2 else text), at


def _replaced(rng: random.Random, tree: Any) -> None:
    """Change one place of a tree: another value, another group, nothing, a key more, a key less."""
    while True:
        keys = list(tree) if isinstance(tree, dict) else list(range(len(tree)))
        if not keys:
            return
        key = rng.choice(keys)
        below = tree[key]
        if isinstance(below, (dict, list)) and below and rng.random() < 0.85:
            tree = below
            continue
        way = rng.random()
        if way < 0.15:
            del tree[key]
        elif way < 0.25 and isinstance(tree, dict):
            tree[rng.choice([str(one) for one in leaves() if isinstance(one, str)])] = below
        elif way < 0.45:
            tree[key] = json.loads(json.dumps(rng.choice(leaves())))
        elif way < 0.6:
            tree[key] = rng.choice(([], {}, "", "x" * 3000, {"value": below}, [below, below]))
        else:
            tree[key] = text_value(rng, below)
        return


def text_value(rng: random.Random, was: Any) -> str:
    """Return a value in the place of ``was``: a quantity, a moment, a slip, anything."""
    return rng.choice((
        quantity(rng)[1],
        rng.choice(MOMENTS_WRITTEN),
        slipped(rng, str(was), 2) if isinstance(was, str) else "x",
        rng.choice(PIECES),
        rng.choice(NUMBERS),
    ))  # fmt: skip


def quantity(rng: random.Random) -> tuple[str, str]:
    """Return a kind of quantity and a text that is nearly one."""
    kind = rng.choice(list(KINDS))
    other = kind if rng.random() < 0.7 else rng.choice(list(KINDS))
    unit = rng.choice(list(KINDS[other]))
    number = (
        rng.choice(NUMBERS)
        if rng.random() < 0.6
        else f"{rng.uniform(-10, 10 ** rng.randint(0, 9)):.{rng.randint(0, 6)}f}"
    )
    text = f"{number}{rng.choice((' ', ' ', ' ', '', '  '))}{unit}"
    return kind, slipped(rng, text, 2) if rng.random() < 0.4 else text


def moment(rng: random.Random) -> str:
    """Return a text that is nearly a moment."""
    if rng.random() < 0.4:
        made = f"{rng.randint(0, 9999):04d}-{rng.randint(0, 13):02d}-{rng.randint(0, 32):02d}"
        made += f"{rng.choice(' T')}{rng.randint(0, 25):02d}:{rng.randint(0, 61):02d}"
        return made + rng.choice(("", "", "Z", "+01:00", " -03:30", "+14:00"))
    text = rng.choice(MOMENTS_WRITTEN)
    return slipped(rng, text, 2) if rng.random() < 0.5 else text


def small(rng: random.Random) -> bytes:
    """Return a file: a text like YAML, a patient with slips, or bytes."""
    way = rng.random()
    if way < 0.35:
        return yaml_like(rng).encode("utf-8", "surrogatepass")
    if way < 0.7:
        return slipped(rng, HEAD).encode()
    name = rng.choice(list(MOMENTS))
    lines = example(name).splitlines(keepends=True)
    start = rng.randrange(len(lines))
    part = HEAD + "".join(lines[start : start + rng.randint(1, 20)])
    return slipped(rng, part).encode() if way < 0.9 else byte_slips(rng, part.encode())
