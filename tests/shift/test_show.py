"""The patient on a terminal: order, width, no colour needed, and the same JSON as items.json."""

from __future__ import annotations

import io
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest
from rich.cells import cell_len
from rich.console import Console

from handoff.document.handover import IN_THE_BAND
from handoff.shift.screen import print_screen, width_for
from tests.conftest import ROOT
from tests.shift.helpers import EXAMPLES, assessed, run, small, text_of_example

AT = EXAMPLES["house-fire"]
FIRE = ROOT / "examples/house-fire.yaml"


def printed(text: str, at: str, width: int = 80, **options: object) -> str:
    console = Console(file=io.StringIO(), width=width, markup=False, emoji=False, highlight=False, **options)  # type: ignore[arg-type]
    print_screen(assessed(text, at), console)
    assert isinstance(console.file, io.StringIO)
    return console.file.getvalue()


def heads(out: str) -> list[str]:
    return [line.partition(" (")[0] for line in out.splitlines() if line and line[0] != " "]


def test_the_order_is_that_of_page_one_and_then_the_parts() -> None:
    out = run("show", FIRE, "--at", AT).out
    assert heads(out) == [
        "Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518",
        "NEEDS ACTION",
        "DO NOW",
        "WHAT TO DO IF",
        "NOT RECORDED AND NEEDED FIRST",
        "DUE OR OVERDUE",
        "SITUATION",
        "BACKGROUND",
        "ASSESSMENT",
        "RECOMMENDATION",
        "NOT RECORDED",
    ]


@pytest.mark.parametrize("name", EXAMPLES)
def test_piped_it_fits_eighty_columns_without_colour_or_trailing_space(name: str) -> None:
    out = run("show", ROOT / f"examples/{name}.yaml", "--at", EXAMPLES[name]).out
    assert max(cell_len(line) for line in out.splitlines()) <= 80
    assert "\x1b" not in out
    assert not re.search(r" $", out, re.MULTILINE)


@pytest.mark.parametrize("width", [40, 60, 80, 132])
def test_no_line_is_wider_than_the_terminal(width: int) -> None:
    out = printed(text_of_example("house-fire"), AT, width)
    assert max(cell_len(line) for line in out.splitlines()) <= width


def test_every_item_of_the_parts_is_there_and_flags_are_words() -> None:
    made = assessed(text_of_example("house-fire"), AT)
    out = " ".join(printed(text_of_example("house-fire"), AT, 2000).split())
    for item in made.items:
        if not item.detail and item.flag.value != "not recorded" and item.key not in IN_THE_BAND:
            assert all(" ".join(line.split()) in out for line in item.shown.splitlines()), item.key
    for item in made.not_recorded:
        assert item.label[1:] in out
    assert "[ACTION]" in out
    assert "[REVIEW]" in out


def test_with_colour_the_words_are_the_same() -> None:
    plain = printed(text_of_example("high-voltage"), EXAMPLES["high-voltage"])
    colour = printed(
        text_of_example("high-voltage"),
        EXAMPLES["high-voltage"],
        force_terminal=True,
        color_system="standard",
    )
    assert "\x1b[" in colour
    assert re.sub(r"\x1b\[[\d;]*m", "", colour) == plain


def test_text_in_brackets_and_between_colons_is_printed_as_typed() -> None:
    more = 'handovers: [{at: 2026-03-14 19:00, severity: "[red]sick[/red] :skull: [/]"}]\n'
    assert "[red]sick[/red] :skull: [/]" in printed(small(more), AT)


def test_a_word_wider_than_the_screen_is_broken_and_not_cut() -> None:
    more = f"handovers: [{{at: 2026-03-14 19:00, severity: {'x' * 150}}}]\n"
    assert printed(small(more), AT).count("x") >= 150


def test_an_almost_empty_file_says_what_is_missing_and_never_that_all_is_well() -> None:
    out = " ".join(
        run("show", ROOT / "examples/nearly-empty.yaml", "--at", EXAMPLES["nearly-empty"]).out.split()
    )
    assert "severity not recorded by the nurse" in out
    assert "WHAT TO DO IF not recorded by the nurse: agree it at the bedside" in out
    assert "NOT RECORDED AND NEEDED FIRST" in out
    for word in ("normal", "stable", "fine"):
        assert f" {word} " not in out.lower()


def test_confidential_content_is_not_on_the_screen() -> None:
    assert "Account given by both parents" in text_of_example("toddler-scald")
    assert "Account given" not in printed(text_of_example("toddler-scald"), EXAMPLES["toddler-scald"], 400)


def test_json_is_the_same_bytes_as_items_json(tmp_path: Path) -> None:
    assert run("draft", FIRE, "--at", AT, "--out", tmp_path).code == 0
    shown = run("show", FIRE, "--json", "--at", AT)
    assert shown.out.encode() == (tmp_path / "house-fire.items.json").read_bytes()
    assert shown.err == ""


def test_a_console_that_lacks_a_letter_prints_its_number(tmp_path: Path) -> None:
    path = tmp_path / "p.yaml"
    path.write_text(small(name="Łukasz Żak"), encoding="utf-8")
    done = subprocess.run(
        [sys.executable, "-m", "handoff", "show", str(path), "--at", AT],
        capture_output=True,
        env={**os.environ, "PYTHONIOENCODING": "cp1252"},
        check=False,
    )
    assert done.returncode == 0, done.stderr
    assert b"\\u0141ukasz" in done.stdout


def test_a_terminal_gives_its_own_width_and_a_pipe_that_of_a_page() -> None:
    assert width_for(Console(file=io.StringIO(), width=132)) == 80
    assert width_for(Console(file=io.StringIO(), width=132, force_terminal=True)) == 132


def test_check_and_working_load_no_terminal_library() -> None:
    script = (
        "import sys; import handoff.cli as c\n"
        f"sys.argv = ['handoff', 'check', {str(FIRE)!r}, '--at', {AT!r}]\n"
        "try: c.main()\nexcept SystemExit: pass\n"
        "assert 'rich.console' not in sys.modules and 'handoff.shift.screen' not in sys.modules\n"
    )
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
