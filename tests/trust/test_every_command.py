"""Every command without a network: it does its work, leaves nothing behind, and its files are private."""

from __future__ import annotations

import os
import shutil
import stat
from collections.abc import Iterator
from pathlib import Path

import pytest

from handoff.cli import app
from handoff.document.pdf import PROGRAMS
from tests.collect.filling import filled
from tests.faults.test_killed import first_box
from tests.shift.helpers import EXAMPLES, text_of_example
from tests.trust.watched import Ran, run

pytestmark = pytest.mark.skipif(os.name == "nt", reason="a process is forked")

AT = ("--at", EXAMPLES["house-fire"])
SECRET = "SECRETWORD"  # noqa: S105 (no password)
CONFIDENTIAL = f"""
confidential:
  safeguarding:
    - {{at: 2026-03-14 15:30, by: EM, note: {SECRET} heard, told: Dr {SECRET} at 15:40}}
    - {{at: 2026-03-14 15:30, by: EM, note: {SECRET} heard, told: Dr {SECRET} at 15:40}}
    - at: 2026-03-14 16:30
      note: wrong patient {SECRET}
      struck: {{by: EM, at: 2026-03-14 16:31, why: wrong patient {SECRET}}}
"""
TRACES = (SECRET, "confidential.safeguarding")
EARLIER = "now/earlier.items.json"

COMMANDS: dict[str, tuple[str, ...]] = {
    "demo": ("demo", "demo"),
    "begin": ("begin", "new.yaml", "--blank"),
    "chart": ("chart", "ward/fire.yaml", "pulse 118 /min", *AT, "--by", "EM", "--confirm"),
    "check": ("check", "ward/fire.yaml", *AT),
    "draft": ("draft", "ward/fire.yaml", *AT, "--out", "out"),
    "draft since": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--since", EARLIER),
    "draft deidentified": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--deidentified"),
    "draft protected": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--protect"),
    "draft confidential": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--confidential"),
    "draft pdf": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--pdf"),
    "draft own look": ("draft", "ward/fire.yaml", *AT, "--out", "out", "--policy", "unit.yaml"),
    "verify": ("verify", "now/earlier-handover.docx", "earlier/earlier.yaml"),
    "due": ("due", "ward/fire.yaml", *AT),
    "show": ("show", "ward/fire.yaml", *AT),
    "show json": ("show", "ward/fire.yaml", *AT, "--json"),
    "since": ("since", "ward/fire.yaml", EARLIER, *AT),
    "since file": ("since", "ward/fire.yaml", "earlier/earlier.yaml", *AT),
    "collect": ("collect", "now/filled.docx", "earlier/earlier.yaml", "--yes", "--now", "2026-03-15 07:00"),
    "note": ("note", "ward/fire.yaml", *AT),
    "note written": ("note", "ward/fire.yaml", *AT, "--out", "out"),
    "transfer": ("transfer", "ward/fire.yaml", *AT, "--out", "out"),
    "transfer deidentified": ("transfer", "ward/fire.yaml", *AT, "--out", "out", "--deidentified"),
    "transfer protected": ("transfer", "ward/fire.yaml", *AT, "--out", "out", "--protect"),
    "transfer confidential": ("transfer", "ward/fire.yaml", *AT, "--out", "out", "--confidential"),
    "ward": ("ward", "ward", *AT, "--out", "out", "--jobs", "2"),
    "ward documents": ("ward", "ward", *AT, "--documents", "out"),
    "wording": ("wording", "ward/fire.yaml", *AT),
    "working": ("working", "ward/fire.yaml", "fluid.total_24h", *AT),
    "plugins": ("plugins",),
    "schema": ("schema",),
    "templates write": ("templates", "write", "out/look"),
    "templates check": ("templates", "check", "look/handover.docx"),
}
ASKED_FOR = {
    "draft confidential": ("-confidential.docx",),
    "transfer confidential": ("confidential", ".yaml", ".zip"),
}
PRINTS_WHAT_WAS_TYPED = {"wording"}


