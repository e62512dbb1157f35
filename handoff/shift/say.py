"""What was charted, in words: every value as it was written, nothing added."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import datetime, timedelta

from handoff.plugin import Clock, List, Map, Node, Text, joined, words
from handoff.shift.charted import ABOUT_THE_ENTRY, moment_at
from handoff.shift.places import BARE, FOLLOWED, HEADS, QUOTED, label_of


class Speaker:
    """Says nodes in words; times are of one clock, with their date where it is not that of ``near``."""

    def __init__(self, clock: Clock, near: datetime, late_after: timedelta) -> None:
        self.clock = clock
        self.near = near
        self.late_after = late_after

    def time(self, moment: datetime) -> str:
        """Return a time, with its date where it is of another day than the end of the note."""
        return self.clock.time(moment, self.near)

    def entry(self, node: Map, keys: Iterable[str], at: datetime | None = None, lead: str = "") -> str:
        """Return what an entry holds at ``keys``, its note, what it corrects, and who charted it.

        Args:
            node: The entry.
            keys: Which of its keys are said; those about the entry itself come at the end.
            at: The time that stands before it already and is not said again.
            lead: What it begins with.
        """
        said = self._parts(node, keys, at)
        parts = [f"{lead}: {said}" if lead and said else lead or said, *self._about(node)]
        by = words(node.get("by"))
        return f"{'; '.join(part for part in parts if part)}{f' ({by})' if by else ''}".strip()

    def _parts(self, node: Map, keys: Iterable[str], at: datetime | None = None) -> str:
        said = [self._part(key, node[key], at) for key in keys if key not in ABOUT_THE_ENTRY]
        kept = [part for part in said if part]
        return ("; " if any(", " in part for part in kept) else ", ").join(kept)

    def _about(self, entry: Map) -> list[str]:
        note = words(entry.get("note"))
        confirmed = words(entry.get("confirmed")) == "yes"
        return [
            *([f"note: {_on_one_line(note)}"] if note else []),
            *self._corrects(entry),
            *(["unusual, checked and confirmed"] if confirmed else []),
        ]

    def marks(self, entry: Map, at: datetime | None) -> str:
        """Return what must be read before an entry: struck out, or written late."""
        said = ""
        struck = entry.get("struck")
        if isinstance(struck, Map):
            said += f"STRUCK OUT, entered in error ({self._who_when_why(struck)}): "
        written = moment_at(entry.get("written"), self.clock)
        if written is not None:
            late = at is not None and written - at > self.late_after
            said += (
                f"LATE ENTRY, written {self.time(written)}: " if late else f"written {self.time(written)}: "
            )
        return said

    def _part(self, key: str, node: Node, at: datetime | None) -> str:
        said = self._value(node)
        if key == "at" and at is not None and moment_at(node, self.clock) == at:
            return ""
        if key in BARE:
            return said
        if key in FOLLOWED:
            return f"{said} {FOLLOWED[key]}"
        if key in QUOTED:
            return f'{label_of(key)}: "{said}"'
        return f"{label_of(key)}{' ' if _is_short(node) else ': '}{said}"

    def _value(self, node: Node) -> str:
        if isinstance(node, Text):
            moment = moment_at(node, self.clock)
            return self.time(moment) if moment is not None else _on_one_line(str(node))
        if isinstance(node, List):
            said = [self._value(value) for value in node]
            return joined(said) if all(value.isalpha() for value in said) else "; ".join(said)
        head = next((name for name in HEADS if name in node), None)
        others = self._parts(node, [key for key in node if key != head])
        said_head = "" if head is None else self._value(node[head])
        said_all = f"{said_head} ({others})" if said_head and others else said_head or others
        by = words(node.get("by"))
        about = "".join(f"; {part}" for part in self._about(node))
        return f"{self.marks(node, None)}{said_all}{about}{f' ({by})' if by else ''}"

    def _corrects(self, entry: Map) -> list[str]:
        before = entry.get("corrects")
        if not isinstance(before, Map):
            return []
        was = _on_one_line(words(before.get("value")))
        return [f'CORRECTED ({self._who_when_why(before)}), before: "{was}"']

    def _who_when_why(self, node: Map) -> str:
        at = moment_at(node.get("at"), self.clock)
        parts = (words(node.get("by")), self.time(at) if at else "", _on_one_line(words(node.get("why"))))
        return ", ".join(part for part in parts if part)


def _is_short(node: Node) -> bool:
    """Return whether a value follows its label without a colon."""
    if isinstance(node, Text):
        return str(node) not in ("yes", "no")
    return isinstance(node, Map) and any(name in node for name in HEADS)


def _on_one_line(text: str) -> str:
    return " ".join(text.split())
