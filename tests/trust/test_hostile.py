"""Files built to do harm: each is refused in a line, quickly, in little memory, and nothing is written by it."""

from __future__ import annotations

import time
from collections.abc import Callable
from io import BytesIO
from pathlib import Path
from zipfile import ZIP_DEFLATED, ZIP_LZMA, ZipFile

import pytest

from handoff.document.read_back import text_of
from tests.collect.filling import zipped
from tests.core.helpers import assessment_of, item, plugin_of
from tests.shift.helpers import EXAMPLES, run, text_of_example

AT = ("--at", EXAMPLES["house-fire"])
LONGEST_S = 20.0
LARGEST_BYTES = 500_000_000

YAML = {
    "a bomb of aliases": "a: &a [x, x]\nb: &b [*a, *a, *a]\nc: [*b, *b, *b]\n",
    "a merge": "a: &a {b: c}\nd: {<<: *a}\n",
    "a python object": "handoff: !!python/object/apply:os.system [echo harm]\n",
    "a python name": "patient: {name: !!python/name:os.system }\n",
    "ten thousand levels": "a: " + "[" * 10_000 + "]" * 10_000 + "\n",
    "ten thousand braces": "{a: " * 10_000 + "\n",
    "one long key": "x" * 900_000 + ": 1\n",
    "a hundred thousand keys": "".join(f"k{number}: 1\n" for number in range(100_000)),
    "two documents": "handoff: 1\n---\nhandoff: 1\n",
    "a null byte": "handoff: 1\0\n",
    "an escape sequence": 'handoff: 1\npatient: {name: "\\e[2J\\e]0;x\\a"}\n',
}


def most_held() -> int:
    """The most memory that this process ever held, in bytes; 0 where the system does not tell."""
    try:
        import resource
    except ImportError:
        return 0
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * 1024


def quick(arguments: tuple[object, ...]) -> tuple[int, str]:
    begun = time.monotonic()
    before = most_held()
    done = run(*arguments)
    assert time.monotonic() - begun < LONGEST_S
    assert most_held() - before < LARGEST_BYTES
    assert "Traceback" not in done.out + done.err
    return done.code, done.out + done.err


@pytest.mark.parametrize("name", YAML)
def test_a_state_file_built_to_do_harm_is_refused_with_its_place(name: str, tmp_path: Path) -> None:
    (tmp_path / "x.yaml").write_text(YAML[name], encoding="utf-8")
    code, said = quick(("check", tmp_path / "x.yaml"))
    assert code in (1, 2), said
    assert "x.yaml" in said
    assert "\x1b" not in said
    assert len(said) < 500_000


@pytest.mark.parametrize("name", ["a bomb of aliases", "a python object", "ten thousand levels"])
def test_a_policy_built_to_do_harm_is_refused_with_its_place(name: str, tmp_path: Path) -> None:
    (tmp_path / "p.yaml").write_text("policy: 1\n" + YAML[name], encoding="utf-8")
    code, said = quick(("plugins", "--policy", tmp_path / "p.yaml"))
    assert code == 4, said
    assert "p.yaml" in said


def entities(name: str) -> bytes:
    """Ten times ten times ... of a letter, named in the root of a part."""
    rows = "".join(f'<!ENTITY e{n} "{f"&e{n - 1};" * 10}">' for n in range(1, 10))
    return f'<?xml version="1.0"?><!DOCTYPE r [<!ENTITY e0 "xxxxxxxxxx">{rows}]><r>&e9;</r>'.encode()


def reads_a_file(_: str) -> bytes:
    return b'<?xml version="1.0"?><!DOCTYPE r [<!ENTITY e SYSTEM "file:///etc/passwd">]><r>&e;</r>'


def deep(_: str) -> bytes:
    return b"<a>" * 100_000 + b"</a>" * 100_000


XML: dict[str, Callable[[str], bytes]] = {"entities": entities, "a file": reads_a_file, "levels": deep}
PARTS = ("word/document.xml", "docProps/core.xml", "docProps/custom.xml")


def parts_of(document: bytes) -> dict[str, bytes]:
    with ZipFile(BytesIO(document)) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


def swollen(document: bytes) -> bytes:
    """A part that unpacks to six hundred million bytes."""
    made = BytesIO()
    with ZipFile(made, "w", ZIP_DEFLATED) as archive:
        for name, content in parts_of(document).items():
            with archive.open(name, "w") as part:
                part.write(content)
                if name == "word/document.xml":
                    for _ in range(600):
                        part.write(b" " * 1_000_000)
    return made.getvalue()


def cut_stream(document: bytes) -> bytes:
    """The packed bytes of the first part are no longer what was packed."""
    start = document.index(b"[Content_Types].xml") + 40
    return document[:start] + b"\xff\x07\x00" * 20 + document[start + 60 :]


def other_packing(document: bytes) -> bytes:
    made = BytesIO()
    with ZipFile(made, "w", ZIP_LZMA) as archive:
        for name, content in parts_of(document).items():
            archive.writestr(name, content)
    packed = made.getvalue()
    start = packed.index(b"[Content_Types].xml") + 40
    return packed[:start] + b"\xff" * 40 + packed[start + 40 :]


