"""The wheel is built once, from the sdist, and installed where only the declared dependencies are."""

from __future__ import annotations

import os
import subprocess
import sys
import venv
from collections.abc import Iterator
from dataclasses import dataclass
from importlib import metadata
from pathlib import Path

import pytest
from packaging.requirements import Requirement

from tests.packaging.project import ROOT, runtime_dependencies


@dataclass(frozen=True)
class CleanPlace:
    """A virtual environment with the wheel and what it declares, and nothing of the checkout."""

    folder: Path

    @property
    def scripts(self) -> Path:
        return self.folder / ("Scripts" if os.name == "nt" else "bin")

    @property
    def packages(self) -> Path:
        return next(path for path in self.folder.rglob("site-packages") if path.is_dir())

    def install(self, wheel: Path) -> None:
        """Install ``wheel`` without asking any index for anything."""
        pip = [sys.executable, "-m", "pip", "--python", str(self.scripts / "python")]
        subprocess.run(
            [*pip, "install", "--quiet", "--no-index", "--no-deps", "--no-compile", str(wheel)], check=True
        )

    def run(self, program: str, *arguments: str, folder: Path) -> subprocess.CompletedProcess[str]:
        """Run a program of this environment in ``folder``, without what the test run itself was given."""
        kept = {"PATH", "HOME", "SYSTEMROOT", "TEMP", "TMPDIR", "LANG"}
        environment = {name: value for name, value in os.environ.items() if name in kept}
        return subprocess.run(
            [str(self.scripts / program), *arguments],
            cwd=folder,
            env={**environment, "PYTHONDONTWRITEBYTECODE": "1"},
            text=True,
            encoding="utf-8",
            capture_output=True,
            check=False,
        )


def build(source: Path, out: Path, *what: str) -> None:
    subprocess.run(
        [sys.executable, "-m", "build", "--no-isolation", *what, "--outdir", str(out), str(source)],
        check=True,
        capture_output=True,
    )


@pytest.fixture(scope="session")
def built(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The folder with the sdist, and with the wheel that was made from it."""
    out = tmp_path_factory.mktemp("built")
    build(ROOT, out)
    return out


@pytest.fixture(scope="session")
def wheel(built: Path) -> Path:
    return next(built.glob("*.whl"))


@pytest.fixture(scope="session")
def sdist(built: Path) -> Path:
    return next(built.glob("*.tar.gz"))


@pytest.fixture(scope="session")
def clean_place(wheel: Path, tmp_path_factory: pytest.TempPathFactory) -> CleanPlace:
    """An environment with the wheel and the dependencies it declares."""
    place = CleanPlace(tmp_path_factory.mktemp("clean") / "venv")
    venv.create(place.folder, with_pip=False, symlinks=os.name != "nt")
    for name in sorted(_closure(runtime_dependencies())):
        _borrow(metadata.distribution(name), place.packages)
    place.install(wheel)
    return place


def _closure(wanted: list[Requirement]) -> set[str]:
    found: set[str] = set()
    waiting = [(requirement, "") for requirement in wanted]
    while waiting:
        requirement, extra = waiting.pop()
        if requirement.marker and not requirement.marker.evaluate({"extra": extra}):
            continue
        if requirement.name in found:
            continue
        found.add(requirement.name)
        extras = ["", *requirement.extras]
        for line in metadata.distribution(requirement.name).requires or ():
            waiting += [(Requirement(line), one) for one in extras]
    return found


def _borrow(distribution: metadata.Distribution, packages: Path) -> None:
    for first in sorted(_tops(distribution)):
        target = packages / first
        if not target.exists():
            target.symlink_to(Path(str(distribution.locate_file(first))).resolve())


def _tops(distribution: metadata.Distribution) -> Iterator[str]:
    for file in distribution.files or ():
        if ".." not in file.parts and file.parts[0] != "__pycache__":
            yield file.parts[0]
