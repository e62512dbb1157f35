"""Insert text into a state file at reader positions; nothing that was there changes.

An insertion is a place and a text. Lists, rows and blocks are found by the positions of the
strict reader, in block style and in flow style, and what is missing on the way is made.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from handoff.state.nodes import List, Map, Node, Text

STEP = "  "

_PLAIN = re.compile(r"[A-Za-z0-9][A-Za-z0-9 _./%+\-()']*(?::[0-9][A-Za-z0-9 _./%+\-()]*)*")
_HAZARD = re.compile(r" #|: |\s$|:$")


@dataclass(frozen=True, slots=True, order=True)
class Insertion:
    """A text to be put before the character at ``place`` (an offset from 0)."""

    place: int
    text: str


class CannotInsert(ValueError):
    """The file's layout has no safe place for the entry; says where."""


def scalar(value: str) -> str:
    """Return ``value`` as it is safely written in a state file: plain where possible, else in quotes."""
    if _PLAIN.fullmatch(value) and not _HAZARD.search(value):
        return value
    escaped = value.replace("\\", "\\\\").replace('"', '\\"').replace("\n", "\\n").replace("\t", "\\t")
    return f'"{escaped}"'


Entry = dict[str, "str | Entry | list[Entry] | list[str]"]


def flow(entry: Entry) -> str:
    """Return ``entry`` on one line: ``{drug: morphine, dose: 4 mg}``."""
    return "{" + ", ".join(f"{scalar(key)}: {_flow_value(value)}" for key, value in entry.items()) + "}"


def _flow_value(value: object) -> str:
    if isinstance(value, dict):
        return flow(value)
    if isinstance(value, list):
        return "[" + ", ".join(_flow_value(part) for part in value) + "]"
    return scalar(str(value))


def applied(text: str, insertions: Iterable[Insertion]) -> str:
    """Return ``text`` with every insertion put in, each at its place in the unchanged text."""
    parts: list[str] = []
    done = 0
    for insertion in sorted(insertions, key=lambda one: one.place):
        parts += [text[done : insertion.place], insertion.text]
        done = insertion.place
    return "".join([*parts, text[done:]])


class Layout:
    """A file's text and nodes, and where in it something can be added."""

    def __init__(self, text: str, root: Map) -> None:
        self.text = text
        self.root = root
        self.newline = "\r\n" if "\r\n" in text else "\r" if "\r" in text and "\n" not in text else "\n"

    def into_list(self, path: Sequence[str], entry: Entry) -> Insertion:
        """Return the insertion that adds ``entry`` at the end of the list at ``path``, made if missing.

        Raises:
            CannotInsert: Something else than a list stands there.
        """
        node, rest = self._deepest(path)
        if rest:
            return self._into_map(node, [*rest], f"- {flow(entry)}", f"[{flow(entry)}]")
        if isinstance(node, List):
            return self._append(node, flow(entry))
        raise CannotInsert(f"{'.'.join(path)} is not a list")

    def into_map(self, path: Sequence[str], key: str, value: str) -> Insertion:
        """Return the insertion that adds ``key: value`` to the mapping at ``path``, made if missing.

        Raises:
            CannotInsert: Something else than a mapping stands there.
        """
        node, rest = self._deepest(path)
        return self._into_map(node, [*rest, key], value, value)

    def into_entry(self, entry: Map, key: str, value: str) -> Insertion:
        """Return the insertion that adds ``key: value`` to an entry that is there."""
        return self._into_map(entry, [key], value, value)

    def beside(self, node: Map, entry: Entry) -> list[Insertion]:
        """Return the insertions that make a list of an entry in braces and add ``entry`` beside it.

        Raises:
            CannotInsert: The entry is not written in braces.
        """
        if not node.flow:
            raise CannotInsert(f"line {node.line}: two entries in one minute need {{ }} around each")
        return [Insertion(node.start, "["), Insertion(node.end, f", {flow(entry)}]")]

    def _deepest(self, path: Sequence[str]) -> tuple[Node, list[str]]:
        node: Node = self.root
        for index, name in enumerate(path):
            if not isinstance(node, Map) or name not in node:
                return node, list(path[index:])
            below = node[name]
            if isinstance(below, Text) and not below:
                return node, list(path[index:])
            node = below
        return node, []

    def _append(self, node: List, item: str) -> Insertion:
        if node.flow:
            comma = ", " if node else ""
            return Insertion(node.end - 1, f"{comma}{item}")
        last = node[-1]
        indent = " " * (self._dash_column(node) - 1)
        return Insertion(self._after(last), f"{self.newline}{indent}- {item}")

    def _dash_column(self, node: List) -> int:
        return node.column

    def _into_map(self, node: Node, names: list[str], block: str, braces: str) -> Insertion:
        if not isinstance(node, Map):
            raise CannotInsert(f"line {getattr(node, 'line', 0)}: a group of keys is due here")
        blank = node.get(names[0])
        if isinstance(blank, Text) and not blank and not node.flow:
            key = node.key(names[0])
            indent = " " * (key.column - 1 + len(STEP))
            body = self._nested(names[1:], block, indent)
            return Insertion(self._line_end(key.end), body)
        if node.flow:
            for name in reversed(names[1:]):
                braces = f"{{{scalar(name)}: {braces}}}"
            comma = ", " if node else ""
            return Insertion(node.end - 1, f"{comma}{scalar(names[0])}: {braces}")
        first = next(iter(node), None)
        indent = " " * (first.column - 1) if isinstance(first, Text) else ""
        after = self._after(node) if node else len(self.text.rstrip())
        return Insertion(after, self._nested(names, block, indent))

    def _nested(self, names: list[str], block: str, indent: str) -> str:
        said = ""
        for name in names[:-1] if not block.startswith("- ") else names:
            said += f"{self.newline}{indent}{scalar(name)}:"
            indent += STEP
        if block.startswith("- ") or not names:
            return f"{said}{self.newline}{indent}{block}"
        return f"{said}{self.newline}{indent}{scalar(names[-1])}: {block}"

    def before_key(self, key: Text, new_key: str, value: str) -> Insertion:
        """Return the insertion of ``new_key: value`` on a line of its own before the line of ``key``."""
        begin = key.start - (key.column - 1)
        if self.text[begin : key.start].strip():
            raise CannotInsert(f"line {key.line}: the entry needs a line of its own")
        return Insertion(begin, f"{self.text[begin : key.start]}{scalar(new_key)}: {value}{self.newline}")

    def after_value(self, key: Text, value: Node, new_key: str, written: str) -> Insertion:
        """Return the insertion of ``new_key: written`` on a line of its own after ``key: value``."""
        indent = " " * (key.column - 1)
        place = self._after(value) if not (isinstance(value, Text) and not value) else self._line_end(key.end)
        return Insertion(place, f"{self.newline}{indent}{scalar(new_key)}: {written}")

    def _after(self, node: Node) -> int:
        """Return the end of the line on which the last character of ``node`` stands."""
        return self._line_end(self._last(node))

    def _last(self, node: Node) -> int:
        if isinstance(node, Text):
            end = node.end
        elif node.flow or not node:
            return node.end
        elif isinstance(node, Map):
            key, value = list(node.items())[-1]
            if isinstance(value, Text) and not value and isinstance(key, Text):
                return key.end
            return self._last(value)
        else:
            return self._last(node[-1])
        return len(self.text[node.start : end].rstrip()) + node.start

    def _line_end(self, offset: int) -> int:
        match = re.compile(r"[\r\n]").search(self.text, offset)
        return match.start() if match else len(self.text)
