"""What is built is whole, holds nothing stray, and runs outside the checkout."""

from __future__ import annotations

import json
import tarfile
import zipfile
from pathlib import Path, PurePosixPath

from tests.packaging.conftest import CleanPlace
from tests.packaging.project import BUNDLED, ROOT, named, project

HELD = (
    "handoff/**.py",
    "handoff/compiled.json",
    "handoff/compiled-templates.json",
    "handoff/py.typed",
    "handoff/document/templates/*.docx",
    "handoff/shift/wording/rules.yaml",
    "handoff/shift/wording/rules.schema.json",
    "handoff/transfer/profiles/*.yaml",
    "handoff/bundled/*/*.json",
    "handoff/bundled/*/*.yaml",
    "handoff/bundled/*/README.md",
    "handoff/schemas/*.schema.json",
    "handoff/examples/*.yaml",
    "handoff-*.dist-info/*",
)


def names_in(wheel: Path) -> set[str]:
    with zipfile.ZipFile(wheel) as archive:
        return set(archive.namelist())


def is_held(name: str) -> bool:
    if name.startswith("handoff/") and name.endswith(".py"):
        return True
    return any(PurePosixPath(name).match(pattern) for pattern in HELD)


def test_the_wheel_holds_nothing_stray(wheel: Path) -> None:
    assert [name for name in sorted(names_in(wheel)) if not is_held(name)] == []


def test_the_wheel_holds_core_plugins_schemas_templates_and_invented_patients(wheel: Path) -> None:
    moved = {"plugins/": "handoff/bundled/", "schemas/": "handoff/schemas/", "examples/": "handoff/examples/"}
    due = set()
    for pattern in ("handoff/**/*", "plugins/*/*", "schemas/*.json", "examples/*.yaml"):
        for path in ROOT.glob(pattern):
            if path.is_file() and "__pycache__" not in path.parts:
                name = named(path)
                for before, after in moved.items():
                    name = after + name.removeprefix(before) if name.startswith(before) else name
                due.add(name)
    assert sorted(due - names_in(wheel)) == [], "add it to force-include in pyproject.toml"


def test_the_sdist_holds_what_a_reader_needs_to_build_and_test(sdist: Path) -> None:
    with tarfile.open(sdist) as archive:
        names = {name.partition("/")[2] for name in archive.getnames()}
    for name in (
        "README.md",
        "DEVELOPERS.md",
        "CHANGELOG.md",
        "pyproject.toml",
        "requirements.lock",
        "tests/requirements.lock",
        "tests/conftest.py",
        "docs/generate.py",
        "docs/plugin-guide.md",
        "examples/plugin-frostbite/pyproject.toml",
        ".ci/run",
    ):
        assert name in names
    strays = (".venv", "dist/", "build/", "__pycache__", ".hypothesis")
    assert [name for name in sorted(names) if any(stray in name for stray in strays)] == []


def test_help_answers_outside_the_checkout(clean_place: CleanPlace, tmp_path: Path) -> None:
    done = clean_place.run("handoff", "--help", folder=tmp_path)
    assert (done.returncode, done.stderr) == (0, "")
    assert "draft" in done.stdout


def test_every_bundled_plugin_is_there_outside_the_checkout(clean_place: CleanPlace, tmp_path: Path) -> None:
    done = clean_place.run("handoff", "plugins", folder=tmp_path)
    assert done.returncode == 0, done.stderr
    listed = {line.partition(":")[0] for line in done.stdout.splitlines() if not line.startswith(" ")}
    assert set(project()["project"]["entry-points"]["handoff.plugins"]) <= listed


def test_every_bundled_plugin_has_its_entry_point() -> None:
    points = project()["project"]["entry-points"]["handoff.plugins"]
    assert points == {name: f"handoff.bundled.{name}:plugin" for name in points}
    assert sorted(points) == BUNDLED


def test_the_demo_drafts_its_documents_outside_the_checkout(clean_place: CleanPlace, tmp_path: Path) -> None:
    done = clean_place.run("handoff", "demo", folder=tmp_path)
    assert done.returncode == 0, done.stderr
    made = tmp_path / "handoff-demo"
    assert sorted(path.name for path in made.iterdir()) == [
        "house-fire-care-plan.docx",
        "house-fire-handover.docx",
        "house-fire.items.json",
        "house-fire.yaml",
    ]
    assert json.loads((made / "house-fire.items.json").read_text(encoding="utf-8"))["failures"] == []


def test_what_runs_there_is_the_wheel_and_not_the_checkout(clean_place: CleanPlace, tmp_path: Path) -> None:
    code = "import handoff, handoff.bundled as b; print(handoff.__file__, *b.__path__, sep='\\n')"
    done = clean_place.run("python", "-c", code, folder=tmp_path)
    assert done.returncode == 0, done.stderr
    assert all(line.startswith(str(clean_place.folder)) for line in done.stdout.splitlines())
