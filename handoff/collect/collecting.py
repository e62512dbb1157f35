"""From a returned care plan and a file's text to the new text; nothing is written here, nothing overwritten."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import datetime

from msgspec import Struct

from handoff.chart.asking import Refused
from handoff.chart.charting import Charted
from handoff.chart.drafting import Draft
from handoff.chart.layout import CannotInsert
from handoff.chart.times import spelled
from handoff.collect.boxes import Box, Row, rows_of
from handoff.collect.identity import Plan, plan_of
from handoff.collect.package import Returned
from handoff.collect.times import done_of, due_of, time_and_initials
from handoff.document.made_from import TASK
from handoff.plugin import plural
from handoff.registry import Setup
from handoff.state.access import entries, words
from handoff.state.clock import ClockError
from handoff.state.load import Loaded
from handoff.state.nodes import Map
from handoff.work import open_text

BLOCK = "collected"
_COMPARED = ("done", "by", "text", "note")


class Collected(Struct, frozen=True):
    """What was read: the new text with its states, what is said of it, and what needs a look.

    ``charted.lines`` are the ticks to be written, one a line; ``said`` is about the document,
    ``problems`` are the places that were not read, or that differ from what was collected before.
    """

    charted: Charted
    said: tuple[str, ...]
    problems: tuple[str, ...]


def collect(text: str, file: str, setup: Setup, document: Returned, now: str = "") -> Collected:
    """Return what collecting ``document`` makes of the text of a file.

    Args:
        text: The text of the file.
        file: Its name, for messages.
        setup: Plugins and schema.
        document: The returned care plan.
        now: The moment of collecting as the file writes it; empty for the present minute.

    Raises:
        StateFaults: The file has faults of its own.
        MomentError: ``now`` is not a moment.
        NotThisPlan: The document is not a care plan of this patient.
        Refused: There is no safe place for the entries.
    """
    before = open_text(text, file, setup, now)
    plan = plan_of(document, before.state, before.now)
    rows, problems = rows_of(document.body)
    work = _Work(document, before, plan)
    draft = Draft(text, file)
    lines: list[str] = []
    try:
        for row in rows:
            problems += row.problems
            for entry, line in work.read(row, problems):
                draft.append([BLOCK], entry)
                lines.append(line)
    except CannotInsert as error:
        raise Refused(str(error)) from None
    missing = work.missing(rows)
    said = [*plan.said, *work.again()]
    after = open_text(draft.text, file, setup, spelled(before.now, before.state.clock))
    if after.state.digest != before.state.digest:
        raise Refused("the ticks would change what the file says of the patient; nothing was written")
    return Collected(Charted(draft.text, before, after, tuple(lines)), tuple(said), (*problems, *missing))


class _Work:
    def __init__(self, document: Returned, before: Loaded, plan: Plan) -> None:
        self.document, self.before, self.plan = document, before, plan
        self.clock = before.state.clock
        self.made_at = spelled(plan.made_at, self.clock)
        self._there = {
            (words(entry.get("ref")), words(entry.get("box"))): entry
            for entry in entries(before.state.root.get(BLOCK))
            if self._of_this_plan(entry)
        }
        self._same = 0

    def read(self, row: Row, problems: list[str]) -> Iterator[tuple[dict[str, str], str]]:
        """Yield the entry and its line for each new tick of ``row``; what needs a look goes to ``problems``."""
        if row.is_by_hand and row.text and not any(box.ticked for box in row.boxes):
            problems.append(
                f"{row.ref} '{row.text}': added by hand and not ticked; plan it for the next shift"
            )
        for box in row.boxes:
            place = f"{row.ref} {box.label}"
            there = self._there.get((row.ref, box.stamp))
            if not box.ticked:
                if there is not None:
                    problems.append(
                        f"{place}: collected before as done, and is not ticked now; the file keeps it"
                    )
                if box.beside:
                    problems.append(
                        f"{place}: not ticked, but '{box.beside}' is written beside it; not collected"
                    )
                continue
            entry, doubt = self._entry(row, box)
            if there is None:
                yield entry, self._line(place, row, entry, doubt)
            elif differing := [key for key in _COMPARED if entry.get(key, "") != words(there.get(key))]:
                was = "; ".join(f"{key} {words(there.get(key)) or 'not written'}" for key in differing)
                new = "; ".join(f"{key} {entry.get(key) or 'not written'}" for key in differing)
                problems.append(
                    f"{place}: collected before with {was}; the document now says {new}; the file keeps it"
                )
            else:
                self._same += 1

    def again(self) -> Iterator[str]:
        """Say how many ticks of this plan stand in the file already."""
        if self._same:
            yield f"{plural(self._same, 'tick')} of this plan collected before, as they are"

    def missing(self, rows: list[Row]) -> Iterator[str]:
        """Name the tasks that the plan was made with and that its document has lost."""
        found = {row.ref for row in rows}
        for key in self.document.properties:
            ref = key.removeprefix(TASK)
            if key.startswith(TASK) and ref not in found:
                yield f"{ref}: the row was not found in the document, or could not be read"

    def _of_this_plan(self, entry: Map) -> bool:
        return self.before.state.when(entry.get("plan")) == self.plan.made_at

    def _entry(self, row: Row, box: Box) -> tuple[dict[str, str], str]:
        time, initials, clear = time_and_initials(box.beside)
        due = self._due(row, box)
        done = done_of(time, due, self.plan.made_at, self.before.now, self.clock) if time else None
        doubt = ""
        if not clear or (time and done is None):
            doubt = f"written beside it: {box.beside}"
            initials = initials if clear else ""
        entry = {
            "plan": self.made_at,
            "version": self.plan.version,
            "ref": row.ref,
            "box": box.stamp,
            "task": self.document.properties.get(f"{TASK}{row.ref}", ""),
            "text": row.text,
            "due": spelled(due, self.clock) if due else "",
            "done": spelled(done, self.clock) if done else "",
            "by": initials,
            "written": spelled(self.before.now, self.clock),
            "note": doubt or (f"due: {box.due}" if row.is_by_hand and box.due and not due else ""),
        }
        return {key: value for key, value in entry.items() if value}, doubt

    def _due(self, row: Row, box: Box) -> datetime | None:
        stamp = box.stamp
        if row.is_by_hand:
            time, rest, clear = time_and_initials(box.due)
            if not time or rest or not clear:
                return None
            stamp = time.replace(":", "")
        return due_of(stamp, self.plan.made_at, self.clock)

    def _line(self, place: str, row: Row, entry: Mapping[str, str], doubt: str) -> str:
        try:
            done = self.clock.day_and_time(self.clock.read(entry["done"])) if "done" in entry else ""
        except ClockError:
            done = ""
        who = f"by {entry['by']}" if "by" in entry else "initials not written"
        said = f"{place}: done {done} {who}" if done else f"{place}: done, time not written, {who}"
        return f"{said} ({row.text})" + (f"; {doubt}, which is no time that can be read" if doubt else "")
