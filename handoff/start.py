"""Set everything up on a fresh machine and run one job: ``python3 -m handoff.start demo``, ``tests`` or ``checks``.

Needs Python 3.11 or newer and nothing else: it makes ``.venv`` beside this checkout, installs
what the lock file names (checked by hash) and runs the job in it. Standard library only.
"""

from __future__ import annotations

import hashlib
import os
import subprocess
import sys
import venv
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
FOLDER = ROOT / ".venv"
JOBS = {
    "demo": ("requirements.lock", ["-m", "handoff", "demo"]),
    "tests": ("tests/requirements.lock", ["-m", "pytest", "--numprocesses", "auto", "--dist", "worksteal"]),
    "checks": ("tests/requirements.lock", [".ci/checks.py"]),
}


def main(arguments: list[str]) -> int:
    """Run the job named first in ``arguments``, with the rest handed on; return its exit code."""
    if not arguments or arguments[0] not in JOBS:
        print("usage: python3 -m handoff.start demo | tests | checks [what to hand on]", file=sys.stderr)
        return 2
    if sys.version_info < (3, 11):  # noqa: UP036  (this file is the one that an older Python may meet)
        print("Python 3.11 or newer is needed", file=sys.stderr)
        return 2
    lock, command = JOBS[arguments[0]]
    python = _python()
    try:
        _install(python, ROOT / lock)
    except subprocess.CalledProcessError:
        print(
            "the packages could not be installed; what pip said stands above. Try again online",
            file=sys.stderr,
        )
        return 2
    return subprocess.run([str(python), *command, *arguments[1:]], cwd=ROOT, check=False).returncode  # noqa: S603


def _python() -> Path:
    python = FOLDER / ("Scripts/python.exe" if os.name == "nt" else "bin/python")
    if not python.exists():
        print(f"making {FOLDER}", flush=True)
        _make()
    return python


def _make() -> None:
    venv.create(FOLDER, with_pip=True, symlinks=os.name != "nt")


def _install(python: Path, lock: Path) -> None:
    digest = hashlib.sha256(lock.read_bytes() + (ROOT / "pyproject.toml").read_bytes()).hexdigest()
    mark = FOLDER / f"installed-{lock.parent.name}-{lock.stem}"
    if mark.exists() and mark.read_text() == digest:
        return
    print(f"installing what {lock.relative_to(ROOT)} names", flush=True)
    if subprocess.run([str(python), "-m", "pip", "--version"], capture_output=True, check=False).returncode:  # noqa: S603
        _make()  # the first attempt was cut short
    pip = [str(python), "-m", "pip", "install", "--quiet", "--disable-pip-version-check"]
    subprocess.run([*pip, "--require-hashes", "-r", str(lock)], check=True)  # noqa: S603
    subprocess.run([*pip, "--no-deps", "--no-build-isolation", "--editable", str(ROOT)], check=True)  # noqa: S603
    mark.write_text(digest)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