def escaping(document: bytes) -> bytes:
    return zipped(
        {
            **parts_of(document),
            "../escaped.xml": b"<a/>",
            "/escaped.xml": b"<a/>",
            "word/../../escaped.xml": b"<a/>",
        }
    )


ZIPS: dict[str, Callable[[bytes], bytes]] = {
    "swollen": swollen,
    "cut stream": cut_stream,
    "other packing": other_packing,
    "escaping names": escaping,
    "empty": lambda _: b"",
    "half": lambda document: document[: len(document) // 2],
    "text": lambda _: b"PK\x03\x04 hello",
}
READERS: dict[str, tuple[str, ...]] = {
    "verify": ("verify", "x.docx", "patient.yaml"),
    "collect": ("collect", "x.docx", "patient.yaml", "--yes", "--now", "2026-03-15 07:00"),
    "wording": ("wording", "x.docx"),
    "templates check": ("templates", "check", "handover.docx"),
    "draft over it": ("draft", "patient.yaml", *AT),
    "draft in that look": ("draft", "patient.yaml", *AT, "--out", "new", "--policy", "unit.yaml"),
    "addendum": ("transfer", "patient.yaml", *AT, "--out", "new", "--addendum", "x.zip"),
}


@pytest.fixture(scope="module")
def plan(tmp_path_factory: pytest.TempPathFactory) -> bytes:
    place = tmp_path_factory.mktemp("plan")
    (place / "patient.yaml").write_text(text_of_example("house-fire"), encoding="utf-8")
    assert run("draft", place / "patient.yaml", *AT).code == 0
    return (place / "patient-care-plan.docx").read_bytes()


@pytest.fixture
def place(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    folder = tmp_path / "ward" / "below"
    (folder / "look").mkdir(parents=True)
    (folder / "patient.yaml").write_text(text_of_example("house-fire"), encoding="utf-8")
    (folder / "unit.yaml").write_text("policy: 1\ntemplates: look\n", encoding="utf-8")
    monkeypatch.chdir(folder)
    return folder


def meet(place: Path, reader: str, content: bytes, is_kept: bool = True) -> None:
    for name in ("x.docx", "x.zip", "handover.docx", "look/handover.docx", "patient-handover.docx"):
        (place / name).write_bytes(content)
    before = (place / "patient.yaml").read_bytes()
    code, said = quick(READERS[reader])
    assert code in (0, 1, 2, 3, 4), said
    assert "fault of its own" not in said
    assert "root:" not in said
    assert not list(place.parent.parent.rglob("escaped*"))
    assert (place / "patient.yaml").read_bytes() == before or (reader == "collect" and code == 0)
    assert not is_kept or (place / "patient-handover.docx").read_bytes() == content


@pytest.mark.parametrize("reader", READERS)
@pytest.mark.parametrize("kind", ZIPS)
def test_a_document_packed_to_do_harm_is_refused_or_read_as_it_is(
    kind: str, reader: str, place: Path, plan: bytes
) -> None:
    meet(place, reader, ZIPS[kind](plan))


@pytest.mark.parametrize("reader", READERS)
@pytest.mark.parametrize("kind", XML)
def test_a_document_whose_parts_are_built_to_do_harm_is_refused_or_read_as_it_is(
    kind: str, reader: str, place: Path, plan: bytes
) -> None:
    for part in PARTS:
        # A document of which the properties alone were touched is as drafted, and may be drafted anew.
        meet(place, reader, zipped({**parts_of(plan), part: XML[kind](part)}), part == PARTS[0])


FORMULAS = (
    "=cmd|' /C calc'!A0",
    "@SUM(1+1)*cmd|' /C calc'!A0",
    "+1+1",
    "-2+3+cmd|' /C calc'!A0",
    "{DDEAUTO c:\\x}",
)


@pytest.mark.parametrize("text", FORMULAS)
def test_a_text_like_a_formula_stands_as_text_and_is_no_field(text: str, place: Path) -> None:
    quoted = text.replace("\\", "\\\\")
    written = text_of_example("house-fire").replace("name: Tomas Ferrandel", f'name: "{quoted}"', 1)
    (place / "patient.yaml").write_text(written, encoding="utf-8")
    code, said = quick(READERS["draft over it"])
    assert code == 0, said
    for path in place.glob("*.docx"):
        assert "DDEAUTO" in text or "cmd" in text or "+" in text
        parts = parts_of(path.read_bytes())
        instructions = b"".join(
            piece.partition(b"</w:instrText>")[0]
            for part in parts.values()
            for piece in part.split(b"<w:instrText")[1:]
        )
        assert text.encode() not in instructions
        assert text in text_of(path.read_bytes()) or any(
            text.replace("'", "&apos;").encode() in part or text.encode() in part for part in parts.values()
        )


@pytest.mark.parametrize("text", ["\x1b[2J", "a\x07b", "a\x00b", "a\x9bb", "a\rb"])
def test_a_plugin_sends_no_control_characters_to_a_terminal(text: str) -> None:
    from handoff.plugin import Findings

    found = assessment_of(plugin_of("a", lambda _: Findings((item("a.one", shown=text),))))
    assert "control character" in found.failures[0].what
    assert assessment_of(plugin_of("a", lambda _: Findings((item("a.one", shown="two\nlines"),)))).items
