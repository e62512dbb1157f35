"""No clinical number in Python: numbers of the clinic lie in cited tables, where a reader can check them."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests.packaging.project import named, python_files

CONVERSIONS = {60, 24, 12, 7, 1000, 3600}
"""Units of time and of size."""

ROUNDING = 1e-9
"""What the machine may be off by; no finding is that small."""

IN_A_FORMULA = {0, 1, 100, ROUNDING, *CONVERSIONS}
ANYWHERE = {*IN_A_FORMULA, 2}
NOT_OF_THE_PATIENT = re.compile(
    r"RANK|PLACES|TREND|SHOWN|EARLIER|BACK|LETTERS|WIDTH|LONGEST|BYTES|BOXES|ALIKE|TRIES|PAUSE|AFTER_S|"
    r"MOST_(ACTIONS|TASKS|DUE|NAMES|FAULTS|LINES)"
)
"""Names of numbers that are about the page or the machine, and not about the patient."""

IN_A_NAMED_FORMULA: dict[str, dict[float, str]] = {
    "plugins/airway_watch/formula.py": {7.50062: "mmHg in a kPa", 2: "a half-life halves"},
}

LAYOUT = (
    "handoff/document/figures/*.py",
    "handoff/document/making/*.py",
    "handoff/document/make_templates.py",
    "handoff/document/paper.py",
)
"""Measures of paper and type, in the units of the page."""

EXCEPTIONS: dict[str, dict[float, str]] = {
    "handoff/begin/skeleton.py": {30: "a column of the page"},
    "handoff/chart/charting.py": {1_000_000: "bytes in a megabyte"},
    "handoff/chart/locking.py": {0o600: "rights of a file", 8: "bytes of a random word"},
    "handoff/chart/phrases.py": {
        3: "words at most, weights",
        4: "weight of a word",
        0.7: "likeness of names",
    },
    "handoff/cli/working.py": {3: "names offered", 0.4: "likeness of names"},
    "handoff/document/brief.py": {0.6: "share of a line"},
    "handoff/document/care_plan.py": {5: "rows added by hand", 6: "boxes of a row"},
    "handoff/document/finish.py": {1980: "the oldest year that a zip file knows"},
    "handoff/document/printable.py": {0xFFFE: "code point", 0xFDD0: "code point", 0xFDEF: "code point"},
    "handoff/document/timeline.py": {3: "place in an order"},
    "handoff/privacy/deidentify.py": {90: "years from which an age alone can name somebody"},
    "handoff/privacy/protect.py": {1980: "the oldest year that a zip file knows", 256: "bits of a key"},
    "handoff/privacy/since_burn.py": {2001: "a year that says nothing"},
    "handoff/start.py": {3: "version of Python", 11: "version of Python"},
    "handoff/state/keywords.py": {0.6: "likeness of names", 3: "parts of a number"},
    "handoff/state/moments.py": {14: "hours between the ends of the time zones"},
    "handoff/state/quantity.py": {3: "words in a list"},
    "handoff/state/file_text.py": {1_000_000: "bytes in a megabyte"},
    "handoff/state/reader.py": {80: "letters looked back"},
    "handoff/state/schema.py": {200: "letters of a name", 4000: "letters of a note"},
    "handoff/state/time_keywords.py": {125: "years before a date is taken for a slip"},
    "handoff/transfer/journey.py": {12: "lines of a sheet", 28: "lines of a sheet", 4: "spare lines"},
    "handoff/transfer/packet.py": {
        1980: "the oldest year that a zip file knows",
        0o600: "rights of a file",
        16: "bits",
    },
    "handoff/transfer/sent.py": {50_000_000: "bytes of a file"},
    "handoff/words.py": {3: "days beyond which hours are said as days"},
    "plugins/fluid/weight_check.py": {0.45359237: "kg in a pound", 10: "a decimal place lost"},
    "plugins/pain/comfort.py": {10: "upper end of a score whose name is its ends"},
    "plugins/pain/score_faults.py": {10: "upper end of a score whose name is its ends"},
}
"""By file: the number and what it is. What is clinical goes into parameters.yaml instead."""


def is_layout(path: Path) -> bool:
    return any(Path(named(path)).match(pattern) for pattern in LAYOUT)


@pytest.mark.parametrize(
    "path", [p for p in python_files("plugins") if p.name.startswith("formula")], ids=named
)
def test_a_formula_holds_no_number_but_zero_one_hundred_and_unit_conversions(path: Path) -> None:
    known = IN_A_FORMULA | set(IN_A_NAMED_FORMULA.get(named(path), {}))
    for line, number in numbers(path):
        assert number in known, f"{named(path)}:{line}: {number} belongs into parameters.yaml"


@pytest.mark.parametrize(
    "path",
    [
        p
        for p in python_files("handoff", "plugins")
        if not p.name.startswith("formula") and p.name != "units.py" and not is_layout(p)
    ],
    ids=named,
)
def test_no_clinical_number_stands_in_the_code(path: Path) -> None:
    known = ANYWHERE | set(EXCEPTIONS.get(named(path), {}))
    for line, number in numbers(path):
        assert number in known, (
            f"{named(path)}:{line}: {number} belongs into parameters.yaml, or into EXCEPTIONS with what it is"
        )


def test_every_exception_is_still_needed() -> None:
    held = {
        (named(path), number) for path in python_files("handoff", "plugins") for _, number in numbers(path)
    }
    for exceptions in (EXCEPTIONS, IN_A_NAMED_FORMULA):
        listed = {(name, number) for name, ones in exceptions.items() for number in ones}
        assert sorted(listed - held) == []


def numbers(path: Path) -> Iterator[tuple[int, float]]:
    """Yield each number with its line, without those that only say a place or a size."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    places = {id(below) for node in ast.walk(tree) for place in places_in(node) for below in ast.walk(place)}
    for node in ast.walk(tree):
        if isinstance(node, ast.Constant) and id(node) not in places:
            value = node.value
            if isinstance(value, int | float) and not isinstance(value, bool):
                yield node.lineno, value


def places_in(node: ast.AST) -> Iterator[ast.AST]:
    """Yield what holds no finding: a place in a list, a rank on page one, digits after the point, a cache."""
    if isinstance(node, ast.Subscript):
        yield node.slice
    elif isinstance(node, ast.keyword) and node.arg and node.arg.endswith(("rank", "maxsize", "places")):
        yield node.value
    elif isinstance(node, ast.Call) and isinstance(node.func, ast.Name):
        digits = {"number_text": 1, "with_unit": 2, "round": 1}.get(node.func.id)
        yield from node.args[digits:] if digits else ()
    elif isinstance(node, ast.ClassDef) and any("Enum" in ast.unparse(base) for base in node.bases):
        yield node
    elif isinstance(node, ast.Assign):
        names = [below.id for to in node.targets for below in ast.walk(to) if isinstance(below, ast.Name)]
        if names and all(NOT_OF_THE_PATIENT.search(name) for name in names):
            yield node.value
