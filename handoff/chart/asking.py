"""What charting asks the nurse, and how it says no."""

from __future__ import annotations

from collections.abc import Sequence

from msgspec import Struct

from handoff.state.patient import PatientState


class Question(Struct, frozen=True):
    """A question with yes or no: its key, how it is asked, and what is said where nobody can answer.

    ``by_confirm`` tells that ``--confirm`` answers it with yes.
    """

    key: str
    asked: str
    refused: str
    by_confirm: bool = False


class Ask(Exception):
    """Charting cannot go on before these questions are answered; ``state`` says whose file it is."""

    def __init__(self, questions: Sequence[Question]) -> None:
        super().__init__(f"{len(questions)} questions")
        self.questions = tuple(questions)
        self.state: PatientState | None = None


class Refused(Exception):
    """The entry cannot be charted; carries the lines that say why and what to do."""

    def __init__(self, *lines: str) -> None:
        super().__init__("\n".join(lines))
        self.lines = lines