@pytest.fixture(scope="module")
def prepared(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A ward with one patient, the documents of an hour before, and the unit's own look."""
    place = tmp_path_factory.mktemp("prepared")
    for name in ("ward", "earlier"):
        (place / name).mkdir()
    text = text_of_example("house-fire") + CONFIDENTIAL
    (place / "ward" / "fire.yaml").write_text(text, encoding="utf-8")
    (place / "earlier" / "earlier.yaml").write_text(text, encoding="utf-8")
    (place / "unit.yaml").write_text("policy: 1\ntemplates: look\n", encoding="utf-8")
    assert run(place, ("templates", "write", "look")).code == 0
    done = run(place, ("draft", "earlier/earlier.yaml", *AT, "--out", "now"))
    assert done.code == 0, done.said
    plan = (place / "now" / "earlier-care-plan.docx").read_bytes()
    (place / "now" / "filled.docx").write_bytes(filled(plan, {first_box(plan): "20:20 JO"}))
    return place


class Case:
    """What one command did in a copy of the prepared folder."""

    def __init__(self, name: str, folder: Path, before: dict[Path, bytes]) -> None:
        self.ran: Ran = run(folder, COMMANDS[name])
        self.folder = folder
        self.made = {path: text for path, text in files(folder).items() if before.get(path) != text}


def files(folder: Path) -> dict[Path, bytes]:
    return {path: path.read_bytes() for path in sorted(folder.rglob("*")) if path.is_file()}


@pytest.fixture(scope="module", params=list(COMMANDS))
def case(
    request: pytest.FixtureRequest, prepared: Path, tmp_path_factory: pytest.TempPathFactory
) -> Iterator[tuple[str, Case]]:
    if request.param == "draft pdf" and not any(shutil.which(name) for name in PROGRAMS):
        pytest.skip("LibreOffice is not installed")
    folder = tmp_path_factory.mktemp("run")
    shutil.copytree(prepared, folder, dirs_exist_ok=True)
    yield request.param, Case(request.param, folder, files(folder))
    shutil.rmtree(folder)


def test_it_needs_no_network_and_asks_for_none(case: tuple[str, Case]) -> None:
    _, done = case
    assert done.ran.code in (0, 1 if case[0] == "wording" else 0, 3), done.ran.said
    assert done.ran.reached == []


def test_what_it_made_is_the_owners_alone(case: tuple[str, Case]) -> None:
    _, done = case
    open_to_others = [
        str(path.relative_to(done.folder))
        for path in done.made
        if not path.is_relative_to(done.folder / "ward")  # an existing file keeps its permissions
        and not path.is_relative_to(done.folder / "earlier")
        and stat.S_IMODE(path.stat().st_mode) & 0o077
    ]
    assert open_to_others == []


def test_nothing_stays_in_a_temporary_folder_and_nothing_is_written_elsewhere(case: tuple[str, Case]) -> None:
    _, done = case
    assert list((done.folder / "temporary").rglob("*")) == []
    assert [path for path in done.folder.rglob(".*") if path.is_file()] == []
    places = [done.folder / path for path in done.ran.written]
    outside = [
        path
        for path in places
        if not path.is_relative_to(done.folder)
        and not path.is_relative_to("/dev")
        and path.suffix != ".pyc"
        and "__pycache__" not in path.parts
    ]
    assert outside == []


def test_a_confidential_entry_is_where_it_was_asked_for_and_nowhere_else(case: tuple[str, Case]) -> None:
    name, done = case
    if name not in PRINTS_WHAT_WAS_TYPED:
        assert SECRET not in done.ran.said
    holding = [str(path.relative_to(done.folder)) for path in done.made if is_held(path)]
    holding = [path for path in holding if not path.startswith(("ward/", "earlier/"))]
    assert [path for path in holding if not any(end in path for end in ASKED_FOR.get(name, ()))] == []
    assert bool(holding) == (name in ASKED_FOR)


def is_held(path: Path) -> bool:
    """Whether a file holds a confidential entry, or only says that there is one."""
    text = everything_in(path)
    return any(trace in text for trace in TRACES)


def everything_in(path: Path) -> str:
    """The text of every part of a file, of files in it too."""
    from io import BytesIO
    from zipfile import ZipFile, is_zipfile

    def read(content: bytes) -> str:
        if not is_zipfile(BytesIO(content)):
            return content.decode("utf-8", errors="replace")
        with ZipFile(BytesIO(content)) as archive:
            closed = any(one.flag_bits & 1 for one in archive.infolist())
            return "" if closed else "".join(read(archive.read(name)) for name in archive.namelist())

    return read(path.read_bytes())


def test_no_command_is_left_out() -> None:
    known = {command.callback.__name__ for command in app.registered_commands if command.callback}
    known |= {group.typer_instance.info.name for group in app.registered_groups if group.typer_instance}
    assert {str(name) for name in known} == {arguments[0] for arguments in COMMANDS.values()}
