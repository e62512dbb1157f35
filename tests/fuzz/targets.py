"""What is fuzzed: how an input is made from a seed, and what is done with it."""

from __future__ import annotations

import random
import tempfile
from collections.abc import Callable
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import Any

from handoff.chart.asking import Ask, Refused
from handoff.chart.charting import Request, chart
from handoff.chart.phrases import NotUnderstood, understand
from handoff.items_json import as_json
from handoff.state.clock import Clock, ClockError, read_date
from handoff.state.faults import StateFaults
from handoff.state.file_text import NotAStateFile, read_text
from handoff.state.load import MomentError
from handoff.state.quantity import QuantityError, read_quantity
from handoff.state.reader import read_nodes
from handoff.state.units import KINDS
from handoff.work import assess_loaded, open_text
from tests.chart.charts import HEAD, MOMENTS, NOW, example, setup, words

from . import grammar
from .documents import returned_input, returned_run, templates_input, templates_run
from .large import large
from .properties import Breach, every_plugin_answered, named, placed, told

READ, REFUSED = "read", "refused"


@dataclass(frozen=True)
class Target:
    """One thing that is fuzzed: its input from a source of chance, and what is done with it.

    ``share`` is how many of 10,000 inputs it gets: what costs little gets most.
    """

    name: str
    what: str
    share: int
    make: Callable[[random.Random], Any]
    run: Callable[[Any], str]


@lru_cache(maxsize=1)
def _folder() -> Path:
    return Path(tempfile.mkdtemp(prefix="fuzz-"))


def read_file(content: bytes) -> str:
    """Read a file as every command does."""
    path = _folder() / "patient.yaml"
    path.write_bytes(content)
    try:
        text = read_text(path)
    except NotAStateFile as error:
        if "UTF-8" in str(error):
            named(str(error))
        told(str(error))
        return REFUSED
    return read_words(text)


def read_words(text: str) -> str:
    """Read a text as strict YAML."""
    try:
        _, faults = read_nodes(text, "patient.yaml")
    except StateFaults as error:
        faults = error.faults
    placed(faults, text)
    return REFUSED if faults else READ


def open_patient(made: tuple[str, str]) -> str:
    """Read a patient with every check, and let every plugin compute."""
    text, at = made
    try:
        loaded = open_text(text, "patient.yaml", setup(), at)
    except StateFaults as error:
        placed(error.faults, text)
        return REFUSED
    placed(loaded.unusual, text)
    assessment = assess_loaded(loaded, setup())
    every_plugin_answered(loaded, assessment)
    as_json(assessment)
    return READ


def open_large(text: str) -> str:
    """Read and check a large file."""
    if len(text.encode("utf-8", "surrogatepass")) >= 1_000_000:
        raise Breach("the input is larger than the promise")
    try:
        loaded = open_text(text, "patient.yaml", setup(), NOW)
    except StateFaults as error:
        placed(error.faults[:5], text)
        return REFUSED
    every_plugin_answered(loaded)
    return READ


def read_amount(made: tuple[str, str]) -> str:
    """Read a quantity, and turn it into every unit of its kind."""
    kind, text = made
    try:
        found = read_quantity(kind, text)
    except QuantityError as error:
        told(error.what, error.cure)
        return REFUSED
    for unit in KINDS[kind]:
        try:
            found.to(unit)
        except QuantityError as error:
            told(error.what, error.cure)
    return READ


def read_moment(made: tuple[str, str]) -> str:
    """Read a moment of a zone, and say it in every way."""
    zone, text = made
    outcome = READ
    for partial in (False, True):
        try:
            read_date(text, partial).shown()
        except ClockError as error:
            told(error.what, error.cure)
    try:
        clock = Clock(zone)
        at = clock.read(text)
        for said in (clock.day_and_time(at), clock.day(at), clock.time(at), clock.iso(at)):
            told(said)
    except ClockError as error:
        told(error.what, error.cure)
        outcome = REFUSED
    return outcome


def a_phrase(rng: random.Random) -> tuple[str, str, bool]:
    """Return what a nurse may type, the time to it, and whether it is charted and not only understood."""
    meaning = rng.choice(words().meanings)
    phrase = rng.choice(meaning.examples)
    if rng.random() < 0.3:
        phrase = f"{rng.choice(meaning.says)} {grammar.quantity(rng)[1]}"
    if rng.random() < 0.7:
        phrase = grammar.slipped(rng, phrase, 3)
    at = rng.choice(("", "", "15:00", grammar.moment(rng)))
    return phrase[:2000], at, rng.random() < 0.05


def chart_phrase(made: tuple[str, str, bool]) -> str:
    """Understand a phrase; chart it into a small patient where that is asked."""
    phrase, at, is_charted = made
    try:
        if not is_charted:
            understand(phrase, words())
            return READ
        request = Request((phrase,), at, "EM")
        done = chart(HEAD, "patient.yaml", setup(), words(), request, NOW, ())
        every_plugin_answered(done.after)
    except NotUnderstood as error:
        told(str(error))
        return REFUSED
    except Refused as error:
        told(*error.lines)
        return REFUSED
    except Ask as ask:
        told(*(question.asked for question in ask.questions))
        return REFUSED
    except MomentError as error:
        raise Breach(f"the moment of charting was given: {error}") from error
    return READ


def _patient_text(rng: random.Random) -> tuple[str, str]:
    if rng.random() < 0.5:
        return grammar.nearly(rng)
    name = rng.choice(list(MOMENTS))
    return grammar.slipped(rng, example(name), 3), MOMENTS[name]


TARGETS = (
    Target("quantities", "a quantity of each kind", 4000, grammar.quantity, read_amount),
    Target(
        "clock",
        "a moment of a zone",
        2500,
        lambda rng: (
            rng.choice(grammar.ZONES[:6] if rng.random() < 0.9 else grammar.ZONES),
            grammar.moment(rng),
        ),
        read_moment,
    ),
    Target("reader", "a file, read as strict YAML", 2700, grammar.small, read_file),
    Target("chart", "a phrase of chart", 500, a_phrase, chart_phrase),
    Target("schemas", "a patient, checked and computed whole", 250, _patient_text, open_patient),
    Target("returned", "a care plan that came back", 45, returned_input, returned_run),
    Target("templates", "an edited template; a hostile patient filled in", 3, templates_input, templates_run),
    Target("large", "a file just below a megabyte", 2, large, open_large),
)
