"""Write the pages that are made from schemas and tables: ``python3 -m docs.generate``.

``--check`` writes nothing and ends with 1 when a page is stale; a test runs the same check.
"""

from __future__ import annotations

import sys
from pathlib import Path

from docs.making.choices import choices
from docs.making.short_words import short_words
from docs.making.sources import read_first, sources
from docs.making.state_file import state_file
from handoff.policy import Policy
from handoff.registry import Setup, find_plugins, prepare

FOLDER = Path(__file__).resolve().parent


def pages(setup: Setup) -> dict[str, str]:
    """Return each page by its file name, made for the plugins of ``setup``."""
    first = read_first((FOLDER / "confirm-first.yaml").read_text(encoding="utf-8"))
    return {
        "state-file.md": state_file(setup),
        "sources.md": sources(setup, first),
        "choices.md": choices(setup),
        "short-words.md": short_words(setup),
    }


def bundled() -> Setup:
    """Return the bundled plugins, with the defaults in force."""
    policy = Policy()
    return prepare(policy, find_plugins(policy, bundled_only=True))


def stale(made: dict[str, str]) -> list[str]:
    """Return the names of the pages that do not hold what was ``made``."""
    paths = {name: FOLDER / name for name in made}
    return [
        name for name, path in paths.items() if not path.exists() or path.read_text("utf-8") != made[name]
    ]


def main(arguments: list[str]) -> int:
    """Write what is stale, or only say so with ``--check``; return the exit code."""
    made = pages(bundled())
    names = stale(made)
    if "--check" in arguments:
        print("\n".join(f"stale: docs/{name}; run python3 -m docs.generate" for name in names) or "all fresh")
        return 1 if names else 0
    for name in names:
        (FOLDER / name).write_text(made[name], encoding="utf-8", newline="\n")
        print(f"written: docs/{name}")
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
