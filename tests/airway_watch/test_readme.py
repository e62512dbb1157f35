"""The README shows a block that the tool reads, every choice with its default, and every contract key."""

from __future__ import annotations

import re

import pytest

from handoff.registry import part_of

from .build import airway, assessed, faults, item, setup_of

HEAD = """handoff: 1
clock: Europe/Dublin
patient: {name: Tomas Ferrandel, born: 1985-02-11, sex: male, height: 178 cm}
injury: {at: 2026-03-14 13:20, causes: [{kind: flame, setting: enclosed space, smoke: yes}]}
"""
README = part_of(airway, "README.md") or ""


def test_the_block_of_the_readme_is_read_without_a_fault() -> None:
    block = re.search(r"```yaml\n(.*?)```", README, re.DOTALL)
    assert block is not None
    assert faults(HEAD + block[1], at="2026-03-14 17:00") == []
    findings = assessed(HEAD + block[1], at="2026-03-14 17:00").findings["airway_watch"]
    assert item(findings, "tidal_per_kg").shown.startswith("6 mL/kg (440 mL)")
    assert item(findings, "pf_ratio").value == pytest.approx(150.01, abs=0.005)
    assert item(findings, "carboxyhaemoglobin_measured").shown == "18 % at 14:15, 9 % at 16:35"


def test_the_readme_names_every_choice_and_its_default() -> None:
    for name, choice in setup_of().parameters["airway_watch"].choices.items():
        row = next(line for line in README.splitlines() if line.startswith(f"| `{name}`"))
        assert all(f"`{one}`" in row for one in choice.among)
        assert row.split("|")[3].strip() == f"`{choice.default}`"


def test_the_readme_names_the_keys_that_must_exist() -> None:
    for key in ("signs_present", "next_check", "carboxyhaemoglobin_now", "pf_ratio"):
        assert f"`airway_watch.{key}`" in README
