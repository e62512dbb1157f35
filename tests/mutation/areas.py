"""What is mutated, and which tests must notice."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]


@dataclass(frozen=True)
class Area:
    """Files that are mutated together, the tests that are tried, and the share that must be noticed."""

    name: str
    files: tuple[str, ...]
    tests: tuple[str, ...]
    wanted_pct: int
    cases: str = ""
    """The worked examples that belong to it: the plugin's name, or nothing for none."""


CORE_FILES = {
    "reader": ("handoff/state/reader.py", "handoff/state/scalars.py"),
    "clock": ("handoff/state/clock.py",),
    "quantities": ("handoff/state/quantity.py", "handoff/state/units.py"),
    "assess": ("handoff/assess.py",),
}
CORE_TESTS = {
    "reader": ("tests/state", "tests/states"),
    "clock": ("tests/state",),
    "quantities": ("tests/state", "tests/words"),
    "assess": ("tests/core",),
}
FORMULA_PCT, CORE_PCT = 95, 90


def areas() -> dict[str, Area]:
    """Return every area by name: one for each plugin with formula files, and those of the core."""
    found = {}
    for folder in sorted((ROOT / "plugins").iterdir()):
        files = tuple(str(path.relative_to(ROOT)) for path in sorted(folder.glob("formula*.py")))
        if files:
            name = folder.name
            found[name] = Area(name, files, (f"tests/{name}", "tests/test_cases.py"), FORMULA_PCT, name)
    for name, files in CORE_FILES.items():
        found[name] = Area(name, files, CORE_TESTS[name], CORE_PCT)
    return found
