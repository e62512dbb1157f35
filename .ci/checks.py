"""Everything that is checked without running the tests: style, types and import rules.

In a checkout the bundled plugins lie in ``plugins/`` and get their import name
(``handoff.bundled.NAME``) when Python runs. A type checker and an import linter do not run
anything, so the house is first laid out in ``build/house/`` as a wheel lays it out.
"""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
HOUSE = ROOT / "build" / "house"
NOT_CODE = shutil.ignore_patterns("__pycache__", "*.md", "pictures")


def main() -> int:
    """Run every check, the later ones too when an earlier one fails; return the number that failed."""
    failed = [name for name, check in CHECKS.items() if not _passes(name, check)]
    print(f"failed: {', '.join(failed)}" if failed else "every check passed")
    return len(failed)


def _passes(name: str, check: Callable[[], bool]) -> bool:
    print(f"--- {name}", flush=True)
    return check()


def style() -> bool:
    """Return whether the linter has nothing to say."""
    return _run(["-m", "ruff", "check", "."])


def layout() -> bool:
    """Return whether every file is laid out as the formatter would."""
    return _run(["-m", "ruff", "format", "--check", "."])


def types() -> bool:
    """Return whether the core, the plugins, the scripts and the example plugins pass the type checker."""
    lay_out_house()
    config = ["--config-file", str(ROOT / "pyproject.toml"), "--cache-dir", str(ROOT / ".mypy_cache")]
    mypy = ["-m", "mypy", *config]
    house = _run([*mypy, "-p", "handoff", "-p", "docs"], HOUSE, _as_in_the_checkout)
    script = _run([*mypy, str(Path(__file__))], HOUSE)
    outside = [
        _run([*mypy, "-p", folder.name], folder.parent, path=str(HOUSE))
        for folder in sorted(ROOT.glob("examples/plugin-*/*/"))
        if (folder / "__init__.py").is_file()
    ]
    return all([house, script, *outside])


def imports() -> bool:
    """Return whether the core imports no plugin, and plugins import the contract alone."""
    lay_out_house()
    command = (
        "import sys; from importlinter.cli import lint_imports_command; sys.exit(lint_imports_command())"
    )
    return _run(["-c", command, "--no-logo", "--no-cache", str(ROOT / "pyproject.toml")], HOUSE)


def lay_out_house() -> Path:
    """Copy core and plugins as a wheel holds them, and return the folder.

    Times of change are kept, so that the type checker reads again only what changed.
    """
    shutil.rmtree(HOUSE, ignore_errors=True)
    shutil.copytree(ROOT / "handoff", HOUSE / "handoff", ignore=NOT_CODE)
    shutil.copytree(ROOT / "plugins", HOUSE / "handoff" / "bundled", ignore=NOT_CODE, dirs_exist_ok=True)
    shutil.copytree(ROOT / "docs", HOUSE / "docs", ignore=NOT_CODE)
    return HOUSE


def _run(
    arguments: list[str],
    folder: Path = ROOT,
    said: Callable[[str], str] | None = None,
    path: str = "",
) -> bool:
    environment = {**os.environ, "MYPYPATH": path} if path else None
    done = subprocess.run(
        [sys.executable, *arguments],
        cwd=folder,
        env=environment,
        check=False,
        text=True,
        capture_output=said is not None,
    )
    if said is not None:
        print(said(done.stdout + done.stderr), end="", flush=True)
    return done.returncode == 0


def _as_in_the_checkout(said: str) -> str:
    bundled = os.path.join("handoff", "bundled", "")  # noqa: PTH118  (a beginning of a line, with its separator)
    lines = said.splitlines(keepends=True)
    return "".join(
        line.replace(bundled, os.path.join("plugins", ""), 1) if line.startswith(bundled) else line  # noqa: PTH118
        for line in lines
    )


CHECKS: dict[str, Callable[[], bool]] = {
    "style": style,
    "layout": layout,
    "types": types,
    "imports": imports,
}

if __name__ == "__main__":
    sys.exit(main())
