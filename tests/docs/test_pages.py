"""The pages that are made from schemas and tables are fresh, and what they are made from is whole."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest

from docs.generate import bundled, pages, stale
from docs.making.choices import values_of
from docs.making.sources import First, sources
from handoff.registry import Setup
from handoff.state.schema import ENTRY
from tests.packaging.project import all_files, named


@pytest.fixture(scope="module")
def setup() -> Setup:
    return bundled()


@pytest.fixture(scope="module")
def made(setup: Setup) -> dict[str, str]:
    return pages(setup)


def test_no_page_is_stale(made: dict[str, str]) -> None:
    assert stale(made) == [], "run python3 -m docs.generate"


def test_every_key_of_the_state_file_is_described(setup: Setup) -> None:
    assert [path for path, key in keys(setup.schema) if not key.get("description")] == []


def keys(schema: Any, path: str = "") -> Iterator[tuple[str, Any]]:
    if not isinstance(schema, dict):
        return
    for name, key in schema.get("properties", {}).items():
        if name not in ENTRY:
            yield f"{path}{name}", key
        yield from keys(key, f"{path}{name}.")
    for part in ("items", "then", "else", "x-row", "additionalProperties"):
        yield from keys(schema.get(part), path)


def test_every_top_key_has_its_section(setup: Setup, made: dict[str, str]) -> None:
    sections = set(re.findall(r"^## (\w+)$", made["state-file.md"], flags=re.MULTILINE))
    assert sorted(set(setup.schema["properties"]) - sections) == []


def test_every_value_and_every_choice_is_listed(setup: Setup, made: dict[str, str]) -> None:
    for plugin in setup.plugins:
        parameters = setup.parameters[plugin.name]
        section = made["sources.md"].split(f"\n## {plugin.name}: ")[1].split("\n## ")[0]
        assert [one for one in parameters.ids() if f"| `{one}` |" not in section] == []
        for name in parameters.choices:
            assert f"### {plugin.name}.{name}\n" in made["choices.md"]


def test_every_value_without_a_source_waits_for_confirmation(setup: Setup, made: dict[str, str]) -> None:
    confirm = made["sources.md"].split("## For a clinician to confirm")[1].split("\n## ")[0]
    for plugin in setup.plugins:
        parameters = setup.parameters[plugin.name]
        for one in parameters.ids():
            if parameters[one].kind in ("from memory", "common practice"):
                assert f"`{plugin.name}.{one}`" in confirm


def test_what_must_be_confirmed_first_names_values_that_are_there(setup: Setup) -> None:
    with pytest.raises(KeyError):
        sources(setup, [First("nothing", "it is not there", ("area.no_such_value",), ())])
    with pytest.raises(KeyError):
        sources(setup, [First("nothing", "it is not there", (), ("area: no such example",))])


def test_a_rule_set_is_not_given_the_values_of_another_choice(setup: Setup) -> None:
    pain = setup.parameters["pain"]
    held = values_of(pain.choices["paracetamol_limit"], pain)
    assert all(one.startswith("paracetamol.") for ids in held.values() for one in ids)


@pytest.mark.parametrize("page", [path for path in all_files() if path.suffix == ".md"], ids=named)
def test_every_link_leads_somewhere(page: Path) -> None:
    for target in re.findall(r"\]\(([^)#]+)(?:#[^)]*)?\)", page.read_text(encoding="utf-8")):
        assert (page.parent / target).exists(), f"{page.name}: {target}"
