"""The command line as a nurse and a script meet it: words, files and exit codes."""

from __future__ import annotations

import json
import stat
import subprocess
import sys
from pathlib import Path

import pytest

from handoff.policy import Policy
from tests.core.helpers import AT, SMALL

DOCUMENTS = ["small-care-plan.docx", "small-handover.docx", "small.items.json"]


def run(*arguments: object, cwd: Path | None = None) -> subprocess.CompletedProcess[str]:
    """Return what ``handoff`` did with ``arguments`` in a process of its own."""
    command = [sys.executable, "-m", "handoff", *map(str, arguments)]
    return subprocess.run(command, capture_output=True, text=True, encoding="utf-8", cwd=cwd, check=False)


@pytest.fixture
def small(tmp_path: Path) -> Path:
    path = tmp_path / "small.yaml"
    path.write_text(SMALL, encoding="utf-8")
    return path


def test_a_file_with_only_patient_and_injury_drafts_both_documents(small: Path) -> None:
    done = run("draft", small, "--at", AT)
    assert done.returncode == 0, done.stderr
    assert sorted(path.name for path in small.parent.iterdir() if path != small) == DOCUMENTS
    assert "Tomas Ferrandel, born 11 Feb 1985, record number HSH-204518" in done.stdout


def test_documents_are_the_owners_alone(small: Path) -> None:
    run("draft", small, "--at", AT)
    for name in DOCUMENTS:
        assert stat.S_IMODE((small.parent / name).stat().st_mode) == 0o600


def test_out_names_another_folder(small: Path, tmp_path: Path) -> None:
    assert run("draft", small, "--at", AT, "--out", tmp_path / "new" / "deep").returncode == 0
    assert sorted(path.name for path in (tmp_path / "new" / "deep").iterdir()) == DOCUMENTS


def test_show_as_json_prints_the_same_bytes_as_items_json(small: Path) -> None:
    run("draft", small, "--at", AT)
    shown = run("show", small, "--json", "--at", AT)
    assert shown.stdout.encode() == (small.parent / "small.items.json").read_bytes()
    assert set(json.loads(shown.stdout)) >= {
        "digest",
        "at",
        "policy",
        "plugins",
        "items",
        "actions",
        "not_recorded",
        "failures",
    }


def test_a_fault_in_the_file_ends_with_exit_code_1_and_writes_nothing(small: Path) -> None:
    small.write_text(SMALL + "pateint: x\n", encoding="utf-8")
    done = run("draft", small, "--at", AT)
    assert done.returncode == 1
    assert f"{small}:5:1: pateint: unknown key 'pateint'; did you mean 'patient'?" in done.stderr
    assert list(small.parent.iterdir()) == [small]


@pytest.mark.parametrize(
    "arguments",
    [["check", "nothing.yaml"], ["check", "."], ["draft"], ["check", "small.yaml", "--at", "later"]],
)
def test_wrong_usage_ends_with_exit_code_2(small: Path, arguments: list[str]) -> None:
    done = run(*arguments, cwd=small.parent)
    assert done.returncode == 2
    assert "Traceback" not in done.stderr


def test_a_policy_with_a_fault_ends_with_exit_code_4(small: Path) -> None:
    policy = small.parent / "policy.yaml"
    policy.write_text("policy: 1\npapr: A4\n", encoding="utf-8")
    done = run("check", small, "--policy", policy)
    assert done.returncode == 4
    assert "unknown key 'papr'; did you mean 'paper'?" in done.stderr


def test_an_unusual_value_is_said_and_does_not_stop_the_work(small: Path) -> None:
    text = SMALL + "observations: {2026-03-14: {15:00: {pulse: 230 /min}}}\n"
    small.write_text(text, encoding="utf-8")
    done = run("check", small, "--at", AT)
    assert done.returncode == 0
    assert "230 /min is unusual" in done.stdout
    small.write_text(text.replace("{pulse: 230 /min}", "{pulse: 230 /min, confirmed: yes}"), encoding="utf-8")
    assert "no faults" in run("check", small, "--at", AT).stdout


def test_working_shows_formula_sum_input_line_and_rule(small: Path) -> None:
    done = run("working", small, "injury.hours_since", "--at", AT)
    assert done.returncode == 0
    assert "6 h 10 min" in done.stdout
    assert "small.yaml, line 4" in " ".join(done.stdout.split())


def test_working_of_an_unknown_figure_names_the_nearest(small: Path) -> None:
    done = run("working", small, "injury.hour_since", "--at", AT)
    assert done.returncode == 2
    assert "injury.hours_since" in done.stderr


def test_working_of_a_figure_that_could_not_be_computed_ends_with_exit_code_3(small: Path) -> None:
    script = (
        "import sys, msgspec, handoff.bundled.fluid as f, handoff.registry as r\n"
        "def broken(case): raise ValueError('x')\n"
        "f.plugin = msgspec.structs.replace(f.plugin, compute=broken)\n"
        "import handoff.cli; sys.argv = ['handoff', 'working', *sys.argv[1:]]; handoff.cli.main()\n"
    )
    for key in ("fluid.total_24h", "injury.hours_since"):
        command = [sys.executable, "-c", script, str(small), key, "--at", AT]
        done = subprocess.run(command, capture_output=True, text=True, check=False)
        assert done.returncode == 3, done.stderr
        assert "Fluid" in done.stderr


def test_plugins_lists_each_with_its_choices() -> None:
    done = run("plugins")
    assert done.returncode == 0
    for name in ("area", "fluid", "airway_watch", "pain", "overview"):
        assert f"\n{name}: " in f"\n{done.stdout}"


def test_the_schema_is_a_json_schema_that_accepts_the_small_patient_as_an_editor_reads_it() -> None:
    from jsonschema import Draft202012Validator

    schema = json.loads(run("schema").stdout)
    Draft202012Validator.check_schema(schema)
    patient = {"name": "Tomas Ferrandel", "identifiers": {"record_number": 451203}}
    validator = Draft202012Validator(schema)
    good = {"handoff": 1, "clock": "Europe/Dublin", "patient": patient, "injury": {}}
    assert not list(validator.iter_errors(good))
    assert list(validator.iter_errors({**good, "pateint": {}}))
    assert list(validator.iter_errors({**good, "patient": {**patient, "height": 178}}))


def test_debug_shows_where_it_stopped_and_no_patient_data(
    small: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    script = (
        "import sys; import handoff.work as w\n"
        "def broken(*a, **k): raise RuntimeError('Tomas Ferrandel')\n"
        "w.assess_loaded = broken\n"
        "import handoff.cli; sys.argv = ['handoff', 'show', sys.argv[1], '--debug']; handoff.cli.main()\n"
    )
    done = subprocess.run(
        [sys.executable, "-c", script, str(small)], capture_output=True, text=True, check=False
    )
    assert done.returncode == 4
    assert "RuntimeError" in done.stderr
    assert "Ferrandel" not in done.stderr.replace(str(small), "")
    assert "Traceback" not in done.stderr


def test_the_built_in_policy_says_so() -> None:
    assert Policy().name == "built-in defaults"
