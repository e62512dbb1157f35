"""What the tests of the house read: the project file and the files of the checkout."""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from packaging.requirements import Requirement

ROOT = Path(__file__).resolve().parents[2]
FOLDERS = (".ci", "docs", "examples", "handoff", "plugins", "schemas", "tests")
BUNDLED = sorted(path.parent.name for path in ROOT.glob("plugins/*/__init__.py"))


def project() -> dict[str, Any]:
    return tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))


def runtime_dependencies() -> list[Requirement]:
    return [Requirement(line) for line in project()["project"]["dependencies"]]


def all_files() -> Iterator[Path]:
    """Every file that belongs to the project, in order."""
    yield from sorted(path for path in ROOT.iterdir() if path.is_file())
    for folder in FOLDERS:
        for path in sorted((ROOT / folder).rglob("*")):
            if path.is_file() and "__pycache__" not in path.parts and not _made(path):
                yield path


def python_files(*folders: str) -> list[Path]:
    return [
        path for path in all_files() if path.suffix == ".py" and path.relative_to(ROOT).parts[0] in folders
    ]


def named(path: Path) -> str:
    """Return the path as the checkout knows it, with forward strokes."""
    return path.relative_to(ROOT).as_posix()


def _made(path: Path) -> bool:
    return any(part.endswith(".egg-info") or part.startswith(".hypothesis") for part in path.parts)
