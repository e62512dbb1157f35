"""A plugin from outside that fails in any way costs itself alone; the document says so, and is made."""

from __future__ import annotations

import json
import os
import sys
import time
from collections.abc import Callable
from datetime import timedelta
from pathlib import Path

import pytest
from typer.testing import CliRunner, Result

from handoff.assess import Assessment
from handoff.cli import app
from handoff.document.read_back import text_of
from handoff.outside import plugins as outside
from handoff.outside import runner
from handoff.outside.carried import packed, read
from handoff.outside.stopped import Stopped
from handoff.plugin import Findings
from handoff.work import assess_loaded, make_setup, open_text
from tests.core.helpers import AT, SMALL
from tests.outside.plugins import END, install
from tests.shift.helpers import EXAMPLES, assessed, text_of_example

NAMED = "Ferrandel"
Install = Callable[..., Path]


@pytest.fixture
def installed(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Install:
    monkeypatch.syspath_prepend(str(tmp_path / "site"))
    monkeypatch.setattr(outside, "STOPPED_AFTER_S", 4)

    def put(name: str, body: str = "", end: str = END) -> Path:
        return install(tmp_path / "site", name, body, end)

    return put


def of(policy: Path, text: str = SMALL) -> Assessment:
    setup = make_setup(policy)
    return assess_loaded(open_text(text, "small.yaml", setup, AT), setup)


def draft(folder: Path, policy: Path, text: str = SMALL) -> Result:
    (folder / "small.yaml").write_text(text, encoding="utf-8")
    arguments = ["draft", str(folder / "small.yaml"), "--at", AT, "--policy", str(policy)]
    return CliRunner().invoke(app, [*arguments, "--out", str(folder / "out")])


def computing(code: str) -> str:
    return f"def one(case):\n    {code}\n"


def checking(code: str) -> str:
    return f"def told(case):\n    {code}\n"


FAULTS = {
    "raises": ("raise KeyError(case.state.name)", "stopped with KeyError (__init__.py, line "),
    "leaves": ("raise SystemExit(case.state.name)", "stopped with SystemExit (__init__.py, line "),
    "hangs": ("while True: pass", "does not come to an end"),
    "sleeps": ("import time; time.sleep(999)", "does not come to an end"),
    "fills memory": ("x = [bytearray(10_000_000) for _ in range(10_000)]", "fills the memory"),
    "kills itself": ("import os; os._exit(0)", "ended its own process"),
    "crashes": ("import os; os.abort()", "ended its own process"),
    "recurses": ("return one(case)", "stopped with RecursionError"),
    "talks": ("print('{' * 100_000_000)", ""),
    "wrong kind": ("return 'text'", "returned str instead of Findings"),
    "another's key": (
        "return Findings((fact('fluid.total_24h', 'x', '1', system=System.FLUID),))",
        "'fluid.total_24h', which is not its own",
    ),
    "changes the file's text": (
        "case.state.patient['name'] = 'X'",
        "stopped with TypeError",
    ),
    "changes it by force": (
        "dict.__setitem__(case.state.written['patient'], 'name', 'X'); return Findings()",
        "changed what it was given",
    ),
    "changes its table": ("case.parameters._values.clear(); return Findings()", "changed what it was given"),
    "hands over anything": ("return Findings(values={'x': object()})", "returned object among its findings"),
    "reaches the network": (
        "import socket; socket.create_connection(('127.0.0.1', 9))",
        "reaches for socket.",
    ),
    "starts a program": ("import subprocess; subprocess.run(['true'])", "reaches for subprocess.Popen"),
    "forks": ("import os; os.fork()", "reaches for os.fork"),
    "kills the one who asked": ("import os; os.kill(os.getppid(), 9)", "reaches for os.kill"),
    "writes a file": ("open(case.state.file, 'w')", "reaches for open"),
    "deletes a file": ("import os; os.unlink(__file__)", "reaches for os.remove"),
}
POSIX = {"forks", "fills memory"}


@pytest.mark.parametrize("fault", FAULTS)
def test_a_failing_plugin_is_named_and_the_figures_of_the_others_stay(fault: str, installed: Install) -> None:
    if fault in POSIX and sys.platform == "win32":
        pytest.skip("Windows knows neither forks nor limits of memory")
    code, said = FAULTS[fault]
    found = of(installed("faulty", computing(code)))
    without = of(installed("quiet", computing("return Findings()")))
    assert [item for item in found.items if not item.key.startswith("faulty.")] == list(without.items)
    assert found.state.name == "Tomas Ferrandel"
    if said:
        (failure,) = found.failures
        assert (failure.plugin, failure.title) == ("faulty", "Title of faulty")
        assert said in failure.what
        assert NAMED not in failure.what


@pytest.mark.parametrize("fault", ["raises", "kills itself", "changes it by force"])
def test_the_documents_are_made_with_a_band_and_exit_3(
    fault: str, installed: Install, tmp_path: Path
) -> None:
    code, said = FAULTS[fault]
    done = draft(tmp_path, installed("faulty", computing(code)))
    assert done.exit_code == 3, done.output
    assert "not computed: Title of faulty" in done.output
    for name in ("small-handover.docx", "small-care-plan.docx"):
        page = text_of((tmp_path / "out" / name).read_bytes())
        assert "Title of faulty" in page
        assert said.strip() in page


@pytest.mark.parametrize("fault", ["raises", "hangs", "changes it by force"])
def test_a_check_that_fails_is_named_and_the_documents_are_made(
    fault: str, installed: Install, tmp_path: Path
) -> None:
    code, said = FAULTS[fault]
    done = draft(tmp_path, installed("faulty", checking(code)))
    assert done.exit_code == 3, done.output
    assert "Title of faulty: its entries were not checked: it " in done.output
    assert said in done.output
    items = json.loads((tmp_path / "out" / "small.items.json").read_text(encoding="utf-8"))
    assert "faulty.one" in {item["key"] for item in items["items"]}


@pytest.mark.parametrize(
    ("body", "said"),
    [
        ("raise ImportError('gone')", "it does not load: stopped with ImportError"),
        ("while True: pass", "it does not load: it does not come to an end"),
        ("import os; os._exit(3)", "ended its own process"),
        ("import socket; socket.socket()", "reaches for socket."),
    ],
)
def test_a_plugin_that_does_not_load_costs_its_own_findings_and_its_block_stays_known(
    body: str, said: str, installed: Install, tmp_path: Path
) -> None:
    done = draft(tmp_path, installed("faulty", body), SMALL + "faulty: {said: heard}\n")
    assert done.exit_code == 3, done.output
    assert "not computed: faulty: it does not load" in done.output
    assert said in done.output


@pytest.mark.parametrize(
    ("end", "said"),
    [
        ("\nplugin = 3\n", "is not a handoff.plugin.Plugin"),
        (END.replace('name="NAME"', 'name="other"'), "calls itself 'other'"),
        (END.replace("check=told", "check=told, api_version=99"), "speaks contract version 99"),
        (END.replace("check=told", "owns=('fluid',)"), "both 'faulty' and 'fluid' report on 'fluid'"),
        (END.replace("check=told", "requires=(3,)"), "not of the contract"),
    ],
)
def test_what_is_no_plugin_of_ours_is_refused_at_the_door(
    end: str, said: str, installed: Install, tmp_path: Path
) -> None:
    done = draft(tmp_path, installed("faulty", "", end))
    assert done.exit_code == 4, done.output
    assert said in done.output
    assert not (tmp_path / "out").exists()


def test_a_good_plugin_says_all_that_it_could_say_in_process(installed: Install) -> None:
    body = """
def one(case):
    from datetime import timedelta
    cited = case.parameters.source_of("limit")
    item = fact("NAME.one", "One", "1.5 h", value=0.1 + 0.2, unit="h", system=System.GENERAL, as_of=case.now,
        flag=Flag.REVIEW, sources=(cited,), cautions=("look",), rank=3, line=4,
        working=Working(formula="f", sum="s", inputs=(case.input("weight", None, "none"),), rule="r"))
    act = Action(key="NAME.do", area="A", text="t", why="w", system=System.PAIN, first_due=case.now,
        every=timedelta(minutes=90), urgency=Urgency.TIMED)
    return Findings((item,), (act,), {"rows": [(case.now, timedelta(hours=1), {"a": None})]})

def told(case):
    node = case.state.patient["name"]
    return (Problem(node, ("patient", "name"), "is odd", "look", Severity.UNUSUAL),)
"""
    found = of(installed("good", body))
    assert found.failures == ()
    item = found.item("good.one")
    assert item is not None
    assert (item.value, item.as_of, item.rank, item.line) == (0.1 + 0.2, found.now, 3, 4)
    assert item.working is not None
    assert item.working.inputs[0].label == "weight"
    assert item.sources[0].kind == "common practice"
    assert found.findings["good"].values == {"rows": ((found.now, timedelta(hours=1), {"a": None}),)}
    (warning,) = (fault for fault in found.warnings if fault.what == "is odd")
    assert (warning.line, warning.path) == (3, "patient.name")


def test_it_reads_the_findings_of_those_that_it_requires(installed: Install) -> None:
    body = computing(
        "return Findings((fact('NAME.one', 'x', str(case.findings['pain'].items[0].key), system=System.PAIN),))"
    )
    found = of(installed("good", body, END.replace("check=told", "requires=('pain',)")))
    item = found.item("good.one")
    assert item is not None, found.failures
    assert item.shown.startswith("pain.")


def test_it_is_not_given_the_confidential_block_nor_the_variables_of_the_one_who_asks(
    installed: Install, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("HANDOFF_SECRET", "SECRETWORD")
    body = computing(
        "import os; seen = str(case.state.written) + str(case.state.root) + str(dict(os.environ)); "
        "return Findings((fact('NAME.one', 'x', 'SECRETWORD' in seen and 'seen' or 'not seen', "
        "system=System.PAIN),))"
    )
    block = 'confidential: {safeguarding: [{at: "2026-03-14 16:00", by: EM, note: SECRETWORD}]}\n'
    found = of(installed("good", body), SMALL + block)
    item = found.item("good.one")
    assert item is not None, found.failures
    assert item.shown == "not seen"


def test_findings_come_back_as_they_went() -> None:
    for found in assessed(text_of_example("house-fire"), EXAMPLES["house-fire"]).findings.values():
        plain = Findings(found.items, found.actions)
        assert read(Findings, json.loads(json.dumps(packed(plain)))) == plain


@pytest.mark.parametrize(
    "data",
    [
        {},
        [],
        None,
        {"items": [{}], "actions": [], "values": {"map": {}}},
        {"items": "x", "actions": [], "values": {"map": {}}},
        {"items": [], "actions": [], "values": {"moment": "never"}},
        {"items": [], "actions": [], "values": 3},
    ],
)
def test_what_is_not_findings_is_refused(data: object) -> None:
    with pytest.raises(Stopped, match="not of the contract"):
        read(Findings, data)


def test_an_answer_without_end_is_cut(installed: Install, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(runner, "MOST_BYTES", 1_000_000)
    body = computing(
        "import os\n"
        "    for number in range(3, 20):\n"
        "        try:\n"
        "            while True: os.write(number, b' ' * 65536)\n"
        "        except OSError: pass"
    )
    (failure,) = [one for one in of(installed("faulty", body)).failures if "checked" not in one.what]
    assert "too much time or memory" in failure.what or "cannot be read" in failure.what


@pytest.mark.skipif(sys.platform == "win32", reason="there is no such list of processes")
def test_no_process_is_left(installed: Install) -> None:
    of(installed("faulty", computing("import time; time.sleep(999)")))
    time.sleep(0.2)
    mine = (
        [
            path
            for path in Path("/proc").glob("[0-9]*/status")
            if f"PPid:\t{os.getpid()}\n" in path.read_text(errors="replace")
        ]
        if Path("/proc").is_dir()
        else []
    )
    assert mine == []
