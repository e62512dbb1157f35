"""The rules of the house that a reader would otherwise have to check by eye."""

from __future__ import annotations

import ast
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from tests.packaging.project import BUNDLED, ROOT, named, project, python_files

MOST_LINES = 300
PARTS = ("__init__.py", "parameters.yaml", "cases.yaml", "README.md")
CODE = python_files("handoff", "plugins")


def tree_of(path: Path) -> ast.Module:
    return ast.parse(path.read_text(encoding="utf-8"), filename=named(path))


def test_every_file_fits_in_the_head_of_a_reader() -> None:
    long = {
        named(path): lines
        for path in CODE
        if (lines := len(path.read_text(encoding="utf-8").splitlines())) >= MOST_LINES
    }
    assert long == {}, f"split it; fewer than {MOST_LINES} lines"


def test_every_module_and_every_public_function_says_what_comes_back() -> None:
    silent = [named(path) for path in CODE if not ast.get_docstring(tree_of(path))]
    for path in CODE:
        silent += [f"{named(path)}: {name}" for name in undocumented(tree_of(path))]
    assert silent == []


def undocumented(node: ast.Module | ast.ClassDef, inside: str = "") -> Iterator[str]:
    for child in node.body:
        if isinstance(child, ast.FunctionDef | ast.ClassDef) and not child.name.startswith("_"):
            if not ast.get_docstring(child):
                yield f"{inside}{child.name}"
            if isinstance(child, ast.ClassDef):
                yield from undocumented(child, f"{child.name}.")


@pytest.mark.parametrize("name", BUNDLED)
def test_a_plugin_has_all_its_parts(name: str) -> None:
    assert [part for part in PARTS if not (ROOT / "plugins" / name / part).is_file()] == []


@pytest.mark.parametrize("path", python_files("plugins"), ids=named)
def test_a_plugin_imports_the_contract_itself_and_light_modules_alone(path: Path) -> None:
    own = f"handoff.bundled.{path.relative_to(ROOT).parts[1]}"
    heavy = {"asyncio", "socket", "ssl", "subprocess", "urllib", "http", "multiprocessing", "sqlite3", "os"}
    for line, module in imported(path):
        top = module.partition(".")[0]
        allowed = (
            module in ("handoff.plugin", own, "msgspec", "msgspec.structs")
            or module.startswith(f"{own}.")
            or (top in sys.stdlib_module_names and top not in heavy)
        )
        assert allowed, f"{named(path)}:{line} imports {module}"


@pytest.mark.parametrize("path", python_files("handoff"), ids=named)
def test_the_core_never_imports_a_plugin(path: Path) -> None:
    for line, module in imported(path):
        assert not module.startswith("handoff.bundled"), f"{named(path)}:{line} imports {module}"


def imported(path: Path) -> Iterator[tuple[int, str]]:
    for node in ast.walk(tree_of(path)):
        if isinstance(node, ast.Import):
            yield from ((node.lineno, alias.name) for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.level == 0 and node.module:
            yield node.lineno, node.module
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 1, f"{named(path)}:{node.lineno} imports from above its own package"


def test_the_import_rules_name_every_room_of_the_core() -> None:
    rooms = {
        f"handoff.{path.stem}"
        for path in (ROOT / "handoff").iterdir()
        if (path / "__init__.py").is_file() or path.suffix == ".py"
    } - {"handoff.__init__", "handoff.__main__", "handoff.bundled"}
    core, plugins = project()["tool"]["importlinter"]["contracts"][:2]
    assert set(core["source_modules"]) == rooms, "name it in [tool.importlinter] of pyproject.toml"
    assert set(plugins["forbidden_modules"]) == rooms - {"handoff.plugin"}
