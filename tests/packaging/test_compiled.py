"""What the build compiled for quick starts is equal to its sources, and never stands in for an edited one."""

from __future__ import annotations

import json
import zipfile
from pathlib import Path

import pytest
import yaml

from handoff import compiled
from handoff.document import draft
from handoff.document.prepared import compile_templates
from handoff.policy import Policy
from handoff.registry import compile_bundled, find_plugins, parameters_of, part_of, prepare
from handoff.state.schema import merged_schema
from handoff.work import assess_loaded, make_setup, open_file
from tests.packaging.project import ROOT


@pytest.fixture(scope="module")
def content(tmp_path_factory: pytest.TempPathFactory) -> dict[str, object]:
    file = tmp_path_factory.mktemp("compiled") / "compiled.json"
    compile_bundled(ROOT / "plugins", file)
    found: dict[str, object] = json.loads(file.read_text(encoding="utf-8"))
    return found


def test_every_bundled_table_is_compiled_and_equal_to_its_source(content: dict[str, object]) -> None:
    for plugin in find_plugins(Policy(), bundled_only=True):
        text = part_of(plugin, "parameters.yaml") or "{}"
        assert content[compiled.digest_of([text])] == (yaml.safe_load(text) or {}), plugin.name


def test_the_merged_schema_is_compiled_and_equal_to_its_sources(
    content: dict[str, object], monkeypatch: pytest.MonkeyPatch
) -> None:
    plugins = find_plugins(Policy(), bundled_only=True)
    parts = [(plugin.name, json.loads(part_of(plugin, "schema.json") or "{}")) for plugin in plugins]
    monkeypatch.setattr(compiled, "_all", lambda file: content)
    asked = []
    monkeypatch.setattr("handoff.registry.merged_schema", asked.append)
    assert prepare(Policy(), plugins).schema == merged_schema(parts)
    assert asked == [], "the schema was merged again although it is compiled"


def test_the_wheel_carries_what_its_sources_give(wheel: Path, content: dict[str, object]) -> None:
    with zipfile.ZipFile(wheel) as archive:
        assert json.loads(archive.read("handoff/compiled.json")) == content


def test_an_edited_table_is_read_from_its_source(monkeypatch: pytest.MonkeyPatch) -> None:
    plugin = find_plugins(Policy(), bundled_only=True)[0]
    text = part_of(plugin, "parameters.yaml") or ""
    wrong = {"parameters": {}, "sources": {}, "choices": {}}
    monkeypatch.setattr(compiled, "_all", lambda file: {compiled.digest_of([text]): wrong})
    assert parameters_of(plugin).ids() == ()
    monkeypatch.setattr("handoff.registry.part_of", lambda plugin, name: text + "\n")
    assert parameters_of(plugin).ids() != ()


def test_texts_are_kept_apart_by_their_borders() -> None:
    assert compiled.digest_of(["ab", "c"]) != compiled.digest_of(["a", "bc"])


def test_a_table_with_keys_that_json_would_change_is_refused(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match="write its keys as text"):
        compiled.keep([(("text",), {200: 235})], tmp_path / "compiled.json")
    assert not (tmp_path / "compiled.json").exists()


def test_documents_are_the_same_with_and_without_prepared_templates(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    file = tmp_path / "templates.json"
    compile_templates(file)
    made: list[dict[str, bytes]] = []
    asked: list[bool] = []
    for store in ({}, json.loads(file.read_text(encoding="utf-8"))):

        def kept(texts: list[str], _: Path, store: dict[str, object] = store) -> object | None:
            asked.append(compiled.digest_of(texts) in store)
            return store.get(compiled.digest_of(texts))

        monkeypatch.setattr("handoff.document.prepared.kept", kept)
        setup = make_setup()
        loaded = open_file(ROOT / "examples" / "house-fire.yaml", setup, "2026-03-14 19:30")
        made.append(draft(assess_loaded(loaded, setup), "same"))
    assert made[0] == made[1]
    assert True in asked, "nothing of the prepared templates was used"
