"""The block shown in the README is a file that the tool reads."""

from __future__ import annotations

import re

from handoff.registry import part_of
from handoff.work import assess_loaded, open_text

from .build import bundled, setup_of

HEAD = """handoff: 1
clock: Europe/Dublin
patient: {name: Tomas Ferrandel, born: 1985-02-11}
injury: {at: 2026-03-14 05:20}
"""


def test_the_block_of_the_readme_is_read_without_a_fault() -> None:
    text = part_of(bundled("pain"), "README.md") or ""
    block = re.search(r"```yaml\n(.*?)```", text, re.DOTALL)
    assert block is not None
    found = assess_loaded(open_text(HEAD + block[1], "README.md", setup_of(), "2026-03-14 20:00"), setup_of())
    assert not found.failures
    assert not found.warnings
    shown = {one.key: one.shown for one in found.items}
    assert shown["pain.infusion.s1"].endswith("stopped 19:00: POSS 3")
    assert shown["pain.opioid_equivalent_24h"] == (
        "not computed: no factor for oliceridine IV in FPM-ANZCA June 2021"
    )


def test_the_readme_names_every_choice_and_its_default() -> None:
    text = part_of(bundled("pain"), "README.md") or ""
    for name, choice in setup_of().parameters["pain"].choices.items():
        row = next(line for line in text.splitlines() if line.startswith(f"| `{name}`"))
        assert all(f"`{one}`" in row for one in choice.among)
        assert row.split("|")[3].strip().startswith(f"`{choice.default}`")
