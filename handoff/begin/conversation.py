"""The questions asked one after the other: each answer is checked as it is typed, back and skip at any time."""

from __future__ import annotations

from collections.abc import Callable
from datetime import UTC, datetime

from msgspec import Struct, field

from handoff.begin.filling import NotYet, completed, faults_of, file_text
from handoff.begin.questions import QUESTIONS, Question, choices
from handoff.chart.times import spelled
from handoff.registry import Setup
from handoff.state.clock import Clock, ClockError
from handoff.state.faults import Fault

BACK, STOP, CLEAR = "back", "stop", "-"
_YES = ("y", "yes")


class Stopped(Exception):
    """The nurse stopped, or nobody can answer; nothing was written."""


class Conversation(Struct):
    """Asks every question and keeps the answers.

    ``ask`` prints a question and returns the line typed; ``say`` prints a line. ``at`` is the moment as a file
    writes it, empty for the present minute; ``zone`` is offered as the time zone.
    """

    file: str
    setup: Setup
    at: str
    zone: str
    ask: Callable[[str], str]
    say: Callable[[str], None]
    answers: dict[str, str] = field(default_factory=dict)
    confirmed: set[str] = field(default_factory=set)

    def run(self) -> str:
        """Ask until the end and return the text of the file.

        Raises:
            Stopped: ``stop`` was typed, or nobody answers.
        """
        self.say(f"Enter skips a question, '{BACK}' goes to the one before, '{STOP}' leaves without a file.")
        asked: list[int] = []
        place = 0
        while place < len(QUESTIONS):
            question = QUESTIONS[place]
            if not question.asked_if(self.answers):
                self.answers.pop(question.key, None)
                place += 1
                continue
            if self._answered(question):
                asked.append(place)
                place += 1
            elif asked:
                place = asked.pop()
            else:
                self.say("this is the first question")
        return self.text()

    def text(self) -> str:
        """The text of the file with the answers so far."""
        return file_text(self.answers, self.file, self.now, frozenset(self.confirmed))

    def skipped(self) -> list[str]:
        """The questions that were asked and not answered, as they were asked."""
        return [
            one.asked for one in QUESTIONS if one.asked_if(self.answers) and not self.answers.get(one.key)
        ]

    def _answered(self, question: Question) -> bool:
        """Ask until the question is answered or skipped; return False to go back."""
        words = choices(question, self.setup.schema)
        self.say("")
        self.say(_wording(question))
        for number, word in enumerate(words, start=1):
            self.say(f"  {number:>2}  {word}")
        there = self.answers.get(question.key) or (self.zone if question.key == "clock" else "")
        hint = f"Enter keeps {there}" if there else "needed" if question.needed else "Enter skips"
        while True:
            typed = " ".join(self.ask(f"[{hint}] > ").split())
            if typed.casefold() == STOP:
                raise Stopped
            if typed.casefold() == BACK:
                return False
            if typed == CLEAR and not question.needed:
                self.answers.pop(question.key, None)
                return True
            if not typed and not there:
                if not question.needed:
                    return True
                self.say(f"  this is needed; for example {question.example or words[0]}")
                continue
            if self._taken(question, _word(typed or there, words)):
                return True

    def _taken(self, question: Question, answer: str) -> bool:
        """Keep ``answer`` if the reader takes it; say what is wrong otherwise."""
        try:
            answer = completed(question.key, answer, self.answers, self.now)
        except NotYet as error:
            for line in error.lines:
                self.say(f"  {line}")
            return False
        before, old = dict(self.answers), self._found()
        self.answers[question.key] = answer
        self.confirmed.discard(question.key)
        refused, unusual = self._found()
        known = {(fault.path, fault.what) for fault in old[0]}
        new = [fault for fault in refused if (fault.path, fault.what) not in known and not _waits(fault)]
        for fault in new:
            self.say(f"  {fault.what}; {fault.cure}")
        if new or not self._confirmed(question, [fault for fault in unusual if fault not in old[1]]):
            self.answers = before
            return False
        if question.key == "burned_at":
            self.say(f"  {self._said(answer)}")
        return True

    def _confirmed(self, question: Question, unusual: list[Fault]) -> bool:
        for fault in unusual:
            typed = self.ask(f"  {fault.what}. Is it right? [y/N] > ")
            if typed.strip().casefold() not in _YES:
                return False
            self.confirmed.add(question.key)
        return True

    def _found(self) -> tuple[list[Fault], list[Fault]]:
        whole = {"name": "unknown", **self.answers}
        whole["clock"] = self.answers.get("clock") or self.zone or "UTC"
        text = file_text(whole, self.file, self.now, frozenset(self.confirmed))
        return faults_of(text, self.file, self.setup, self.moment)

    @property
    def now(self) -> datetime:
        """The moment of beginning.

        Raises:
            ClockError: ``at`` is not a moment.
        """
        if self.at:
            return self._clock.read(self.at)
        return datetime.now(UTC).replace(second=0, microsecond=0)

    @property
    def moment(self) -> str:
        """The moment of beginning as a file writes it."""
        return spelled(self.now, self._clock)

    @property
    def _clock(self) -> Clock:
        try:
            return Clock(self.answers.get("clock") or self.zone or "UTC")
        except ClockError:
            return Clock("UTC")

    def _said(self, answer: str) -> str:
        clock = Clock(self.answers["clock"])
        return " to ".join(clock.day_and_time(clock.read(part)) for part in answer.split(" to "))


def _waits(fault: Fault) -> bool:
    """A fault that an answer still to come will mend."""
    return "is missing" in fault.what


def _wording(question: Question) -> str:
    return f"{question.asked} (for example {question.example})" if question.example else question.asked


def _word(typed: str, words: tuple[str, ...]) -> str:
    """The word that a number of the list stands for."""
    if words and typed.isdecimal() and 1 <= int(typed) <= len(words):
        return words[int(typed) - 1]
    return typed.casefold() if typed.casefold() in words else typed
