"""Word files that are nearly right: returned care plans, edited templates, and patients that print badly."""

from __future__ import annotations

import random
import tempfile
from functools import lru_cache
from io import BytesIO
from pathlib import Path
from zipfile import ZIP_DEFLATED, ZIP_STORED, ZipFile

from msgspec.structs import replace

from handoff.chart.asking import Refused
from handoff.collect.collecting import collect
from handoff.collect.identity import NotThisPlan
from handoff.collect.package import returned
from handoff.document import DocumentError, draft
from handoff.document.outside import refuse_what_reaches_out
from handoff.document.render import template_bytes
from handoff.document.template_check import KINDS, template_faults
from handoff.policy import Policy
from handoff.shift.wording.word_text import NotADocument
from handoff.state.faults import StateFaults
from handoff.work import assess_loaded, open_text
from tests.chart.charts import MOMENTS, example, setup
from tests.document.reading import parts

from . import grammar
from .properties import Breach, told

PATIENT = "house-fire"
DRAFTED = ("handover.docx", "care-plan.docx")
LATER = "2026-03-15 07:30"
BOMB = b'<?xml version="1.0"?><!DOCTYPE a [<!ENTITY a "aaaaaaaaaa"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;">]><a>&b;</a>'
HOSTILE_TEXT = [
    "{{ 7*7 }}",
    "{% for x in y %}",
    "{#",
    "</w:t>",
    "<w:p>",
    "&amp;",
    "]]>",
    "{{r x }}",
    "\u05e9\u05dc",
]
HOSTILE_TEXT += [
    "x" * 1900,
    "'",
    "\\",
    "%}",
    "{%p if %}",
    "=1+1",
    "\U0001f525",
    "a\u0301" * 30,
    "{{ ''.__class__ }}",
]
READ, REFUSED = "read", "refused"


@lru_cache(maxsize=1)
def plan() -> bytes:
    """Return the care plan of an invented patient."""
    text = example(PATIENT)
    assessment = assess_loaded(open_text(text, "patient.yaml", setup(), MOMENTS[PATIENT]), setup())
    return draft(assessment, "plan")["plan-care-plan.docx"]


def _zipped(found: list[tuple[str, bytes]], way: int = ZIP_DEFLATED) -> bytes:
    made = BytesIO()
    with ZipFile(made, "w", way) as file:
        for name, part in found:
            file.writestr(name, part)
    return made.getvalue()


def mangled(rng: random.Random, content: bytes) -> bytes:
    """Return a Word file with bytes, parts, tags or texts changed, or a part that is meant to do harm."""
    if rng.random() < 0.25:
        return grammar.byte_slips(rng, content)
    found = dict(parts(content))
    name = rng.choice([name for name in found if name.endswith(".xml")] + ["word/document.xml"] * 8)
    way = rng.random()
    if way < 0.35:
        found[name] = grammar.slipped(rng, found[name].decode(), 4).encode("utf-8", "replace")
    elif way < 0.55:
        found[name] = _tag_slip(rng, found[name].decode()).encode()
    elif way < 0.65:
        del found[name]
    elif way < 0.75:
        found[name] = rng.choice((BOMB, b"", b"\x00" * 100, b"<a/>", b"<a>" * 5000, b" " * 13_000_000))
    elif way < 0.85:
        found[rng.choice(("../x", "/x", "C:x", "word/../../x", "word/header9.xml"))] = b"<a/>"
    else:
        found[name] = grammar.byte_slips(rng, found[name])
    return _zipped(list(found.items()), rng.choice((ZIP_DEFLATED, ZIP_STORED)))


def _tag_slip(rng: random.Random, xml: str) -> str:
    """Swap, double or drop whole tags, or put another text between two."""
    pieces = xml.split("<")
    for _ in range(rng.randint(1, 6)):
        place, other = rng.randrange(len(pieces)), rng.randrange(len(pieces))
        way = rng.randrange(4)
        if way == 0:
            pieces[place], pieces[other] = pieces[other], pieces[place]
        elif way == 1:
            pieces.insert(place, pieces[other])
        elif way == 2 and len(pieces) > 1:
            del pieces[place]
        else:
            tag, closed, _ = pieces[place].partition(">")
            text = rng.choice(
                (*HOSTILE_TEXT[:3], "25:99 XX", "{{ frame.titel }}", "{{ frame.title", "9" * 40)
            )
            pieces[place] = f"{tag}{closed}{text if closed else ''}"
    return "<".join(pieces)


def returned_input(rng: random.Random) -> bytes:
    """Return a care plan that suffered on its way."""
    return mangled(rng, plan())


def returned_run(content: bytes) -> str:
    """Read a returned care plan and collect its ticks."""
    try:
        document = returned(content)
        collect(example(PATIENT), "patient.yaml", setup(), document, LATER)
    except NotADocument as error:
        told(str(error))
        return REFUSED
    except (NotThisPlan, Refused) as error:
        told(*error.lines)
        return REFUSED
    return READ


def templates_input(rng: random.Random) -> tuple[str, bytes | str]:
    """Return an edited template with its name, or the text of a patient that prints badly."""
    if rng.random() < 0.5:
        name = rng.choice(list(KINDS))
        return name, mangled(rng, template_bytes(name))
    lines = example(PATIENT).splitlines(keepends=True)
    for _ in range(rng.randint(1, 8)):
        number = rng.randrange(len(lines))
        key, colon, rest = lines[number].partition(": ")
        if colon and rest[:1].isalpha() and "," not in rest:
            lines[number] = f"{key}: '{rng.choice(HOSTILE_TEXT).replace(chr(39), chr(39) * 2)}'\n"
    return "", "".join(lines)


def templates_run(made: tuple[str, bytes | str]) -> str:
    """Check an edited template, or print a patient with the built-in ones."""
    name, content = made
    if isinstance(content, bytes):
        return _checked(name, content)
    try:
        loaded = open_text(content, "patient.yaml", setup(), MOMENTS[PATIENT])
    except StateFaults:
        return REFUSED
    draft(assess_loaded(loaded, setup()), "fuzz")
    return READ


def _checked(name: str, content: bytes) -> str:
    try:
        refuse_what_reaches_out(content, name)
    except DocumentError as error:
        told(str(error))
        return REFUSED
    try:
        faults = template_faults(content, name)
    except NOT_A_TEMPLATE:
        return REFUSED
    if faults:
        told(*faults)
        return REFUSED
    if name in DRAFTED:
        _filled(name, content)
    return READ


def _filled(name: str, content: bytes) -> None:
    """Print a patient with an edited template, as the command does: in a process with limits."""
    with tempfile.TemporaryDirectory() as folder:
        (Path(folder) / name).write_bytes(content)
        read = open_text(example(PATIENT), "patient.yaml", setup(), MOMENTS[PATIENT])
        assessment = replace(assess_loaded(read, setup()), policy=Policy(templates=folder))
        trouble: list[str] = []
        made = draft(assessment, "fuzz", None, trouble)
    if len(made) != len(DRAFTED):
        raise Breach("a document was not made")
    told(*trouble)


NOT_A_TEMPLATE = (Exception,)
"""The command catches whatever the Word library stops with on a foreign file, and says so of the file."""
