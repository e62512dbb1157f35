"""From answers to the text of a patient file, and what the reader says of an answer as it is typed."""

from __future__ import annotations

import re
from collections.abc import Mapping
from datetime import datetime
from pathlib import Path
from typing import Any

from handoff.begin.questions import UNKNOWN, Answers, is_unknown
from handoff.chart.insertion import flow, scalar
from handoff.chart.times import spelled
from handoff.registry import Setup
from handoff.state.clock import Clock, ClockError
from handoff.state.faults import Fault, StateFaults
from handoff.work import open_text

_TIME_ALONE = re.compile(r"\d{1,2}:\d{2}")
_FROM_TO = re.compile(r"(.+?) +to +(.+)")
_WORDS_FOR_ALLERGIES = ("none known", "unable to ask")
_FIRST_LINES = """\
# Patient file of handoff, begun {begun}. Blank means not recorded, never that all is well.
# Chart into it:     handoff chart {file} "urine 35 mL" "pulse 118 /min" --by EM
# What it may hold:  handoff chart --words
handoff: 1
"""


class NotYet(Exception):
    """An answer cannot stand; carries the lines that say why and what to do."""

    def __init__(self, *lines: str) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines


def completed(key: str, answer: str, answers: Answers, now: datetime) -> str:
    """Return an answer as the file keeps it: a time alone gets the date of today.

    Raises:
        NotYet: The time alone means nothing yet, because the time zone is not known.
    """
    text = " ".join(answer.split())
    if key == "name" and text.casefold() == UNKNOWN:
        return UNKNOWN
    if key != "burned_at":
        return text
    try:
        clock = Clock(answers.get("clock", ""))
    except ClockError as error:
        raise NotYet(f"{error.what}; {error.cure}") from None
    parts = _FROM_TO.fullmatch(text)
    return " to ".join(_dated(part, clock, now) for part in (parts.groups() if parts else (text,)))


def file_text(answers: Answers, file: str, now: datetime, confirmed: frozenset[str] = frozenset()) -> str:
    """Return the text of a new patient file that holds ``answers``.

    Args:
        answers: What was answered, by the key of its question.
        file: The name of the file, for the comment at its head.
        now: The moment at which it is begun.
        confirmed: Keys of answers that are unusual and were confirmed.
    """
    try:
        begun = spelled(now, Clock(answers.get("clock", "")))
    except ClockError:
        begun = f"{now:%Y-%m-%d %H:%M}"
    head = _FIRST_LINES.format(begun=begun, file=_in_comment(Path(file).name))
    lines = [f"clock: {scalar(answers.get('clock', ''))}"]
    for block, keys in (
        ("patient", _patient(answers, begun, confirmed)),
        ("injury", _injury(answers)),
    ):
        lines += ["", f"{block}:"]
        for key, value in keys.items():
            lines += _key(key, value)
    return head + "\n".join(lines) + "\n"


def faults_of(text: str, file: str, setup: Setup, at: str = "") -> tuple[list[Fault], list[Fault]]:
    """Return what the reader refuses in ``text``, and what it finds unusual; an empty file name is never told."""
    try:
        return [], list(open_text(text, file, setup, at).unusual)
    except StateFaults as error:
        return error.faults, []


def _dated(text: str, clock: Clock, now: datetime) -> str:
    if not _TIME_ALONE.fullmatch(text):
        return text
    return f"{clock.local(now):%Y-%m-%d} {text.rjust(len('13:20'), '0')}"


def _patient(answers: Answers, begun: str, confirmed: frozenset[str]) -> dict[str, Any]:
    keys: dict[str, Any] = {"name": answers.get("name", "")}
    if is_unknown(answers):
        keys |= {"estimated_age": answers.get("estimated_age", "")}
        number = "temporary"
    else:
        keys |= {"born": answers.get("born", "")}
        number = "record_number"
    keys |= {"sex": answers.get("sex", ""), "identifiers": {number: answers.get(number, "")}}
    keys |= {"location": answers.get("location", ""), "weights": []}
    if answers.get("weight"):
        weight = {
            "value": answers["weight"],
            "kind": answers.get("weight_kind") or "today",
            "known": answers.get("weight_known") or "estimated",
            "at": begun,
        }
        keys["weights"] = [weight | ({"confirmed": "yes"} if "weight" in confirmed else {})]
    height = answers.get("height", "")
    keys["height"] = {"value": height, "confirmed": "yes"} if "height" in confirmed else height
    keys["allergies"] = _allergies(answers.get("allergies", ""))
    decision = {"decision": answers.get("resuscitation", "")}
    keys["resuscitation"] = decision | ({"by": answers["decided_by"]} if answers.get("decided_by") else {})
    return keys


def _allergies(answer: str) -> str | list[dict[str, str]]:
    if not answer or answer.casefold().strip(" .") in _WORDS_FOR_ALLERGIES:
        return answer.casefold().strip(" .")
    made = []
    for one in answer.split(";"):
        to, _, reaction = (part.strip() for part in one.partition(":"))
        made.append({"to": to} | ({"reaction": reaction} if reaction else {}))
    return [one for one in made if one["to"]]


def _injury(answers: Answers) -> dict[str, Any]:
    burned_at = answers.get("burned_at", "")
    parts = _FROM_TO.fullmatch(burned_at)
    keys: dict[str, Any] = {
        "at": {"earliest": parts[1], "latest": parts[2]} if parts else burned_at,
        "causes": [],
        "first_aid": {"cooled_for": answers.get("cooled_for", "")},
        "tetanus": {"doses": answers.get("tetanus", "")},
    }
    if answers.get("cause"):
        cause = {"kind": answers["cause"], "setting": answers.get("setting", "")}
        keys["causes"] = [{key: value for key, value in cause.items() if value}]
    return keys


def _key(key: str, value: Any) -> list[str]:
    """The lines of one key: blank where nothing was answered, entries of a list on a line each."""
    if isinstance(value, Mapping):
        value = {name: part for name, part in value.items() if part}
    if not value:
        return [f"  {key}:"]
    if isinstance(value, list):
        return [f"  {key}:", *(f"    - {flow(entry)}" for entry in value)]
    return [f"  {key}: {flow(value)}"]


def _in_comment(file: str) -> str:
    return "".join(char if char.isprintable() else "?" for char in file)
