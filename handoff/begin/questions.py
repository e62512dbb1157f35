"""What is asked for a new patient file, in the order of the bedside; nothing is filled in for the nurse."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import TypeAlias

from msgspec import Struct

from handoff.chart import shape
from handoff.chart.shape import Schema

Answers: TypeAlias = Mapping[str, str]

UNKNOWN = "unknown"


class Question(Struct, frozen=True):
    """One question: where its answer stands, how it is asked, an example with its unit.

    ``asked_if`` tells from the answers so far whether it is asked; ``needed`` that it cannot be
    skipped; ``path`` leads to the words it may be answered with, where the schema closes them.
    """

    key: str
    asked: str
    example: str = ""
    path: tuple[str, ...] = ()
    needed: bool = False
    asked_if: Callable[[Answers], bool] = lambda _: True


def is_unknown(answers: Answers) -> bool:
    """Return whether the patient is not identified."""
    return answers.get("name", "").strip().casefold() == UNKNOWN


def _has(key: str) -> Callable[[Answers], bool]:
    return lambda answers: bool(answers.get(key))


QUESTIONS: tuple[Question, ...] = (
    Question("clock", "Time zone of the unit", "Europe/Dublin", needed=True),
    Question("name", "Name as on the wrist band", "Tomas Ferrandel; or: unknown", needed=True),
    Question(
        "temporary", "Temporary identifier on the wrist band", "UNK-0417", needed=True, asked_if=is_unknown
    ),
    Question("estimated_age", "Estimated age", "45 years, 8 months or 3 weeks", asked_if=is_unknown),
    Question(
        "born",
        "Date of birth, year first",
        "1985-02-11",
        asked_if=lambda answers: not is_unknown(answers),
    ),
    Question(
        "record_number",
        "Hospital record number",
        "HSH-204518",
        asked_if=lambda answers: not is_unknown(answers),
    ),
    Question("sex", "Sex", path=("patient", "sex")),
    Question("location", "Ward and bed (shown, never an identifier)", "Ward 6, bed 3"),
    Question("weight", "Weight", "82 kg or 181 lb"),
    Question(
        "weight_kind",
        "Which weight is it",
        path=("patient", "weights", "kind"),
        needed=True,
        asked_if=_has("weight"),
    ),
    Question(
        "weight_known",
        "How is it known",
        path=("patient", "weights", "known"),
        needed=True,
        asked_if=_has("weight"),
    ),
    Question("height", "Height", "178 cm"),
    Question(
        "allergies",
        "Allergies: dressings, latex and iodine too",
        "penicillin: rash; latex. Or: none known. Or: unable to ask",
    ),
    Question(
        "resuscitation", "Resuscitation decision in force", path=("patient", "resuscitation", "decision")
    ),
    Question("decided_by", "Who decided", "Dr A. Quill", asked_if=_has("resuscitation")),
    Question(
        "burned_at",
        "Time of the burn",
        "2026-03-14 13:20, or 13:20 for today; where uncertain: 2026-03-14 12:00 to 2026-03-14 13:30",
    ),
    Question("cause", "Cause", path=("injury", "causes", "kind")),
    Question("setting", "Where it happened", path=("injury", "causes", "setting"), asked_if=_has("cause")),
    Question("cooled_for", "Cooled with running water for", "20 min"),
    Question("tetanus", "Tetanus: doses so far", path=("injury", "tetanus", "doses")),
)


def choices(question: Question, schema: Schema) -> tuple[str, ...]:
    """Return the words that ``question`` may be answered with; none where any text may stand."""
    found: Schema | None = schema
    for name in question.path:
        entry = shape.list_form(found or shape.NOTHING)
        found = shape.keys_of(entry if entry is not None else found or shape.NOTHING).get(name)
    return shape.words_of(found) if question.path and found is not None else ()
