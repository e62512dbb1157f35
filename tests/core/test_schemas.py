"""The project's own files and what it prints for programs hold to the schemas that are shipped."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Any

import pytest
import yaml
from jsonschema import Draft202012Validator

from handoff.items_json import as_data
from handoff.plugin import Plugin
from handoff.policy import Policy
from handoff.registry import PluginError, find_plugins, parameters_of, part_of
from handoff.state.schema import load_schema
from handoff.work import assess_loaded, make_setup, open_file

EXAMPLES = Path(__file__).parents[2] / "examples"
MOMENTS = {
    "house-fire": "2026-03-14 19:30",
    "toddler-scald": "2026-05-09 14:00",
    "high-voltage": "2026-08-21 21:00",
    "nearly-empty": "2026-10-02 03:40",
}
PLUGINS = find_plugins(Policy(), bundled_only=True)


def breaches(schema: str, data: Any) -> list[str]:
    validator = Draft202012Validator(load_schema(schema))
    return [f"{error.json_path}: {error.message[:120]}" for error in validator.iter_errors(data)]


@pytest.mark.parametrize("plugin", PLUGINS, ids=lambda plugin: plugin.name)
def test_tables_and_worked_examples_hold_to_their_schemas(plugin: Plugin) -> None:
    assert (
        breaches("parameters.schema.json", yaml.safe_load(part_of(plugin, "parameters.yaml") or "{}")) == []
    )
    assert breaches("cases.schema.json", yaml.safe_load(part_of(plugin, "cases.yaml") or "[]")) == []


@pytest.mark.parametrize("name", MOMENTS)
def test_items_json_holds_to_its_schema(name: str) -> None:
    setup = make_setup()
    data = as_data(assess_loaded(open_file(EXAMPLES / f"{name}.yaml", setup, MOMENTS[name]), setup))
    assert breaches("items.schema.json", data) == []
    del data["items"][0]["flag"]
    assert breaches("items.schema.json", data), "the schema would not see a missing flag"


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("choices: {a: {among: [x], default: x}}", "'why' is a required property"),
        ("sources: {x: {doi: y}}", "'citation' is a required property"),
        ("parameters: {a: {value: 1, unit: h, kind: opinion, source: none, locator: x}}", "'opinion'"),
        ("paramters: {}", "'paramters'"),
    ],
)
def test_a_faulty_table_of_an_outside_plugin_is_named_with_its_place(
    text: str, said: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    package = tmp_path / "outside_table"
    package.mkdir()
    (package / "__init__.py").write_text("")
    (package / "parameters.yaml").write_text(text)
    monkeypatch.syspath_prepend(str(tmp_path))
    sys.modules.pop("outside_table", None)
    plugin = Plugin("outside_table", "Outside", "outside_table", lambda case: None)  # type: ignore[arg-type,return-value]
    with pytest.raises(PluginError) as error:
        parameters_of(plugin)
    assert said in str(error.value)
    assert "'outside_table'" in str(error.value)
