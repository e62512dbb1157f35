"""Killed before every step on the file system: each file is the old one or the new one, and the next run goes on."""

from __future__ import annotations

import os
from collections.abc import Callable, Iterator, Mapping
from io import BytesIO
from pathlib import Path

import pytest
from docx import Document

from handoff.document.names import WORD
from handoff.files import PART
from tests.collect.filling import filled
from tests.faults.killing import was_killed
from tests.shift.helpers import run, text_of_example

pytestmark = pytest.mark.skipif(os.name == "nt", reason="a process is forked and killed by a signal")

AT, LATER = "2026-03-14 19:30", "2026-03-14 20:00"
MOST_STEPS = 200
EVERY = int(os.environ.get("FAULTS_EVERY", "4"))
"""Of the many steps of a whole set of documents, each so-many-th is taken; FAULTS_EVERY=1 takes all of them."""


def contents(folder: Path) -> dict[str, bytes]:
    """Return what stands in ``folder``, what a killed process may leave behind aside."""
    return {
        str(path.relative_to(folder)): path.read_bytes()
        for path in sorted(folder.rglob("*"))
        if path.is_file() and not path.name.startswith(PART) and ".lock" not in path.name
    }


def first_box(plan: bytes) -> str:
    """Return the row and the stamp of the first tick box of a care plan."""
    document = Document(BytesIO(plan))
    tags = (tag.get(f"{WORD}val") for tag in document.element.body.iter(f"{WORD}tag"))
    return next(tag.removeprefix("row:") for tag in tags if tag.startswith("row:") and tag.count(":") == 2)


def left_behind(folder: Path) -> list[str]:
    return [path.name for path in folder.rglob(".*") if path.is_file()]


def killed_at_each_step(
    arguments: list[object], folder: Path, reset: Callable[[], None], every: int
) -> Iterator[tuple[int, dict[str, bytes]]]:
    """Yield what stands in ``folder`` after each run that was killed, until one reaches its end."""
    for step in range(1, MOST_STEPS, every):
        reset()
        if not was_killed(arguments, folder, step):
            return
        yield step, contents(folder)
    raise AssertionError("the command never reached its end")


def check_each(
    arguments: list[object],
    folder: Path,
    old: Mapping[str, bytes],
    is_new: Callable[[str, bytes], bool],
    least: int,
    every: int = 1,
) -> None:
    """Kill at each step; every file must be as in ``old`` or new, and the run after the killed one must do all."""

    def reset() -> None:
        for path in sorted(folder.rglob("*"), reverse=True):
            path.unlink() if path.is_file() else path.rmdir()
        for name, content in old.items():
            (folder / name).parent.mkdir(parents=True, exist_ok=True)
            (folder / name).write_bytes(content)

    steps = 0
    for step, found in killed_at_each_step(arguments, folder, reset, every):
        steps = step
        assert set(old) <= set(found), f"step {step}: a file is lost"
        for name, content in found.items():
            assert content == old.get(name) or is_new(name, content), f"step {step}: {name} is neither"
        if step % 5 == 0 or (
            every > 1 and step % 3 == 0
        ):  # the next run goes on where a killed one stopped, and clears up after it
            assert run(*arguments).code in (0, 3), f"step {step}"
            assert left_behind(folder) == [], f"step {step}"
    assert steps >= least, "the command was hardly ever killed"


def test_chart_leaves_the_old_or_the_new_file(tmp_path: Path) -> None:
    file = tmp_path / "patient.yaml"
    old = {"patient.yaml": text_of_example("house-fire").encode()}
    arguments = ["chart", file, "pulse 131 /min", "--at", AT, "--by", "EM", "--confirm"]

    def is_new(name: str, content: bytes) -> bool:
        file.write_bytes(content)
        return content.count(b"pulse: 131 /min") == 1 and run("check", file).code == 0

    check_each(arguments, tmp_path, old, is_new, least=6)


def test_draft_leaves_each_document_old_or_new(tmp_path: Path) -> None:
    file, out = tmp_path / "house-fire.yaml", tmp_path / "out"
    file.write_text(text_of_example("house-fire"), encoding="utf-8")
    drafted = ["draft", file, "--out", out]
    assert run(*drafted, "--at", AT).code == 0
    old = contents(out)
    assert run(*drafted, "--at", LATER).code == 0
    new = contents(out)
    assert all(old[name] != new[name] for name in new)
    check_each([*drafted, "--at", LATER], out, old, lambda name, content: content == new[name], 10, EVERY)


def test_collect_leaves_the_old_or_the_new_file(tmp_path: Path) -> None:
    file = tmp_path / "house-fire.yaml"
    file.write_text(text_of_example("house-fire"), encoding="utf-8")
    assert run("draft", file, "--at", AT).code == 0
    plan = (tmp_path / "house-fire-care-plan.docx").read_bytes()
    old = {"house-fire.yaml": file.read_bytes(), "plan.docx": filled(plan, {first_box(plan): "20:20 JO"})}
    arguments = ["collect", tmp_path / "plan.docx", file, "--yes", "--now", "2026-03-15 07:00"]

    def is_new(name: str, content: bytes) -> bool:
        file.write_bytes(content)
        return content.count(b"\ncollected:") == 1 and run("check", file).code == 0

    check_each(arguments, tmp_path, old, is_new, least=6)


def test_transfer_leaves_no_half_written_sheet(tmp_path: Path) -> None:
    file, out = tmp_path / "house-fire.yaml", tmp_path / "out"
    file.write_text(text_of_example("house-fire"), encoding="utf-8")
    arguments = ["transfer", file, "--at", AT, "--out", out]
    assert run(*arguments).code in (0, 3)
    new = contents(out)
    assert len(new) > 4
    out.mkdir(exist_ok=True)
    check_each(arguments, out, {}, lambda name, content: content == new[name], 10, EVERY)
