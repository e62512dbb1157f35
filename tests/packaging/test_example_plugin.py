"""The example plugin is complete, installs, and runs only where the policy names it."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest

from handoff.plugin import Plugin
from handoff.registry import parameters_of
from tests import test_cases
from tests.packaging.conftest import CleanPlace, build
from tests.packaging.project import ROOT

EXAMPLE = ROOT / "examples" / "plugin-frostbite"

STATE = """\
handoff: 1
clock: Europe/Oslo
patient: {name: Solveig Andal, born: 1991-06-02, identifiers: {record_number: HSH-771102}}
injury: {at: 2026-03-14 12:00, causes: [{kind: cold}]}
"""
BLOCK = """\
frostbite:
  thawed: 2026-03-14 15:30
  baths: [{at: 2026-03-14 15:00, water: 41 C, for: 30 min}]
  parts: [{part: left foot, at: 2026-03-14 18:30, feeling: absent, blisters: clear}]
"""
AT = ("--at", "2026-03-14 19:30")


@pytest.fixture
def frostbite(monkeypatch: pytest.MonkeyPatch) -> Plugin:
    monkeypatch.syspath_prepend(str(EXAMPLE))
    import handoff_frostbite

    plugin: Plugin = handoff_frostbite.plugin
    return plugin


@pytest.fixture(scope="session")
def with_frostbite(clean_place: CleanPlace, tmp_path_factory: pytest.TempPathFactory) -> CleanPlace:
    """The clean environment, with the example plugin installed beside the wheel."""
    out = tmp_path_factory.mktemp("frostbite")
    build(EXAMPLE, out, "--wheel")
    clean_place.install(next(out.glob("*.whl")))
    return clean_place


@pytest.fixture
def ward(tmp_path: Path) -> Path:
    """A folder with a patient whose foot froze, and a policy that names the plugin."""
    (tmp_path / "andal.yaml").write_text(STATE + BLOCK, encoding="utf-8")
    (tmp_path / "plain.yaml").write_text(STATE, encoding="utf-8")
    (tmp_path / "unit-policy.yaml").write_text("policy: 1\nplugins: [frostbite]\n", encoding="utf-8")
    return tmp_path


def test_its_worked_examples_come_out(frostbite: Plugin, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(test_cases.PLUGINS, "frostbite", frostbite)
    monkeypatch.setattr(test_cases, "SETUPS", {})
    cases = [case.values[1] for case in test_cases.all_cases() if case.values[0] is frostbite]
    assert {case.get("formula") for case in cases} >= {"degrees_outside", "hours_left"}
    for case in cases:
        test_cases.test_a_worked_example_comes_out_as_its_source_prints_it(frostbite, case)


def test_its_table_is_cited(frostbite: Plugin) -> None:
    assert parameters_of(frostbite).source_of("bath_range.wms-2011").citation


def test_it_runs_where_the_policy_names_it(with_frostbite: CleanPlace, ward: Path) -> None:
    done = with_frostbite.run(
        "handoff", "show", "andal.yaml", "--json", *AT, "--policy", "unit-policy.yaml", folder=ward
    )
    assert done.returncode == 0, done.stderr
    shown = json.loads(done.stdout)
    items = {item["key"]: item for item in shown["items"]}
    assert items["frostbite.bath"]["flag"] == "due for review"
    assert items["frostbite.hours_since_thaw"]["value"] == 4
    assert "frostbite.check" in {action["key"] for action in shown["actions"]}


def test_its_findings_reach_the_documents(with_frostbite: CleanPlace, ward: Path) -> None:
    done = with_frostbite.run(
        "handoff", "draft", "andal.yaml", *AT, "--policy", "unit-policy.yaml", folder=ward
    )
    assert done.returncode == 0, done.stderr
    assert (ward / "andal-handover.docx").is_file()
    assert "frostbite.bath" in (ward / "andal.items.json").read_text(encoding="utf-8")


def test_the_list_of_plugins_says_that_it_comes_from_outside(with_frostbite: CleanPlace, ward: Path) -> None:
    done = with_frostbite.run("handoff", "plugins", "--policy", "unit-policy.yaml", folder=ward)
    assert re.search(r"^frostbite: Frostbite .*outside plugin", done.stdout, flags=re.MULTILINE)


@pytest.mark.parametrize("arguments", [(), ("--policy", "unit-policy.yaml", "--bundled-only")])
def test_it_does_not_run_unnamed_or_with_bundled_only(
    with_frostbite: CleanPlace, ward: Path, arguments: tuple[str, ...]
) -> None:
    done = with_frostbite.run("handoff", "show", "plain.yaml", "--json", *AT, *arguments, folder=ward)
    assert done.returncode == 0, done.stderr
    assert "frostbite" not in done.stdout
    assert "frostbite" not in with_frostbite.run("handoff", "plugins", *arguments, folder=ward).stdout


def test_its_block_is_an_unknown_key_where_it_does_not_run(with_frostbite: CleanPlace, ward: Path) -> None:
    done = with_frostbite.run("handoff", "check", "andal.yaml", *AT, folder=ward)
    assert done.returncode == 1
    assert "unknown key 'frostbite'" in done.stdout + done.stderr
