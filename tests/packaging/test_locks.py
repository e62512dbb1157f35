"""The lock files pin every package by hash and name no address."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from packaging.requirements import Requirement
from packaging.version import Version

from tests.packaging.project import ROOT, project

RUNTIME = ROOT / "requirements.lock"
TESTS = ROOT / "tests" / "requirements.lock"


def pinned(lock: Path) -> dict[str, Version]:
    found = re.findall(r"^([\w.-]+)==([^\s;\\]+)", lock.read_text(encoding="utf-8"), flags=re.MULTILINE)
    return {name.lower().replace("_", "-"): Version(version) for name, version in found}


@pytest.mark.parametrize("lock", [RUNTIME, TESTS], ids=["runtime", "tests"])
def test_every_package_is_pinned_with_a_hash(lock: Path) -> None:
    text = lock.read_text(encoding="utf-8")
    for entry in re.split(r"\n(?=\S)", text.strip()):
        assert re.match(r"[\w.-]+==\S+", entry), entry
        assert re.search(r"--hash=sha256:[0-9a-f]{64}", entry), entry


@pytest.mark.parametrize("lock", [RUNTIME, TESTS], ids=["runtime", "tests"])
def test_no_lock_names_an_address(lock: Path) -> None:
    assert not re.search(r"://|@|--(extra-)?index-url|--find-links", lock.read_text(encoding="utf-8"))


@pytest.mark.parametrize(("lock", "extras"), [(RUNTIME, ["build"]), (TESTS, ["build", "test"])])
def test_every_declared_dependency_is_locked_in_a_version_that_suits(lock: Path, extras: list[str]) -> None:
    declared = project()["project"]
    lines = [*declared["dependencies"]]
    for extra in extras:
        lines += declared["optional-dependencies"][extra]
    locked = pinned(lock)
    for line in lines:
        requirement = Requirement(line)
        name = requirement.name.lower().replace("_", "-")
        assert name in locked, f"run tests/lock.sh: {name} is not locked"
        assert locked[name] in requirement.specifier, f"run tests/lock.sh: {name} {locked[name]}"


def test_the_tests_run_on_the_versions_that_the_users_get() -> None:
    tests = pinned(TESTS)
    assert {name: tests.get(name) for name in pinned(RUNTIME)} == pinned(RUNTIME)
