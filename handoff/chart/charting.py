"""From a file's text and a nurse's words to the new text, checked as a whole; nothing is written here."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Collection, Iterator
from datetime import datetime
from typing import Any

from msgspec import Struct, field

from handoff.chart.adding import added_to
from handoff.chart.amending import Amendment, amend
from handoff.chart.asking import Ask, Question, Refused
from handoff.chart.describing import describe_entry, describe_key, same
from handoff.chart.drafting import Draft
from handoff.chart.entries import Moment, Placed, Write, gathered, placed, rows_at
from handoff.chart.layout import CannotInsert
from handoff.chart.meanings import ADDITION, GROUP, LIST, OBSERVATION, Lexicon
from handoff.chart.phrases import NotUnderstood, Said, understand
from handoff.chart.standing import listed_entries, stands, words_that_stand
from handoff.chart.times import meant, spelled
from handoff.registry import Setup
from handoff.state.faults import Fault, StateFaults
from handoff.state.file_text import MAX_BYTES
from handoff.state.load import Loaded
from handoff.state.nodes import Map, plain
from handoff.work import open_text


class Request(Struct, frozen=True):
    """What the nurse asks for: phrases with their time, or one correction, or one entry to strike out."""

    phrases: tuple[str, ...] = ()
    at: str = ""
    by: str = ""
    correct: str = ""
    strike: str = ""
    why: str = ""


class Charted(Struct, frozen=True):
    """The new text, the state before and after, and what was charted in words."""

    text: str
    before: Loaded
    after: Loaded
    lines: tuple[str, ...]


class _Made(Struct):
    """A draft with its entries in place, and the lines that say what they chart."""

    draft: Draft
    placed: list[Placed] = field(default_factory=list)
    lines: list[str] = field(default_factory=list)

    def said_at(self, path: str) -> str:
        """The phrase that a fault at ``path`` is about, or an empty string."""
        found = (one.said_at(path) for one in self.placed)
        return next((said.text for said in found if said is not None), "")


def chart(
    text: str, file: str, setup: Setup, words: Lexicon, request: Request, now: str, yes: Collection[str]
) -> Charted:
    """Return the new text of a file with what ``request`` asks for.

    Args:
        text: The file's text.
        file: Its name, for messages.
        setup: Plugins and schema.
        words: What phrases can mean.
        request: What is to be charted.
        now: The moment of charting as the file writes it; empty for the present minute.
        yes: The keys of the questions that were answered with yes.

    Raises:
        StateFaults: The file has faults of its own.
        MomentError: ``now`` is not a moment.
        Ask: Something has to be asked first.
        Refused: It cannot be charted.
    """
    for option, said in (("--by", request.by), ("--why", request.why)):
        if not said.isprintable() or "\ufeff" in said:
            raise Refused(f"{option} holds a character that cannot be printed; type it again")
    before = open_text(text, file, setup, now)
    words.found.clear()
    words.found.update(words_that_stand(before.state.root))
    work = _Work(text, file, setup, words, request, before, yes)
    try:
        return work.done()
    except (CannotInsert, NotUnderstood) as error:
        raise Refused(str(error)) from None
    except Ask as ask:
        ask.state = before.state
        raise


class _Work(Struct, frozen=True):
    text: str
    file: str
    setup: Setup
    words: Lexicon
    request: Request
    before: Loaded
    yes: Collection[str]

    def done(self) -> Charted:
        """Make the draft, check it as a whole, and ask what has to be asked."""
        make = self._charted() if self.request.phrases else self._amended()
        made = make(self._confirmed())
        if len(made.draft.text.encode()) > MAX_BYTES:
            raise Refused(f"the file would grow beyond {MAX_BYTES // 1_000_000} MB; begin a new one")
        now = spelled(self.before.now, self.before.state.clock)
        try:
            after = open_text(made.draft.text, self.file, self.setup, now)
        except StateFaults as error:
            raise Refused(*(self._about(fault, made) for fault in error.faults)) from None
        questions = [question for question in self._unusual(after, made) if question.key not in self.yes]
        if questions:
            raise Ask(questions)
        return Charted(made.draft.text, self.before, after, tuple(made.lines))

    def _confirmed(self) -> frozenset[str]:
        said = (
            key.removeprefix("unusual ").rpartition(": ")[0] for key in self.yes if key.startswith("unusual ")
        )
        return frozenset(said)

    def _moment(self, at: datetime) -> Moment:
        clock, now = self.before.state.clock, self.before.now
        is_late = now - at > self.setup.policy.late_entry_after
        return Moment(at, self.request.by, spelled(now, clock) if is_late else "", clock)

    def _charted(self) -> Callable[[Collection[str]], _Made]:
        clock, now = self.before.state.clock, self.before.now
        phrases = self._understood()
        moment = self._moment(meant(self.request.at, now, clock, self.yes))
        schema = self.setup.schema
        again = _again(self.before.state.root, gathered(phrases, moment, schema, ()), moment)
        questions = [question for question in again if question.key not in self.yes]
        if questions:
            raise Ask(questions)

        def make(confirmed: Collection[str]) -> _Made:
            made = _Made(Draft(self.text, self.file))
            for write in gathered(phrases, moment, schema, confirmed):
                made.lines += [*_said(write), *_beside_another(made.draft.root, write, moment)]
                put_in = added_to if write.kind == ADDITION else placed
                made.placed.append(put_in(made.draft, write, moment))
            for one in made.placed:  # a later entry of the same minute made a list of an earlier one
                if not isinstance(made.draft.node(one.path), dict):
                    one.path = (*one.path, 0)
            late = f", late entry (written {clock.day_and_time(now)})" if moment.written else ""
            made.lines.insert(0, f"charted for {clock.day_and_time(moment.at)} by {moment.by}{late}:")
            return made

        return make

    def _understood(self) -> list[Said]:
        found: list[Said] = []
        faults: list[str] = []
        for phrase in self.request.phrases:
            try:
                said = understand(phrase, self.words)
            except NotUnderstood as error:
                faults.append(str(error))
                continue
            if any(said.text == other.text for other in found):
                faults.append(f"'{said.text}' stands twice in this command; keep one")
            found.append(said)
        if faults and len(self.request.phrases) > 1 and not any(" " in one for one in self.request.phrases):
            faults = [f'put each entry in quotes: handoff chart FILE "{" ".join(self.request.phrases)}"']
        if faults:
            raise Refused(*faults)
        return found

    def _amended(self) -> Callable[[Collection[str]], _Made]:
        def make(confirmed: Collection[str]) -> _Made:
            draft = Draft(self.text, self.file)
            request = self.request
            asked = Amendment(request.correct, request.strike, request.by, request.why)
            lines = amend(draft, asked, self.before, self.setup.schema, self.words, self.yes, bool(confirmed))
            return _Made(draft, lines=lines)

        return make

    def _about(self, fault: Fault, made: _Made) -> str:
        phrase = made.said_at(fault.path) or self.request.correct or self.request.strike
        return f"'{phrase or ', '.join(self.request.phrases)}': {fault.what}; {fault.cure}"

    def _unusual(self, after: Loaded, made: _Made) -> Iterator[Question]:
        """What is unusual now and was not before, wherever a plugin sees it."""
        known = Counter(_without_places(fault) for fault in self.before.unusual)
        for fault in after.unusual:
            kind = _without_places(fault)
            if known[kind]:
                known[kind] -= 1
                continue
            phrase = made.said_at(fault.path) or self.request.correct or fault.path
            if f"again {phrase}" in self.yes and fault.what.startswith("the same entry"):
                continue  # that was asked before, in other words
            yield Question(
                f"unusual {phrase}: {fault.what.replace(': ', ' ')}",
                f"{phrase}: {fault.what}. Is it right?",
                f"'{phrase}': {fault.what}; check it; if it is right, chart it again with --confirm",
                by_confirm=True,
            )


def _without_places(fault: Fault) -> tuple[str, str]:
    steps = (step.partition("[")[0] for step in fault.path.split("."))
    return ".".join(steps), fault.what


def _said(write: Write) -> Iterator[str]:
    if not write.first.is_row:
        yield f"  {write.first.means}: {describe_entry({**write.which, **write.keys}) or write.path[-1]}"
    else:
        yield from (f"  {describe_key(key, value)}" for key, value in write.keys.items())


def _again(root: Map, writes: list[Write], moment: Moment) -> Iterator[Question]:
    """What stands there already, the same value in the same minute, whoever charted it."""
    clock = moment.clock
    for write in writes:
        if write.kind in (GROUP, ADDITION):
            continue  # these stand once and are refused a second time
        if write.kind == LIST:
            for _, entry in listed_entries(root, write.path):
                if same({**write.keys, "note": ""}, {**_dict(plain(entry)), "note": ""}):
                    phrase = next(iter(write.said.values())).text
                    yield _is_there(phrase, describe_entry(write.keys), entry, moment)
                    break
            continue
        if write.kind == OBSERVATION:
            rows = [row for _, row in rows_at(root, moment.at, clock)]
        else:
            entries = (entry for _, entry in listed_entries(root, write.path))
            rows = [entry for entry in entries if clock.read(str(entry["at"])) == moment.at]
        for key, value in write.keys.items():
            for row in rows:
                if key in row and "struck" not in row and same(value, plain(row[key])):
                    yield _is_there(write.said[key].text, describe_key(key, value), row, moment)
                    break


def _dict(tree: object) -> dict[str, Any]:
    return tree if isinstance(tree, dict) else {}


def _is_there(phrase: str, said: str, entry: Map, moment: Moment) -> Question:
    there = f"{said} is charted already for {moment.clock.day_and_time(moment.at)}"
    there += f" by {entry['by']}" if entry.get("by") else ""
    return Question(
        f"again {phrase}",
        f"{there}. Chart it a second time?",
        f"'{phrase}': {there}; to chart it a second time add --confirm",
        by_confirm=True,
    )


def _beside_another(root: Map, write: Write, moment: Moment) -> Iterator[str]:
    if write.kind != OBSERVATION:
        return
    for _, row in rows_at(root, moment.at, moment.clock):
        for key in write.keys:
            if stands(row, key) and "struck" not in row and not same(write.keys[key], plain(row[key])):
                by = row.get("by", "somebody")
                yield (
                    f"  beside {describe_key(key, plain(row[key]))} charted by {by} for the same minute; "
                    "both stand (if one is wrong: --correct or --strike)"
                )
